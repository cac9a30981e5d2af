"""The verdict on one quantity: the word, the next mesh and the reasons in plain words."""

import math
from collections.abc import Mapping

from convergence import numbers
from convergence.checks._corner import STRESS_KINDS
from convergence.corner import Corner
from convergence.histories.table import LEAST_EXPONENT
from convergence.intervals import Interval
from convergence.next_mesh import Next, next_mesh
from convergence.results import Facts, Ladder, Quantity, Verdict, VerdictWord

SETTLED = 0.025  # half-width over value below which 2 % of the bank's singular values lie at most


def verdict(
    quantity: Quantity, found: Interval, spoiled: Mapping[str, str], ladder: Ladder, facts: Facts
) -> Verdict:
    """Return the statement on a quantity; `spoiled` has the verdicts that failed checks force, with why."""
    expected = expected_order(quantity, facts)
    tolerance = accepted(quantity, found.value)
    word = _word(quantity, found, tolerance, spoiled, facts)
    refines = word == "refine"
    ahead = next_mesh(quantity, found, tolerance, expected, ladder, facts) if refines else Next()
    stated = word != "singular"
    reasons = _reasons(quantity, found, spoiled, tolerance, expected, ahead, word, facts)
    if word in ("sound", "refine"):
        reasons += _about_unexamined(facts.doubtful.get(quantity.name, ()))
    return Verdict(
        word=word,
        value=found.value,
        limit=found.limit if stated else math.nan,
        low=found.low if stated else math.nan,
        high=found.high if stated else math.nan,
        uncertainty=found.half_width if stated else math.nan,
        tolerance=tolerance,
        behaviour=found.behaviour,
        observed_order=found.order,
        order_low=found.order_low,
        order_high=found.order_high,
        formal_order=quantity.formal_order,
        expected_order=expected,
        next_h=ahead.mesh.h,
        next_cells=ahead.mesh.cells,
        next_dofs=ahead.mesh.dofs,
        next_seconds=ahead.mesh.seconds,
        next_memory=ahead.mesh.memory,
        coverage=found.coverage if stated else None,
        reasons=tuple(reasons),
    )


def expected_order(quantity: Quantity, facts: Facts) -> float | None:
    """Return the formal order, limited to 2λ by the weakest corner of the model (Szabó & Babuška 1991)."""
    if quantity.formal_order is None or facts.exponent is None:
        return quantity.formal_order
    return min(quantity.formal_order, 2.0 * facts.exponent)


def accepted(quantity: Quantity, value: float) -> float:
    """Return the accepted half-width: the larger of the relative and the absolute tolerance."""
    relative = (quantity.relative or 0.0) * abs(value)
    return max(relative, quantity.absolute or 0.0)


def _word(
    quantity: Quantity, found: Interval, tolerance: float, spoiled: Mapping[str, str], facts: Facts
) -> VerdictWord:
    if "singular" in spoiled:
        return "singular"
    if spoiled or found.flaw or found.levels < 3 or _may_grow(quantity, found, facts) or _is_slow(facts):
        return "unproven"
    if found.half_width <= tolerance:
        return "sound"
    if tolerance <= 0.0 or found.behaviour == "constant" or _nothing_to_relate(quantity, found):
        return "unproven"
    return "refine"


def _may_grow(quantity: Quantity, found: Interval, facts: Facts) -> bool:
    """Return whether a value of an unknown model moves so much that growth without limit is possible.

    What is no stress has a limit as a rule: there the levels must show growth.
    """
    if (facts.corners is not None and facts.all_corners) or found.growth == "excluded":
        return False
    if quantity.kind not in STRESS_KINDS and found.growth != "shown":
        return False
    return found.half_width > SETTLED * abs(found.value)


def _is_slow(facts: Facts) -> bool:
    """Return whether a corner of the model makes values converge more slowly than is calibrated."""
    return facts.exponent is not None and facts.exponent < LEAST_EXPONENT


def _nothing_to_relate(quantity: Quantity, found: Interval) -> bool:
    """Return whether only a relative tolerance is given and the value may be zero."""
    return not quantity.absolute and abs(found.value) <= found.half_width


def _reasons(
    quantity: Quantity,
    found: Interval,
    spoiled: Mapping[str, str],
    tolerance: float,
    expected: float | None,
    ahead: Next,
    word: VerdictWord,
    facts: Facts,
) -> list[str]:
    decisive = [spoiled["singular"]] if "singular" in spoiled else spoiled.values()
    reasons = [f"{_capital(reason)}." for reason in decisive]
    if word == "unproven":
        reasons += _why_unproven(quantity, found, tolerance, facts)
    if found.lost:
        reasons.append(f"{found.lost} level(s) without a value were left out.")
    if word == "singular" or found.flaw:
        return reasons
    reasons += [said for said in (found.companion, found.side) if said]
    reasons += _about_order(found, quantity.formal_order, expected)
    if found.behaviour == "constant":
        reasons.append("The last three levels give the same value, to round-off or to its printed digits.")
    else:
        half = numbers.beside_limit(found.half_width, tolerance)
        own = 0.5 * (found.high - found.low)
        best, about = (
            numbers.rounded(found.limit, own),
            "" if found.side else f" ± {numbers.significant(own, 2)}",
        )
        reasons.append(f"Half-width {half} about the finest value; best estimate of the limit {best}{about}.")
    return reasons + _about_tolerance(quantity, tolerance, ahead)


def _why_unproven(quantity: Quantity, found: Interval, tolerance: float, facts: Facts) -> list[str]:
    """Return what, beside failed checks, leaves a quantity unproven."""
    if found.flaw:
        return [f"No interval: {found.flaw}."]
    if found.levels == 2:
        return ["Two levels never prove a value: the interval is an orientation; add a third level."]
    if _may_grow(quantity, found, facts):
        return [
            "The levels do not tell slow convergence from growth without limit (a singular place): add a "
            "finer level, or say whether a corner, a point force or a support's end is near."
        ]
    if _is_slow(facts):
        return [
            f"The model's weakest corner has the exponent {facts.exponent:.3g}: values that converge so"
            " slowly are not calibrated. Give the corner its real radius, or show that another model agrees."
        ]
    if found.half_width <= tolerance:
        return []
    if _nothing_to_relate(quantity, found):
        return ["The value is zero within its interval: give an absolute_tolerance."]
    if tolerance <= 0.0:
        return ["The tolerance is zero: no interval is that narrow."]
    if found.behaviour == "constant":
        return ["Round-off or the printed digits are wider than the tolerance: no finer mesh helps."]
    return []


def _about_order(found: Interval, formal: float | None, expected: float | None) -> list[str]:
    if not math.isfinite(found.order):
        return []
    lines = [f"The last three levels show {found.behaviour}, observed order {found.order:.2f}."]
    if found.behaviour.endswith("divergence"):
        return [f"{lines[0][:-1]}: all levels together carry the interval, these changes alone do not."]
    if expected is None or formal is None:
        return lines
    cause = (
        f" (the formal {formal:.3g} is limited in the end by the model's weakest corner)"
        if expected < formal
        else ""
    )
    lines.append(f"Theory expects {expected:.3g}{cause}.")
    if found.order < 0.5 * expected:
        lines.append(
            "The observed order is far below theory: the levels are not yet in the asymptotic range."
        )
    elif found.order > formal + 1.0:
        lines.append("The observed order is above theory: part of the change cancels by accident.")
    return lines


def _about_tolerance(quantity: Quantity, tolerance: float, ahead: Next) -> list[str]:
    parts = [f"{100 * quantity.relative:.4g} % of the value"] if quantity.relative else []
    parts += [f"{quantity.absolute:.4g} {quantity.unit}".strip()] if quantity.absolute else []
    assumed = " (assumed, none was given)" if quantity.assumed_tolerance else ""
    accepted_text = f"Accepted: {' or '.join(parts)}{assumed}, that is {numbers.compact(tolerance, 5)}."
    return [accepted_text, *ahead.advice]


def _about_unexamined(corners: tuple[Corner, ...]) -> list[str]:
    if not corners:
        return []
    names = ", ".join(corner.name for corner in corners)
    return [
        f"Within its reach, not examined: {names}, of a material or shape that the theory of corners used "
        "here does not cover; were stress singular there, it would pass this value on finer meshes."
    ]


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]
