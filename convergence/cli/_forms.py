"""What the command line says of the forms of a report, in words."""

from datetime import date
from pathlib import Path
from typing import get_args

from convergence.errors import Fault, InputError, nearest
from convergence.numbers import DecimalMark
from convergence.report.forms import Form, Forms


def forms_of(words: str, mark: DecimalMark | None, template: Path | None = None) -> Forms:
    """Return the forms of words such as "html,pdf" with the decimal mark that is asked for.

    `InputError` names every unknown one.
    """
    known: dict[str, Form] = {form: form for form in get_args(Form)}
    asked = [word.strip().lower() for word in words.split(",")]
    faults = [
        Fault("--as", "unknown form", nearest(word, known), word or "nothing")
        for word in asked
        if word not in known
    ]
    if template and "docx" not in asked:
        faults.append(Fault("--template", "a template without docx", "add docx to --as", str(template)))
    if faults:
        raise InputError(faults)
    return Forms(tuple(dict.fromkeys(known[word] for word in asked)), template, mark)


def date_of(word: str | None) -> str:
    """Return the date as it was written, "" where none was; `InputError` where it is none."""
    try:
        return date.fromisoformat(word).isoformat() if word else ""
    except ValueError:
        raise InputError([Fault("--date", "not a date", "write e.g. 2026-03-31", word)]) from None
