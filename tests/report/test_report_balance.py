"""The figure and the section of a printout's balance: in a plane, in space, without points, of many rows."""

from dataclasses import replace

import numpy as np
import pytest

from convergence.dimensions import SYSTEMS
from convergence.report.as_html import as_html
from convergence.report.content import Document
from convergence.report.document import write_report
from convergence.report.figures_balance import balance_figure
from convergence.report.records import findings_object
from convergence.report.sections_balance import balance_section
from convergence.results import Findings
from convergence.statics import COMPONENTS, IN_PLANE, Actions, Balance, Printout, balances


def rows(count: int, *, solid: bool, points: bool = True) -> Balance:
    """So many loads of 1 on a line, and the reaction that holds their sum at the first."""
    place = np.zeros((3, count + 1))
    place[0, :count] = np.arange(count) if points else 0.0
    force, moment = np.zeros((3, count + 1)), np.zeros((3, count + 1))
    up = 2 if solid else 1
    force[up, :count], force[up, count] = -1.0, count
    moment[1 if solid else 2, count] = (-1.0 if solid else 1.0) * place[0].sum()
    names = (*(f"<bolt {number}>" for number in range(count)), "foot")
    none = np.zeros_like(force)
    of = Actions(np.arange(count + 1) < count, names, force, moment, place, none, none)
    components = COMPONENTS if solid else IN_PLANE
    if not points:
        components = tuple(name for name in components if name.startswith("F"))
    return balances(Printout("forces.csv", {"": of}, components, "kN", "m"))[""]


def page_of(found: Balance) -> str:
    return as_html(Document("t", "", [balance_section(found, None)]))


@pytest.mark.parametrize("solid", [False, True])
def test_every_row_is_drawn_with_its_name(solid: bool) -> None:
    found = rows(3, solid=solid)
    assert found.passed is True
    picture = balance_figure("b", found)
    assert picture is not None and "an arrow of 3 kN is the longest one" in picture.caption
    views = 3 if solid else 1
    assert picture.svg.count("point of moments") == 1 and picture.svg.count("[m]") == 2 * views
    # seen along the arrows a force is a point without a name
    assert picture.svg.count("&lt;bolt 1&gt;</text>") == (2 if solid else 1)
    assert "3 kN m</text>" in picture.svg and "Round arrows: moments" in picture.caption


def test_many_rows_have_no_names() -> None:
    picture = balance_figure("b", rows(300, solid=False))
    assert picture is not None and "bolt" not in picture.svg
    assert "301 rows, without their names." in picture.caption
    most = balance_figure("b", rows(700, solid=False))
    assert most is not None and "The 500 largest forces of 701 rows, without their names." in most.caption
    assert len(most.svg) < 2 * len(picture.svg), "a page stays small"


def test_without_points_there_is_nothing_to_draw() -> None:
    found = rows(2, solid=True, points=False)
    assert balance_figure("b", found) is None
    page = page_of(found)
    assert "Fz [kN]" in page and "Mx [kN m]" not in page and "moments about" not in page


def test_names_are_made_safe_and_long_tables_are_cut() -> None:
    page = page_of(rows(300, solid=False))
    assert "&lt;bolt 1&gt;" in page and "<bolt" not in page
    assert "301 rows of the table, the first 200" in page and page.count("<tr>") < 220


def test_the_report_of_a_study_has_the_section(
    findings: Findings, tmp_path_factory: pytest.TempPathFactory
) -> None:
    folder = tmp_path_factory.mktemp("report")
    whole = replace(findings, facts=replace(findings.facts, balance=rows(3, solid=False)))
    units = SYSTEMS["mm, N, MPa"]
    about = {"study_text": "", "study_name": "s", "command": "c", "date": "d"}
    (path,) = write_report(whole, folder, fields=[], units=units, **about)
    page = path.read_text()
    assert 'href="#balance"' in page and "From forces.csv." in page
    assert (folder / "figures" / "equilibrium.svg").is_file()
    record = findings_object(whole)["balance"]
    assert record["passed"] is True and record["components"]["Fy"]["loads"] == -3.0
    assert findings_object(findings)["balance"] is None
