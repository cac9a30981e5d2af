"""Files: texts read with one clear message for each way to fail, everything written atomically; digests."""

import difflib
from hashlib import file_digest
from pathlib import Path

from convergence.errors import Fault, InputError

MOST_BYTES = 200_000_000  # of a study or a table


def read_text(path: Path, wanted: str) -> str:
    """Return the text of a UTF-8 file; `wanted` says what the user should give, e.g. "a study file"."""
    where, instead = str(path), f"give the path of {wanted}"
    try:
        text = read_bytes(path, wanted).decode("utf-8-sig")
    except UnicodeDecodeError:
        text = "\0"
    if "\0" in text:
        raise InputError([Fault(where, "not a text file in UTF-8", f"{instead}, saved as text in UTF-8")])
    if not text.strip():
        raise InputError([Fault(where, "the file is empty", instead)])
    return text


def read_bytes(path: Path, wanted: str) -> bytes:
    """Return the content of a file that is not empty."""
    where, instead = str(path), f"give the path of {wanted}"
    if path.is_dir():
        raise InputError([Fault(where, "a folder", instead)])
    try:
        with path.open("rb") as file:
            raw = file.read(MOST_BYTES + 1)
    except FileNotFoundError:
        raise InputError([Fault(where, "no such file", _neighbour(path) or instead)]) from None
    except OSError as error:
        raise InputError([Fault(where, f"cannot be read ({error.strerror})", instead)]) from None
    if len(raw) > MOST_BYTES:
        raise InputError([Fault(where, f"more than {MOST_BYTES // 10**6} MB", instead)])
    if not raw:
        raise InputError([Fault(where, "the file is empty", instead)])
    return raw


def digest_of(path: Path) -> str:
    """Return the SHA-256 of a file."""
    with path.open("rb") as file:
        return file_digest(file, "sha256").hexdigest()


def write_text(path: Path, text: str) -> None:
    """Write a UTF-8 text as `write_bytes` does."""
    write_bytes(path, text.encode("utf-8"))


def write_bytes(path: Path, content: bytes) -> None:
    """Write a whole file or nothing: a killed program leaves the old file."""
    spare = path.with_name(f"{path.name}.part")
    spare.write_bytes(content)
    spare.replace(path)


def _neighbour(path: Path) -> str:
    """Return "did you mean ...?" for a file of nearly the same name in the same folder."""
    found = path.parent.glob(f"*{path.suffix}") if path.parent.is_dir() else []
    names = {file.stem: file.name for file in found}
    close = difflib.get_close_matches(path.stem, names, n=1)
    return f"did you mean {names[close[0]]!r}?" if close else ""
