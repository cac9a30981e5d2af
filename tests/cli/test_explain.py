"""`--explain NAME`: the steps to a verdict, with their numbers."""

import pytest

from convergence.cli.main import outcome

TABLE = """h [mm], tip deflection [mm], root peak [MPa]
8.0, 6.412, 88.4
4.0, 6.498, 101.7
2.0, 6.524, 109.2
1.0, 6.532, 112.8
"""


@pytest.fixture
def table(tmp_path):
    path = tmp_path / "arm.csv"
    path.write_text(TABLE, encoding="utf-8")
    return path


def explained(capsys, *arguments: str) -> str:
    assert outcome(["judge", *arguments]) in (0, 1)
    return " ".join(capsys.readouterr().out.partition("step by step")[2].split())


def test_the_steps_have_the_numbers(table, capsys) -> None:
    said = explained(
        capsys, str(table), "--kind", "root peak=peak_stress", "--degree", "1", "--explain", "root peak"
    )
    assert "1. 4 levels, h = 8, 4, 2, 1 mm. 2. Values: 88.4, 101.7, 109.2, 112.8 MPa." in said
    assert "Changes from level to level: 13.3, 7.50, 3.60." in said
    assert "Interval (kind peak stress, degree 1):" in said and "Measured coverage of such intervals" in said
    assert "observed order 1.06." in said, "ln(7.5 / 3.6) / ln 2"
    assert "Accepted: 5 % of the value (assumed, none was given)" in said
    assert "From 112.8 MPa on the finest mesh to the far end of the interval: " in said
    assert "MPa, more than the accepted 5.64 MPa." in said, "5 % of 112.8"
    assert said.rstrip().endswith("Verdict: refine; next: h = 0.254 mm.")


def test_only_what_is_asked_for(table, capsys) -> None:
    said = explained(capsys, str(table), "--explain", "tip deflection")
    assert "6.412, 6.498, 6.524, 6.532 mm" in said and "88.4" not in said
    assert "kind displacement by its unit, degree not known" in said
    assert "kind not known, degree not known" in explained(capsys, str(table), "--explain", "root peak")


def test_an_unknown_name_is_told_with_the_nearest(table, capsys) -> None:
    assert outcome(["judge", str(table), "--explain", "tip deflexion"]) == 2
    error = capsys.readouterr().err
    assert error == "--explain: no such quantity, got 'tip deflexion'; did you mean 'tip deflection'?\n"


def test_a_run_tells_it_before_it_solves(tmp_path, capsys) -> None:
    assert outcome(["run", "studies/tie_rod.toml", "--out", str(tmp_path), "--explain", "strech"]) == 2
    assert "--explain: no such quantity, got 'strech'" in capsys.readouterr().err
    assert not list(tmp_path.iterdir())


def test_every_ladder_that_has_it(table, capsys) -> None:
    other = table.with_name("boom.csv")
    other.write_text(TABLE.replace("tip", "end"), encoding="utf-8")
    outcome(["judge", str(table), str(other), "--explain", "root peak", "--explain", "end deflection"])
    out = capsys.readouterr().out
    assert out.count("root peak, step by step") == 2 and out.count("end deflection, step by step") == 1
