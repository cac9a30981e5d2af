"""The two JSON objects: exact keys, null where there is no number."""

import json
from dataclasses import replace

from convergence.report.records import findings_object, judge_object
from convergence.results import Estimate, Findings

KEYS = {
    "verdict", "value", "limit", "low", "high", "coverage", "observed_order", "formal_order", "behaviour",
    "next_h", "estimates", "reasons",
}  # fmt: skip


def test_the_short_object_has_exactly_its_keys(findings: Findings) -> None:
    record = judge_object(findings)
    assert set(record) == {"ladder", "levels", "quantities"}
    assert record["ladder"] == "out/bracket/ladder.csv"
    assert record["levels"] == 5
    assert list(record["quantities"]) == [quantity.name for quantity in findings.quantities]
    for quantity in record["quantities"].values():
        assert set(quantity) == KEYS
        for estimate in quantity["estimates"].values():
            assert set(estimate) == {"limit", "uncertainty", "order", "remark"}


def test_nothing_is_null(findings: Findings) -> None:
    record = judge_object(findings)["quantities"]
    singular = record["corner_stress"]
    assert [singular[key] for key in ("limit", "low", "high", "observed_order", "coverage")] == [None] * 5
    assert singular["value"] == findings.verdicts["corner_stress"].value
    assert record["fillet_stress"]["estimates"]["richardson"]["limit"] is None
    assert record["tip_deflection"]["next_h"] == 0.31


def test_both_are_strict_json(findings: Findings) -> None:
    unbounded = {"fillet_stress": {"richardson": Estimate(float("-inf"), 1.0, float("inf"))}}
    for record in (judge_object, findings_object):
        text = json.dumps(record(replace(findings, estimates=unbounded)), allow_nan=False)
        assert json.loads(text)["quantities"]["fillet_stress"]["estimates"]["richardson"]["limit"] is None


def test_coverage_is_a_share_and_in_full_what_was_measured(findings: Findings) -> None:
    """2,057 of 2,140; half of the interval from 311.6 to 315.6 is the uncertainty of the made-up verdict."""
    share = 2057 / 2140
    assert judge_object(findings)["quantities"]["fillet_stress"]["coverage"] == share
    full = findings_object(findings)["quantities"]
    assert full["fillet_stress"]["measured_coverage"] == {
        "knowledge": "kind and degree", "levels": 5, "cases": 2140, "covered": 2057, "share": share,
        "low": 0.9521, "high": 0.9690, "ratio": 3.1,
    }  # fmt: skip
    best = full["fillet_stress"]["best_estimate"]
    assert best["value"] == 313.9 and abs(best["half_width"] - 1.996) < 1e-12
    assert (full["fillet_stress"]["order_low"], full["fillet_stress"]["order_high"]) == (1.62, 2.21)
    assert full["corner_stress"]["measured_coverage"] is None
    assert full["corner_stress"]["best_estimate"] == {"value": None, "half_width": None}


def test_the_full_object_holds_the_rest(findings: Findings) -> None:
    record = findings_object(findings)
    tip = record["quantities"]["tip_deflection"]
    assert tip["next_cells"] == 249_740.1
    assert tip["expected_order"] == 1.09
    assert tip["relative_tolerance"] == 0.01
    assert len(record["table"]) == 5
    assert record["table"][0]["values"]['<b>pin & "reaction"</b> $x$'] is None
    assert [check["passed"] for check in record["checks"]] == [True, False, None]
    assert record["facts"]["corners"][0]["exponent"] == 0.5445
    assert record["facts"]["unexamined"] == []
    (corner,) = findings.facts.corners or ()
    silent = replace(findings.facts, unexamined=(replace(corner, exponent=float("nan")),))
    written = json.dumps(findings_object(replace(findings, facts=silent)), allow_nan=False)
    assert json.loads(written)["facts"]["unexamined"] == ["inner corner"]
    assert {"python", "numpy", "scipy", "scikit-fem"} <= set(record["versions"])
    assert record["all_sound"] is False
