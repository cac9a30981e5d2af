"""Findings as objects for JSON: the short one that `judge --json` prints, the full one kept on disk."""

import math
import platform
from collections.abc import Mapping
from dataclasses import asdict
from importlib import metadata
from typing import Any

from convergence import __version__
from convergence.coverage import Coverage
from convergence.envelope import envelope
from convergence.report._trust import half_width
from convergence.report.sections_instead import instead_objects
from convergence.report.sections_map import mapped_object
from convergence.results import Check, Companion, Estimate, Findings, Level, Quantity, Verdict
from convergence.statics import Balance, finding

PACKAGES = ("numpy", "scipy", "scikit-fem")


def _number(value: float | None) -> float | None:
    """Return a finite float, None for what JSON has no number for."""
    return float(value) if value is not None and math.isfinite(value) else None


def _estimate(estimate: Estimate) -> dict[str, Any]:
    return {
        "limit": _number(estimate.limit),
        "uncertainty": _number(estimate.uncertainty),
        "order": _number(estimate.order),
        "remark": estimate.remark,
    }


def _statement(findings: Findings, name: str) -> dict[str, Any]:
    verdict = findings.verdicts[name]
    return {
        "verdict": verdict.word,
        "value": _number(verdict.value),
        "limit": _number(verdict.limit),
        "low": _number(verdict.low),
        "high": _number(verdict.high),
        "coverage": None if verdict.coverage is None else verdict.coverage.share,
        "observed_order": _number(verdict.observed_order),
        "formal_order": _number(verdict.formal_order),
        "behaviour": verdict.behaviour,
        "next_h": _number(verdict.next_h),
        "estimates": {method: _estimate(e) for method, e in findings.estimates.get(name, {}).items()},
        "reasons": list(verdict.reasons),
    }


def judge_object(findings: Findings) -> dict[str, Any]:
    """Return the object of one ladder; null (None) where there is no number."""
    return {
        "ladder": findings.ladder.source,
        "levels": len(findings.ladder.levels),
        "quantities": {q.name: _statement(findings, q.name) for q in findings.quantities},
    }


def cases_object(cases: Mapping[str, Findings]) -> dict[str, Any]:
    """Return the objects of all load cases and the envelope of every quantity."""
    quantities = next(iter(cases.values())).quantities
    largest = {quantity.name: envelope(cases, quantity.name) for quantity in quantities}
    return {
        "all_sound": all(findings.all_sound for findings in cases.values()),
        "cases": {name: judge_object(findings) for name, findings in cases.items()},
        "envelope": {
            name: {
                "verdict": found.word,
                "case": found.case,
                "value": _number(found.value),
                "low": _number(found.low),
                "high": _number(found.high),
            }
            for name, found in largest.items()
        },
    }


def _more(quantity: Quantity, verdict: Verdict) -> dict[str, Any]:
    """Return what findings.json says of a quantity beyond `judge_object`."""
    return {
        "kind": quantity.kind,
        "unit": quantity.unit,
        "description": quantity.description,
        "uncertainty": _number(verdict.uncertainty),
        "best_estimate": {"value": _number(verdict.limit), "half_width": _number(half_width(verdict))},
        "order_low": _number(verdict.order_low),
        "order_high": _number(verdict.order_high),
        "measured_coverage": _coverage(verdict.coverage),
        "tolerance": _number(verdict.tolerance),
        "relative_tolerance": _number(quantity.relative),
        "absolute_tolerance": _number(quantity.absolute),
        "assumed_tolerance": quantity.assumed_tolerance,
        "assumed_kind": quantity.assumed_kind,
        "expected_order": _number(verdict.expected_order),
        "next_cells": _number(verdict.next_cells),
        "next_dofs": _number(verdict.next_dofs),
        "next_seconds": _number(verdict.next_seconds),
        "next_memory": _number(verdict.next_memory),
    }


def _coverage(coverage: Coverage | None) -> dict[str, Any] | None:
    """Return what was measured with its share; `low` and `high` are its binomial interval."""
    if coverage is None:
        return None
    return asdict(coverage) | {"share": coverage.share, "ratio": _number(coverage.ratio)}


def _instead(findings: Findings, quantity: Quantity) -> list[dict[str, Any]]:
    numbers = ("value", "low", "high")
    rows = instead_objects(findings, quantity)
    return [row | {name: _number(row[name]) for name in numbers} for row in rows]


def _level(level: Level) -> dict[str, Any]:
    return {
        "h": _number(level.h),
        "cells": int(level.cells),
        "dofs": int(level.dofs),
        "seconds": _number(level.seconds),
        "memory": _number(level.memory),
        "values": {name: _number(value) for name, value in level.values.items()},
    }


def _companion(companion: Companion | None) -> dict[str, Any] | None:
    if companion is None:
        return None
    levels = [_level(level) for level in companion.ladder.levels]
    return {"cells": companion.cells, "table": levels}


def _check(check: Check) -> dict[str, Any]:
    return {
        "name": check.name,
        "passed": check.passed,
        "finding": check.finding,
        "spoils": dict(check.spoils),
        "leads_to": check.leads_to,
        "values": {name: [_number(value) for value in row] for name, row in check.values.items()},
    }


def balance_object(balance: Balance | None) -> dict[str, Any] | None:
    """Return the balance of printed loads and reactions, None where there are none."""
    if balance is None:
        return None
    rows = {
        one.name: {
            "loads": one.loads,
            "reactions": one.reactions,
            "missing": one.missing,
            "measured_by": one.scale,
            "share": _number(one.share),
            "rounding": one.rounding,
            "outcome": one.word,
        }
        for one in balance.components
    }
    return {
        "passed": balance.passed,
        "finding": finding(balance),
        "worst": balance.worst.name,
        "about": list(balance.about),
        "tolerance": balance.tolerance,
        "units": {"force": balance.printout.force_unit, "length": balance.printout.length_unit},
        "components": rows,
    }


def _facts(findings: Findings) -> dict[str, Any]:
    facts = findings.facts
    corners = None if facts.corners is None else [asdict(corner) for corner in facts.corners]
    return {
        "degree": facts.degree,
        "dimension": facts.dimension,
        "size": _number(facts.size),
        "yields": {region: found and asdict(found) for region, found in facts.yields.items()},
        "exponent": _number(facts.exponent),
        "corners": corners,
        "unexamined": [corner.name for corner in facts.unexamined],
    }


def versions() -> dict[str, str]:
    """Return the versions that the numbers depend on."""
    found = {"meshassay": __version__, "python": platform.python_version()}
    return found | {package: metadata.version(package) for package in PACKAGES}


def findings_object(findings: Findings, acting: dict[str, Any] | None = None) -> dict[str, Any]:
    """Return everything that is known about one ladder, for findings.json; `acting` as of `_acting`."""
    record = judge_object(findings)
    for quantity in findings.quantities:
        more = _more(quantity, findings.verdicts[quantity.name])
        record["quantities"][quantity.name].update(more | {"instead": _instead(findings, quantity)})
    return {
        "title": findings.title,
        **record,
        "all_sound": findings.all_sound,
        "fingerprint": findings.ladder.fingerprint,
        "remarks": list(findings.ladder.remarks),
        "table": [_level(level) for level in findings.ladder.levels],
        "companion": _companion(findings.companion),
        "checks": [_check(check) for check in findings.checks],
        "balance": balance_object(findings.facts.balance),
        "acting": acting,
        "facts": _facts(findings),
        "map": {field.name: mapped_object(field) for field in findings.mapped},
        "versions": versions(),
    }
