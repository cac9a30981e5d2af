"""The contract of the room of models, swept over its members, and tested with bad ones."""

import inspect
from collections.abc import Callable, Mapping
from dataclasses import replace
from itertools import product
from typing import Any, get_type_hints

import numpy as np
import pytest

from convergence import bind, rooms
from convergence.dimensions import SYSTEMS, Located
from convergence.errors import SolvingError, Unsuitable
from convergence.fem.facets import facet_bases
from convergence.fem.loads import BodyForce, PointForce, TemperatureRise, Traction
from convergence.fem.material import Material, PlaneKind, material_names
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import solve
from convergence.models.tapered_arm import tapered_arm

Model = Callable[..., Problem]
STEEL = Material(210000.0, 0.3)
SHAPES: dict[int, tuple[Shape, ...]] = {
    1: ("line",),
    2: ("triangle", "quadrilateral"),
    3: ("tetrahedron", "wedge", "hexahedron"),
}
TOLERANCES = {"relative_tolerance", "absolute_tolerance"}
MEMBERS = pytest.mark.parametrize("name", rooms.names("models"))
NOT_PARAMETERS = {"kind"}


def model_of(name: str) -> Model:
    function: Model = rooms.find("models", name)
    return function


def cells_of(problem: Problem, divisions: int, shape: Any, degree: int) -> Mesh:
    counts = problem.part.divisions(size=None, divisions=divisions)
    return mesh(problem.part, counts, shape=shape, degree=degree)


def kinds_of(function: Model) -> list[dict[str, PlaneKind]]:
    """Return what to say of the kind: both where the model has them, nothing where it has one of its own."""
    if "kind" not in inspect.signature(function).parameters:
        return [{}]
    return [{"kind": "plane stress"}, {"kind": "plane strain"}]


IN_EVERY_KIND = [(name, said) for name in rooms.names("models") for said in kinds_of(model_of(name))]


def check_signature(function: Model) -> None:
    """Keyword-only, each with a dimension or choices and a phrase; all but `material` have a default."""
    assert inspect.getdoc(function)
    given = inspect.signature(function).parameters
    assert all(parameter.kind is parameter.KEYWORD_ONLY for parameter in given.values())
    hints = get_type_hints(function, include_extras=True)
    assert hints["return"] is Problem
    assert hints.get("kind", PlaneKind) == PlaneKind
    assert hints["material"] is Material
    bare = [name for name in material_names(function) if given[name].default is inspect.Parameter.empty]
    assert bare == ["material"]
    for parameter in bind.parameters(function, given=material_names(function)):
        assert parameter.default is not bind.REQUIRED, parameter.name
        assert parameter.dimension is not None or parameter.choices, parameter.name
        assert parameter.doc or parameter.name == "kind", parameter.name


def check_files_can_set_it(function: Model) -> None:
    """The defaults, written into a study file, are accepted and give the same problem."""
    table = {
        parameter.name: parameter.default
        for parameter in bind.parameters(function, given=material_names(function))
        if parameter.name not in NOT_PARAMETERS
    }
    given = material_names(function)
    arguments, faults = bind.bind(function, table, where=str, units=SYSTEMS["mm, N, MPa"], given=given)
    assert not faults
    assert function(material=STEEL, **arguments).part.points == function(material=STEEL).part.points


def check_boundaries(problem: Problem) -> None:
    """Named boundaries cover the outline, each edge once; supports and loads use known names."""
    part = problem.part
    if isinstance(part, Part):
        named = [frozenset(edge) for edges in part.boundaries.values() for edge in edges]
        assert len(named) == len(set(named))
        assert set(named) == {frozenset(edge) for edge in part.outline}
    if isinstance(part, SolidPart):
        faces = [face for some in part.boundaries.values() for face in some]
        assert len(faces) == len(set(faces))
        assert set(faces) == part.faces
    for support in problem.supports:
        assert (support.boundary in problem.part.boundaries) != (support.point in problem.part.points)
    for load in problem.loads:
        if isinstance(load, BodyForce | TemperatureRise):
            assert load.region is None or load.region in problem.part.regions
        elif isinstance(load, PointForce):
            assert load.point in problem.part.points
        else:
            assert load.boundary in problem.part.boundaries
    assert set(problem.materials) == set(problem.part.regions or {"body": ()})
    assert 0 < len(problem.title) < 50


def outline_area(part: Part, steps: Callable[[tuple[str, str]], int]) -> float:
    """Return the area inside the outline of chords, `steps` of them on each edge."""
    total = 0.0
    for start, end in part.outline:
        x, y = part.edge(start, end, np.linspace(0.0, 1.0, steps((start, end)) + 1))
        total += 0.5 * float((x[:-1] * y[1:] - x[1:] * y[:-1]).sum())
    return total


def enclosed(level: Mesh) -> float:
    """Return the measure inside all boundaries, the flux of the place through them over the dimension."""
    flux = 0.0
    for boundary in level.part.boundaries:
        for facets in facet_bases(level, boundary, 9):
            flux += float(((facets.places * facets.normals).sum(axis=0) * facets.dx).sum())
    return flux / level.dimension


def check_meshes(problem: Problem) -> None:
    """Every level is free of inverted cells (or `mesh` raises) and fills the part.

    Its boundaries enclose what its cells fill (Gauss's theorem), to round-off on cells of any kind.

    Straight cells fill the polygon of their own boundary vertices; the area under parabolas is off by
    less than a tenth of what the chords lose (theory: (angle of the segment)²/80, segments below 90°).
    """
    part = problem.part
    for shape, degree in product(SHAPES[part.dimension], (1, 2)):
        level = cells_of(problem, 1, shape, degree)
        assert enclosed(level) == pytest.approx(level.measure, rel=1e-12)
    if not isinstance(part, Part):
        return
    for divisions in (1, 2, 3):
        counts = part.divisions(size=None, divisions=divisions)
        polygon = outline_area(part, lambda edge, c=counts: c[part.families[edge]])  # type: ignore[misc]
        true = outline_area(part, lambda edge: 2000)
        for shape in ("triangle", "quadrilateral"):
            straight = cells_of(problem, divisions, shape, 1).measure
            curved = cells_of(problem, divisions, shape, 2).measure
            assert straight == pytest.approx(polygon, rel=1e-12)
            assert abs(curved - true) < 0.1 * abs(polygon - true) + 1e-6 * true


def check_balance(problem: Problem) -> None:
    """Reactions balance loads in force and moment to 1e-9, on every kind of cell."""
    dimension = problem.part.dimension
    for shape, degree in product(SHAPES[dimension], (1, 2)):
        solution = solve(problem, cells_of(problem, 1, shape, degree))
        left = solution.resultant(solution.load + solution.reactions)
        scale = np.abs(solution.load).sum() + np.abs(solution.reactions).sum()
        assert scale > 0 and len(left) == {1: 1, 2: 3, 3: 6}[dimension]
        assert np.abs(left[:dimension]).max() < 1e-9 * scale
        assert (np.abs(left[dimension:]) < 1e-9 * scale * problem.part.size).all()
        assert solution.energy > 0


def check_quantities(problem: Problem, quantities: Mapping[str, Mapping[str, Any]]) -> None:
    """Each suggestion names a quantity, is accepted by it, has a tolerance and gives a number at a node."""
    assert quantities
    solution = solve(problem, cells_of(problem, 2, SHAPES[problem.part.dimension][-1], 2))
    for name, table in quantities.items():
        assert name.isidentifier()
        measure = rooms.find("quantities", table["measure"])
        rest = {key: value for key, value in table.items() if key not in TOLERANCES | {"measure"}}
        assert TOLERANCES & set(table)
        arguments, faults = bind.bind(measure, rest, where=str, units=SYSTEMS["mm, N, MPa"])
        assert not faults
        for parameter in bind.parameters(measure):
            value = arguments[parameter.name]
            if isinstance(value, str) and parameter.names:
                assert value in problem.names()[parameter.names], value
                if parameter.names == "point":
                    place = np.array(problem.part.points[value])[:, None]
                    away = np.linalg.norm(solution.mesh.nodes - place, axis=0)
                    assert away.min() < 1e-9 * problem.part.size
        found = measure(solution, **arguments)
        assert np.isfinite(found.value if isinstance(found, Located) else found)


@MEMBERS
def test_signature(name: str) -> None:
    check_signature(model_of(name))
    check_files_can_set_it(model_of(name))
    assert rooms.shelf("models")[name]


@pytest.mark.parametrize(("name", "said"), IN_EVERY_KIND)
def test_problem(name: str, said: dict[str, PlaneKind]) -> None:
    """In both kinds where the model has them, else once."""
    problem = model_of(name)(material=STEEL, **said)
    assert problem.kind == said.get("kind", problem.kind)
    check_boundaries(problem)
    check_balance(problem)


@MEMBERS
def test_meshes(name: str) -> None:
    check_meshes(model_of(name)(material=STEEL))


@MEMBERS
def test_quantities(name: str) -> None:
    check_quantities(model_of(name)(material=STEEL), rooms.beside("models", name, "QUANTITIES"))


# The contract itself, handed bad members.


def positional(length: float = 1.0, kind: PlaneKind = "plane stress", *, material: Material) -> Problem:
    """Takes positional arguments."""
    return tapered_arm(length=length, kind=kind, material=material)


def undimensioned(*, length: float = 1.0, kind: PlaneKind = "plane stress", material: Material) -> Problem:
    """Has a parameter without a dimension."""
    return tapered_arm(length=length, kind=kind, material=material)


def with_steel(*, kind: PlaneKind = "plane stress", material: Material = STEEL) -> Problem:
    """Chooses the material itself."""
    return tapered_arm(kind=kind, material=material)


@pytest.mark.parametrize("member", [positional, undimensioned, with_steel])
def test_a_bad_signature_fails(member: Model) -> None:
    with pytest.raises(AssertionError):
        check_signature(member)


def test_bad_boundaries_fail() -> None:
    good = tapered_arm(material=STEEL)
    check_boundaries(good)
    fewer = {name: edges for name, edges in good.part.boundaries.items() if name != "upper"}
    twice = {**good.part.boundaries, "again": good.part.boundaries["upper"]}
    for boundaries in (fewer, twice):
        with pytest.raises(AssertionError):
            check_boundaries(replace(good, part=replace(good.part, boundaries=boundaries)))
    with pytest.raises(AssertionError):
        check_boundaries(replace(good, loads=(Traction("nowhere", (0.0, 1.0)),)))


def test_bad_meshes_fail() -> None:
    problem = tapered_arm(material=STEEL)
    good = problem.part
    folded = replace(good, points={**good.points, "middle": (650.0, 400.0)})
    with pytest.raises(SolvingError, match="is inverted"):
        check_meshes(replace(problem, part=folded))
    doubled = replace(good, blocks=(*good.blocks, good.blocks[0]))
    with pytest.raises(AssertionError):
        check_meshes(replace(problem, part=doubled))


def test_bad_balance_fails() -> None:
    problem = tapered_arm(material=STEEL)
    with pytest.raises(AssertionError):
        check_balance(replace(problem, loads=()))


def test_bad_quantities_fail() -> None:
    problem = tapered_arm(material=STEEL)
    good = {"measure": "displacement", "at": "tip", "relative_tolerance": 0.01}
    check_quantities(problem, {"deflection": good})
    for change in ({"at": "nowhere"}, {"component": "w"}, {"measure": "strain_energy"}):
        with pytest.raises(AssertionError):
            check_quantities(problem, {"deflection": {**good, **change}})
    with pytest.raises(Unsuitable, match="component 'z': one of x, y"):
        check_quantities(problem, {"deflection": {**good, "component": "z"}})
    with pytest.raises(AssertionError):
        check_quantities(problem, {"deflection": {"measure": "strain_energy"}})
