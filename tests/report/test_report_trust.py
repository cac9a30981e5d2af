"""What is said of an interval: half-width, coverage, two levels, and the half page on how it is found."""

import re
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.coverage import Coverage
from convergence.histories.laws import COURSES, SCATTERS
from convergence.histories.table import Table
from convergence.report import _trust, _words
from convergence.report.sections_method import found_section
from convergence.report.sections_quantity import quantities_section
from convergence.report.sections_statement import statement_section
from convergence.results import Findings, Quantity, Verdict

STRESS = Quantity("s", unit="MPa", relative=0.02)
BARE = Coverage("nothing", 4, 1000, 950, 0.9346, 0.9627, 4.2)


@pytest.mark.parametrize(
    ("coverage", "words"),
    [
        (
            BARE,
            "95.0 % (93.4 to 96.3 %) of 1,000 ladders of 4 levels, kind and degree not known, whole families"
            " left out",
        ),
        (
            replace(BARE, knowledge="kind", levels=3, covered=9496, cases=10_000, low=0.9451, high=0.9538),
            "94.96 % (94.5 to 95.4 %) of 10,000 ladders of 3 levels, kind known, degree not, whole families"
            " left out",
        ),
    ],
)
def test_coverage_in_words(coverage: Coverage, words: str) -> None:
    """The share is not rounded across 95 %, the binomial interval is rounded outward."""
    assert _trust.measured(coverage) == words


def test_best_estimate_stands_in_the_middle_of_an_interval_that_the_finest_value_does_not(
    verdict_of: Callable[..., Verdict],
) -> None:
    verdict = verdict_of(limit=314.2, low=312.9, high=315.5, uncertainty=3.063)
    assert _trust.best_text(verdict) == "314.2 ± 1.3"
    assert _words.value_text(verdict) == "312.4 ± 3.1"
    assert _words.interval_text(verdict) == "312.9 to 315.5"
    assert _trust.best_text(verdict_of("singular")) == "none"
    assert _trust.coverage_text(verdict_of(coverage=None)) == ""


def test_two_levels_are_for_orientation(findings: Findings, verdict_of: Callable[..., Verdict]) -> None:
    two = verdict_of("unproven", coverage=replace(BARE, levels=2), reasons=("Two levels show no order.",))
    only = replace(findings, quantities=(STRESS,), verdicts={"s": two})
    said = _words.statement(only, STRESS, "mm")
    assert said.startswith("On 5 meshes down to h = 0.75 mm")
    assert (
        "s is 312.4 MPa on the finest mesh, but two levels never prove anything. For orientation only, the"
        " interval is 310.4 to 314.5 MPa, best estimate 313.9 ± 2.0 MPa. It is unproven. Measured" in said
    )


def test_an_order_below_zero_is_explained(findings: Findings, on_page) -> None:
    grows = replace(findings.verdicts["fillet_stress"], order_low=-0.25)
    for verdicts, said in ((findings.verdicts, False), ({**findings.verdicts, "fillet_stress": grows}, True)):
        pictures = {q.name: [] for q in findings.quantities}
        page = quantities_section(replace(findings, verdicts=verdicts), pictures, "mm")
        assert ("below zero it would grow without limit" in on_page(page)) == said


def test_coverage_is_said_once_where_it_is_the_same(findings: Findings) -> None:
    (line,) = _trust.coverage_lines(findings)
    assert line.startswith("Measured coverage of such intervals: 96.1 %")
    tip = replace(findings.verdicts["tip_deflection"], coverage=BARE)
    lines = _trust.coverage_lines(replace(findings, verdicts={**findings.verdicts, "tip_deflection": tip}))
    assert [re.findall(r"\((\w+)\)", line) for line in lines] == [["fillet_stress"], ["tip_deflection"]]


def test_an_interval_without_a_measured_coverage_is_named(findings: Findings, on_page) -> None:
    assert "No coverage was measured" not in on_page(statement_section(findings, "mm"))
    flat = replace(findings.verdicts["fillet_stress"], coverage=None)
    changed = replace(findings, verdicts={**findings.verdicts, "fillet_stress": flat})
    page = on_page(statement_section(changed, "mm"))
    assert "No coverage was measured for intervals such as that of fillet_stress." in page


def test_how_the_interval_is_found_fits_half_a_page(findings: Findings, on_page) -> None:
    """Half a page of A4 in 10.5 point holds 22 lines of 16 words beside a heading and a small table."""
    even = np.ones((len(COURSES), len(SCATTERS)))
    made = {"date": "2031-05-02", "families": ["arm", "bar"], "ladders": 3120, "sub_ladders": 12_345}
    page = on_page(found_section(findings, Table(made, {"": even}, even, {}, {}, {}, {})))
    paragraphs = re.findall(r"<p>(.*?)</p>", page)
    assert len(" ".join(paragraphs).split()) < 22 * 16
    for words in ("12,345 of two", "2 families", "0.1 to 6", "3 to 200 %", "left out", "Not covered"):
        assert words in " ".join(paragraphs)
    (row,) = [row for row in re.findall(r"<tr>(.*?)</tr>", page) if "fillet_stress" in row]
    cells = re.findall(r"<t[hd][^>]*>(.*?)</t[hd]>", row)
    assert cells == [
        "fillet_stress, tip_deflection", "5 levels or more", "kind and degree known",
        "96.1 % (95.2 to 96.9 %)", "2,140", "3.1",
    ]  # fmt: skip
