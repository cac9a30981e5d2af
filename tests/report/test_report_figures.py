"""Figures of awkward ladders and meshes: what is drawn, what is left out, and that it says so."""

import math
from collections.abc import Callable
from dataclasses import replace
from typing import Any
from xml.etree import ElementTree

import numpy as np
import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.colors import to_hex
from matplotlib.figure import Figure

from convergence.fields import Fields
from convergence.report import _plane
from convergence.report._axes import middle
from convergence.report.figures_error import error_map, norm_figure
from convergence.report.figures_growth import growth_figure
from convergence.report.figures_order import error_figure
from convergence.report.figures_stress import deformation_factor
from convergence.report.figures_value import value_figure
from convergence.results import Facts, Findings, Ladder, Quantity, Verdict

NAN = math.nan
H = np.array([4.0, 2.0, 1.0])
STRESS = Quantity("s", unit="MPa")
NOTHING = {"limit": NAN, "low": NAN, "high": NAN, "uncertainty": NAN, "observed_order": NAN}


def texts(svg: str) -> str:
    """All text of an SVG: it stays text and is not turned into outlines."""
    return " ".join(
        "".join(node.itertext()) for node in ElementTree.fromstring(svg).iter() if "text" in node.tag
    )


def test_value_figure_says_what_it_shows(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder = ladder_of({"s": np.array([300.0, 309.0, 312.437])}, H)
    picture = value_figure("s-value", STRESS, verdict_of(), ladder, "mm")
    assert picture is not None
    shown = texts(picture.svg)
    for word in (
        "interval",
        "tolerance",
        "best estimate",
        "fitted curve",
        "s [MPa]",
        "h [mm]",
        "24,000",
        "1,500",
    ):
        assert word in shown
    assert picture.png.startswith(b"\x89PNG")


def test_curve_fits_the_levels_and_a_narrow_interval_is_enlarged(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    """Values 313.9 - 2 h^1.75 exactly; a level on the other side of the best estimate takes no part."""
    ladder = ladder_of({"s": np.append(320.0, 313.9 - 2.0 * H**1.75)}, np.append(8.0, H))
    verdict = verdict_of(value=311.9, limit=313.9, low=313.5, high=314.3)
    picture = value_figure("s-value", STRESS, verdict, ladder, "mm")
    assert picture is not None and "1.75 fits best" in picture.caption
    assert "Right: enlarged" in picture.caption and "enlarged" in texts(picture.svg)
    wide = value_figure("s-value", STRESS, replace(verdict, low=303.9, high=323.9), ladder, "mm")
    assert wide is not None and "enlarged" not in wide.caption + texts(wide.svg)


def test_orders_of_the_belief_are_shaded(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder = ladder_of({"s": 313.9 - 2.0 * H**1.75}, H)
    for verdict, shaded in ((verdict_of(), True), (verdict_of(order_low=-1.0, order_high=-0.5), False)):
        picture = error_figure("e", STRESS, verdict, ladder, "mm")
        assert picture is not None and ("believed: 1.62 to 2.21" in texts(picture.svg)) == shaded


@pytest.mark.parametrize("values", [[NAN, NAN, NAN], [0.0, 0.0, 0.0]])
def test_nothing_to_draw(
    values: list[float], verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder = ladder_of({"s": np.array(values)}, H)
    verdict = verdict_of("unproven", value=values[-1], **NOTHING)
    assert error_figure("e", STRESS, verdict, ladder, "mm") is None
    assert growth_figure("g", STRESS, ladder, "mm", 0.5) is None
    drawn = value_figure("v", STRESS, verdict, ladder, "mm")
    assert (drawn is None) == math.isnan(values[0])


def test_missing_levels_and_a_wide_tolerance_are_named(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder = ladder_of({"s": np.array([NAN, 300.0, 300.01])}, H)
    verdict = verdict_of("unproven", value=300.01, tolerance=6.0, **NOTHING)
    picture = value_figure("v", STRESS, verdict, ladder, "mm")
    assert picture is not None
    assert picture.caption == (
        "Value on 2 levels. Crosses on the axis: 1 level without a value. The tolerance lies partly outside"
        " the picture."
    )


def test_without_a_limit_the_changes_are_drawn(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder = ladder_of({"s": np.array([300.0, 309.0, 306.0])}, H)
    picture = error_figure("e", STRESS, verdict_of("unproven", value=306.0, **NOTHING), ladder, "mm")
    assert picture is not None
    assert "change from the level before [MPa]" in texts(picture.svg)


def test_growth_finds_the_power_and_draws_no_limit(ladder_of: Callable[..., Ladder]) -> None:
    """The values are an exact power of h, so the fitted power is exact to rounding."""
    picture = growth_figure("g", STRESS, ladder_of({"s": -90.0 * H**-0.4555}, H), "mm", 0.5445)
    assert picture is not None
    shown = texts(picture.svg)
    assert "data: h^(-0.456)" in shown and "corner theory: h^(-0.456)" in shown
    assert "No limit exists" in shown
    assert "limit " not in shown.replace("No limit exists", "")


def test_energy_norm_only_where_recorded(findings: Findings, ladder_of: Callable[..., Ladder]) -> None:
    """Recorded errors fall with 0.545; theory is the smaller of degree 2 and exponent 0.5445."""
    picture = norm_figure(findings.ladder, findings.facts, "mm")
    assert picture is not None
    assert "observed order 0.545, theory order 0.544" in picture.alt
    assert norm_figure(ladder_of({"s": H}, H), Facts(), "mm") is None


def test_error_map_of_an_exact_solution_is_left_out(fields: list[Fields], units: object) -> None:
    empty = replace(fields[0], error=np.zeros_like(fields[0].error))
    assert error_map(empty, np.eye(2), units) is None  # type: ignore[arg-type]


def test_deformation_is_shown_but_never_shrunk(fields: list[Fields]) -> None:
    """Largest displacement 0.2683 on a part of 120: 0.06 * 120 / 0.2683 = 26.8, rounded down to 20."""
    assert deformation_factor(fields[-1]) == 20.0
    assert deformation_factor(replace(fields[-1], displacement=1e3 * fields[-1].displacement)) == 1.0
    assert deformation_factor(replace(fields[-1], displacement=0 * fields[-1].displacement)) == 1.0


@pytest.mark.parametrize(
    ("wanted", "factor"), [(26.8, 20.0), (1.0, 1.0), (0.004, 0.002), (5e6, 5e6), (99, 50)]
)
def test_round_factor(wanted: float, factor: float) -> None:
    assert math.isclose(_plane.round_factor(wanted), factor)


def test_outline_is_one_closed_walk(fields: list[Fields]) -> None:
    (chain,) = _plane._chains(fields[1].boundary)
    assert chain[0] == chain[-1]
    assert len(chain) == fields[1].boundary.shape[1] + 1


def test_quadrilaterals_are_split_without_loss(fields: list[Fields]) -> None:
    """Area of the L: three quarters of 120 by 120."""
    corners = fields[0].points[:, _plane.triangles(fields[0].cells)]
    a, b = corners[..., 1] - corners[..., 0], corners[..., 2] - corners[..., 0]
    assert math.isclose((a[0] * b[1] - a[1] * b[0]).sum() / 2, 0.75 * 120**2)


def test_long_names_are_shortened_in_the_middle() -> None:
    assert middle("short") == "short"
    long = middle("a" * 50 + "b" * 50)
    assert len(long) <= 42 and long.startswith("a") and long.endswith("b")


def test_a_tinted_part_keeps_its_hole_open() -> None:
    """A square of side 6 with a hole of side 2: a pixel within the ring is tinted, one in the hole is not."""
    corners = np.array([[-1.0, 1.0, 1.0, -1.0], [-1.0, -1.0, 1.0, 1.0]])
    boundary = np.array([[0, 1, 2, 3, 4, 7, 6, 5], [1, 2, 3, 0, 7, 6, 5, 4]])
    figure = Figure(figsize=(2.0, 2.0), dpi=50)
    axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    _plane.tint(axes, np.hstack((3.0 * corners, corners)), boundary)
    _plane.view(axes, 3.0 * corners)
    canvas: Any = FigureCanvasAgg(figure)
    canvas.draw()
    pixels = np.asarray(canvas.buffer_rgba())
    assert to_hex(pixels[50, 20] / 255.0) == _plane.TINT
    assert to_hex(pixels[50, 50] / 255.0) == "#ffffff"
