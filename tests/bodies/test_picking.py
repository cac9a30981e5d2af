"""Boundaries picked by geometry, on a quarter ring and a quarter tube whose facets are known by name."""

from typing import Any

import numpy as np
import pytest

from convergence.bodies.picking import boundary, picked
from convergence.errors import Unsuitable
from convergence.fem.element import Shape
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.outer_facets import outer_facets
from convergence.fem.part import Part, arc
from convergence.fem.solid_part import REVOLVED, SolidPart

RING = Part(
    points={"a": (1.0, 0.0), "b": (2.0, 0.0), "c": (0.0, 2.0), "d": (0.0, 1.0)},
    blocks=(("a", "b", "c", "d"),),
    curves={("b", "c"): arc((0.0, 0.0), 2.0, 0.0, 90.0), ("a", "d"): arc((0.0, 0.0), 1.0, 0.0, 90.0)},
    boundaries={"in": (("d", "a"),), "out": (("b", "c"),), "low": (("a", "b"),), "left": (("c", "d"),)},
)
TUBE = SolidPart(RING, (("base", 0.0), ("lid", 3.0)))
SOLIDS: tuple[Shape, ...] = ("tetrahedron", "hexahedron", "wedge")


def cut(part: Part | SolidPart, shape: Shape, degree: int) -> Mesh:
    return mesh(part, part.divisions(size=None, divisions=3), shape=shape, degree=degree)


def facets(groups: tuple[np.ndarray, ...]) -> set[tuple[int, ...]]:
    return {tuple(sorted(facet)) for group in groups for facet in group.T}


def pick(made: Mesh, **said: Any) -> set[tuple[int, ...]]:
    groups = tuple(nodes for nodes, _ in outer_facets(made.shape, made.degree, made.cell_nodes))
    return facets(picked(boundary(**said), made.nodes, groups))


@pytest.mark.parametrize(
    ("said", "name"),
    [
        ({"circle": (0.0, 0.0), "radius": 1.0}, "in"),
        ({"circle": (0.0, 0.0), "radius": 2.0}, "out"),
        ({"plane": (5.0, 0.0), "normal": (0.0, -3.0)}, "low"),
        ({"plane": (0.0, 0.0), "normal": (1.0, 0.0)}, "left"),
        ({"facing": (0.0, -1.0), "angle": 5.0, "low": (0.9, -0.1), "high": (2.1, 0.1)}, "low"),
        ({"low": (-0.1, 0.9), "high": (0.0, 2.1)}, "left"),
    ],
)
@pytest.mark.parametrize(("shape", "degree"), [("triangle", 1), ("triangle", 2), ("quadrilateral", 2)])
def test_sides_of_a_ring(said: dict[str, Any], name: str, shape: Shape, degree: int) -> None:
    made = cut(RING, shape, degree)
    assert pick(made, **said) == facets(made.facets[name])


@pytest.mark.parametrize(
    ("said", "name"),
    [
        ({"cylinder": (0.0, 0.0, 7.0), "axis": (0.0, 0.0, -2.0), "radius": 1.0}, "in"),
        ({"cylinder": (0.0, 0.0, 0.0), "axis": (0.0, 0.0, 1.0), "radius": 2.0}, "out"),
        ({"plane": (0.0, 0.0, 3.0), "normal": (0.0, 0.0, 1.0)}, "lid"),
        ({"facing": (0.0, 0.0, -1.0)}, "base"),
        ({"facing": (0.0, 0.0, -1.0), "angle": 0.0}, "base"),
    ],
)
@pytest.mark.parametrize("shape", SOLIDS)
@pytest.mark.parametrize("degree", [1, 2])
def test_faces_of_a_tube(said: dict[str, Any], name: str, shape: Shape, degree: int) -> None:
    made = cut(TUBE, shape, degree)
    assert pick(made, **said) == facets(made.facets[name])


def test_a_sphere() -> None:
    ball = SolidPart(RING, (("start", 0.0), ("end", 90.0)), sweep=REVOLVED)
    made = cut(ball, "tetrahedron", 2)
    found = pick(made, sphere=(0.0, 0.0, 0.0), radius=2.0)
    assert found == facets(made.facets["out"])


def test_a_facet_across_a_cylinder_is_not_on_it() -> None:
    """All three vertices of a triangle on the lid of a coarse shaft may lie on its rim."""
    nodes = np.array([[1.0, -0.5, -0.5, 0.0], [0.0, 0.75**0.5, -(0.75**0.5), 0.0], [0.0, 0.0, 0.0, -1.0]])
    lid = np.array([[0], [1], [2]])
    rim = boundary(cylinder=(0.0, 0.0, 0.0), axis=(0.0, 0.0, 1.0), radius=1.0)
    with pytest.raises(Unsuitable, match="none faces that way"):
        picked(rim, nodes, (lid,))


def test_a_box_within_a_boundary_of_the_file() -> None:
    made = cut(RING, "triangle", 1)
    half = boundary(of="out", low=(0.0, -1.0), high=(3.0, 1.01))
    found = facets(picked(half, made.nodes, made.facets["out"]))
    assert found and found < facets(made.facets["out"])


@pytest.mark.parametrize(
    ("said", "message"),
    [
        ({"circle": (0.0, 0.0), "radius": 1.3}, "the nearest facet is 0.3 away"),
        ({"plane": (0.0, -0.25), "normal": (0.0, 1.0)}, "the nearest facet is 0.25 away"),
        ({"low": (-1.0, -1.0), "high": (3.0, 3.0)}, "this picks all of it"),
        ({"cylinder": (0.0, 0.0, 0.0), "axis": (0.0, 0.0, 1.0), "radius": 1.0}, r"\[x, y\]"),
        ({"sphere": (0.0, 0.0), "radius": 1.0}, "circle: the part is plane"),
    ],
)
def test_what_picks_nothing_or_all_says_so(said: dict[str, Any], message: str) -> None:
    with pytest.raises(Unsuitable, match=message):
        pick(cut(RING, "triangle", 1), **said)


def test_part_of_a_named_boundary_off_its_circle_is_told() -> None:
    made = cut(RING, "triangle", 1)
    both = made.facets["out"] + made.facets["low"]
    with pytest.raises(Unsuitable, match="3 of 12 facets"):
        picked(boundary(of="skin", circle=(0.0, 0.0), radius=2.0), made.nodes, both)


@pytest.mark.parametrize(
    ("said", "key"),
    [
        ({}, ""),
        ({"plane": (0.0, 0.0)}, "normal"),
        ({"circle": (0.0, 0.0)}, "radius"),
        ({"cylinder": (0.0, 0.0, 0.0), "radius": 1.0}, "axis"),
        ({"plane": (0.0, 0.0), "normal": (0.0, 0.0)}, "normal"),
        ({"low": (0.0, 0.0)}, "high"),
        ({"circle": (0.0, 0.0), "plane": (0.0, 0.0), "radius": 1.0}, "circle"),
    ],
)
def test_keys_that_misfit(said: dict[str, Any], key: str) -> None:
    with pytest.raises(Unsuitable) as caught:
        boundary(**said)
    assert key in [problem[0] for problem in caught.value.problems]
