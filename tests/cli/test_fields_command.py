"""`meshassay fields` and result files in `judge` and `run`, as their user meets them."""

import json
from pathlib import Path

import pytest

from convergence.cli import main

FILES = sorted((Path(__file__).parents[1] / "bodies" / "files").glob("cylinder-sfepy-*"))
STEEL = ("--young", "210000", "--poisson", "0.3", "--kind", "plane strain")


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


def test_files_without_a_study(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "fields", *map(str, FILES), *STEEL)
    assert code == 1, "the files' own stress is unproven"
    assert "largest_displacem" in out and "hot_spot_1" in out
    assert "places on the finest mesh: hot_spot_1 (" in out


def test_the_study_it_prints_gives_the_same(
    capsys: pytest.CaptureFixture[str], tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """And a run of it leaves a folder that can be judged by itself."""
    monkeypatch.chdir(tmp_path)
    code, study, _ = call(capsys, "fields", *map(str, FILES), *STEEL, "--study")
    assert code == 0
    Path("ring.toml").write_text(study)
    _, first, _ = call(capsys, "fields", *map(str, FILES), *STEEL, "--json")
    _, second, _ = call(capsys, "judge", "ring.toml", "--json")
    assert json.loads(first) == json.loads(second)
    call(capsys, "run", "ring.toml")
    folder = Path("out/ring")
    assert {"report.html", "ladder.csv", "findings.json", "study.toml"} <= {p.name for p in folder.iterdir()}
    page = (folder / "report.html").read_text()
    assert "Hot spots: von Mises stress [MPa] on every mesh, coarse to fine" in page
    assert (folder / "figures" / "stress.svg").exists()
    for file in FILES:
        file_copy = folder / file.name
        assert file_copy.exists()
    _, third, _ = call(capsys, "judge", str(folder), "--json")
    numbers = [{k: v["value"] for k, v in json.loads(text)["quantities"].items()} for text in (first, third)]
    assert numbers[0] == numbers[1]


def test_what_cannot_be_read_is_named(capsys: pytest.CaptureFixture[str], tmp_path: Path) -> None:
    broken = tmp_path / "broken.vtu"
    broken.write_bytes(b"\x00\x01nothing")
    code, out, err = call(capsys, "fields", str(FILES[0]), str(broken), "none.vtk", *STEEL)
    assert code == 2 and out == ""
    assert len(err.splitlines()) == 2 and "broken.vtu: " in err and "none.vtk: no such file" in err


def test_a_material_is_asked_for(capsys: pytest.CaptureFixture[str]) -> None:
    code, _, err = call(capsys, "fields", str(FILES[0]), str(FILES[1]))
    assert code == 2 and "--young" in err
