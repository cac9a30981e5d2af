"""What the command line says of bare tables, in words."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from convergence.columns import kind_of
from convergence.errors import Fault, InputError
from convergence.intake._raw_table import Place
from convergence.results import Kind


@dataclass(frozen=True)
class Said:
    """What the command line says of bare tables; None where it says nothing."""

    kinds: Mapping[str, Kind]
    degree: int | None = None
    tolerance: float | None = None
    dimension: int | None = None
    place: Place = field(default_factory=Place)
    case: str | None = None

    @property
    def anything(self) -> bool:
        return self != Said({})


def kinds_of(words: tuple[str, ...]) -> dict[str, Kind]:
    """Return NAME -> kind from words NAME=KIND."""
    kinds: dict[str, Kind] = {}
    faults: list[Fault] = []
    for word in words:
        name, sign, kind = word.rpartition("=")
        if not sign or not name:
            faults.append(Fault(f"--kind {word}", "not NAME=KIND", "e.g. --kind deflection=displacement"))
            continue
        try:
            kinds[name] = kind_of(name, kind)
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return kinds


def tolerance_of(word: str | None) -> float | None:
    """Return 0.05 for "5%" and "0.05"; `InputError` where it is neither."""
    if word is None:
        return None
    percent = word.strip().endswith("%")
    try:
        value = float(word.strip().removesuffix("%")) / (100.0 if percent else 1.0)
    except ValueError:
        value = float("nan")
    if not 0.0 < value < float("inf"):
        raise InputError([Fault("--tolerance", "not a tolerance", "write e.g. 5% or 0.05", word)])
    return value
