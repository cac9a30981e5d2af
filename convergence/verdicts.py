"""The verdict on one quantity: the word, the next mesh and the reasons in plain words."""

import math
from collections.abc import Mapping
from dataclasses import dataclass

from convergence import numbers
from convergence.checks._corner import STRESS_KINDS
from convergence.corner import Corner
from convergence.coverage import Coverage
from convergence.forecast import STEEPEST_MEMORY, STEEPEST_TIME, grown
from convergence.histories.width import MOST_LEVELS
from convergence.intervals import LEAST_ORDER, Interval
from convergence.results import Facts, Ladder, Quantity, Verdict, VerdictWord

SETTLED = 0.03  # half-width over value below which no singular value of the bank lies
MOST_ORDER = 4.0
AFFORDABLE_DOFS = 5e7
OUT_OF_REACH = 1e-40


@dataclass(frozen=True)
class Next:
    """The mesh at which the interval is expected to fit the tolerance; NaN where there is none."""

    h: float = math.nan
    cells: float = math.nan
    dofs: float = math.nan
    seconds: float = math.nan
    memory: float = math.nan


def verdict(
    quantity: Quantity, found: Interval, spoiled: Mapping[str, str], ladder: Ladder, facts: Facts
) -> Verdict:
    """Return the statement on a quantity; `spoiled` has the verdicts that failed checks force, with why."""
    expected = expected_order(quantity, facts)
    tolerance = accepted(quantity, found.value)
    word = _word(quantity, found, tolerance, spoiled, facts)
    ahead = _next_mesh(found, tolerance, expected, ladder, facts) if word == "refine" else Next()
    stated = word != "singular"
    reasons = _reasons(quantity, found, spoiled, tolerance, expected, ahead, word)
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
        next_h=ahead.h,
        next_cells=ahead.cells,
        next_dofs=ahead.dofs,
        next_seconds=ahead.seconds,
        next_memory=ahead.memory,
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
    if spoiled or found.flaw or found.levels < 3 or _may_grow(quantity, found, facts):
        return "unproven"
    if found.half_width <= tolerance:
        return "sound"
    if tolerance <= 0.0 or found.behaviour == "constant" or _nothing_to_relate(quantity, found):
        return "unproven"
    return "refine"


def _may_grow(quantity: Quantity, found: Interval, facts: Facts) -> bool:
    """Return whether a stress of an unknown model moves so much that growth without limit is possible."""
    if facts.corners is not None or quantity.kind not in STRESS_KINDS or found.growth == "excluded":
        return False
    return found.half_width > SETTLED * abs(found.value)


def _nothing_to_relate(quantity: Quantity, found: Interval) -> bool:
    """Return whether only a relative tolerance is given and the value may be zero."""
    return not quantity.absolute and abs(found.value) <= found.half_width


def _next_mesh(
    found: Interval, tolerance: float, expected: float | None, ladder: Ladder, facts: Facts
) -> Next:
    scattered = found.behaviour.endswith("divergence")
    order = found.estimates["least_squares"].order if scattered else found.order
    order = order if math.isfinite(order) else (expected or 1.0)
    ceiling = MOST_ORDER if expected is None else min(expected, MOST_ORDER)
    order = min(max(order, LEAST_ORDER), max(ceiling, LEAST_ORDER))
    finest = ladder.levels[-1]
    h = finest.h * max((tolerance / found.half_width) ** (1.0 / order), OUT_OF_REACH)
    growth = (finest.h / h) ** facts.dimension
    counts = list((finest.h / ladder.h) ** facts.dimension)
    return Next(
        h,
        finest.cells * growth,
        finest.dofs * growth,
        grown(counts, [level.seconds for level in ladder.levels], growth, steepest=STEEPEST_TIME),
        grown(counts, [level.memory for level in ladder.levels], growth, steepest=STEEPEST_MEMORY),
    )


def _reasons(
    quantity: Quantity,
    found: Interval,
    spoiled: Mapping[str, str],
    tolerance: float,
    expected: float | None,
    ahead: Next,
    word: VerdictWord,
) -> list[str]:
    decisive = [spoiled["singular"]] if "singular" in spoiled else spoiled.values()
    reasons = [f"{_capital(reason)}." for reason in decisive]
    if found.lost:
        reasons.append(f"{found.lost} level(s) without a value were left out.")
    if word == "singular":
        return reasons
    if found.flaw:
        return [*reasons, f"No interval: {found.flaw}."]
    reasons += _about_order(found, quantity.formal_order, expected)
    if found.behaviour == "constant":
        reasons.append("The last three levels give the same value, to round-off or to its printed digits.")
    elif found.coverage is not None:
        reasons += _about_interval(found, tolerance, found.coverage)
    if found.levels == 2:
        reasons.append("Two levels never prove a value: the interval is an orientation; add a third level.")
    elif word == "unproven" and not spoiled and found.half_width > tolerance and found.growth != "excluded":
        reasons.append(
            "The levels do not tell slow convergence from growth without limit (a singular place): add a "
            "finer level, or say whether a corner, a point force or a support's end is near."
        )
    return reasons + _about_tolerance(quantity, found, tolerance, ahead, word)


def _about_interval(found: Interval, tolerance: float, measured: Coverage) -> list[str]:
    half = numbers.beside_limit(found.half_width, tolerance)
    best, own = numbers.compact(found.limit, 6), numbers.compact(0.5 * (found.high - found.low), 2)
    levels = f"{measured.levels} levels{' and more' if measured.levels == MOST_LEVELS else ''}"
    share, low, high = (f"{100.0 * x:.1f} %" for x in (measured.share, measured.low, measured.high))
    return [
        f"Half-width {half} about the finest value; best estimate of the limit {best} ± {own}.",
        f"Such intervals ({levels}, {measured.knowledge} known) held the limit of {share} ({low} to {high}) "
        f"of {measured.cases} known ladders, each judged with its family of parts left out.",
    ]


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


def _about_tolerance(
    quantity: Quantity, found: Interval, tolerance: float, ahead: Next, word: VerdictWord
) -> list[str]:
    parts = [f"{100 * quantity.relative:.4g} % of the value"] if quantity.relative else []
    parts += [f"{quantity.absolute:.4g} {quantity.unit}".strip()] if quantity.absolute else []
    assumed = " (assumed, none was given)" if quantity.assumed_tolerance else ""
    accepted_text = f"Accepted: {' or '.join(parts)}{assumed}, that is {numbers.compact(tolerance, 5)}."
    if word != "sound" and _nothing_to_relate(quantity, found):
        accepted_text += " The value is zero within its interval: give an absolute_tolerance."
    lines = [accepted_text]
    if word == "refine" and math.isfinite(ahead.h):
        cost = numbers.cost(ahead.cells, ahead.dofs, ahead.seconds, ahead.memory)
        lines.append(f"A cell size of about {ahead.h:.3g}{cost} would do, if the order holds.")
        if ahead.dofs > AFFORDABLE_DOFS:
            lines.append(
                "That is out of reach: use degree 2, a smaller part around the place, or another quantity."
            )
    return lines


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
