"""The end of the document: caution, and what it takes to get the same numbers again."""

from collections.abc import Mapping

from convergence.report import html, records
from convergence.report.html import Html, text

CAUTION = (
    "The discretization error is one part of the uncertainty of a result. It says how far the numbers are"
    " from the exact answer of this model, not how far the model is from the part.",
    "Modelling, loads, material data and code checks stay with the analyst.",
    "Local codes and licensed practice decide what may be built, operated or approved.",
    "A balance of forces proves bookkeeping and solver; it says nothing about the mesh.",
)


def caution_section() -> Html:
    """Return what the document must not be taken for."""
    return html.section("caution", "Caution", html.bullets(CAUTION))


def trace_section(facts: Mapping[str, str], study_text: str) -> Html:
    """Return facts such as command and date, the versions and the study itself."""
    rows = [[text(name), text(value)] for name, value in {**facts, **records.versions()}.items()]
    study = html.element("pre", {"tabindex": "0"}, text(study_text))
    return html.section(
        "trace",
        "Traceability",
        html.table("How to get these numbers again", ("what", "which"), rows, "words"),
        html.details("The study as it was read", study) if study_text else Html(""),
    )
