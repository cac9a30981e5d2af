"""Numbers as text: the digits an uncertainty supports, and never rounded across a limit.

Rounding is done on the shortest decimal text of the float, so that what is printed can be checked by
hand. NaN prints as "none".
"""

import math
from decimal import ROUND_CEILING, ROUND_FLOOR, ROUND_HALF_EVEN, Decimal
from typing import Literal

NONE = "none"
MOST_DIGITS = 17  # tells any two doubles apart
DecimalMark = Literal["point", "comma"]
Scale = tuple[tuple[float, str], ...]
TIME: Scale = ((3600.0, "h"), (60.0, "min"), (1.0, "s"))  # in seconds
MEMORY: Scale = ((1e6, "TB"), (1e3, "GB"), (1.0, "MB"))  # in MB


def _decimal(value: float) -> Decimal:
    return Decimal(repr(float(value)))


def _special(value: float) -> str | None:
    """Return the text of what is not a finite number, else None."""
    if math.isnan(value):
        return NONE
    if math.isinf(value):
        return "unbounded" if value > 0 else "-unbounded"
    return None


def _round(value: Decimal, place: int, rounding: str = ROUND_HALF_EVEN) -> Decimal:
    """Round to a power of ten, but never ask for more than the digits of a double."""
    if value:
        place = max(place, value.adjusted() - MOST_DIGITS + 1)
    return value.quantize(Decimal(1).scaleb(place), rounding)


def _text(value: Decimal) -> str:
    """Write plainly where that is short, with an exponent otherwise; zero has no sign and no digits."""
    if not value:
        return "0"
    return f"{value:f}" if -4 <= value.adjusted() < 7 else f"{value:e}"


def significant(value: float, digits: int = 4) -> str:
    """Return the value to a number of significant digits."""
    special = _special(value)
    if special is not None:
        return special
    number = _decimal(value)
    return _text(_round(number, number.adjusted() - digits + 1))


def order(value: float) -> str:
    """Return an order of accuracy to two decimals: more are never supported by three values."""
    special = _special(value)
    return special if special is not None else _text(_round(_decimal(value), -2))


def _without_fill(number: str) -> str:
    """Drop zeros behind the point that only fill up digits."""
    mantissa, mark, power = number.partition("e")
    if "." in mantissa:
        mantissa = mantissa.rstrip("0").rstrip(".")
    return f"{mantissa}{mark}{power}"


def compact(value: float, digits: int) -> str:
    """Return the value to at most so many significant digits: 0.750 is 0.75."""
    return _without_fill(significant(value, digits))


def _supported(value: float, uncertainty: float) -> int:
    """Return the last decimal place that two digits of the uncertainty support.

    Two digits of the value stay even where the uncertainty is larger; six where none is stated.
    """
    number = _decimal(value)
    if not math.isfinite(uncertainty) or uncertainty == 0:
        return number.adjusted() - 5
    place = _decimal(abs(uncertainty)).adjusted() - 1
    return min(place, number.adjusted() - 1) if number else place


def rounded(value: float, uncertainty: float) -> str:
    """Return the value to the digits that its uncertainty (half-width, NaN: not known) supports."""
    special = _special(value)
    if special is not None:
        return special
    return _text(_round(_decimal(value), _supported(value, uncertainty)))


def outward(low: float, high: float, value: float, uncertainty: float) -> tuple[str, str]:
    """Return both ends of an interval in the digits of `rounded`, never narrower than it is."""
    texts = []
    for end, rounding in ((low, ROUND_FLOOR), (high, ROUND_CEILING)):
        special = _special(end)
        place = _supported(value if math.isfinite(value) else end, uncertainty)
        texts.append(special or _text(_round(_decimal(end), place, rounding)))
    return texts[0], texts[1]


def at_step(value: float, step: float) -> str:
    """Return a multiple of `step` (a tick of an axis) without digits that the step does not need."""
    size = Decimal(f"{step:.2g}").normalize()
    return _text(_round(_decimal(value), min(int(size.as_tuple().exponent), size.adjusted())))


def _beside(value: Decimal, limit: Decimal, digits: int) -> Decimal:
    """Return the shortest rounding, from `digits` on, that compares with the limit as the value does."""
    for count in range(digits, MOST_DIGITS + 1):
        short = _round(value, value.adjusted() - count + 1)
        if short.compare(limit) == value.compare(limit):
            return short
    return value


def beside_limit(value: float, limit: float, digits: int = 3) -> str:
    """Return the value in as many digits as keep it on its own side of the limit.

    Equal prints as equal, larger as larger, smaller as smaller: 1.996 beside 2 is "1.996".
    """
    special = _special(value)
    if special is not None:
        return special
    if math.isnan(limit):
        return significant(value, digits)
    return _text(_beside(_decimal(value), _decimal(limit), digits))


def both_sides(value: float, limit: float, digits: int = 3) -> tuple[str, str]:
    """Return value and limit, both rounded, so that the texts compare as the numbers do."""
    shown, accepted = significant(value, digits), significant(limit, digits)
    if math.isfinite(value) and math.isfinite(limit):
        asked = _decimal(value).compare(_decimal(limit))
        for count in range(digits, MOST_DIGITS + 1):
            shown, accepted = significant(value, count), significant(limit, count)
            if Decimal(shown).compare(Decimal(accepted)) == asked:
                break
    return shown, _without_fill(accepted)


def percent(ratio: float, limit: float = math.nan, digits: int = 3) -> str:
    """Return a ratio in per cent, on its own side of a limit that is a ratio too."""
    special = _special(ratio)
    if special is not None:
        return special
    number = _decimal(ratio).scaleb(2)
    if math.isnan(limit):
        return f"{_text(_round(number, number.adjusted() - digits + 1))} %"
    return f"{_text(_beside(number, _decimal(limit).scaleb(2), digits))} %"


def plain_percent(ratio: float) -> str:
    """Return a ratio that somebody typed, such as a tolerance, in per cent with all its digits."""
    special = _special(ratio)
    return special or f"{_text(_decimal(ratio).scaleb(2).normalize())} %"


def percent_share(value: float, tolerance: float, relative: float) -> str:
    """Return the value in per cent where `tolerance` is `relative`, on its own side of it.

    The three are finite and the tolerance is not zero.
    """
    target = _decimal(relative).scaleb(2)
    share = _decimal(value) * target / _decimal(tolerance)
    return f"{_text(_beside(share, target, 3))} %"


def several(number: int, what: str) -> str:
    """Return "1 level" or "5 levels"."""
    return f"{number} {what}" if number == 1 else f"{number} {what}s"


def count(number: float) -> str:
    """Return a count of things with thousands apart: three digits where it is a forecast."""
    if not math.isfinite(number):
        return NONE
    if number != int(number):
        number = float(f"{number:.2e}")
    return f"{number:,.0f}"


def amount(value: float, scale: Scale) -> str:
    """Return a positive amount to two digits in the largest unit that fits: 2345 MB is 2.3 GB."""
    size, unit = _unit(value, scale)
    return f"{significant(value / size, 2)} {unit}"


def amounts(value: float, limit: float, scale: Scale) -> tuple[str, str]:
    """Return an amount and its limit; in one unit and so that the texts compare as the numbers, if near."""
    if value > 10.0 * limit:
        return amount(value, scale), amount(limit, scale)
    size, unit = _unit(value, scale)
    shown, accepted = both_sides(value / size, limit / size, 2)
    return f"{shown} {unit}", f"{accepted} {unit}"


def _unit(value: float, scale: Scale) -> tuple[float, str]:
    return next((step for step in scale if value >= step[0]), scale[-1])


def cost(cells: float, dofs: float, seconds: float, memory: float) -> str:
    """Return what is known of the cost of a mesh, in brackets after a blank; "" where nothing is."""
    parts = [f"{count(n)} {what}" for n, what in ((cells, "cells"), (dofs, "unknowns")) if n > 0]
    parts += [f"about {amount(seconds, TIME)}"] if seconds > 0 else []
    parts += [f"about {amount(memory, MEMORY)} of memory"] if memory > 0 else []
    return f" ({', '.join(parts)})" if parts else ""
