"""Figures of solids: places and singular edges on the deformed part, the words about them."""

import math
from collections.abc import Callable
from dataclasses import replace

import numpy as np

from convergence.corner import Corner
from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.report import _scene, _space
from convergence.report._marks import Deformed, stations, top
from convergence.report.figures_error import error_map
from convergence.report.figures_mesh import mesh_figure
from convergence.report.figures_stress import stress_figure
from convergence.report.sections_fields import stress_section
from convergence.results import Findings

Solid = Callable[[int], Fields]
VIEW = _space._rotation(np.array((0.8, 0.6, 1.0)))


def findings_of(
    findings: Findings, places: dict[str, tuple[float, ...]], corners: tuple[Corner, ...]
) -> Findings:
    level = findings.ladder.levels[-1]
    values = {key: value for key, value in level.values.items() if not key.endswith((".x", ".y"))}
    for name, place in places.items():
        values |= {f"{name}.{axis}": part for axis, part in zip("xyz", place, strict=True)}
    ladder = replace(findings.ladder, levels=(*findings.ladder.levels[:-1], replace(level, values=values)))
    return replace(findings, ladder=ladder, facts=replace(findings.facts, corners=corners, dimension=3))


def test_a_place_moves_with_the_part_and_a_hidden_one_is_told(findings: Findings, cube: Solid) -> None:
    field = cube(3)
    moved = replace(field, displacement=0.01 * field.points)
    part = Deformed(_scene.scene(moved, VIEW @ (1.05 * field.points), 4.0), VIEW, 5.0)
    assert np.allclose(part.put(np.ones((3, 1))), 1.05 * VIEW.sum(axis=1)[:, None])
    towards = _scene.turn(moved)[2]
    near = tuple((towards > 0).astype(float))
    far = tuple((towards < 0).astype(float))
    places = {"fillet_stress": near, "corner_stress": far}
    picture = stress_figure(moved, _scene.turn(moved), findings_of(findings, places, ()), "MPa")
    assert "place of fillet_stress<" in picture.svg
    assert "place of corner_stress, hidden in this view<" in picture.svg
    assert all(f">{axis}</text>" in picture.svg for axis in "xyz")


def test_a_singular_edge_is_a_line_with_its_ends(findings: Findings, cube: Solid, on_page) -> None:
    corner = replace(findings.facts.corners[0], path=((0.0, 1.0, 0.0), (0.0, 1.0, 1.0)))  # type: ignore[index]
    told = findings_of(findings, {}, (corner,))
    picture = stress_figure(cube(3), VIEW, told, "MPa")
    assert "1 singular edge banded" in picture.alt
    assert "surface" in picture.caption and "tubes around them" in picture.caption
    assert "from (0, 1, 0) to (0, 1, 1)" in on_page(stress_section(told, picture))


def test_colours_end_outside_the_tube_around_a_singular_edge(findings: Findings, cube: Solid) -> None:
    """The stress falls with the distance from the edge x = 0, y = 1; nodes within 0.03 are left out.

    Of a grid of 1 / 40 the next node is diagonally across, on the ends of the edge.
    """
    field = cube(40)
    x, y, _ = field.points
    field = replace(field, von_mises=1.0 - np.hypot(x, y - 1.0))
    path = ((0.0, 1.0, 0.0), (0.0, 1.0, 1.0))
    corner = replace(findings.facts.corners[0], path=path)  # type: ignore[index]
    assert math.isclose(top(field, (corner,)), 1.0 - math.hypot(1 / 40, 1 / 40))
    assert top(field, ()) == 1.0


def test_stations_keep_the_bends_of_a_path() -> None:
    path = np.array(((0.0, 1.0, 1.0), (0.0, 0.0, 2.0), (0.0, 0.0, 0.0)))
    walk = stations(path)
    assert np.isclose(walk.T, path[:, 1]).all(axis=1).any()
    assert math.isclose(np.linalg.norm(np.diff(walk, axis=1), axis=0).sum(), 3.0)
    assert stations(path[:, :1]).shape == (3, 1)


def test_all_levels_of_a_solid_are_drawn(findings: Findings, units: Units, drilled: Solid) -> None:
    levels = [drilled(1), drilled(2), drilled(16)]
    picture = mesh_figure(levels, VIEW, findings.ladder, "mm")
    assert picture.svg.count(">x</text>") == 3
    assert "Of level 3 the outline only" in picture.caption
    assert "The levels from 4 on are too fine to be drawn." in picture.caption
    drawn = error_map(levels[1], VIEW, units)
    assert drawn is not None and "error density" in drawn.svg
    assert "cells at the surface" in drawn.caption
