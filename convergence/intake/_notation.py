"""Numbers as people write them: decimal point or comma, thousands separators, per cent.

"1,234" may be 1.234 or 1234. Which it is follows from other cells of its column, else of the other columns,
as a file is written in one country's way. Where these leave it open nothing is guessed. "1.234" is a decimal
point unless another cell shows decimal commas.
"""

import re
from collections.abc import Collection, Mapping, Sequence
from decimal import Decimal
from typing import Literal

from convergence.intake._grid import Cell

Decimals = Literal["point", "comma"]
BOTH: tuple[Decimals, Decimals] = ("point", "comma")
NO_VALUE = ("", "nan", "n/a", "-", "–", "—")

_SPACES = " \u00a0\u2009\u202f"
_SIGNS: dict[Decimals, tuple[str, str]] = {
    "point": (r"\.", rf"[,'’{_SPACES}]"),
    "comma": (",", rf"[.'’{_SPACES}]"),
}
_PATTERNS = {
    decimal: re.compile(
        rf"(?P<sign>[+-]?)(?=[\d.,])(?P<whole>[1-9]\d{{0,2}}(?P<group>{group})\d{{3}}(?:(?P=group)\d{{3}})*|\d*)"
        rf"(?:{sign}(?P<part>\d*))?(?P<power>[eEdD][+-]?\d+)?(?P<percent>[{_SPACES}]?%)?",
        re.ASCII,
    )
    for decimal, (sign, group) in _SIGNS.items()
}


def plain(text: str, decimal: Decimals) -> str | None:
    """Return a number in the notation of `_cells.number`, None where the text is none."""
    found = _PATTERNS[decimal].fullmatch(text.replace("−", "-"))
    if not found or not (found["whole"] or found["part"]):
        return None
    whole = found["whole"].replace(found["group"], "") if found["group"] else found["whole"]
    part = "" if found["part"] is None else f".{found['part']}"
    number = f"{found['sign']}{whole}{part}{found['power'] or ''}"
    if not found["percent"]:
        return number
    return str(Decimal(re.sub("[dD]", "e", number)).scaleb(-2))


def is_number(text: str) -> bool:
    """Say whether a text is a number in one of the notations."""
    return any(plain(text, decimal) is not None for decimal in BOTH)


def has_no_value(text: str) -> bool:
    """Say whether a cell states that there is no value."""
    return text.lower() in NO_VALUE


def decimals(
    columns: Mapping[str, Sequence[Cell]], counts: Collection[str]
) -> dict[str, tuple[Decimals, str]]:
    """Return the decimal sign of each column, and a cell of it that may be read otherwise, "" mostly.

    Columns among `counts` have whole numbers: a sign in them separates thousands.
    """
    texts = {
        name: [cell.text for cell in cells if not cell.stored and is_number(cell.text)]
        for name, cells in columns.items()
    }
    possible = {name: _possible(found, name in counts) for name, found in texts.items()}
    decided = {ways[0] for ways in possible.values() if len(ways) == 1}
    return {name: _decided(found, possible[name], decided) for name, found in texts.items()}


def _possible(texts: Sequence[str], whole: bool) -> list[Decimals]:
    """Return the notations that fit a column; where none fits all of it, that of its first clear cell."""
    fitting = [decimal for decimal in BOTH if all(plain(text, decimal) is not None for text in texts)]
    if whole:
        without = [d for d in fitting if not any("." in (plain(text, d) or "") for text in texts)]
        fitting = without or fitting
    if not fitting:
        clear = next(text for text in texts if sum(plain(text, d) is not None for d in BOTH) == 1)
        fitting = [decimal for decimal in BOTH if plain(clear, decimal) is not None]
    alike = all(plain(text, "point") == plain(text, "comma") for text in texts)
    return ["point", "comma"] if alike else fitting


def _decided(
    texts: Sequence[str], possible: Sequence[Decimals], others: set[Decimals]
) -> tuple[Decimals, str]:
    if len(possible) == 1:
        return possible[0], ""
    open_texts = [text for text in texts if plain(text, "point") != plain(text, "comma")]
    if not open_texts:
        return "point", ""
    if len(others) == 1:
        return next(iter(others)), ""
    doubtful = open_texts if others else [text for text in open_texts if "," in text]
    return "point", doubtful[0] if doubtful else ""
