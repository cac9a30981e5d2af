"""What a finding says in words: value, interval, tolerance, order, next step, and one sentence."""

import math
from collections.abc import Mapping

from convergence import numbers
from convergence.envelope import SEVERITY, Envelope, worst_first
from convergence.report import _trust
from convergence.results import Companion, Findings, Ladder, Quantity, Verdict


def anchor(findings: Findings, quantity: Quantity) -> str:
    """Return the id of a quantity's part of the page."""
    return f"quantity-{1 + findings.quantities.index(quantity)}"


def plain(name: str) -> str:
    """Return the name of a check or a method without the marks of a file name."""
    return name.replace("_", " ")


def sentence(words: str) -> str:
    """Return the words with one full stop at their end."""
    return f"{words.rstrip('.')}."


def with_unit(number: str, unit: str) -> str:
    """Return a number with its unit; a word instead of a number has none."""
    return f"{number} {unit}".strip() if any(sign.isdigit() for sign in number) else number


def value_text(verdict: Verdict) -> str:
    """Return the finest value to the digits that the uncertainty supports, with the half-width."""
    value = finest_text(verdict)
    if verdict.word == "singular" or not math.isfinite(verdict.uncertainty):
        return value
    return f"{value} ± {half_width(verdict)}"


def finest_text(verdict: Verdict) -> str:
    """Return the finest value; three digits where it is singular and no digit means anything."""
    if verdict.word == "singular":
        return numbers.significant(verdict.value, 3)
    return numbers.rounded(verdict.value, verdict.uncertainty)


def half_width(verdict: Verdict) -> str:
    """Return the uncertainty in two digits, more where they would carry it across the tolerance."""
    return numbers.beside_limit(verdict.uncertainty, verdict.tolerance, digits=2)


def interval_text(verdict: Verdict) -> str:
    """Return "low to high", rounded outward, or "none"."""
    if verdict.word == "singular" or math.isnan(verdict.low) or math.isnan(verdict.high):
        return numbers.NONE
    low, high = numbers.outward(verdict.low, verdict.high, verdict.limit, _trust.half_width(verdict))
    return f"{low} to {high}"


def precision_text(quantity: Quantity, verdict: Verdict) -> tuple[str, str]:
    """Return half-width and tolerance so that they can be compared: per cent where it was given so."""
    width, accepted, relative = verdict.uncertainty, verdict.tolerance, quantity.relative
    in_percent = relative is not None and quantity.absolute is None
    if relative is not None and in_percent and math.isfinite(width) and 0 < accepted < math.inf:
        return f"±{numbers.percent_share(width, accepted, relative)}", numbers.plain_percent(relative)
    if relative is not None and in_percent:
        return numbers.NONE, numbers.plain_percent(relative)
    if math.isnan(accepted):
        return with_unit(numbers.significant(width, 2), quantity.unit), numbers.NONE
    shown, limit = numbers.both_sides(width, accepted)
    return with_unit(f"±{shown}", quantity.unit), with_unit(limit, quantity.unit)


def order_text(verdict: Verdict) -> str:
    """Return observed order against that of theory, which has none for a singular quantity."""
    theory = verdict.formal_order if verdict.expected_order is None else verdict.expected_order
    theory = None if verdict.word == "singular" else theory
    shown = numbers.NONE if theory is None else numbers.compact(theory, 3)
    return f"{numbers.order(verdict.observed_order)} / {shown}"


def next_step(verdict: Verdict, length: str = "") -> str:
    """Return what to do, in a few words."""
    if verdict.word == "sound":
        return "none needed"
    if verdict.word == "singular":
        return "report another quantity"
    if math.isfinite(verdict.next_h):
        return f"h = {with_unit(numbers.compact(verdict.next_h, 3), length)}"
    return "refine in steps" if verdict.word == "refine" else "see the reasons"


def condition(ladder: Ladder, verdict: Verdict, length: str) -> str:
    """Return what the statement rests on: meshes, finest size, behaviour, order."""
    finest = ladder.levels[-1]
    meshes = "1 mesh" if len(ladder.levels) == 1 else f"{len(ladder.levels)} meshes"
    parts = [f"{numbers.count(finest.cells)} cells"] if finest.cells > 0 else []
    parts += [verdict.behaviour] if verdict.behaviour else []
    if math.isfinite(verdict.observed_order) and verdict.word != "singular":
        observed, theory = order_text(verdict).split(" / ")
        parts.append(f"observed order {observed}" + (f", theory {theory}" if theory != "none" else ""))
    size = with_unit(numbers.compact(finest.h, 3), length)
    return f"On {meshes} down to h = {size}" + (f" ({'; '.join(parts)})" if parts else "")


def statement(findings: Findings, quantity: Quantity, length: str) -> str:
    """Return the sentence that may be quoted: conditions first, then the number, then the verdict."""
    verdict = findings.verdicts[quantity.name]
    start = f"{condition(findings.ladder, verdict, length)}{_beside(findings.companion)}, {quantity.name}"
    value = with_unit(finest_text(verdict), quantity.unit)
    if verdict.word == "singular":
        return (
            f"{start} has no limit: {value} on the finest mesh is set by the mesh and not by the part."
            " It is singular and must not be quoted."
        )
    reach, coverage = _expected(quantity, verdict), _trust.coverage_text(verdict)
    if reach and verdict.coverage is not None and verdict.coverage.levels == 2:
        said = f"{start} is {value} on the finest mesh, but two levels never prove anything"
        return f"{said}. For orientation only, the interval is {reach}. {_end(verdict, length)} {coverage}"
    if verdict.word == "unproven" or not reach:
        why = verdict.reasons[0].rstrip(".") if verdict.reasons else "No reason was recorded"
        lacking = f"but the evidence does not suffice. {why}"
        return f"{start} is {value} on the finest mesh, {lacking}. {_end(verdict, length)}"
    shown, accepted = precision_text(quantity, verdict)
    where = f"is {value}; the answer of this model without discretization error is expected within {reach}"
    side = "inside" if verdict.word == "sound" else "wider than"
    width = f"The finest value is uncertain by {shown}, {side} the tolerance of {accepted}"
    said = f"{start} {where}. {width}. {_end(verdict, length)}"
    return f"{said} {coverage}".rstrip()


def _beside(companion: Companion | None) -> str:
    if companion is None:
        return ""
    return f", and on {numbers.several(len(companion.ladder.levels), 'level')} of {companion.cells}"


def _expected(quantity: Quantity, verdict: Verdict) -> str:
    """Return the interval with the best estimate in it, "" where there is none."""
    reach, best = interval_text(verdict), _trust.best_text(verdict)
    if reach == numbers.NONE:
        return ""
    return f"{with_unit(reach, quantity.unit)}, best estimate {with_unit(best, quantity.unit)}"


def _end(verdict: Verdict, length: str) -> str:
    if verdict.word == "sound":
        return "It is sound."
    start = "Refine" if verdict.word == "refine" else "It is unproven"
    if not math.isfinite(verdict.next_h):
        return f"{start}."
    cost = numbers.cost(verdict.next_cells, verdict.next_dofs, verdict.next_seconds, verdict.next_memory)
    step = next_step(verdict, length) + cost
    return f"{start}: {step} would do." if verdict.word == "refine" else f"{start}; next: {step}."


def overall(findings: Findings) -> str:
    """Return the conclusion on all quantities together."""
    words = {quantity.name: findings.verdicts[quantity.name].word for quantity in findings.quantities}
    total, sound = len(words), sum(word == "sound" for word in words.values())
    if not total:
        return "No quantity was judged."
    if sound == total:
        few = {1: "The one quantity is", 2: "Both quantities are"}
        every = few.get(total, f"All {total} quantities are")
        return f"{every} sound: the interval lies inside the tolerance."
    open_ones = ", ".join(f"{name} ({word})" for name, word in words.items() if word != "sound")
    verb = "is" if sound == 1 else "are"
    return f"{sound} of {total} quantities {verb} sound. Not settled: {open_ones}."


def span_text(largest: Envelope) -> str:
    """Return "low to high" of the largest absolute value, rounded outward, or "none"."""
    if math.isnan(largest.high):
        return numbers.NONE
    half = 0.5 * (largest.high - largest.low)
    low, high = numbers.outward(largest.low, largest.high, abs(largest.value), half)
    return f"{low} to {high}"


def overall_cases(cases: Mapping[str, Findings]) -> str:
    """Return the conclusion on all cases together, the worst one first."""
    sound = sum(findings.all_sound for findings in cases.values())
    if sound == len(cases):
        few = {1: "The one case is", 2: "Both cases are"}
        every = few.get(sound, f"All {sound} cases are")
        return f"{every} sound: every interval lies inside the tolerance."
    left = [
        f"{case} ({', '.join(sorted(words, key=SEVERITY.index, reverse=True))})"
        for case in worst_first(cases)
        if (words := {verdict.word for verdict in cases[case].verdicts.values()} - {"sound"})
    ]
    verb = "is" if sound == 1 else "are"
    return f"{sound} of {len(cases)} cases {verb} sound. Not settled: {', '.join(left)}."
