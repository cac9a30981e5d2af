"""What is seen of a solid: what hides what, which lines are drawn, from where it is looked at."""

import math
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.fields import Fields
from convergence.report import _plane, _scene, _sight, _space
from convergence.report._sight import Sight

Solid = Callable[[int], Fields]
VIEW = _space._rotation(np.array((0.8, 0.6, 1.0)))


def seen(field: Fields, pixels: int = 200, turned: np.ndarray = VIEW) -> Sight:
    page = turned @ field.points
    return _space.look(page, field.cells, _plane.size_of(page) / pixels)


def hits(sight: Sight) -> np.ndarray:
    """Where the line of sight of each covered pixel meets the surface, in the part's coordinates."""
    row, column = np.nonzero(sight.nearest >= 0)
    across, up = sight.corner[:, None] + sight.step * np.array((column, row))
    return np.asarray(VIEW.T @ np.array((across, up, sight.depth[row, column])))


@pytest.mark.parametrize("direction", _space.DIRECTIONS)
def test_views_are_rotations_with_y_upright(direction: np.ndarray) -> None:
    rows = _space._rotation(direction)
    assert np.allclose(rows @ rows.T, np.eye(3)) and math.isclose(np.linalg.det(rows), 1.0)
    assert rows[2] @ direction > 0
    assert rows[0, 1] == 0 and rows[1, 1] > 0


@pytest.mark.parametrize("divisions", [1, 5])
def test_of_a_cube_three_sides_are_seen(divisions: int, cube: Solid) -> None:
    """The shadow of a unit cube is the sum of the components of the direction (own computation).

    The count of pixels is right to the length of the shadow's outline, below 6, times a pixel.
    """
    field = cube(divisions)
    sight = seen(field)
    middles = field.points[:, field.cells[:, np.unique(sight.faces[sight.nearest[sight.nearest >= 0]])]].mean(
        1
    )
    assert middles.shape[1] == 3 * divisions**2
    assert np.allclose(middles.max(axis=0), 1.0)
    assert math.isclose((sight.nearest >= 0).sum() * sight.step**2, VIEW[2].sum(), abs_tol=6 * sight.step)


def test_colours_are_linear_and_right_to_rounding(drilled: Solid) -> None:
    """A linear field in the pixels is that field at the places where the lines of sight end."""
    field, slope = drilled(2), np.array((1.0, -2.0, 0.5))
    sight = seen(field)
    pixels = sight.nodal(slope @ field.points)
    assert np.isnan(pixels).sum() == (sight.nearest < 0).sum() > 0
    assert np.allclose(pixels[sight.nearest >= 0], slope @ hits(sight), rtol=0, atol=1e-9 * 40)


@pytest.mark.parametrize("divisions", [1, 4])
def test_the_front_hides_the_bore_and_the_hole_shows_it(divisions: int, drilled: Solid) -> None:
    """Lines of sight that cross the front z = 20 in the material end there, those through the hole do not."""
    field = drilled(divisions)
    found = hits(seen(field))
    front = found + (20.0 - found[2]) / VIEW[2, 2] * VIEW[2][:, None]
    r, onto = np.hypot(*front[:2]), np.abs(front[:2]).max(axis=0) < 20
    inner = 10 * math.cos(math.pi / (8 * divisions))  # the hole is drawn with straight sides
    in_material, through = onto & (r > 10), onto & (r < inner)
    assert in_material.sum() > 1000 and through.sum() > 1000
    assert np.allclose(found[2, in_material], 20.0)
    assert (found[2, through] < 20.0 - 1e-6).all()
    radius = np.hypot(*found[:2, through])
    assert ((radius > inner - 1e-6) & (radius < 10 + 1e-6)).all(), "all end on the bore"


def test_an_upright_leg_hides_the_foot_behind_it(angle: Solid) -> None:
    """Places on the foot, y = 4: the line to the eye meets the leg at x = 44 or passes beside it."""
    x, z = (part.ravel() for part in np.meshgrid(np.linspace(1, 39, 30), np.linspace(1, 29, 30)))
    places = np.array((x, np.full_like(x, 4.0), z))
    at_leg = places + (44.0 - x) / VIEW[2, 0] * VIEW[2][:, None]
    sight = seen(angle(1), 600)
    clear = np.abs(at_leg[2] - 30.0) > 10 * sight.step  # passes so close that a pixel decides
    assert at_leg[1].max() < 48.0
    expected = at_leg[2] > 30.0
    assert 100 < expected[clear].sum() < clear.sum() - 100
    assert (sight.visible(VIEW @ places) == expected)[clear].all()


def test_a_face_whose_middle_is_farther_still_hides(cube: Solid) -> None:
    """A long plate and a small block over its far end: the plate's middle is nearer, the block hides it."""
    plate, block = cube(1), cube(1)
    long, small = np.array((0.1, 0.1, 10.0)), np.array((0.3, 0.3, 0.3))
    shift = np.array((-0.1, 0.1, 0.0))
    points = np.hstack((long[:, None] * plate.points, small[:, None] * block.points + shift[:, None]))
    field = replace(plate, points=points, cells=np.hstack((plate.cells, block.cells + plate.points.shape[1])))
    top = np.flatnonzero(np.isclose(points[1, field.cells], 0.4).all(axis=0))
    sight = seen(field, 2000)
    shown = (sight.nearest >= 0) & np.isin(sight.faces[sight.nearest], top)
    depths = (VIEW @ points)[2, field.cells].mean(axis=0)
    assert depths[top] < depths[np.isclose(points[1, field.cells], 0.1).all(axis=0) & (np.arange(12) < 6)]
    # all of the block's upper side is seen: its area times the slope, right to its outline times a pixel
    assert math.isclose(shown.sum() * sight.step**2, 0.09 * VIEW[2, 1], abs_tol=4 * 0.3 * sight.step)


@pytest.mark.parametrize("divisions", [1, 4])
def test_of_a_cube_nine_edges_are_drawn(divisions: int, cube: Solid) -> None:
    """The three edges at the far corner are hidden, but for the last piece of four pixels at their ends."""
    field = cube(divisions)
    sight = seen(field, 400)
    pieces = sight.strokes(*(sight.points[:, ends] for ends in field.boundary))
    drawn = np.hypot(*(pieces[:, 1] - pieces[:, 0]).T).sum()
    assert field.boundary.shape[1] == 12 * divisions
    assert _space.facing(sight, field.boundary).sum() == 9 * divisions
    assert _space.unhidden(sight, field.boundary).shape[1] == 9 * divisions
    assert math.isclose(drawn, 3 * np.hypot(*VIEW[:2]).sum(), abs_tol=3 * 4 * sight.step)


def test_the_surface_turns_away_along_its_shadow(cube: Solid) -> None:
    """Of a cube these are the six edges between a side that is seen and one that is not."""
    sight = seen(cube(3))
    ends = sight.points[:2, sight.turning()]
    assert sight.turning().shape[1] == 6 * 3
    assert math.isclose(np.hypot(*(ends[:, 0] - ends[:, 1])).sum(), 2 * np.hypot(*VIEW[:2]).sum())


@pytest.mark.parametrize(("axis", "end"), [(axis, end) for axis in range(3) for end in (0.0, 1.0)])
def test_the_view_shows_the_largest_stress(axis: int, end: float, cube: Solid) -> None:
    field = cube(4)
    place = np.full(3, 0.5)
    place[axis] = end
    field = replace(field, von_mises=10.0 - np.linalg.norm(field.points - place[:, None], axis=0))
    towards = _scene.turn(field)[2]
    assert towards[axis] * (end - 0.5) > 0
    assert towards[1] > 0 or (axis, end) == (1, 0.0), "from above, unless the place is below"


def test_of_two_views_the_one_that_shows_more_is_taken(angle: Solid) -> None:
    """The even stress is seen from everywhere; the open side of the angle shows more than its back."""
    towards = _scene.turn(angle(1))[2]
    assert towards[0] < 0 < towards[1]


def test_the_eye_stays_above_where_more_is_seen_from_below(angle: Solid) -> None:
    """The angle upside down opens to x > 0 and y < 0."""
    field = angle(1)
    assert _scene.turn(replace(field, points=np.diag((-1.0, -1.0, 1.0)) @ field.points))[2, 1] > 0


def test_batches_leave_no_trace(drilled: Solid, monkeypatch: pytest.MonkeyPatch) -> None:
    at_once = seen(drilled(2))
    monkeypatch.setattr(_sight, "BATCH", 64)
    assert (seen(drilled(2)).depth == at_once.depth).all()


def test_the_error_of_a_face_is_in_its_pixels(cube: Solid) -> None:
    field = cube(3)
    sight = seen(field)
    pixels = sight.facial(np.arange(field.cells.shape[1], dtype=float))
    middles = sight.points[:, field.cells].mean(axis=1)
    faces = np.flatnonzero(field.points[:, field.cells].mean(axis=1).max(axis=0) > 1 - 1e-9)
    column, row = np.rint((middles[:2, faces] - sight.corner[:, None]) / sight.step).astype(int)
    assert (pixels[row, column] == faces).all()
