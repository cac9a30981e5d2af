"""A browser without a network, and pages of every kind: small, large, hostile, of cases, of two ladders."""

import shutil
from collections.abc import Callable, Iterator
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from convergence.cli import main
from convergence.dimensions import SYSTEMS, Units
from convergence.fields import Fields
from convergence.report.as_html import as_html
from convergence.report.cases_page import write_cases
from convergence.report.content import Bullets, Document, Heading, Paragraph, Section, Table, mark
from convergence.report.document import write_report
from convergence.results import Estimate, Facts, Findings, Ladder, Quantity, Verdict

NAMES = ("chromium", "chromium-browser", "google-chrome", "google-chrome-stable", "chrome", "msedge")
LABELLED = {"study_name": "davit", "command": "meshassay judge davit.csv", "date": "2031-05-02"}
HOSTILE = [
    "<img src=x onerror=alert(1)><script>alert(1)</script>",
    '=HYPERLINK("http://x") $x^2$ {{7*7}} &amp; ]]>',
    "שלום עולם",
    "x" * 300,
    "crane 🏗 hook ⚓",
    "turned \u202eback",
]
FIRST = "h [mm],tip [mm],root [MPa]\n8,10.64,88.4\n4,10.16,101.7\n2,10.04,109.2\n1,10.01,112.8\n"
SECOND = "h [mm],tip [mm],root [MPa]\n6,10.36,125.1\n3,10.09,135.9\n1.5,10.02,141.1\n"
PRINTOUT = """case,what,name,fx [kN],fy [kN],m [kN m],x [m],y [m]
lift,load,hook,0.000,-12.500,,3.0,4.0
lift,reaction,foot,0.000,12.500,37.500,0,0
heel,load,hook,2.500,-12.500,,3.0,4.0
heel,reaction,foot,-2.500,12.500,40.000,0,0
"""


@pytest.fixture(scope="session")
def browser() -> Iterator[Any]:
    driver = pytest.importorskip("playwright.sync_api", reason="the browser's driver is not installed")
    found = next((path for name in NAMES if (path := shutil.which(name))), None)
    if found is None:
        pytest.skip(f"none of {', '.join(NAMES)} is installed")
    with driver.sync_playwright() as started:
        chromium = started.chromium.launch(executable_path=found)
        yield chromium
        chromium.close()


@pytest.fixture
def visit(browser: Any) -> Iterator[Callable[..., Any]]:
    """Open a file without a network; whatever it says or asks for fails the test at its end."""
    heard: list[str] = []
    contexts = []

    def opened(path: Path, width: int = 1400, **settings: Any) -> Any:
        context = browser.new_context(
            viewport={"width": width, "height": 900}, offline=True, reduced_motion="reduce", **settings
        )
        contexts.append(context)
        page = context.new_page()
        page.on("console", lambda message: heard.append(message.text))
        page.on("pageerror", lambda error: heard.append(str(error)))
        page.on("dialog", lambda dialog: heard.append(dialog.message))
        page.on(
            "request", lambda request: None if request.url == path.as_uri() else heard.append(request.url)
        )
        page.goto(path.as_uri())
        return page

    yield opened
    for context in contexts:
        context.close()
    assert heard == []


@pytest.fixture(scope="session")
def small(
    tmp_path_factory: pytest.TempPathFactory,
    verdict_of: Callable[..., Verdict],
    ladder_of: Callable[..., Ladder],
) -> Path:
    """One quantity from a table."""
    h = np.array([8.0, 4.0, 2.0, 1.0])
    ladder = ladder_of({"tip": 313.9 - 1.463 * h**1.94}, h)
    findings = Findings(
        "Arm", ladder, (Quantity("tip", "displacement", "mm", 2.0),), Facts(), {}, (), {"tip": verdict_of()}
    )
    return write(findings, tmp_path_factory.mktemp("small"), [], SYSTEMS["consistent"])


@pytest.fixture(scope="session")
def middle(
    tmp_path_factory: pytest.TempPathFactory, findings: Findings, fields: list[Fields], units: Units
) -> Path:
    """One quantity of each verdict, with meshes and stress."""
    return write(findings, tmp_path_factory.mktemp("middle"), fields, units)


@pytest.fixture(scope="session")
def many(
    findings: Findings, verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> Findings:
    """Twelve quantities on six levels, hostile names among them."""
    h = 12.0 / 2.0 ** np.arange(6)
    names = [*HOSTILE, *(f"quantity number {n}" for n in range(len(HOSTILE), 12))]
    words = ["sound", "refine", "singular", "unproven"] * 3
    ladder = ladder_of({name: 313.9 - (1 + n) * h**1.94 for n, name in enumerate(names)}, h)
    estimate = {
        "grid_convergence_index": Estimate(313.9, 1.94, 1.83),
        "richardson": Estimate(313.9, 1.94, 1.2),
    }
    return replace(
        findings,
        title=HOSTILE[0],
        ladder=ladder,
        quantities=tuple(Quantity(name, "peak_stress", "MPa", 2.0, description=name) for name in names),
        estimates=dict.fromkeys(names, estimate),
        verdicts={name: verdict_of(word) for name, word in zip(names, words, strict=True)},
    )


@pytest.fixture(scope="session")
def large(
    tmp_path_factory: pytest.TempPathFactory, many: Findings, fields: list[Fields], units: Units
) -> Path:
    return write(many, tmp_path_factory.mktemp("large"), fields, units)


@pytest.fixture(scope="session")
def matrix(tmp_path_factory: pytest.TempPathFactory, many: Findings) -> Path:
    """Twelve quantities in four load cases."""
    cases = ("lift", "swell", HOSTILE[0], HOSTILE[2])
    (page,) = write_cases(
        dict.fromkeys(cases, many), tmp_path_factory.mktemp("matrix"), title=HOSTILE[3],
        loads=dict.fromkeys(cases, "tip_shear = -9.6"), study_text="", **LABELLED,
    )  # fmt: skip
    return page


@pytest.fixture(scope="session")
def hostile(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Hostile words in every place of a document."""
    rows = [(name, (mark("sound"), name), name) for name in HOSTILE]
    parts = [Heading(name, f"quantity-{n}", mark("refine")) for n, name in enumerate(HOSTILE)]
    blocks = [
        Paragraph("All sound.", "overall"),
        Paragraph("before שלום, مرحبا 12.5 MPa"),
        Bullets(HOSTILE),
        Table(HOSTILE[0], HOSTILE[:3], rows, "matrix"),
        *parts,
    ]
    path = tmp_path_factory.mktemp("hostile") / "page.html"
    path.write_text(
        as_html(Document(HOSTILE[0], HOSTILE[3], [Section("a", "A", "A", blocks)])), encoding="utf-8"
    )
    return path


def write(findings: Findings, folder: Path, fields: list[Fields], units: Units) -> Path:
    (page,) = write_report(
        findings, folder, fields=fields, units=units, study_text="title = 'davit'", **LABELLED
    )  # fmt: skip
    return page


@pytest.fixture(scope="session")
def compared(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Two quantities on two ladders."""
    folder = tmp_path_factory.mktemp("compared")
    tables = [folder / "first.csv", folder / "second.csv"]
    for table, text in zip(tables, (FIRST, SECOND), strict=True):
        table.write_text(text, encoding="utf-8")
    kinds = ["--kind", "tip=displacement", "--kind", "root=peak_stress", "--degree", "1"]
    main.outcome(["compare", *map(str, tables), *kinds, "--out", str(folder / "page")])
    return folder / "page" / "report.html"


@pytest.fixture(scope="session")
def balanced(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A printout of two load cases, one of them out of balance."""
    folder = tmp_path_factory.mktemp("balanced")
    (folder / "forces.csv").write_text(PRINTOUT, encoding="utf-8")
    main.outcome(["balance", str(folder / "forces.csv"), "--out", str(folder / "page")])
    return folder / "page" / "report.html"


@pytest.fixture(scope="session")
def hostile_words() -> list[str]:
    return HOSTILE


@pytest.fixture(scope="session")
def asked() -> Callable[[Any, str], Any]:
    """Ask a page by one of the functions beside this file."""
    here = Path(__file__).parent
    return lambda page, what: page.evaluate((here / f"{what}.js").read_text(encoding="utf-8"))


@pytest.fixture(scope="session")
def shown() -> Callable[[Any, str], int]:
    """How many of what a selector finds are seen."""
    return lambda page, what: int(page.locator(f"{what}:visible").count())


@pytest.fixture(scope="session")
def pressed() -> Callable[[Any, str], list[str]]:
    """The values of an attribute of the buttons that are pressed."""

    def of(page: Any, what: str) -> list[str]:
        buttons = page.locator(f"button[{what}][aria-pressed=true]:visible")
        return [button.get_attribute(what) for button in buttons.all()]

    return of
