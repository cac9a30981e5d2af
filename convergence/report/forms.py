"""The forms of a document and how a folder is written: figures, numbers as JSON, then each form."""

import json
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Literal

from convergence.numbers import DecimalMark
from convergence.report._decimal_comma import DecimalComma, with_decimal_comma
from convergence.report._picture import write_figures
from convergence.report.as_docx import as_docx
from convergence.report.as_html import as_html
from convergence.report.as_pdf import as_pdf
from convergence.report.content import Document, pictures_of
from convergence.textfile import write_bytes, write_text

Form = Literal["html", "pdf", "docx"]
NAME = "report"


@dataclass(frozen=True)
class Forms:
    """Which forms are written; `template` is a Word file whose styles are used.

    `decimal_mark` is that of documents and figures; None where nobody said: a point.
    """

    names: tuple[Form, ...] = ("html",)
    template: Path | None = None
    decimal_mark: DecimalMark | None = None

    def comma(self, names: frozenset[str]) -> DecimalComma | None:
        """Return what puts commas into a text but for names, None where a point is written."""
        return DecimalComma(names) if self.decimal_mark == "comma" else None


HTML = Forms()


def write_document(
    document: Document,
    folder: Path,
    record: tuple[str, Mapping[str, Any]],
    date: str,
    forms: Forms,
    names: frozenset[str] = frozenset(),
) -> list[Path]:
    """Write a folder; return the paths of the forms. `record` is the name and content of the JSON file.

    `names` were given by somebody: where a decimal comma is written, their points stay.

    Each file is replaced as a whole, the forms last; figures that are not drawn any more go.
    """
    comma = forms.comma(names)
    document = with_decimal_comma(document, comma) if comma else document
    folder.mkdir(parents=True, exist_ok=True)
    write_figures(folder / "figures", list(pictures_of(document)))
    name, content = record
    write_text(folder / name, f"{json.dumps(content, indent=2, ensure_ascii=False, allow_nan=False)}\n")
    return [_write(document, folder / f"{NAME}.{form}", form, date, forms) for form in forms.names]


def _write(document: Document, path: Path, form: Form, date: str, forms: Forms) -> Path:
    match form:
        case "html":
            write_text(path, as_html(document))
        case "pdf":
            write_bytes(path, as_pdf(document))
        case "docx":
            write_bytes(path, as_docx(document, date, forms.template))
    return path
