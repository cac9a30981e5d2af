"""Sentences and the rows of the table on screen, word for word."""

import math
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.report import _words
from convergence.report._level_words import level_values
from convergence.report.terminal import COLUMNS, summary_rows
from convergence.results import Findings, Ladder, Quantity, Verdict

STRESS = Quantity("s", unit="MPa", relative=0.02)


def test_rows_of_the_table(findings: Findings) -> None:
    rows = summary_rows(findings)
    assert all(len(row) == len(COLUMNS) for row in rows)
    assert rows[0][1:] == (
        *("313.6 ± 2.0", "MPa", "313.9 ± 2.0", "311.6 to 315.7"),
        *("sound", "1.94 / 2", "none needed"),
    )
    assert rows[1][5:] == ("refine", "1.10 / 1.09", "h = 0.31")
    assert rows[2][1:] == ("318", "MPa", "none", "none", "singular", "none / none", "report another quantity")
    assert rows[3][1:] == ("12001.9", "N", "none", "none", "unproven", "none / none", "see the reasons")


def test_sentences_put_conditions_first(findings: Findings) -> None:
    sound, refine, singular, unproven = (_words.statement(findings, q, "mm") for q in findings.quantities)
    assert sound == (
        "On 5 meshes down to h = 0.75 mm (42,666 cells; monotone; observed order 1.94, theory 2),"
        " fillet_stress is 313.6 MPa; the answer of this model without discretization error is expected"
        " within 311.6 to 315.7 MPa, best estimate 313.9 ± 2.0 MPa. The finest value is uncertain by"
        " ±0.636 %, inside the tolerance of 2 %. It is sound. Measured coverage of such intervals: 96.1 %"
        " (95.2 to 96.9 %) of 2,140 ladders of 5 levels or more, kind and degree known, whole families left"
        " out."
    )
    assert (
        "uncertain by ±3.74 %, wider than the tolerance of 1 %. Refine: h = 0.31 mm (250,000 cells, 999,000"
        " unknowns, about 48 s) would do. Measured coverage" in refine
    )
    assert "has no limit" in singular
    assert "±" not in singular
    assert unproven.endswith(
        "the evidence does not suffice. Changes keep their size from level to level. It is unproven."
    )


@pytest.mark.parametrize(
    ("share", "word", "text"), [(0.998, "sound", "±1.996 %"), (1.0002, "refine", "±2.0004 %")]
)
def test_the_half_width_is_not_rounded_into_the_tolerance(
    verdict_of: Callable[..., Verdict], share: float, word: str, text: str
) -> None:
    tolerance = 6.24874
    verdict = verdict_of(word, tolerance=tolerance, uncertainty=share * tolerance)
    assert _words.precision_text(STRESS, verdict) == (text, "2 %")


def test_an_absolute_tolerance_is_compared_in_its_unit(verdict_of: Callable[..., Verdict]) -> None:
    quantity = replace(STRESS, relative=None, absolute=5.0)
    verdict = verdict_of("refine", tolerance=5.0, uncertainty=5.001)
    assert _words.precision_text(quantity, verdict) == ("±5.001 MPa", "5 MPa")
    assert _words.value_text(verdict) == "312.4 ± 5.001"


def test_overall(findings: Findings, verdict_of: Callable[..., Verdict]) -> None:
    assert _words.overall(findings).startswith(
        "1 of 4 quantities is sound. Not settled: tip_deflection (refine)"
    )
    one = replace(findings, quantities=(STRESS,), verdicts={"s": verdict_of()})
    assert _words.overall(one) == "The one quantity is sound: the interval lies inside the tolerance."
    assert _words.overall(replace(findings, quantities=())) == "No quantity was judged."


def test_values_of_levels_have_no_digit_that_was_not_printed_or_solved(
    ladder_of: Callable[..., Ladder],
) -> None:
    """Printed to 0.01: half a unit is 0.005. Solved to 1e-10 of the value, twice as many digits as change."""
    h, quantity = np.array([4.0, 2.0, 1.0]), Quantity("s")
    ladder = ladder_of({"s": np.array([10.64, 10.16, 10.04])}, h)
    assert level_values(ladder, quantity, math.nan) == ["10.640", "10.160", "10.040"]
    printed = replace(ladder, resolution={"s": 0.005})
    assert level_values(printed, quantity, math.nan) == ["10.64", "10.16", "10.04"]
    noise = ladder_of({"s": 5000.0 + np.array([0.0, 1e-9, -1e-9])}, h)
    assert level_values(noise, quantity, math.nan) == ["5000.00000000"] * 3
