"""The pointwise map: exact values inside their intervals, verdicts by tolerance, and the file of a map."""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from pathlib import Path
from typing import Any

import meshio
import numpy as np
import pytest

from convergence import rooms
from convergence.bodies.nodal_fields import NodalFields, nodal_fields, rounding
from convergence.bodies.pointwise import WORDS, PointwiseMap, Reading, pointwise
from convergence.bodies.write_fields import write_fields
from convergence.fem.element import element
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import solve

STEEL = Material(young=210_000.0, poisson=0.3)
DISPLACEMENT = [Reading("displacement", axis, "displacement", 0.01) for axis in ("magnitude", "x", "y")]
STRESS = [Reading("stress", name, "point_stress", 0.02) for name in ("xx", "yy", "xy", "von_mises")]


def series(model: str, shape: str, degree: int) -> tuple[Problem, list[NodalFields], list[float]]:
    problem = rooms.find("models", model)(material=STEEL)
    levels, sizes = [], []
    for divisions in (4, 8, 16):
        counts = problem.part.divisions(size=None, divisions=divisions)
        solution = solve(problem, mesh(problem.part, counts, shape=shape, degree=degree))
        levels.append(nodal_fields(solution))
        sizes.append(solution.mesh.h)
    return problem, levels, sizes


def judge(
    levels: Sequence[NodalFields], sizes: Sequence[float], readings: Sequence[Reading], **more: Any
) -> PointwiseMap:
    return pointwise(levels[-1], [[level] for level in levels[:-1]], sizes, readings, **more)


def exact_fields(problem: Problem, nodes: np.ndarray) -> Mapping[str, np.ndarray]:
    assert problem.exact is not None
    return {"displacement": problem.exact.displacement(*nodes), "stress": problem.exact.stress(*nodes)}


@pytest.fixture(scope="module")
def plate() -> tuple[Problem, list[NodalFields], list[float]]:
    """The plate with a hole, of triangles of degree 1."""
    return series("perforated_plate", "triangle", 1)


@pytest.fixture(scope="module")
def judged(plate: tuple[Problem, list[NodalFields], list[float]]) -> PointwiseMap:
    _, levels, sizes = plate
    return judge(levels, sizes, DISPLACEMENT + STRESS, corners_known=True)


def test_exact_values_lie_in_their_intervals(
    plate: tuple[Problem, list[NodalFields], list[float]], judged: PointwiseMap
) -> None:
    """The intervals are made to hold 95 of 100 limits."""
    exact = exact_fields(plate[0], judged.finest.nodes)
    for field in judged.fields:
        wanted = field.reading.of(exact)
        assert np.mean((field.low <= wanted) & (wanted <= field.high)) >= 0.95, field.reading.name


def test_an_interval_is_no_wider_than_it_need_be(judged: PointwiseMap) -> None:
    """Cells of 1/32 of the hole's quarter: linear stress is off by a percent of the largest at most."""
    for field in judged.fields:
        assert np.median(field.relative) < 0.01, field.reading.name


def test_observed_orders_are_those_of_linear_cells(judged: PointwiseMap) -> None:
    """Order 2 of displacement; coarse values inside cells scatter it, not its median."""
    assert np.nanmedian(judged.fields[0].order) == pytest.approx(2.0, abs=0.25)


def test_the_verdict_follows_the_tolerance(plate: tuple[Problem, list[NodalFields], list[float]]) -> None:
    _, levels, sizes = plate
    reading = replace(STRESS[3], tolerance=1e-3)
    found = judge(levels, sizes, [reading, replace(reading, scale="local")], corners_known=True)
    largest, local = found.fields
    assert (largest.half_width == local.half_width).all()
    top = np.abs(largest.values).max()
    assert ((largest.word == WORDS.index("sound")) == (largest.half_width <= 1e-3 * top)).all()
    assert ((local.word == WORDS.index("sound")) == (local.half_width <= 1e-3 * np.abs(local.values))).all()
    assert 0.0 < local.share("sound") <= largest.share("sound") < 1.0
    assert largest.share("sound") + largest.share("refine") == pytest.approx(1.0)


def test_singular_nodes_and_possible_growth(plate: tuple[Problem, list[NodalFields], list[float]]) -> None:
    _, levels, sizes = plate
    chosen = np.arange(0, levels[-1].nodes.shape[1], 7)
    spots = np.zeros(len(chosen), dtype=bool)
    spots[3] = True
    reading = [DISPLACEMENT[0], replace(STRESS[3], scale="local", tolerance=1e-3)]
    found = judge(levels, sizes, reading, nodes=chosen, singular=spots)
    assert found.fields[0].word[3] != WORDS.index("singular")
    stress = found.fields[1]
    assert np.flatnonzero(stress.word == WORDS.index("singular")).tolist() == [3]
    doubted = (stress.growth > 0) & (stress.half_width > 0.03 * np.abs(stress.values))
    assert doubted.any()
    assert (stress.word[doubted & ~spots] == WORDS.index("unproven")).all()


def line(values: np.ndarray, count: int) -> NodalFields:
    """Squares in a row, with a field."""
    x = np.linspace(0.0, 1.0, count + 1)
    nodes = np.array([np.tile(x, 2), np.repeat([0.0, 0.25], count + 1)])
    first = np.arange(count)
    cells = np.array([first, first + 1, first + count + 2, first + count + 1])
    return NodalFields(nodes, cells, element("quadrilateral", 1), {"heat": values(nodes[0])[None]})


def test_values_that_do_not_move_are_constant() -> None:
    """A linear field is the same on all meshes; single precision moves it by 6e-8 of its largest value, 3."""
    levels = [line(lambda x: 2.0 + x, count) for count in (2, 4, 8)]
    reading = Reading("heat", "", "unknown", 1e-5)
    found = judge(levels, (0.5, 0.25, 0.125), [reading]).fields[0]
    assert found.is_constant.all() and (found.word == WORDS.index("sound")).all()
    assert np.isnan(found.order).all()
    assert found.half_width.max() == pytest.approx(1e-6, rel=1e-6)
    single = rounding(levels[-1].fields["heat"].astype(np.float32))
    assert single == pytest.approx(3.0 * 2.0**-24)
    rough = [replace(level, resolution={"heat": 1e-5}) for level in levels]
    found = judge(rough, (0.5, 0.25, 0.125), [reading]).fields[0]
    assert found.half_width.max() == pytest.approx(2e-5)
    assert (found.word == WORDS.index("sound")).all()  # 1e-5 of 3


def test_nodes_without_a_coarse_value_are_unproven() -> None:
    levels = [line(lambda x: 2.0 + x**2, count) for count in (2, 4, 8)]
    longer = replace(levels[-1], nodes=levels[-1].nodes * np.array([[4.0], [1.0]]))
    found = judge([*levels[:2], longer], (0.5, 0.25, 0.125), [Reading("heat", "", "unknown", 0.05)])
    lost = np.isnan(found.fields[0].half_width)
    assert lost.sum() == max(found.missing) > 0
    assert (found.fields[0].word[lost] == WORDS.index("unproven")).all()


def test_a_map_is_written_for_viewers(judged: PointwiseMap, tmp_path: Path) -> None:
    """Single precision holds 6e-8 of a value."""
    half = replace(judged, nodes=judged.nodes[::2], fields=tuple(_every_second(judged)))
    write_fields(tmp_path / "map.vtu", [half])
    back = meshio.read(tmp_path / "map.vtu")
    assert back.cells[0].type == "triangle" and len(back.cells[0].data) == judged.finest.cell_nodes.shape[1]
    assert (back.points[:, :2] == judged.finest.nodes.T).all()
    field = judged.fields[-1]
    told = back.point_data["stress von_mises half_width"]
    assert told[::2] == pytest.approx(field.half_width[::2], rel=1e-6) and np.isnan(told[1::2]).all()
    word = back.point_data["stress von_mises verdict 0 sound, 1 refine, 2 singular, 3 unproven"]
    assert (word[::2] == field.word[::2]).all() and (word[1::2] == -1).all()
    assert back.point_data["displacement"][:, 2].max() == 0.0


def _every_second(judged: PointwiseMap) -> list:
    arrays = ("values", "limit", "low", "high", "half_width", "relative", "order", "growth", "word")
    return [replace(field, **{name: getattr(field, name)[::2] for name in arrays}) for field in judged.fields]
