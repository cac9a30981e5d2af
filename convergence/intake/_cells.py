"""Cells of a printed table: what counts as a number, and how finely it was printed."""

import re
from collections.abc import Iterable
from decimal import Decimal

_NUMBER = re.compile(r"[+-]?(\d+\.?\d*|\.\d+)([eEdD][+-]?\d+)?")
_HEADER = re.compile(r"(?P<name>.+?)\s*[\[(](?P<unit>[^\d\])][^\])]*)[\])]")


def number(text: str) -> float | None:
    """Return the number a cell prints (Fortran's D exponent too), NaN for "" and nan, None for others."""
    if text == "" or text.lower() == "nan":
        return float("nan")
    if not (_NUMBER.fullmatch(text) and text.isascii()):
        return None
    value = float(re.sub("[dD]", "e", text))
    return None if abs(value) == float("inf") else value


def resolution(texts: Iterable[str]) -> float:
    """Return half a unit of the last printed digit of a column, for its largest number.

    A spreadsheet drops trailing zeros: every cell counts as printed to the column's longest number of
    digits.
    """
    printed = [Decimal(re.sub("[dD]", "e", text)) for text in texts]
    digits = max(len(value.as_tuple().digits) for value in printed)
    leading = max((value.adjusted() for value in printed if value), default=printed[0].adjusted())
    return float(Decimal(5).scaleb(leading - digits))


def split_unit(header: str) -> tuple[str, str]:
    """Return name and unit of a header such as "deflection [mm]" or "deflection (mm)"."""
    found = _HEADER.fullmatch(header)
    return (found["name"], found["unit"].strip()) if found else (header, "")
