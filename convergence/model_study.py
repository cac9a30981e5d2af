"""The model of a study: what is to be solved, on which meshes, in which load cases, and what is measured."""

import hashlib
import json
from collections.abc import Mapping
from dataclasses import asdict, dataclass, field, replace
from typing import Any

from convergence import __version__, rooms
from convergence.cases import read_cases
from convergence.errors import listing, nearest
from convergence.fem.dilatation import require_suitable
from convergence.fem.material import ORTHOTROPIC, Material, material, material_names
from convergence.fem.problem import Problem
from convergence.ladder_spec import LadderSpec, companion, ladder
from convergence.measured import read_measured
from convergence.results import Quantity
from convergence.sections import Sections


@dataclass(frozen=True)
class ModelStudy:
    """What the tables of a model study say; `cases` have the arguments of the model in each load case.

    `parts` is all that changes a number of a level beside the arguments. `companion` is the same model on a
    second ladder.
    """

    model: str
    arguments: Mapping[str, Any]
    ladder: LadderSpec
    quantities: tuple[Quantity, ...]
    dimension: int
    cases: Mapping[str, Mapping[str, Any]]
    parts: Mapping[str, Any] = field(default_factory=dict)
    companion: "ModelStudy | None" = None

    def fingerprint(self, arguments: Mapping[str, Any]) -> str:
        """Return the fingerprint of the study with these arguments of the model."""
        return digest({**self.parts, "model": [self.model, arguments]})


def material_tables(sections: Sections) -> tuple[str, ...]:
    """Return the names of the material tables; those of the file while the model is not known."""
    data = sections.file.data
    if "model" not in data:
        return ("material",)
    name = data["model"].get("name") if isinstance(data["model"], dict) else None
    if name in rooms.names("models"):
        return material_names(rooms.find("models", name))
    return tuple(key for key in data if f"_{key}".endswith("_material")) or ("material",)


def read_materials(sections: Sections, tables: tuple[str, ...]) -> dict[str, Material]:
    """Read the material tables: a single one has defaults, of several each must be there."""
    materials = {}
    for name in tables:
        if len(tables) > 1 and name not in sections.file.data:
            sections.fault((), f"no table [{name}]", f"add it: the model has {' and '.join(tables)}")
        found = sections.read(material, name) or material()
        if found.yield_strength is not None and not found.yield_source.strip():
            right = 'add yield_source = "where the value stands"'
            sections.fault((name, "yield_strength"), "a yield strength without its source", right)
        materials[name] = found
    return materials


def read_model(sections: Sections, materials: Mapping[str, Material], unit_system: str) -> ModelStudy:
    """Read all tables of a model study but the materials; their faults are kept in `sections`."""
    spec = sections.read(ladder, "ladder") or ladder()
    model, arguments, problem = _model(sections, materials)
    dimension = problem.part.dimension if problem else 2
    spec = sections.called(spec.of_dimension, {"dimension": dimension}, "ladder") or spec
    cases: dict[str, dict[str, Any]] = {}
    if problem:
        cases = read_cases(sections, rooms.find("models", model), arguments, materials)
    if not sections.file.data.get("quantities"):
        sections.fault((), "no quantity of interest", "add [quantities.NAME] with measure = ...")
    parts = {
        "version": __version__,
        "units": unit_system,
        "materials": {name: found.constants() for name, found in materials.items()},
    }
    blank = ModelStudy(model, arguments, spec, (), dimension, cases, parts)
    found = _on_ladder(sections, blank, spec, problem, "ladder")
    if "companion" not in sections.file.data or sections.faults:
        return found
    second = _companion(sections, spec, dimension)
    if second is None:
        return found
    return replace(found, companion=_on_ladder(sections, blank, second, problem, "companion"))


def _on_ladder(
    sections: Sections, blank: ModelStudy, spec: LadderSpec, problem: Problem | None, table: str
) -> ModelStudy:
    """Return a study on a ladder, its quantities with the formal orders that they have there."""
    if problem:
        suits = {"formulation": spec.formulation, "shape": spec.shape, "kind": problem.kind}
        sections.called(require_suitable, suits, table)
    found = [
        sections.keep(
            *read_measured(sections.file, name, spec.degree, spec.shape or "", sections.units, problem)
        )
        for name in sections.named("quantities", "quantity")
    ]
    kept = [item for item in found if item]
    parts = {
        **blank.parts,
        "ladder": {**asdict(spec), "levels": None},
        "quantities": {item.quantity.name: [item.measure, item.arguments] for item in kept},
    }
    return replace(blank, ladder=spec, quantities=tuple(item.quantity for item in kept), parts=parts)


def _companion(sections: Sections, spec: LadderSpec, dimension: int) -> LadderSpec | None:
    """Return the second ladder, of the same sizes; None where its table has faults."""
    said = sections.read(companion, "companion")
    found = None if said is None else sections.called(spec.with_companion, said, "companion")
    return found and sections.called(found.of_dimension, {"dimension": dimension}, "companion")


def _model(
    sections: Sections, materials: Mapping[str, Material]
) -> tuple[str, dict[str, Any], Problem | None]:
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
    arguments = sections.bound(function, said, "model", given=materials, also=("name",))
    if arguments is None:
        return model, {}, None
    problem: Problem | None = sections.called(function, {**arguments, **materials}, "model")
    if problem and problem.exact is not None:
        for table, found in materials.items():
            if not found.isotropic:
                right = f"leave out {', '.join(ORTHOTROPIC)}, or take another model"
                sections.fault((table, "young_y"), "orthotropic in a model with a closed form", right)
    return model, arguments, problem


def digest(parts: Mapping[str, Any]) -> str:
    """Return sixteen characters that change with anything of the parts."""
    return hashlib.sha256(json.dumps(parts, sort_keys=True).encode()).hexdigest()[:16]
