"""What a comparison of two ladders says in words and as an object for JSON."""

import math
from typing import Any

from convergence import numbers
from convergence.comparison import Compared, Comparison
from convergence.coverage import WITH_COMPANION
from convergence.report import _trust, _words
from convergence.report._words import with_unit
from convergence.results import Verdict

LOOKS = {"meet": "sound", "part": "singular", "cannot be compared": "unproven"}


def apart_text(one: Compared) -> str:
    """Return the distance of both intervals over the sum of their half-widths, on its own side of 1."""
    return numbers.beside_limit(one.distance, 1.0, digits=2)


def sentence(one: Compared, revisions: bool) -> str:
    """Return what holds of one quantity: how far both are apart, and what follows from it."""
    if one.word == "cannot be compared":
        return f"{one.first.name} cannot be compared. {' '.join(one.reasons)}"
    said = _changed(one) if revisions else _of_one_model(one)
    return " ".join([f"{one.first.name}: {said}", *one.reasons])


def _of_one_model(one: Compared) -> str:
    apart = f"their middles are {apart_text(one)} of the sum of their half-widths apart"
    if one.word == "part":
        side = "above" if one.difference > 0 else "below"
        gap = with_unit(numbers.significant(one.gap, 2), one.unit)
        return (
            f"the intervals part, {apart}. The second lies {side} the first with {gap}{_share(one)} between"
            " the near ends: at least one does not hold the answer of this model, or the models differ."
        )
    if one.joint is None:
        return f"the intervals meet, {apart}.{_unknown(one)}"
    joint = with_unit(_words.interval_text(one.joint), one.unit)
    best = with_unit(_trust.best_text(one.joint), one.unit)
    return f"the intervals meet, {apart}. Together: {joint}, best estimate {best}."


def _unknown(one: Compared) -> str:
    """Return what would have to be known for a statement of both together, "" where nothing is missing."""
    known = {v.coverage.knowledge for v in one.verdicts if v.coverage}
    if known <= {"kind and degree", WITH_COMPANION}:
        return ""
    return " With kind and degree of both known, what they say together could be stated."


def _changed(one: Compared) -> str:
    half = 0.5 * (one.high - one.low)
    low, high = numbers.outward(one.low, one.high, one.difference, half)
    change = with_unit(numbers.rounded(one.difference, half), one.unit)
    span = f"the revision changes it by {change}, from {low} to {high} wherever both intervals hold"
    if one.word == "part":
        return f"{span}; the change is larger than what the meshes leave open."
    return f"{span}; that may be no change at all."


def _share(one: Compared) -> str:
    value = abs(one.verdicts[0].limit)
    return f" ({numbers.percent(one.gap / value, digits=2)} of the first)" if value else ""


def overall(found: Comparison) -> str:
    """Return the conclusion on all quantities."""
    total, good = len(found.compared), sum(one.word == "meet" for one in found.compared)
    if found.revisions:
        return _overall_change(found)
    if good == total:
        few = {1: "The one quantity meets", 2: "Both quantities meet"}
        return f"{few.get(total, f'All {total} quantities meet')}: the intervals overlap."
    left = ", ".join(f"{one.first.name} ({one.word})" for one in found.compared if one.word != "meet")
    return f"{good} of {total} quantities {'meets' if good == 1 else 'meet'}. Not so: {left}."


def _overall_change(found: Comparison) -> str:
    names = {
        word: [one.first.name for one in found.compared if one.word == word]
        for word in ("part", "meet", "cannot be compared")
    }
    said = {
        "part": "The revision changes",
        "meet": "No change is shown of",
        "cannot be compared": "Nothing can be said of",
    }
    return " ".join(f"{said[word]} {', '.join(of)}." for word, of in names.items() if of)


def remarks(found: Comparison) -> list[str]:
    """Return which quantities have no partner, and units that were taken as alike."""
    lines = [
        f"Only in {name}: {', '.join(alone)}."
        for name, alone in zip(found.names, found.alone, strict=True)
        if alone
    ]
    for one in found.compared:
        if one.first.unit != one.second.unit:
            silent = found.names[0] if not one.first.unit else found.names[1]
            lines.append(f"{silent} states no unit of {one.first.name}; taken as {one.unit}.")
    return lines


def comparison_object(found: Comparison) -> dict[str, Any]:
    """Return the comparison for JSON; null (None) where there is no number."""
    return {
        "first": found.names[0],
        "second": found.names[1],
        "as": "revisions" if found.revisions else "one model",
        "all_meet": found.all_meet,
        "quantities": {one.first.name: _object(one, found.revisions) for one in found.compared},
        "remarks": remarks(found),
    }


def _object(one: Compared, revisions: bool) -> dict[str, Any]:
    first, second = one.verdicts
    return {
        "outcome": one.word,
        "finding": sentence(one, revisions),
        "unit": one.unit,
        "first": _side(one.first.name, first),
        "second": _side(one.second.name, second),
        "distance": _number(one.distance),
        "gap": _number(one.gap),
        "difference": {"value": _number(one.difference), "low": _number(one.low), "high": _number(one.high)},
        "together": None if one.joint is None else _side(one.first.name, one.joint),
    }


def _side(name: str, verdict: Verdict) -> dict[str, Any]:
    return {
        "quantity": name,
        "verdict": verdict.word,
        "value": _number(verdict.value),
        "limit": _number(verdict.limit),
        "low": _number(verdict.low),
        "high": _number(verdict.high),
    }


def _number(value: float) -> float | None:
    return float(value) if math.isfinite(value) else None
