"""A study file, read and checked: what is to be solved or which table is to be judged, and what counts."""

import hashlib
import json
from collections.abc import Mapping
from dataclasses import asdict, dataclass, replace
from pathlib import Path
from typing import Annotated, Any

from convergence import __version__, rooms
from convergence.bind import bind
from convergence.columns import bare_quantities, read_column
from convergence.dimensions import SYSTEMS, Units
from convergence.errors import Fault, InputError, listing, nearest
from convergence.fem.material import Material, material
from convergence.fem.problem import Problem
from convergence.intake.table import table
from convergence.ladder_spec import LadderSpec, ladder
from convergence.measured import read_measured
from convergence.results import Ladder, Quantity
from convergence.sections import Sections
from convergence.tomlfile import read_toml

SECTIONS = ("model", "table", "ladder", "material", "quantities")
DEFAULT_SYSTEM = "mm, N, MPa"


@dataclass(frozen=True)
class Study:
    """What a study file says. Either `model`, `arguments` and `ladder`, or `table`, is there.

    `table` is the ladder of the table, its columns under the names of the quantities; `table_file` is
    where it stands. `fingerprint` changes with everything that changes a number of a level.
    """

    file: Path
    name: str
    title: str
    unit_system: str
    units: Units
    quantities: tuple[Quantity, ...]
    material: Material
    text: str
    fingerprint: str
    model: str = ""
    arguments: Mapping[str, Any] | None = None
    ladder: LadderSpec | None = None
    table: Ladder | None = None
    table_file: Path | None = None
    dimension: int = 2

    def problem(self) -> Problem:
        """Return the problem of a model study."""
        if self.arguments is None:
            raise InputError([Fault(str(self.file), "a table study has nothing to solve", "give [model]")])
        problem: Problem = rooms.find("models", self.model)(**self.arguments, material=self.material)
        return problem


def load(path: Path, *, name: str = "") -> Study:
    """Read a study; `InputError` has every fault of the file. The name is the file's where none is given."""
    sections = Sections(read_toml(path), SYSTEMS[DEFAULT_SYSTEM])
    data = sections.file.data
    said = {key: value for key, value in data.items() if key not in SECTIONS}
    arguments, faults = bind(head, said, where=sections.file.where, units=sections.units, also=SECTIONS)
    title, system = sections.keep(head(**arguments), faults)
    if system in SYSTEMS:
        sections.units = SYSTEMS[system]
    else:
        sections.fault(("units",), "unknown unit system", nearest(system, SYSTEMS), system)
    blank = Study(
        file=path,
        name=name or path.stem,
        title=title or name or path.stem,
        unit_system=system,
        units=sections.units,
        quantities=(),
        material=_material(sections),
        text=sections.file.text,
        fingerprint="",
    )
    if ("model" in data) == ("table" in data):
        what = "both [model] and [table]" if "model" in data else "neither [model] nor [table]"
        sections.fault((), what, 'give either [model] with name = "..." or [table] with file = "..."')
        raise InputError(sections.faults)
    study = _model_study(sections, blank) if "model" in data else _table_study(sections, blank)
    if sections.faults:
        raise InputError(sections.faults)
    return study


def head(
    *,
    title: Annotated[str, "what is studied"] = "",
    units: Annotated[str, f"consistent units, one of: {'; '.join(SYSTEMS)}"] = DEFAULT_SYSTEM,
) -> tuple[str, str]:
    """Return what stands above the tables of a study."""
    return title, units


def _material(sections: Sections) -> Material:
    found = sections.read(material, "material") or material()
    if found.yield_strength is not None and not found.yield_source.strip():
        right = 'add yield_source = "where the value stands"'
        sections.fault(("material", "yield_strength"), "a yield strength without its source", right)
    return found


def _model_study(sections: Sections, blank: Study) -> Study:
    spec = sections.read(ladder, "ladder") or ladder()
    model, arguments, problem = _model(sections, blank.material)
    asked = sections.quantity_names()
    if not sections.file.data.get("quantities"):
        sections.fault((), "no quantity of interest", "add [quantities.NAME] with measure = ...")
    found = [
        sections.keep(*read_measured(sections.file, name, spec.degree, spec.shape, blank.units, problem))
        for name in asked
    ]
    kept = [item for item in found if item]
    parts = {
        "version": __version__,
        "units": blank.unit_system,
        "model": [model, arguments],
        "elastic": [blank.material.young, blank.material.poisson],
        "ladder": {**asdict(spec), "levels": None},
        "quantities": {item.quantity.name: [item.measure, item.arguments] for item in kept},
    }
    return replace(
        blank,
        model=model,
        arguments=arguments,
        ladder=spec,
        quantities=tuple(item.quantity for item in kept),
        fingerprint=_digest(parts),
    )


def _model(sections: Sections, of: Material) -> tuple[str, dict[str, Any], Problem | None]:
    """Return the model, its arguments and its problem (None where it cannot be built)."""
    said, members = sections.table("model"), rooms.names("models")
    model = said.get("name")
    if model not in members:
        missing = model is None
        what = "the key 'name' is missing" if missing else "unknown model"
        right = f"add name = one of {listing(members)}" if missing else nearest(str(model), members)
        sections.fault(("model", "name"), what, right, model)
        return "", {}, None
    function = rooms.find("models", model)
    arguments = sections.bound(function, said, "model", given=("material",), also=("name",))
    if arguments is None:
        return model, {}, None
    problem: Problem | None = sections.called(function, {**arguments, "material": of}, "model")
    return model, arguments, problem


def _table_study(sections: Sections, blank: Study) -> Study:
    if "ladder" in sections.file.data:
        sections.fault(("ladder",), "a table study has no ladder of its own", "remove [ladder]")
    arguments = sections.bound(table, sections.table("table"), "table")
    if arguments is None:
        return blank
    path = _beside(blank.file, arguments["file"])
    read = sections.called(table, {**arguments, "file": str(path)}, "table")
    if read is None:
        return blank
    found, units = read
    asked = sections.quantity_names()
    pairs = [
        sections.keep((q, source), faults)
        for q, source, faults in (read_column(sections.file, name, blank.units, units) for name in asked)
    ]
    sources = {quantity.name: source for quantity, source in pairs if quantity}
    quantities = tuple(quantity for quantity, _ in pairs if quantity)
    if not sections.file.data.get("quantities"):
        quantities = bare_quantities(found, units, kinds={}, degree=None, relative=None)
        sources = {quantity.name: quantity.name for quantity in quantities}
    return replace(
        blank,
        quantities=quantities,
        table=_renamed(found, sources),
        table_file=path,
        dimension=arguments["dimension"],
        fingerprint=_digest({"table": path.read_text(encoding="utf-8-sig"), "columns": sources}),
    )


def _beside(study: Path, file: str) -> Path:
    """Return the table's path from the study's folder; a copy of the study has its table beside it."""
    path = study.parent / file
    copy = study.parent / Path(file).name
    return copy if copy.exists() and not path.exists() else path


def _renamed(found: Ladder, sources: Mapping[str, str]) -> Ladder:
    """Return the ladder with the columns under the names of the quantities, and their places."""
    columns = {name + end: source + end for name, source in sources.items() for end in ("", ".x", ".y")}
    levels = tuple(
        replace(lv, values={new: lv.values[old] for new, old in columns.items() if old in lv.values})
        for lv in found.levels
    )
    fine = {new: found.resolution[old] for new, old in columns.items() if old in found.resolution}
    return replace(found, levels=levels, resolution=fine)


def _digest(parts: Mapping[str, Any]) -> str:
    return hashlib.sha256(json.dumps(parts, sort_keys=True).encode()).hexdigest()[:16]
