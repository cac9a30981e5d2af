"""Documents with a decimal comma: every number of ours, none of what somebody else wrote."""

import html
import importlib
import inspect
import json
import pickle
import re
import zipfile
from collections.abc import Callable
from dataclasses import replace
from io import BytesIO
from pathlib import Path
from typing import Any

import pytest

from convergence.coverage import Coverage
from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.numbers import DecimalMark
from convergence.report._decimal_comma import DecimalComma, given_names, with_decimal_comma
from convergence.report._picture import draw
from convergence.report.as_docx import as_docx
from convergence.report.content import Details, Document, Heading, Section, Table, Verbatim, Words
from convergence.report.document import write_report
from convergence.report.forms import Forms
from convergence.results import Findings

DAY = "2031-05-02"
HOSTILE = "S.1.2 at 3.5 mm, 1.5, 2.0 (1,234.5)"
LONG = "pin 1.25 of the davit's boom in all its length up to the head at 3.75 mm"
NUMBER = re.compile(r"(?<![\w.])\d+(?:,\d{3})*(?:\.\d+)?")


@pytest.fixture(scope="module")
def comma() -> DecimalComma:
    return DecimalComma(frozenset({HOSTILE, LONG, "case 1.5", "2.5", "3.5 mm"}))


@pytest.mark.parametrize(
    ("point", "wanted"),
    [
        ("0.5", "0,5"),
        ("-0.0321 ± 1.2e-05 mm", "-0,0321 ± 1,2e-05 mm"),
        ("±0.326 %, inside 3 %. It is 0.1.", "±0,326 %, inside 3 %. It is 0,1."),
        ("1,234", "1\u202f234"),
        ("1,234,567.25 N", "1\u202f234\u202f567,25 N"),
        ("h^(-0.456), h^0.55; 1 MPa mm^0.4555 at 87.14°", "h^(-0,456), h^0,55; 1 MPa mm^0,4555 at 87,14°"),
        ("99.9 % (95.6 to 97.5 %) of 1,689 ladders", "99,9 % (95,6 to 97,5 %) of 1\u202f689 ladders"),
        ("level 1: 1,024 cells, h = 2.5 mm", "level 1: 1\u202f024 cells, h = 2,5 mm"),
        ("0.1\n0.2", "0,1\n0,2"),
    ],
)
def test_numbers(point: str, wanted: str) -> None:
    assert DecimalComma(frozenset())(point) == wanted


@pytest.mark.parametrize(
    ("point", "wanted"),
    [
        ("at (150.0, -0.5, 7)", "at (150,0; -0,5; 7)"),
        ("at (60, -60), 90°", "at (60; -60), 90°"),
        ("(at (150.0, 0.0), component y)", "(at (150,0; 0,0), component y)"),
        ("sizes 8.0, 4, 2 and 1", "sizes 8,0; 4; 2 and 1"),
        ("levels 2, 3 and 4", "levels 2, 3 and 4"),
        ("On 5 meshes, 0.5 mm, 1.5 mm", "On 5 meshes, 0,5 mm, 1,5 mm"),
        ("(1,020 cells, 2.5 mm)", "(1\u202f020 cells, 2,5 mm)"),
    ],
)
def test_lists_of_numbers_have_semicolons(point: str, wanted: str) -> None:
    assert DecimalComma(frozenset())(point) == wanted


@pytest.mark.parametrize(
    "given",
    [
        "3.11.7", "0.1.0", "annex B.18, C.8.1", "EN 1993-1-5", "EN 10025-2.1", "2031-05-02", "02.05.2031",
        "plate_1.5", "mesh 1.5.csv", "out/1.5/ladder.csv", "x1.5", "1.5x", "V&V 10", "ü1.5", "1,5", "1,23",
        "doi 10.1016/j.jcp.2014.01.006", "ITTC 7.5-03-01-01", "1. Purpose", "3f9a2c.5", "12,3456",
    ],
)  # fmt: skip
def test_what_is_no_number_of_ours(given: str) -> None:
    assert DecimalComma(frozenset())(given) == given


def test_names_stay_wherever_they_stand(comma: DecimalComma) -> None:
    assert comma(HOSTILE) == HOSTILE
    assert comma(f"{HOSTILE} is 0.5 mm, {HOSTILE}: 1.5, 2.5") == f"{HOSTILE} is 0,5 mm, {HOSTILE}: 1,5, 2.5"
    assert comma("case 1.5 (sound), case 1.55, showcase 1.5") == "case 1.5 (sound), case 1,55, showcase 1,5"
    assert comma("2.5 and 2.55, 12.5, 1,002.5. 2.5.") == "2.5 and 2,55; 12,5; 1\u202f002,5. 2.5."


def test_a_name_that_was_cut_in_its_middle_stays(comma: DecimalComma) -> None:
    assert comma(f"{LONG[:20]}…{LONG[-20:]} [mm] 0.5") == f"{LONG[:20]}…{LONG[-20:]} [mm] 0,5"
    assert comma("0.5…0.7") == "0,5…0,7"


def test_names_that_are_known(findings: Findings) -> None:
    quantity = replace(findings.quantities[0], name="Q 1.5")
    told = replace(findings, quantities=(quantity,), title="Bracket 2.5")
    study = 'title = "x 7.5"\nrelative = "0.5 %"\n[supports."wall 3.5"]\nat = ["p 4.5", 1.5]\nkind = "held"\n'
    known = given_names([told], study, ["case 6.5", "plain"])
    assert known == {"Q 1.5", "Bracket 2.5", "x 7.5", "wall 3.5", "p 4.5", "case 6.5"}


def test_every_block_and_nothing_that_is_given(comma: DecimalComma) -> None:
    rows = [[Words("a 0.5", to="#b-1.5", anchor="c-1.5"), ("0.1", Words("0.2", given=True))]]
    blocks = [
        Heading("h 0.5", "h-1.5", Words("sound", look="sound")),
        Details("d 0.5", [Table("t 0.5", ["u 0.5", "v"], rows), Verbatim("x = 0.5")]),
    ]
    made = with_decimal_comma(Document("1.5", "2.25", [Section("s-1.5", "0.5", "0.75", blocks)]), comma)
    heading, details = made.sections[0].blocks
    assert (made.title, made.about) == ("1,5", "2,25")
    assert made.sections[0] == replace(made.sections[0], anchor="s-1.5", short="0,5", title="0,75")
    assert heading == Heading("h 0,5", "h-1.5", Words("sound", look="sound"))
    assert isinstance(details, Details) and details.summary == "d 0,5"
    table, verbatim = details.blocks
    wanted = [[Words("a 0,5", to="#b-1.5", anchor="c-1.5"), ("0,1", Words("0.2", given=True))]]
    assert table == Table("t 0,5", ["u 0,5", "v"], wanted) and verbatim == Verbatim("x = 0.5")


def test_a_figure_is_drawn_with_commas_from_ticks_to_legend(comma: DecimalComma) -> None:
    def paint(figure: Any) -> None:
        one, other = figure.subplots(1, 2, sharey=True)
        one.plot([0.0, 0.5], [0.0, 1234.5], label="believed: 0.25 to 0.75")
        other.plot([0.0, 0.5], [0.0, 1234.5])
        one.set_yticks([0.0, 1234.5], labels=["0", "1,234.5"])
        one.set_title(HOSTILE)
        one.annotate("at (0.5, 0.25)", (0.2, 100.0))
        one.secondary_xaxis("top").set_xticks([0.25], ["0.25"])
        figure.legend()

    point, changed = (draw("f", (5.0, 3.0), "0.5", "0.5", paint, comma=c) for c in (None, comma))
    texts = drawn_text(changed.svg)
    assert {"believed: 0,25 to 0,75", "at (0,5; 0,25)", "1\u202f234,5", "0,25", HOSTILE} <= set(texts)
    assert [listed(to_point(text)) for text in texts if text != HOSTILE] == [
        text for text in drawn_text(point.svg) if text != HOSTILE
    ]
    assert not [text for text in texts if text != HOSTILE and re.search(r"\d\.\d", text)]
    assert changed.png != point.png and changed.alt == "0.5"
    assert draw("f", (5.0, 3.0), "0.5", "0.5", paint, comma=pickle.loads(pickle.dumps(comma))) == changed


def test_every_figure_can_be_drawn_with_commas() -> None:
    """`pictures` hands the option to whatever it draws."""
    home = Path(inspect.getfile(importlib.import_module("convergence.report"))).parent
    figures = [
        function
        for path in home.glob("figures_*.py")
        for function in vars(importlib.import_module(f"convergence.report.{path.stem}")).values()
        if inspect.isfunction(function) and function.__module__.endswith(path.stem)
        if not function.__name__.startswith("_")
        and "Picture" in str(inspect.signature(function).return_annotation)
    ]
    assert len(figures) >= 12
    assert [f.__name__ for f in figures if "comma" not in inspect.signature(f).parameters] == []


def drawn_text(svg: str) -> list[str]:
    return [html.unescape(text) for text in re.findall(r"<text[^>]*>([^<]*)</text>", svg)]


def to_point(text: str) -> str:
    """The way back, for texts without names: each comma between digits is a point again."""
    return re.sub(r"(?<=\d),(?=\d)", ".", text).replace("\u202f", ",")


def listed(text: str) -> str:
    """A text whose numbers are never parted by semicolons."""
    return re.sub(r"(?<=\d); (?=-?\d)", ", ", text)


def seen(page: str) -> str:
    """What a page says: no script, style, drawing or study."""
    page = re.sub(r"<(script|style|pre)\b.*?</\1>", "", page, flags=re.DOTALL)
    page = re.sub(r' (?:viewBox|d|x|y|width|height|points|transform|style|content|cx|cy|r)="[^"]*"', "", page)
    page = re.sub(r"<(?:path|use|g|rect|svg|image|clipPath|circle)\b[^>]*>", "", page)
    return html.unescape(page)


@pytest.fixture(scope="module")
def told(findings: Findings) -> Findings:
    """The findings with a hostile name of the first quantity, and a bank that is large."""
    first, *others = findings.quantities
    rename = {first.name: HOSTILE}
    levels = tuple(
        replace(level, values={rename.get(name, name): v for name, v in level.values.items()})
        for level in findings.ladder.levels
    )
    coverage = Coverage("kind and degree", 5, 2140, 2057, 0.9521, 0.9690, 3.1)
    verdicts = {rename.get(name, name): verdict for name, verdict in findings.verdicts.items()}
    verdicts[HOSTILE] = replace(verdicts[HOSTILE], coverage=coverage)
    return replace(
        findings,
        quantities=(replace(first, name=HOSTILE), *others),
        ladder=replace(findings.ladder, levels=levels),
        verdicts=verdicts,
        estimates={rename.get(name, name): found for name, found in findings.estimates.items()},
    )


Written = Callable[[DecimalMark | None], Path]


@pytest.fixture(scope="module")
def written(
    tmp_path_factory: pytest.TempPathFactory, told: Findings, fields: list[Fields], units: Units
) -> Written:
    made: dict[DecimalMark | None, Path] = {}

    def of(mark: DecimalMark | None) -> Path:
        if mark not in made:
            made[mark] = tmp_path_factory.mktemp("report")
            write_report(
                told, made[mark], fields=fields[:2], units=units, study_text='title = "Bracket 7.5"',
                study_name="bracket_2.5", command="meshassay run bracket_2.5.toml --budget 1.5min", date=DAY,
                record={"drawing": "A-1.25, scale 2.5"}, forms=Forms(("html", "docx"), None, mark),
            )  # fmt: skip
        return made[mark]

    return of


def test_without_the_option_nothing_changes(written: Written) -> None:
    for path in sorted(written(None).rglob("*.*")):
        assert path.read_bytes() == (written("point") / path.relative_to(written(None))).read_bytes()


def test_the_numbers_of_the_page_are_the_same_ones(written: Written) -> None:
    point, changed = (seen((written(mark) / "report.html").read_text("utf-8")) for mark in ("point", "comma"))
    assert point.count(HOSTILE) == changed.count(HOSTILE) > 5
    point, changed = point.replace(HOSTILE, "S"), changed.replace(HOSTILE, "S")
    assert len(re.findall(r"\d,\d", changed)) > 200
    assert listed(to_point(changed)) == listed(point)


def test_no_point_is_left_but_in_what_others_wrote(written: Written) -> None:
    page = seen((written("comma") / "report.html").read_text("utf-8"))
    trace = page[page.index("How to get these numbers again") :]
    assert "meshassay run bracket_2.5.toml --budget 1.5min" in trace
    methods = r"ITTC Recommended Procedure 7\.5-03-01-01|10\.1016/j\.jcp\.2014\.01\.006"
    left = page.replace(trace, "").replace(HOSTILE, "").replace("A-1.25, scale 2.5", "")
    left = re.sub(methods, "", left.replace("bracket_2.5", ""))
    assert re.findall(r".{0,30}\d\.\d.{0,10}", left) == []


def test_word_has_the_same_text(written: Written) -> None:
    def text(mark: DecimalMark) -> str:
        with zipfile.ZipFile(BytesIO((written(mark) / "report.docx").read_bytes())) as file:
            found = re.findall(r"<w:t(?: [^>]*)?>([^<]*)<", file.read("word/document.xml").decode())
        return html.unescape("\n".join(found)).replace(HOSTILE, "S")

    said = text("comma")
    assert "\u202f" in said and len(re.findall(r"\d,\d", said)) > 150
    trace = said.index("How to get these numbers again")
    changed = listed(to_point(said[:trace]))
    assert changed == listed(text("point"))[: len(changed)]


def test_what_machines_read_keeps_the_point(written: Written) -> None:
    found = [json.loads((written(mark) / "findings.json").read_text("utf-8")) for mark in ("point", "comma")]
    assert found[0] == found[1] and found[1]["quantities"][HOSTILE]["value"] == pytest.approx(313.6, abs=1.0)


def test_hints_and_files_of_figures_have_commas(written: Written) -> None:
    page = (written("comma") / "report.html").read_text("utf-8")
    assert re.search(r"<title>level 1 of 5; h 12[^<]*; value \d+,\d+ MPa</title>", page)
    for path in (written("comma") / "figures").glob("*.svg"):
        texts = [text for text in drawn_text(path.read_text("utf-8")) if "S.1.2" not in text]
        assert not [text for text in texts if re.search(r"\d\.\d", text)], path.name


def test_docx_of_a_document_with_commas_opens(comma: DecimalComma) -> None:
    document = Document("1.5", "0.5", [Section("s", "S", "S", [Table("t", ["a"], [["1,234.5"]])])])
    made = as_docx(with_decimal_comma(document, comma), DAY)
    docx = pytest.importorskip("docx")
    assert docx.Document(BytesIO(made)).tables[-1].rows[-1].cells[0].text == "1\u202f234,5"
