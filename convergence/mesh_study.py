"""The tables of a study on meshes of real parts: files, supports, loads, cases, what is measured."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Annotated, Any, Literal

from convergence import __version__
from convergence.body_tables import (
    BodyKind,
    body_kind,
    read_body_materials,
    read_loads,
    read_picks,
    read_supports,
)
from convergence.dimensions import RATIO, PositiveLength
from convergence.errors import listing, nearest, require
from convergence.fem.dilatation import require_suitable
from convergence.fem.given_part import GivenPart
from convergence.fem.loads import Load, scaled
from convergence.fem.material import ProblemKind
from convergence.fem.problem import Problem
from convergence.given_series import given_series
from convergence.ladder_spec import Formulation, LadderSpec, Levels
from convergence.measured import Measured, read_measured
from convergence.results import Quantity
from convergence.sections import Sections
from convergence.textfile import digest_of

SECTION = "meshes"
REFINED = 4  # levels, where none are said


@dataclass(frozen=True)
class Meshes:
    """What [meshes] says: files from coarse to fine, or one file and the levels it is refined to."""

    files: tuple[str, ...]
    levels: int | None
    degree: Literal[1, 2] | None
    merge: bool
    kind: BodyKind | None
    thickness: float
    formulation: Formulation


@dataclass(frozen=True)
class MeshStudy:
    """What the tables of a mesh study say.

    `cases` have the problem of each load case and its loads in words; `parts` is all that changes a number
    of a level, but the loads of a case.
    """

    problem: Problem
    ladder: LadderSpec
    quantities: tuple[Quantity, ...]
    cases: Mapping[str, tuple[Problem, str]]
    files: tuple[Path, ...]
    remarks: tuple[str, ...]
    parts: Mapping[str, Any]


def meshes(
    *,
    files: Annotated[tuple[str, ...] | None, "mesh files from coarse to fine"] = None,
    file: Annotated[str | None, "a coarse mesh to be refined, in place of `files`"] = None,
    levels: Annotated[Levels | None, "levels that `file` is refined to; 4 where none are given"] = None,
    degree: Annotated[Literal[1, 2] | None, "degree of the elements, that of the files if not given"] = None,
    merge: Annotated[bool, "join nodes at one place: bodies that touch; it would close a crack"] = False,
    kind: Annotated[BodyKind | None, "plane stress of a plane mesh, solid of others, if not given"] = None,
    thickness: Annotated[PositiveLength, "thickness of a plane part"] = 1.0,
    formulation: Annotated[
        Formulation, "mean dilatation does not lock at Poisson's ratio near 0.5"
    ] = "displacement",
) -> Meshes:
    """Return what [meshes] says. Unsuitable where neither or both of `files` and `file` are there."""
    names = {Path(name).name for name in files or ()}
    require(
        ((files is None) != (file is None), "files", files, "either `files` or `file`"),
        (files is None or len(files) > 0, "files", files, "at least one file, better four or more"),
        (len(names) == len(files or ()), "files", files, "names that differ: a run keeps a copy of each"),
        (levels is None or files is None, "levels", levels, "no levels: each of `files` is one"),
    )
    if file is not None:
        return Meshes((file,), levels or REFINED, degree, merge, kind, thickness, formulation)
    return Meshes(files or (), None, degree, merge, kind, thickness, formulation)


def read_mesh_study(sections: Sections, unit_system: str) -> MeshStudy | None:
    """Read all tables of a mesh study, None where meshes cannot be read; faults are kept in `sections`."""
    spec = sections.read(meshes, SECTION)
    picks = read_picks(sections)
    if spec is None or sections.faults:
        return None
    paths = tuple(sections.beside(name) for name in spec.files)
    part, remarks = given_series(sections, paths, picks, spec.levels, spec.degree, spec.merge)
    if part is None:
        return None
    kind = body_kind(sections, SECTION, spec.kind, part.meshes[0].nodes)
    regions = tuple(part.regions)
    bare = Problem("", part, read_body_materials(sections, regions), (), (), kind, spec.thickness)
    loads = read_loads(sections, bare)
    problem = replace(bare, supports=read_supports(sections, bare), loads=tuple(loads.values()))
    ladder = _ladder(sections, spec, part, kind)
    if sections.faults:
        return None
    cases, measured = _cases(sections, problem, loads), _measured(sections, problem, ladder)
    parts = {
        "version": __version__,
        "units": unit_system,
        "files": [digest_of(path) for path in paths],
        "materials": {name: found.constants() for name, found in problem.materials.items()},
        "tables": {name: sections.table(name) for name in ("boundaries", "supports", "loads")},
        "meshes": [kind, spec.thickness, spec.formulation, spec.degree, spec.merge],
        "quantities": {item.quantity.name: [item.measure, item.arguments] for item in measured},
    }
    quantities = tuple(item.quantity for item in measured)
    return MeshStudy(problem, ladder, quantities, cases, paths, remarks, parts)


def _ladder(sections: Sections, spec: Meshes, part: GivenPart, kind: ProblemKind) -> LadderSpec:
    made = part.meshes[0]
    suits = {"formulation": spec.formulation, "shape": made.shape, "kind": kind}
    sections.called(require_suitable, suits, SECTION)
    return LadderSpec(None, None, 2.0, len(part.meshes), made.shape, made.degree, spec.formulation)


def _measured(sections: Sections, problem: Problem, ladder: LadderSpec) -> list[Measured]:
    if not sections.file.data.get("quantities"):
        sections.fault((), "no quantity of interest", "add [quantities.NAME] with measure = ...")
    read = [
        sections.keep(
            *read_measured(sections.file, name, ladder.degree, ladder.shape or "", sections.units, problem)
        )
        for name in sections.named("quantities", "quantity")
    ]
    return [item for item in read if item]


def case(
    *,
    loads: Annotated[tuple[str, ...], "names of the loads that act"],
    factors: Annotated[tuple[float, ...] | None, RATIO, "how much of each acts; 1 if not given"] = None,
) -> dict[str, float]:
    """Return the factor of each load that acts in [cases.NAME]."""
    require(
        (factors is None or len(factors) == len(loads), "factors", factors, "one factor for each load"),
        (len(set(loads)) == len(loads), "loads", loads, "each load once"),
    )
    return dict(zip(loads, factors or [1.0] * len(loads), strict=True))


def _cases(sections: Sections, problem: Problem, loads: Mapping[str, Load]) -> dict[str, tuple[Problem, str]]:
    """Return the problem of every case and its loads in words, none without [cases]."""
    found = {}
    if sections.file.data.get("cases") == {}:
        sections.fault(("cases",), "no case", 'add [cases.NAME] with loads = ["..."]')
    for name in sections.named("cases", "case"):
        said = sections.bound(case, sections.table("cases")[name], "cases", name)
        acting = None if said is None else sections.called(case, said, "cases", name)
        for load in acting or {}:
            if load not in loads:
                right = nearest(load, loads) if loads else f"known: {listing(())}"
                sections.fault(("cases", name, "loads"), "no such load", right, load)
        if acting is not None and set(acting) <= set(loads):
            own = tuple(scaled(loads[load], factor) for load, factor in acting.items())
            words = ", ".join(f"{factor:g} × {load}" for load, factor in acting.items())
            found[name] = (replace(problem, loads=own), words or "none")
    return found
