"""The command line as its user meets it: texts, exit codes, JSON, and never a stack trace."""

import json
import subprocess
import sys
from pathlib import Path

import click
import pytest
from click.testing import CliRunner

from convergence import __version__, rooms
from convergence.cli import main
from convergence.cli._progress import ahead
from convergence.results import Level

REFUSED = ("pandas", "matplotlib", "skfem", "scipy", "numpy", "rich")
# Celik et al. 2008 (J. Fluids Eng. 130, 078001), column A: order 1.53, limit 6.1685, index 2.2 %
PUBLISHED = "cells,length\n18000,6.063\n8000,5.972\n4500,5.863\n"
SETTLED = "h,u\n8,10.64\n4,10.16\n2,10.04\n1,10.01\n"  # 10 + 0.01 h²
ROUGH = "h,u\n4,1.0\n2,2.0\n1,2.5\n"
STUDY = """[model]
name = "patch_test"
[ladder]
divisions = 1
levels = 3
degree = 1
[quantities.energy]
measure = "strain_energy"
"""


@pytest.fixture(autouse=True)
def _folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("good.csv").write_text(PUBLISHED)
    Path("settled.csv").write_text(SETTLED)
    Path("rough.csv").write_text(ROUGH)
    Path("patch.toml").write_text(STUDY)


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


def test_version_and_help() -> None:
    result = CliRunner().invoke(main.commands, ["--version"])
    assert result.exit_code == 0 and result.output == f"meshassay, version {__version__}\n"
    shown = CliRunner().invoke(main.commands, ["--help"]).output
    for name in ("judge", "list", "new", "run", "0 all sound, 1 not all sound"):
        assert name in shown


@pytest.mark.parametrize("arguments", [["--version"], ["list", "models"], ["run", "--help"]])
def test_the_first_answer_needs_no_heavy_package(arguments: list[str]) -> None:
    code = (
        "import sys; from convergence.cli.main import outcome; "
        f"outcome({arguments!r}); print(sorted(set({REFUSED!r}) & set(sys.modules)))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, cwd=rooms.HOME.parent)
    assert done.returncode == 0 and done.stdout.splitlines()[-1] == "[]", done.stdout + done.stderr


@pytest.mark.parametrize("room", rooms.OPEN_ROOMS)
def test_list_shows_every_member_with_its_line(capsys: pytest.CaptureFixture[str], room: str) -> None:
    code, out, _ = call(capsys, "list", room)
    assert code == 0
    assert [line.split()[0] for line in out.splitlines()] == rooms.names(room)
    assert all(len(line.split()) > 2 for line in out.splitlines())


def test_new_prints_a_study(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "new", "patch_test")
    assert code == 0 and 'name = "patch_test"' in out
    assert call(capsys, "new", "patch_tset") == (
        2,
        "",
        "models: unknown name in models, got 'patch_tset'; did you mean 'patch_test'?\n",
    )


def test_judge_a_table(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "judge", "settled.csv")
    assert code == 0 and err == ""
    assert "sound" in out and "2.00" in out and "Tolerance assumed, 5 % of the value: u." in out
    assert "Measured coverage of such intervals" in out
    assert "\x1b" not in out and max(map(len, out.splitlines())) <= 80
    code, out, _ = call(capsys, "judge", "rough.csv", "--tolerance", "1%")
    assert code == 1 and "Tolerance assumed" not in out and "u: " in out


def test_judge_as_json(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(
        capsys,
        "judge",
        "good.csv",
        "--json",
        "--kind",
        "length=displacement",
        "--degree",
        "1",
        "--tolerance",
        "50%",
    )
    one = json.loads(out)
    assert code == 0 and one["ladder"] == "good.csv" and one["levels"] == 3
    found = one["quantities"]["length"]
    assert found["formal_order"] == 2.0
    # as printed: 1.53, 6.1685 and, relative to the finest value, 2.2 %
    assert round(found["observed_order"], 2) == 1.53
    index = found["estimates"]["grid_convergence_index"]
    assert round(index["limit"], 4) == 6.1685 and round(100 * index["uncertainty"] / 6.063, 1) == 2.2
    code, out, _ = call(capsys, "judge", "good.csv", "rough.csv", "--json")
    assert [each["ladder"] for each in json.loads(out)] == ["good.csv", "rough.csv"]


def test_run_then_judge_its_folder(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "run", "patch.toml")
    assert code == 0 and err == "" and "Report: out/patch/report.html" in out
    folder = Path("out/patch")
    assert (folder / "study.toml").read_text() == STUDY
    assert (folder / "report.html").exists() and (folder / "findings.json").exists()
    ladder = (folder / "ladder.csv").read_bytes()
    code, shown, _ = call(capsys, "judge", "out/patch")
    assert code == 0 and set(out.splitlines()[:-1]) <= set(shown.splitlines())
    assert "energy: no method has an answer" in shown
    assert call(capsys, "judge", "patch.toml")[0] == 0
    assert call(capsys, "judge", "out/patch/ladder.csv")[0] == 0
    Path("patch.toml").write_text(STUDY.replace("divisions = 1", "divisions = 2"))
    assert call(capsys, "judge", "patch.toml") == (
        2,
        "",
        "out/patch/ladder.csv: the ladder was made from another study (model, sizes, quantities or version "
        "differ); run the study again; --out FOLDER keeps the old ladder\n",
    )
    assert (folder / "ladder.csv").read_bytes() == ladder


def test_run_as_json_prints_nothing_else(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "run", "patch.toml", "--json", "--out", "here")
    assert code == 0 and json.loads(out)["ladder"] == "here/ladder.csv" and "here/report.html" in err


def test_run_of_a_table_study_leaves_a_folder_that_stands_alone(capsys: pytest.CaptureFixture[str]) -> None:
    Path("deep").mkdir()
    Path("deep/arm.toml").write_text('[table]\nfile = "../settled.csv"\n')
    assert call(capsys, "run", "deep/arm.toml")[0] == 0
    Path("settled.csv").unlink()
    code, out, _ = call(capsys, "judge", "out/arm")
    assert code == 0 and "2.00" in out


def test_judge_writes_a_report_for_each(capsys: pytest.CaptureFixture[str]) -> None:
    call(capsys, "judge", "good.csv", "rough.csv", "--out", "reports")
    assert Path("reports/good/report.html").exists() and Path("reports/rough/findings.json").exists()


def test_a_closed_pipe_is_no_defect() -> None:
    command = f"{sys.executable} -m convergence list models | true"
    done = subprocess.run(command, shell=True, capture_output=True, text=True, cwd=rooms.HOME.parent)
    assert done.stderr == ""


def test_every_command_says_what_it_does() -> None:
    context = click.Context(main.commands)
    for name in main.commands.list_commands(context):
        command = main.commands.get_command(context, name)
        assert command is not None and command.help


def test_time_that_remains() -> None:
    # 1e-6 n^1.2 seconds, 50 MB and 2 kB an unknown: 5.28 s and 83.66 s (1.48 min), 850 MB and 8050 MB
    solved = [Level(1.0, 1, n, 1e-6 * n**1.2, {}, 50.0 + 2e-3 * n) for n in (4_000, 40_000)]
    assert (
        ahead(solved, [4_000, 40_000, 400_000, 4_000_000])
        == ", about 1.5 min remaining, up to 8.0 GB of memory"
    )
    assert ahead(solved, [4_000, 40_000, 400_000]) == ", about 5.3 s remaining, up to 850 MB of memory"
