"""How the interval came about, and where the methods were published."""

from convergence import numbers, rooms
from convergence.report import _words, html
from convergence.report.html import Html, text
from convergence.results import Findings


def made_section(findings: Findings) -> Html:
    """Return how the interval came about."""
    coverages = {verdict.coverage for verdict in findings.verdicts.values()}
    base = "the widest of the grid convergence index, the least-squares uncertainty and the last change"
    lines = [
        f"Interval: {base}; {_words.NOT_CALIBRATED}."
        if coverage is None
        else f"Interval with a coverage of {numbers.percent(coverage)}: measured on problems of known answer."
        for coverage in sorted(coverages, key=lambda c: -1.0 if c is None else c)
    ]
    return html.section(
        "interval",
        "How the interval was made",
        html.bullets(lines),
        html.paragraph(
            "Numbers are printed in the digits that the half-width supports. Ends of an interval are rounded"
            " outward. A number is never rounded across the tolerance. Singular quantities have no interval."
        ),
        _sources(findings),
    )


def _sources(findings: Findings) -> Html:
    """Return every method that was used with what it is and its published source."""
    known = rooms.shelf("estimators")
    used = dict.fromkeys(name for estimates in findings.estimates.values() for name in estimates)
    rows = []
    for name in used:
        source = str(rooms.beside("estimators", name, "SOURCE") or "") if name in known else ""
        title = html.element("span", {"id": f"method-{name}"}, text(_words.plain(name)))
        rows.append([title, text(known.get(name, "")), text(source or numbers.NONE)])
    return html.table("Methods", ("method", "what it is", "source"), rows, "words") if rows else Html("")
