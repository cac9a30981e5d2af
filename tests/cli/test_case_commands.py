"""Load cases on the command line: one matrix, a report for each case, judged again from their folder."""

import contextlib
import io
import json
import re
from html.parser import HTMLParser
from pathlib import Path
from urllib.parse import unquote

import pytest

from convergence.cli import main

STUDY = """title = "Davit arm"
[model]
name = "tapered_arm"
tip_tension = 0.5
[cases.lift]
[cases.drag]
tip_shear = 0.0
tip_tension = 2.0
[ladder]
divisions = 1
levels = 3
degree = 1
shape = "quadrilateral"
[quantities.energy]
measure = "strain_energy"
relative_tolerance = 0.2
[quantities.pull]
measure = "reaction_force"
support = "root"
component = "x"
absolute_tolerance = 0.001
"""


@pytest.fixture(scope="module")
def ran(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, int, str]:
    """The folder in which `run arm.toml` was called once, its exit code and output."""
    folder, out = tmp_path_factory.mktemp("cases"), io.StringIO()
    (folder / "arm.toml").write_text(STUDY)
    with contextlib.chdir(folder), contextlib.redirect_stdout(out):
        code = main.outcome(["run", "arm.toml"])
    return folder, code, out.getvalue()


@pytest.fixture(autouse=True)
def _inside(ran: tuple[Path, int, str], monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ran[0])
    Path("arm.toml").write_text(STUDY)


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


class Links(HTMLParser):
    """Collects ids, and links that lead out of the page."""

    def __init__(self, page: Path) -> None:
        super().__init__()
        self.ids: set[str] = set()
        self.links: list[str] = []
        self.feed(page.read_text())

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        for key, value in attrs:
            if key == "id" and value:
                self.ids.add(value)
            if key == "href" and value and not value.startswith("#"):
                self.links.append(value)


def test_run_then_judge_the_folder(ran: tuple[Path, int, str], capsys: pytest.CaptureFixture[str]) -> None:
    _, code, out = ran
    assert code == 0 and "Report: out/arm/report.html" in out
    assert "Both cases are sound" in out and max(map(len, out.splitlines())) <= 80
    folder = Path("out/arm")
    assert (folder / "study.toml").read_text() == STUDY and not (folder / "ladder.csv").exists()
    for case in ("lift", "drag"):
        for name in ("ladder.csv", "report.html", "findings.json", "levels/level-2.npz"):
            assert (folder / case / name).exists()
    again, shown, err = call(capsys, "judge", "out/arm")
    assert (again, err) == (0, "") and shown == out.replace("Report: out/arm/report.html\n", "")
    assert call(capsys, "judge", "arm.toml")[:2] == (0, shown)


def test_every_link_of_the_matrix_leads_somewhere() -> None:
    folder = Path("out/arm")
    page = Links(folder / "report.html")
    # two quantities in two cases, and the report of each case
    assert len(page.links) == 6
    for link in page.links:
        file, _, anchor = link.partition("#")
        assert anchor in Links(folder / unquote(file)).ids
    text = (folder / "report.html").read_text()
    assert "tip_shear = 0 MPa, tip_tension = 2 MPa" in text and "Davit arm" in text


def test_the_matrix_as_json(capsys: pytest.CaptureFixture[str]) -> None:
    found = json.loads(call(capsys, "judge", "out/arm", "--json")[1])
    assert found["all_sound"] is True and list(found["cases"]) == ["lift", "drag"]
    assert found["cases"]["drag"]["ladder"] == "out/arm/drag/ladder.csv"
    pull = found["envelope"]["pull"]
    # equilibrium: 2 MPa on a tip of 120 mm by 12 mm
    assert pull["case"] == "drag" and pull["value"] == pytest.approx(-2880.0, rel=1e-9)
    assert pull["low"] <= 2880.0 <= pull["high"] and pull["verdict"] == "sound"
    kept = json.loads(Path("out/arm/findings.json").read_text())
    assert {key: kept[key] for key in found} == found and kept["title"] == "Davit arm"
    both = json.loads(call(capsys, "judge", "out/arm", "out/arm/lift/ladder.csv", "--json")[1])
    assert both[0] == found and both[1]["ladder"] == "out/arm/lift/ladder.csv"


def test_one_case_that_is_not_sound_is_exit_code_1(capsys: pytest.CaptureFixture[str]) -> None:
    """Only the bending of the lift needs a finer mesh; tension of a nearly straight bar is met at once."""
    Path("arm.toml").write_text(STUDY.replace("relative_tolerance = 0.2", "relative_tolerance = 0.005"))
    code, out, _ = call(capsys, "judge", "arm.toml")
    words = re.findall(r"(lift|drag) +(\w+) ", out)
    assert code == 1 and words[:2] == [("lift", "refine"), ("drag", "sound")]
    assert "energy, lift: refine; next: h = " in out
    assert "1 of 2 cases is sound. Not settled: lift (refine)." in out
    assert json.loads(call(capsys, "judge", "arm.toml", "--json")[1])["all_sound"] is False


def test_the_folder_of_one_case_is_judged_alone(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "judge", "out/arm/drag")
    assert (code, err) == (0, "") and out.startswith("Davit arm: drag\n") and "lift" not in out
    Path("out/arm/other").mkdir()
    code, _, err = call(capsys, "judge", "out/arm/other")
    assert code == 2 and "other/study.toml: no such file" in err


def test_cases_that_are_not_solved_are_all_named(capsys: pytest.CaptureFixture[str]) -> None:
    Path("new.toml").write_text(STUDY)
    assert call(capsys, "judge", "new.toml") == (
        2,
        "",
        "out/new/lift/ladder.csv: nothing solved yet; meshassay run new.toml\n"
        "out/new/drag/ladder.csv: nothing solved yet; meshassay run new.toml\n",
    )
    Path("arm.toml").write_text(STUDY.replace("tip_tension = 2.0", "tip_tension = 3.0"))
    code, _, err = call(capsys, "judge", "arm.toml")
    assert code == 2 and err.startswith("out/arm/drag/ladder.csv: the ladder was made from another study")
    assert "lift" not in err


def test_a_report_of_a_judged_folder(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "judge", "out/arm", "--out", "there")
    assert code == 0 and "Report: there/report.html" in out
    assert Path("there/lift/report.html").exists() and Path("there/drag/findings.json").exists()


def test_the_page_of_all_cases_has_the_record_and_the_way_to_and_fro(
    capsys: pytest.CaptureFixture[str],
) -> None:
    """What is stated once for all cases; a point that stands in the reports of the cases leads there."""
    Path("stated.toml").write_text(STUDY + '[record]\nanalyst = "A. Initials"\n')
    assert call(capsys, "run", "stated.toml")[0] in (0, 1)
    page = Path("out/stated/report.html").read_text()
    assert "Stated by the analyst, not checked here" in page and "A. Initials" in page
    assert '<a href="#cases">The reports of the cases</a>' in page and "SHA-256 of the study" in page
    case = Path("out/stated/lift/report.html").read_text()
    assert '<a href="../report.html">All cases</a>' in case and "A. Initials" in case


def test_a_report_elsewhere_shows_the_meshes_of_the_run(
    capsys: pytest.CaptureFixture[str], tmp_path: Path
) -> None:
    call(capsys, "report", "out/arm", "--as", "html", "--out", str(tmp_path / "elsewhere"))
    page = (tmp_path / "elsewhere" / "lift" / "report.html").read_text()
    assert 'id="meshes"' in page and 'id="stress"' in page
