"""The bank: ladders with known limits, made once and kept as one packed table beside this file.

A row is one quantity on one ladder; sizes and values stand coarse to fine, in the order of `KnownLadder`.
"""

import csv
import gzip
import io
from collections.abc import Iterable
from dataclasses import fields
from pathlib import Path
from typing import Any

import numpy as np

from convergence.calibration.known_ladder import KnownLadder

BANK = Path(__file__).with_name("bank.csv.gz")
UNSEEN = Path(__file__).with_name("unseen.csv.gz")  # ladders of the families that no table is made of
DIGITS = 12


def write_bank(ladders: Iterable[KnownLadder], path: Path = BANK) -> None:
    """Write the rows in order of their names, byte for byte the same for the same ladders."""
    text = io.StringIO()
    names = [field.name for field in fields(KnownLadder)]
    rows = csv.writer(text, lineterminator="\n")
    rows.writerow(names)
    rows.writerows([_cell(getattr(ladder, name)) for name in names] for ladder in sorted(ladders, key=_name))
    write_packed(text.getvalue(), path)


def write_packed(text: str, path: Path) -> None:
    """Write a packed text, byte for byte the same for the same text."""
    with path.open("wb") as raw, gzip.GzipFile("", "wb", fileobj=raw, mtime=0) as packed:
        packed.write(text.encode())


def read_bank(path: Path = BANK) -> list[KnownLadder]:
    """Return all ladders."""
    with gzip.open(path, "rt", encoding="utf-8", newline="") as packed:
        return [_ladder(row) for row in csv.DictReader(packed)]


def _name(ladder: KnownLadder) -> tuple[str | int, ...]:
    made = (ladder.source, ladder.shape, ladder.degree)
    return (ladder.family, ladder.case, *made, ladder.label, len(ladder.h))


def _cell(value: Any) -> str:
    if isinstance(value, np.ndarray):
        return " ".join(f"{number:.{DIGITS}g}" for number in value)
    if isinstance(value, float):
        return f"{value:.{DIGITS}g}"
    return "" if value is None else str(value)


def _ladder(row: dict[str, str]) -> KnownLadder:
    arrays = {name: np.array(row[name].split(), dtype=float) for name in ("h", "f")}
    return KnownLadder(
        family=row["family"],
        case=row["case"],
        label=row["label"],
        kind=row["kind"],  # type: ignore[arg-type]
        source=row["source"],
        shape=row["shape"],
        dimension=int(row["dimension"]),
        degree=int(row["degree"]),
        exponent=float(row["exponent"]) if row["exponent"] else None,
        singular=row["singular"] == "True",
        h=arrays["h"],
        f=arrays["f"],
        limit=float(row["limit"]),
        bound=float(row["bound"]),
    )
