"""The tables of a study on meshes of a file: materials by region, picked boundaries, supports, loads."""

from collections.abc import Callable, Mapping
from typing import Any, Literal

import numpy as np

from convergence.bodies.picking import Pick, boundary
from convergence.conditions import LOADS, SUPPORTS
from convergence.errors import listing, nearest
from convergence.fem.loads import Load
from convergence.fem.material import Material, ProblemKind, material
from convergence.fem.problem import ElasticSupport, Problem, Support
from convergence.measured import misplaced
from convergence.sections import Sections

KIND = "kind"
BESIDE = 1e-6  # of the largest radius: nodes this near to the axis are on it
BodyKind = Literal["plane stress", "plane strain", "axisymmetric", "solid"]


def body_kind(sections: Sections, section: str, said: BodyKind | None, nodes: np.ndarray) -> ProblemKind:
    """Return the kind of problem; a fault where meshes with such nodes (D, n) cannot be of it."""
    dimension = len(nodes)
    if said is None:
        return "solid" if dimension == 3 else "plane stress"
    if (said == "solid") != (dimension == 3):
        right = "solid" if dimension == 3 else "plane stress, plane strain or axisymmetric"
        sections.fault((section, KIND), f"the meshes have {dimension} dimensions", right, said)
    if said == "axisymmetric" and nodes[0].min() < -BESIDE * np.ptp(nodes[0]):
        what = f"the mesh reaches x = {nodes[0].min():.4g}"
        sections.fault((section, KIND), what, "x from 0: it is the radius, and y the axis", said)
    return said


def read_picks(sections: Sections) -> dict[str, Pick]:
    """Return what [boundaries.NAME] pick; their faults are kept in `sections`."""
    found = {}
    for name in sections.named("boundaries", "boundary"):
        arguments = sections.bound(boundary, sections.table("boundaries")[name], "boundaries", name)
        pick = None if arguments is None else sections.called(boundary, arguments, "boundaries", name)
        if pick:
            found[name] = pick
    return found


def read_body_materials(sections: Sections, regions: tuple[str, ...]) -> dict[str, Material]:
    """Return the material of every region: [material], changed by [material.REGION] where it is there."""
    said = sections.table("material")
    own = {name: table for name, table in said.items() if isinstance(table, dict)}
    for name in own:
        if name not in regions:
            sections.fault(("material", name), "the mesh has no such region", nearest(name, regions), name)
    common = {key: value for key, value in said.items() if key not in own}
    found = {}
    for name in regions:
        keys = ("material", name) if name in own else ("material",)
        read = _material(sections, {**common, **own.get(name, {})}, *keys)
        if read is None:
            break
        found[name] = read
    return found


def _material(sections: Sections, said: Mapping[str, Any], *keys: str) -> Material | None:
    arguments = sections.bound(material, said, *keys)
    found = None if arguments is None else sections.called(material, arguments, *keys)
    if found and found.yield_strength is not None and not found.yield_source.strip():
        right = 'add yield_source = "where the value stands"'
        sections.fault((*keys, "yield_strength"), "a yield strength without its source", right)
    return found


def read_supports(sections: Sections, problem: Problem) -> tuple[Support | ElasticSupport, ...]:
    """Return the supports of [supports.NAME] on a part; kind = "rigid" where none is said."""
    found = []
    for name in sections.named("supports", "support"):
        made = _condition(sections, problem, SUPPORTS, "supports", name, "rigid", {"name": name})
        found += [] if made is None else [made]
    return tuple(found)


def read_loads(sections: Sections, problem: Problem) -> dict[str, Load]:
    """Return the loads of [loads.NAME] on a part, by name."""
    made = {
        name: _condition(sections, problem, LOADS, "loads", name, None, {})
        for name in sections.named("loads", "load")
    }
    return {name: load for name, load in made.items() if load is not None}


def _condition(
    sections: Sections,
    problem: Problem,
    known: Mapping[str, Callable[..., Any]],
    section: str,
    name: str,
    usual: str | None,
    given: Mapping[str, Any],
) -> Any:
    """Return what a table makes, None where it has faults."""
    said = sections.table(section)[name]
    kind = said.get(KIND, usual)
    if kind is None:
        right = f"add {KIND} = one of {listing(sorted(known))}"
        sections.fault((section, name), f"the key {KIND!r} is missing", right)
        return None
    if kind not in known:
        sections.fault((section, name, KIND), f"unknown {KIND}", nearest(str(kind), known), kind)
        return None
    arguments = sections.bound(known[kind], said, section, name, given=given, also=(KIND,))
    if arguments is None:
        return None

    def place(key: str) -> str:
        return sections.file.where(section, name, key if key in said else "")

    faults = misplaced(known[kind], arguments, place, problem, given)
    sections.faults += faults
    return None if faults else sections.called(known[kind], {**arguments, **given}, section, name)
