"""[equilibrium] in the study of a table: what a printout out of balance spoils, and what is wrong with it."""

from pathlib import Path

import pytest

from convergence.errors import InputError
from convergence.field_levels import field_ladder
from convergence.judgement import facts_of, judge
from convergence.results import Findings
from convergence.study import Study, load

FILES = Path(__file__).parent / "bodies" / "files"
TABLE = "h [mm],tip [mm]\n8,10.64\n4,10.16\n2,10.04\n1,10.01\n"  # 10 + 0.01 h²
CASES = "case,h [mm],tip [mm]\n" + "".join(
    f"{case},{line}\n" for case in ("lift", "heel") for line in TABLE.splitlines()[1:]
)
STUDY = """[table]
file = "arm.csv"
[material]
young = 210000.0
poisson = 0.3
[quantities.tip]
kind = "displacement"
degree = 1
relative_tolerance = 0.05
[equilibrium]
file = "forces.csv"
"""
GOOD = "what,fx [N],fy [N],x [mm],y [mm]\nload,0.0,-500.0,300,0\nreaction,-750.0,0.0,0,200\n"
GOOD += "reaction,750.0,500.0,0,0\n"
BAD = GOOD.replace("750.0,500.0", "750.0,450.0")
BOTH = "case," + GOOD.replace("\n", "\nlift,", 3) + "".join(f"heel,{row}\n" for row in BAD.splitlines()[1:])


def study(folder: Path, forces: str, more: str = "", table: str = TABLE) -> Study:
    (folder / "arm.csv").write_text(table)
    (folder / "forces.csv").write_text(forces)
    (folder / "arm.toml").write_text(STUDY + more)
    return load(folder / "arm.toml")


def findings(one: Study) -> Findings:
    assert one.table is not None
    return judge(one.table, one.quantities, facts_of(one), one.title)


def equilibrium(found: Findings) -> tuple[bool | None, str]:
    (check,) = (check for check in found.checks if check.name == "equilibrium")
    return check.passed, check.finding


def said(folder: Path, forces: str, more: str = "", table: str = TABLE) -> list[str]:
    with pytest.raises(InputError) as caught:
        study(folder, forces, more, table)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


def test_a_printout_in_balance_leaves_the_verdicts(tmp_path: Path) -> None:
    found = findings(study(tmp_path, GOOD))
    assert equilibrium(found) == (
        True,
        "Loads and reactions of the printout balance to the last digit (allowed 0.1 %), moments about (0, 0)"
        " mm.",
    )
    assert found.verdicts["tip"].word == "sound"


def test_a_printout_out_of_balance_spoils_every_quantity(tmp_path: Path) -> None:
    found = findings(study(tmp_path, BAD))
    passed, words = equilibrium(found)
    assert passed is False and "the worst component, Fy, is off by 10 % of the load" in words.replace(
        "10.0", "10"
    )
    verdict = found.verdicts["tip"]
    assert verdict.word == "unproven"
    assert verdict.reasons[0] == "The printed loads and reactions are out of balance."


def test_digits_that_cannot_tell_spoil_nothing(tmp_path: Path) -> None:
    found = findings(study(tmp_path, GOOD.replace("750.0,500.0", "750.0,500.1"), "tolerance = 0.0001\n"))
    passed, words = equilibrium(found)
    assert passed is None and "cannot be told from the printed digits" in words
    assert found.verdicts["tip"].word == "sound"


def test_each_load_case_has_its_own_balance(tmp_path: Path) -> None:
    one = study(tmp_path, BOTH, table=CASES)
    assert {name: equilibrium(findings(case))[0] for name, case in one.cases.items()} == {
        "lift": True,
        "heel": False,
    }


def test_a_study_without_cases_says_which_case_of_the_printout_is_its_own(tmp_path: Path) -> None:
    assert equilibrium(findings(study(tmp_path, BOTH, 'case = "heel"\n')))[0] is False
    assert said(tmp_path, BOTH) == [
        "arm.toml:10: equilibrium: forces.csv has the load cases lift, heel; say which one belongs here,"
        ' case = "NAME"'
    ]
    assert said(tmp_path, BOTH, 'case = "heal"\n') == [
        "arm.toml:12: equilibrium.case: the table has no such load case, got 'heal'; did you mean 'heel'?"
    ]
    assert said(tmp_path, GOOD, table=CASES) == [
        f"arm.toml:11: equilibrium.file: the table has no such load case, got {case!r};"
        " add a column 'case' to it"
        for case in ("lift", "heel")
    ]


def test_what_is_wrong_is_named_with_its_key(tmp_path: Path) -> None:
    assert said(tmp_path, GOOD, "about = [0, 0, 0]\n") == [
        "arm.toml:12: equilibrium.about: unsuitable about, got (0.0, 0.0, 0.0); give 2 coordinates, as the"
        " table has"
    ]
    assert said(tmp_path, GOOD, "tolerance = 0\nfil = 1\n") == [
        "arm.toml:13: equilibrium.fil: unknown key; did you mean 'file'?",
        "arm.toml:12: equilibrium.tolerance: out of range, got 0; give a number, 0 < value",
    ]
    assert said(tmp_path, "what,fx\nload,a1\nreaction,2\n") == [
        "forces.csv:2: column 'fx': not a number, got 'a1'; write a number such as 1234.5 or 1.2e3, or leave"
        " the cell empty for zero"
    ]


def test_a_file_of_the_same_name_is_refused_as_both_are_kept_in_one_folder(tmp_path: Path) -> None:
    study(tmp_path, GOOD)
    (tmp_path / "list").mkdir()
    (tmp_path / "list" / "arm.csv").write_text(GOOD)
    (tmp_path / "arm.toml").write_text(STUDY.replace("forces.csv", "list/arm.csv"))
    with pytest.raises(InputError, match=r"the name of another file of the study, got 'arm\.csv'; rename it"):
        load(tmp_path / "arm.toml")


def test_the_sheet_of_a_workbook_that_has_the_table_too(tmp_path: Path) -> None:
    openpyxl = pytest.importorskip("openpyxl")
    book = openpyxl.Workbook()
    for sheet, text in ((book.active, TABLE), (book.create_sheet("forces"), GOOD)):
        for line in text.splitlines():
            cells = line.split(",")
            sheet.append([float(c) if c.strip("-.").replace(".", "").isdigit() else c for c in cells])
    book.save(tmp_path / "arm.xlsx")
    text = STUDY.replace("arm.csv", "arm.xlsx").replace("forces.csv", "arm.xlsx")
    (tmp_path / "arm.toml").write_text(text + 'sheet = "forces"\n')
    assert equilibrium(findings(load(tmp_path / "arm.toml")))[0] is True


def test_a_model_computes_its_own_reactions(tmp_path: Path) -> None:
    text = '[model]\nname = "patch_test"\n[ladder]\nlevels = 3\ndivisions = 1\n'
    text += '[quantities.u]\nmeasure = "strain_energy"\n[equilibrium]\nfile = "f.csv"\n'
    (tmp_path / "m.toml").write_text(text)
    with pytest.raises(InputError, match="a study that is solved computes its own reactions; remove"):
        load(tmp_path / "m.toml")


def test_result_files_of_another_solver_take_its_printout_too(tmp_path: Path) -> None:
    """Pressure of 21 MPa in a quarter of a bore of 30 mm pushes with 21 · 30 = 630 N a mm each way."""
    files = ", ".join(f'"{FILES / f"cylinder-ngsolve-{number}.vtu"}"' for number in (1, 2, 3))
    text = f"[fields]\nfiles = [{files}]\nkind = 'plane strain'\nhot_spots = 1\n"
    text += "[material]\nyoung = 210000.0\npoisson = 0.3\n[equilibrium]\nfile = 'forces.csv'\n"
    (tmp_path / "barrel.toml").write_text(text)
    rows = "load,630.0,630.0\nreaction,-629.9,0.0\nreaction,{},-630.2\n"
    for right, passed in (("0.0", True), ("-5.0", False)):
        (tmp_path / "forces.csv").write_text("what,fx,fy\n" + rows.format(right))
        found = field_ladder(load(tmp_path / "barrel.toml"))
        findings = judge(found.ladder, found.study.quantities, facts_of(found.study), "barrel")
        assert equilibrium(findings)[0] is passed
        assert ("sound" in {v.word for v in findings.verdicts.values()}) is passed
