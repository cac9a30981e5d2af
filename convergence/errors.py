"""What the user can repair, and the exit code of each kind."""

import difflib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass


@dataclass(frozen=True)
class Fault:
    """One problem of the input: where it stands, what is wrong, what was found, what would be right."""

    where: str
    what: str
    instead: str
    found: object = None

    def __str__(self) -> str:
        got = "" if self.found is None else f", got {self.found!r}"
        return f"{self.where}: {self.what}{got}; {self.instead}"


class MeshassayError(Exception):
    """Base of what is reported to the user as a message; `exit_code` is the command's."""

    exit_code = 2


class InputError(MeshassayError):
    """A study, table or command that cannot be used as it stands; carries every fault at once."""

    def __init__(self, faults: Iterable[Fault]):
        self.faults = tuple(faults)
        super().__init__("\n".join(str(fault) for fault in self.faults))


class SolvingError(MeshassayError):
    """A level that could not be solved; the levels before it are kept."""

    exit_code = 3


class Unsuitable(ValueError):
    """Arguments that a member refuses: (key, found, what would be right) each.

    Raised by models and quantities, which do not know the file; the study adds file and line.
    """

    def __init__(self, problems: Iterable[tuple[str, object, str]]):
        self.problems = tuple(problems)
        super().__init__("; ".join(f"{key} {found!r}: {right}" for key, found, right in self.problems))


def require(*conditions: tuple[bool, str, object, str]) -> None:
    """Raise one `Unsuitable` for all conditions (holds, key, found, what would be right) that fail."""
    problems = [(key, found, right) for holds, key, found, right in conditions if not holds]
    if problems:
        raise Unsuitable(problems)


def nearest(name: str, known: Iterable[str]) -> str:
    """Return "did you mean X?" for the nearest known name, or "known: a, b, c"."""
    known = sorted(known)
    close = difflib.get_close_matches(name, known, n=1, cutoff=0.5)
    return f"did you mean {close[0]!r}?" if close else f"known: {listing(known)}"


def listing(names: Sequence[str]) -> str:
    """Join names for a message, "none" where there is none."""
    return ", ".join(names) if names else "none"
