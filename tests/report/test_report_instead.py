"""What to report instead of a singular stress, in the report, in findings.json and as a figure."""

import math
from dataclasses import replace

import pytest

from convergence.report.figures_growth import field_figure
from convergence.report.records import findings_object
from convergence.report.sections_instead import instead_objects, instead_part, tolerance
from convergence.results import Facts, Findings, Ladder, Level, Quantity

NAME = "corner_stress"


@pytest.fixture
def cornered(findings: Findings) -> Findings:
    """A field around the inner corner: 90 r^-0.4555, changing by 8 % a level in the last two places."""
    (corner,) = findings.facts.corners or ()
    levels = []
    for number, level in enumerate(findings.ladder.levels):
        values = {f"singular_field.{corner.name}.reach": 40.0, f"singular_field.{corner.name}.single": 1.0}
        for place in range(7):
            stress = 90.0 * (40.0 * 0.5**place) ** -0.4555 * (1.0 + (0.08 * number if place > 4 else 0.0))
            own = {"xx": 0.0, "yy": stress, "zz": 0.0, "xy": 0.0, "across": stress}
            values |= {f"singular_field.{corner.name}.{place}.{axis}": x for axis, x in own.items()}
        side = {"thickness": 60.0, "hot_spot": -50.0 - 0.1**number, "membrane": 10.0, "bending": 30.0}
        values |= {f"singular_field.{corner.name}.-y.{key}": x for key, x in side.items()}
        levels.append(Level(level.h, level.cells, level.dofs, 0.0, {**level.values, **values}))
    kinds = {quantity.name: quantity.kind for quantity in findings.quantities}
    intervals = {f"{NAME}: at 4": (57.0, 61.0), f"{NAME}: -y.hot_spot": (-50.1, -49.9)}
    facts = replace(
        findings.facts,
        kinds=kinds,
        covered={NAME: (corner,)},
        intervals=intervals,
        units={NAME: "MPa"},
    )
    return replace(findings, ladder=replace(findings.ladder, levels=tuple(levels), h_unit="mm"), facts=facts)


def quantity_of(findings: Findings) -> Quantity:
    return next(quantity for quantity in findings.quantities if quantity.name == NAME)


def test_the_table(cornered: Findings, on_page) -> None:
    shown = on_page(instead_part(cornered, quantity_of(cornered)))
    assert "What to report instead (verdict at a tolerance of 5 %)" in shown
    assert "von Mises stress 2.5 mm from the corner" in shown and "57.0 to 61.0" in shown
    assert "structural hot-spot stress of the surface along -y (0.4 t and 1.0 t, t = 60 mm)" in shown
    assert "MPa mm^0.4555" in shown and "nan" not in shown
    assert shown.count('class="verdict sound"') == 2, "59.3 in 57 to 61, and -50 ± 0.1: within 5 %"
    assert shown.count('class="verdict unproven"') == 5, "what has no interval"


def test_nothing_where_no_corner_is_to_blame(cornered: Findings) -> None:
    other = cornered.quantities[1]
    assert instead_part(cornered, other) == [] and instead_objects(cornered, other) == []
    bare = replace(cornered, ladder=Ladder((), "table"), facts=Facts(kinds={NAME: "peak_stress"}))
    assert instead_part(bare, quantity_of(bare)) == []


def test_what_is_left_out_is_said(findings: Findings, on_page) -> None:
    (corner,) = findings.facts.corners or ()
    facts = replace(findings.facts, kinds={NAME: "peak_stress"}, covered={NAME: (corner,)})
    shown = on_page(instead_part(replace(findings, facts=facts), quantity_of(findings)))
    assert "The levels hold no numbers of the field around inner corner." in shown and "<table" not in shown


def test_the_record(cornered: Findings) -> None:
    rows = findings_object(cornered)["quantities"][NAME]["instead"]
    assert rows[0] == {
        "what": "von Mises stress 2.5 mm from the corner",
        "unit": "MPa",
        "value": pytest.approx(90.0 * 2.5**-0.4555),
        "limit": 59.0,
        "low": 57.0,
        "high": 61.0,
        "verdict": "sound",
    }
    assert rows[1]["low"] is None and rows[1]["verdict"] == "unproven", "no NaN in JSON"
    assert len(rows) == 7


@pytest.mark.parametrize(("relative", "accepted"), [(None, 0.05), (0.02, 0.02)])
def test_the_tolerance(relative: float | None, accepted: float) -> None:
    assert tolerance(Quantity("f", relative=relative)) == accepted


def test_the_figure(cornered: Findings, findings: Findings) -> None:
    """One line a level; says where the levels agree."""
    picture = field_figure("f", quantity_of(cornered), cornered.ladder, cornered.facts)
    assert picture is not None and "from 2.5 mm" in picture.caption and "polluted" in picture.svg
    assert "r^(-0.456)" in picture.svg and "finest level" in picture.svg
    none = field_figure("f", quantity_of(findings), findings.ladder, findings.facts)
    assert none is None, "nothing was recorded"
    assert math.isfinite(picture.width)
