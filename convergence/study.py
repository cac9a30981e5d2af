"""A study file, read and checked: what is to be solved or which table is to be judged, and what counts."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Annotated, Any

from convergence import rooms
from convergence.bind import bind
from convergence.cases import loads_of
from convergence.dimensions import SYSTEMS, Units
from convergence.errors import Fault, InputError, nearest
from convergence.fem.material import Material
from convergence.fem.problem import Problem
from convergence.ladder_spec import LadderSpec
from convergence.model_study import ModelStudy, digest, material_tables, read_materials, read_model
from convergence.results import Ladder, Quantity
from convergence.sections import Sections
from convergence.table_study import TableStudy, read_table_study
from convergence.tomlfile import read_toml

SECTIONS = ("model", "cases", "table", "ladder", "companion", "quantities")
COMPANION = "companion"
DEFAULT_SYSTEM = "mm, N, MPa"


@dataclass(frozen=True)
class Study:
    """What a study file says. Either `model`, `arguments` and `ladder`, or `table`, is there.

    `table` is the ladder of the table, its columns under the names of the quantities; `table_file` is
    where it stands. `materials` are under the names of their tables. `fingerprint` changes with everything
    that changes a number of a level. `cases` are studies of their own that differ in their loads only: then
    they are what is solved and judged. `companion` is the same study on a second ladder; it is kept in the
    `subfolder` of the folder of a run.
    """

    file: Path
    name: str
    title: str
    unit_system: str
    units: Units
    quantities: tuple[Quantity, ...]
    materials: Mapping[str, Material]
    text: str
    fingerprint: str
    model: str = ""
    arguments: Mapping[str, Any] | None = None
    ladder: LadderSpec | None = None
    table: Ladder | None = None
    table_file: Path | None = None
    dimension: int = 2
    cases: Mapping[str, "Study"] = field(default_factory=dict)
    companion: "Study | None" = None
    subfolder: str = ""

    @property
    def cells(self) -> str:
        """Return what the meshes are made of, in words; the name of the file of a table."""
        if self.ladder is None:
            return self.table_file.name if self.table_file else ""
        return f"{self.ladder.shape}s of degree {self.ladder.degree}"

    def problem(self) -> Problem:
        """Return the problem of a model study."""
        if self.arguments is None:
            raise InputError([Fault(str(self.file), "a table study has nothing to solve", "give [model]")])
        problem: Problem = rooms.find("models", self.model)(**self.arguments, **self.materials)
        return problem

    def loads(self) -> dict[str, str]:
        """Return what the cases differ in, in words for each of them."""
        arguments = {name: case.arguments or {} for name, case in self.cases.items()}
        return loads_of(rooms.find("models", self.model), self.arguments or {}, arguments, self.units)


def load(path: Path, *, name: str = "") -> Study:
    """Read a study; `InputError` has every fault of the file. The name is the file's where none is given."""
    sections = Sections(read_toml(path), SYSTEMS[DEFAULT_SYSTEM])
    data = sections.file.data
    needed = material_tables(sections)
    tables = (*SECTIONS, *needed)
    said = {key: value for key, value in data.items() if key not in tables}
    arguments, faults = bind(head, said, where=sections.file.where, units=sections.units, also=tables)
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
        materials=read_materials(sections, needed),
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


def _model_study(sections: Sections, blank: Study) -> Study:
    found = read_model(sections, blank.materials, blank.unit_system)
    study = _on_ladder(blank, found)
    if found.companion is None:
        return study
    second = _on_ladder(replace(blank, subfolder=COMPANION), found.companion)
    cases = {name: replace(case, companion=second.cases[name]) for name, case in study.cases.items()}
    return replace(study, companion=second, cases=cases)


def _on_ladder(blank: Study, found: ModelStudy) -> Study:
    study = replace(
        blank,
        model=found.model,
        arguments=found.arguments,
        ladder=found.ladder,
        quantities=found.quantities,
        dimension=found.dimension,
        fingerprint=found.fingerprint(found.arguments),
    )
    cases = {
        name: replace(
            study,
            name=f"{blank.name}/{name}",
            title=f"{blank.title}: {name}",
            arguments=arguments,
            fingerprint=found.fingerprint(arguments),
        )
        for name, arguments in found.cases.items()
    }
    return replace(study, cases=cases)


def _table_study(sections: Sections, blank: Study) -> Study:
    for section, what in (("ladder", "ladder of its own"), ("cases", "load cases")):
        if section in sections.file.data:
            sections.fault((section,), f"a table study has no {what}", f"remove [{section}]")
    found = read_table_study(sections, blank.file, blank.units)
    if found is None:
        return blank
    study = _of_table(blank, found)
    if found.companion is None:
        return study
    return replace(study, companion=_of_table(replace(blank, subfolder=COMPANION), found.companion))


def _of_table(blank: Study, found: TableStudy) -> Study:
    parts = {"table": found.file.read_text(encoding="utf-8-sig"), "columns": found.columns}
    return replace(
        blank,
        quantities=found.quantities,
        table=found.ladder,
        table_file=found.file,
        dimension=found.dimension,
        fingerprint=digest(parts),
    )
