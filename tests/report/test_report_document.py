"""The report folder: complete, self-contained, escaped, the same bytes twice."""

import json
import re
from dataclasses import replace
from html.parser import HTMLParser
from pathlib import Path
from typing import Any

import pytest

from convergence.dimensions import SYSTEMS, Units
from convergence.fields import Fields
from convergence.report.document import write_report
from convergence.report.pictures import stems
from convergence.results import Facts, Findings

VOID = {"meta", "br", "img", "link", "hr"}


class Reader(HTMLParser):
    """Collects ids, references and text, and notes tags that do not close in order."""

    def __init__(self) -> None:
        super().__init__()
        self.ids: list[str] = []
        self.references: list[str] = []
        self.open: list[str] = []
        self.tags: list[str] = []
        self.misnested: list[str] = []
        self.labels: list[str] = []
        self.text = ""

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append(tag)
        if tag not in VOID:
            self.open.append(tag)
        for key, value in attrs:
            value = value or ""
            if key == "id":
                self.ids.append(value)
            if key in ("href", "xlink:href", "src"):
                self.references.append(value)
            if key == "aria-label" and tag == "svg":
                self.labels.append(value)
            self.references += [f"#{to}" for to in re.findall(r"url\(#([^)]*)\)", value)]

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.handle_starttag(tag, attrs)
        if tag not in VOID:
            self.open.pop()

    def handle_endtag(self, tag: str) -> None:
        if not self.open or self.open.pop() != tag:
            self.misnested.append(tag)

    def handle_data(self, data: str) -> None:
        self.text += data


def write(findings: Findings, folder: Path, fields: list[Fields], units: Units) -> Path:
    (page,) = write_report(
        findings, folder, fields=fields, units=units, study_text='title = "<i>Bracket</i>"',
        study_name="bracket", command="meshassay run studies/bracket.toml", date="2031-05-02",
    )  # fmt: skip
    return page


@pytest.fixture(scope="module")
def folder(
    tmp_path_factory: pytest.TempPathFactory, findings: Findings, fields: list[Fields], units: Units
) -> Path:
    return write(findings, tmp_path_factory.mktemp("report") / "out", fields, units).parent


@pytest.fixture(scope="module")
def page(folder: Path) -> Any:
    reader = Reader()
    reader.feed((folder / "report.html").read_text(encoding="utf-8"))
    return reader


def test_what_is_left_in_the_folder(folder: Path) -> None:
    assert {path.name for path in folder.iterdir()} == {"report.html", "findings.json", "figures"}
    stem = {path.stem for path in (folder / "figures").iterdir()}
    assert stem == {
        "fillet-stress-value", "fillet-stress-order", "tip-deflection-value", "tip-deflection-order",
        "fillet-stress-standing", "tip-deflection-standing", "corner-stress-growth",
        "b-pin-reaction-b-x-value", "b-pin-reaction-b-x-order",
        "meshes", "stress", "error-map", "energy-norm",
    }  # fmt: skip
    for name in stem:
        assert (folder / "figures" / f"{name}.svg").stat().st_size > 0
        assert (folder / "figures" / f"{name}.png").stat().st_size > 0
    assert json.loads((folder / "findings.json").read_text())["title"] == "Bracket of the quayside davit"


def test_page_is_well_formed_and_stands_alone(page: Reader) -> None:
    assert page.misnested == [] and page.open == []
    assert page.tags.count("script") == 1 and "link" not in page.tags
    outside = [to for to in page.references if not to.startswith(("#", "data:image/png;base64,"))]
    assert outside == []


def test_ids_are_unique_and_references_lead_somewhere(page: Reader) -> None:
    assert len(page.ids) == len(set(page.ids))
    assert {to[1:] for to in page.references if to.startswith("#")} <= set(page.ids)


def test_every_figure_has_words(page: Reader) -> None:
    assert len(page.labels) == page.tags.count("svg") == 13
    assert all(len(label) > 20 for label in page.labels)


def test_what_the_user_wrote_is_escaped(page: Reader) -> None:
    assert "b" not in page.tags and "i" not in page.tags
    assert '<b>pin & "reaction"</b> $x$' in page.text
    assert "<i>Bracket</i>" in page.text


def test_statement_comes_first_with_its_limits(page: Reader) -> None:
    order = [
        "1 of 4 quantities is sound", "Not covered", "On 5 meshes",
        "Where each point of the record stands",
        "Levels from coarse to fine", "Checks on this ladder",
        "Any candidate for the limit", "is one part of the uncertainty",
        "How to get these numbers again",
    ]  # fmt: skip
    places = [page.text.index(words) for words in order]
    assert places == sorted(places)
    for words in (
        "Measured coverage of such intervals: 96.1 % (95.2 to 96.9 %) of 2,140 ladders of 5 levels or more",
        "best estimate 313.9 ± 2.0 MPa. The error falls with an order between 1.62 and 2.21",
        "for comparison: the interval is not made from them",
        "The discretization error is one part of the uncertainty",
        "Local codes and licensed practice decide",
        "meshassay run studies/bracket.toml",
        "J. Fluids Eng. 116 (1994) 405-413",
        "every quantity: theory ends here",
    ):
        assert words in page.text


def test_the_same_input_gives_the_same_bytes(
    folder: Path, tmp_path: Path, findings: Findings, fields: list[Fields], units: Units
) -> None:
    write(findings, tmp_path, fields, units)
    paths = [path.relative_to(folder) for path in folder.rglob("*") if path.is_file()]
    assert len(paths) == 28
    for path in paths:
        assert (folder / path).read_bytes() == (tmp_path / path).read_bytes(), path


def test_a_table_has_no_mesh_sections_and_old_figures_go(tmp_path: Path, findings: Findings) -> None:
    (tmp_path / "figures").mkdir()
    (tmp_path / "figures" / "meshes.svg").write_text("old")
    (tmp_path / "figures" / "notes.txt").write_text("mine")
    bare = replace(findings, quantities=findings.quantities[:1], checks=(), estimates={}, facts=Facts())
    levels = [replace(lv, cells=0, dofs=0, values={"fillet_stress": 1.0}) for lv in findings.ladder.levels]
    bare = replace(bare, ladder=replace(bare.ladder, levels=tuple(levels)))
    text = write(bare, tmp_path, [], SYSTEMS["consistent"]).read_text()
    assert 'id="meshes"' not in text and 'id="stress"' not in text and 'id="error"' not in text
    assert not (tmp_path / "figures" / "meshes.svg").exists()
    assert (tmp_path / "figures" / "notes.txt").read_text() == "mine"


def test_stems_are_plain_and_differ() -> None:
    found = stems(["Peak stress / MPa", "peak_stress MPa", "%", "<>", "x" * 200])
    assert list(found.values()) == [
        "peak-stress-mpa",
        "peak-stress-mpa-2",
        "quantity",
        "quantity-2",
        "x" * 48,
    ]
