"""Rays and surfaces at singular corners: where they start, where they point, how far they go."""

import numpy as np
import pytest

from convergence import rooms
from convergence.corners.rays import Ray, rays
from convergence.corners.singular_corners import singular_corners
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support

ROOT = np.sqrt(0.5)


def problem_of(model: str, **arguments: object) -> Problem:
    made: Problem = rooms.find("models", model)(material=Material(210000.0, 0.3), **arguments)
    return made


def rays_of(problem: Problem, most: int = 4) -> dict[str, Ray]:
    return {ray.corner.name: ray for ray in rays(problem, singular_corners(problem), most)}


def test_a_plane_bracket() -> None:
    """Legs 80 wide, size 283: a quarter of it is 71, the largest of 1, 2, 4, 8 tens below is 40."""
    found = rays_of(problem_of("l_bracket", fillet_radius=0.0))
    inner, right = found["inner_corner"], found["top_right"]
    assert inner.start == pytest.approx([80.0, 80.0]) and inner.way == pytest.approx([-ROOT, -ROOT])
    assert abs(inner.way @ inner.across) < 1e-12 and np.linalg.norm(inner.across) == pytest.approx(1.0)
    assert inner.reach == 40.0 and inner.single
    assert right.way == pytest.approx([-ROOT, -ROOT]) and right.single
    # within 1e-5 of the part's size, as places on a part are told
    assert sorted(tuple(s.way.round(9)) for s in inner.surfaces) == [(0.0, 1.0), (1.0, 0.0)]
    assert [s.thickness for s in inner.surfaces] == pytest.approx([80.0, 80.0], abs=0.01)
    (below,) = right.surfaces
    assert below.way == pytest.approx([0.0, -1.0]) and below.inward == pytest.approx([-1.0, 0.0])
    assert len(rays_of(problem_of("l_bracket", fillet_radius=0.0), most=1)) == 1


def test_a_short_leg_has_no_hot_spot() -> None:
    """The arm's upper surface is 50 long and the arm 80 deep; the post's is 120 long."""
    found = rays_of(problem_of("l_bracket", fillet_radius=0.0, arm_length=130.0))
    (surface,) = found["inner_corner"].surfaces
    assert surface.way == pytest.approx([0.0, 1.0])


def test_materials_that_meet() -> None:
    """The bond line halves the opening: the ray halves one material instead; both surfaces are read."""
    found = rays_of(problem_of("bonded_strip"))["bond_edge"]
    assert np.abs(found.way) == pytest.approx([ROOT, ROOT]) and found.way[1] < 0.0
    left, right = sorted(found.surfaces, key=lambda surface: surface.toe[0])
    assert left.toe[0] < 60.0 < right.toe[0], "each in its own material"


def test_a_plane_of_symmetry_carries_the_ray() -> None:
    """Ahead of the crack, where the stress across is that of the stress intensity."""
    tip = rays_of(problem_of("centre_cracked_plate"))["tip"]
    assert tip.way == pytest.approx([1.0, 0.0], abs=1e-9) and np.abs(tip.across) == pytest.approx([0.0, 1.0])


def test_an_acute_clamped_corner_has_no_section() -> None:
    """At 87.1° a line square to the free surface leaves the part at once."""
    root = rays_of(problem_of("tapered_arm"))["root_upper"]
    assert root.surfaces == () and root.reach > 0.0


def test_complex_exponents_do_not_lead_alone() -> None:
    """Clamped-free 180° has 0.5 ± 0.12i (Williams 1952): the field oscillates, s r^0.5 has no limit."""
    plan = Part(
        points={"a": (0, 0), "b": (1, 0), "c": (2, 0), "d": (2, 1), "e": (1, 1), "f": (0, 1)},
        blocks=(("a", "b", "e", "f"), ("b", "c", "d", "e")),
        boundaries={"held": (("a", "b"),)},
    )
    held = Support("held", x=0.0, y=0.0, boundary="held")
    problem = Problem("half held", plan, {"body": Material(210000.0, 0.3)}, (held,), ())
    found = rays_of(problem)
    assert found["b"].corner.exponent == pytest.approx(0.5, abs=1e-9) and not found["b"].single
    assert found["a"].single, "90°: one real exponent"


def test_an_edge_of_a_solid() -> None:
    """The middle of a straight edge, the middle of a middle piece of one that closes."""
    found = rays_of(problem_of("solid_bracket", fillet_radius=0.0))
    inner = found["inner_corner_back-inner_corner_middle-inner_corner_front"]
    assert inner.start == pytest.approx([80.0, 80.0, 0.0]) and inner.way == pytest.approx([-ROOT, -ROOT, 0.0])
    assert inner.across[2] == pytest.approx(0.0, abs=1e-9) and len(inner.surfaces) == 2
    (around,) = (ray for name, ray in found.items() if name.startswith("top_"))
    assert around.corner.distance(tuple(around.start)) < 1e-9 and around.way[1] < 0.0


def test_no_ray_from_a_point_of_a_solid_or_from_a_rod() -> None:
    assert rays(problem_of("tie_rod"), (), 4) == ()
    assert rays(problem_of("l_bracket"), (), 4) == ()
