"""Studies of result files: two independent programs next to exact values, and what bad files are told."""

import json
from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.errors import InputError
from convergence.field_levels import FieldLadder, field_ladder
from convergence.judgement import facts_of, judge
from convergence.results import Findings
from convergence.study import load

FILES = Path(__file__).parent / "bodies" / "files"
# thick cylinder of 30 and 45 mm under 21 MPa inside: Lamé 1852, Timoshenko & Goodier art. 28
PRESSURE, INNER, OUTER, YOUNG, POISSON = 21.0, 30.0, 45.0, 210000.0, 0.3
HOOP = PRESSURE * (OUTER**2 + INNER**2) / (OUTER**2 - INNER**2)
STRAIN = (1.0 + POISSON) / YOUNG
GROWTH = STRAIN * PRESSURE * INNER * ((1 - 2 * POISSON) * INNER**2 + OUTER**2) / (OUTER**2 - INNER**2)
# radial stress -p and hoop stress at the bore, across ν (hoop - p): plane strain
ACROSS = POISSON * (HOOP - PRESSURE)
MISES = np.sqrt(0.5 * ((HOOP + PRESSURE) ** 2 + (HOOP - ACROSS) ** 2 + (ACROSS + PRESSURE) ** 2))
ENERGY = 0.5 * PRESSURE * (0.5 * np.pi * INNER) * GROWTH  # of the quarter, by Clapeyron
CYLINDER = """
title = "Barrel"
[fields]
files = [{files}]
kind = "plane strain"
hot_spots = {spots}
[material]
young = 210000.0
poisson = 0.3
"""
QUANTITIES = """
[quantities.bore_hoop]
measure = "stress"
at = [30.0, 0.0]
component = "yy"
relative_tolerance = 0.02
[quantities.bore_growth]
measure = "displacement"
at = [30.0, 0.0]
component = "x"
relative_tolerance = 0.01
[quantities.energy]
measure = "strain_energy"
relative_tolerance = 0.01
"""
SUPPORTED = """
[boundaries.left]
plane = [0.0, 30.0]
normal = [1.0, 0.0]
[boundaries.bottom]
plane = [30.0, 0.0]
normal = [0.0, 1.0]
[boundaries.bore]
circle = [0.0, 0.0]
radius = 30.0
[supports.left]
boundary = "left"
x = 0.0
[supports.bottom]
boundary = "bottom"
y = 0.0
[loads.oil]
kind = "pressure"
boundary = "bore"
value = {pressure}
"""


def series(program: str, count: int) -> list[Path]:
    return sorted(FILES.glob(f"cylinder-{program}-*"))[:count]


def study(folder: Path, files: list[Path], more: str = "", spots: int = 0) -> Path:
    names = ", ".join(json.dumps(str(file)) for file in files)
    path = folder / "barrel.toml"
    path.write_text(CYLINDER.format(files=names, spots=spots) + more)
    return path


def judged(path: Path) -> tuple[FieldLadder, Findings]:
    found = field_ladder(load(path))
    return found, judge(found.ladder, found.study.quantities, facts_of(found.study), "")


@pytest.mark.parametrize(("program", "count"), [("ngsolve", 4), ("sfepy", 3)])
def test_intervals_of_two_programs_hold_the_exact_values(program: str, count: int, tmp_path: Path) -> None:
    """Quadratic curved triangles of one, bilinear quadrilaterals of the other: the same exact answer."""
    _, findings = judged(study(tmp_path, series(program, count), QUANTITIES))
    exact = {"bore_hoop": HOOP, "bore_growth": GROWTH, "energy": ENERGY}
    for name, value in exact.items():
        verdict = findings.verdicts[name]
        assert verdict.low <= value <= verdict.high
        assert verdict.word in (("sound", "refine") if name == "bore_hoop" else ("sound",))


def test_without_quantities_the_usual_ones_and_hot_spots(tmp_path: Path) -> None:
    """The peak stands on the bore; no corner is re-entrant, and the polygon of the bore makes none."""
    found, findings = judged(study(tmp_path, series("ngsolve", 4), spots=3))
    names = [quantity.name for quantity in findings.quantities]
    assert names[:2] == ["largest_displacement", "peak_von_mises"]
    assert "hot_spot_1" in names and "peak_in_files" not in names
    assert findings.facts.corners == () and not findings.facts.all_corners
    peak = findings.verdicts["peak_von_mises"]
    assert peak.low <= MISES <= peak.high
    values = found.ladder.levels[-1].values
    assert np.hypot(values["hot_spot_1.x"], values["hot_spot_1.y"]) == pytest.approx(INNER, rel=1e-6)
    assert 0.0 < values["hot_spot_1.spread"] < 0.2
    assert len(found.fields) == 4


def test_the_files_own_stress_is_judged_beside_the_recomputed_one(tmp_path: Path) -> None:
    """One value a cell, at its middle: below the peak on the bore by what the stress falls over half a cell.

    The stress of the file has xx, yy, xy; in plane strain the one across follows from them.
    """
    found, findings = judged(study(tmp_path, series("sfepy", 3)))
    check = next(check for check in findings.checks if check.name == "file_stress")
    assert check.passed is True and "one value a cell" in check.finding
    values = found.ladder.column("peak_in_files")
    middle = INNER + 0.5 * 15.0 / 16.0
    there = MISES * (INNER / middle) ** 2  # but for the mean stress the deviator falls like 1/r²
    assert values[-1] == pytest.approx(there, rel=0.01)


def test_supports_and_loads_of_the_study_are_held_against_the_files(tmp_path: Path) -> None:
    path = study(tmp_path, series("sfepy", 3), SUPPORTED.format(pressure=21.0))
    _, findings = judged(path)
    check = next(check for check in findings.checks if check.name == "given_field")
    assert check.passed is True and findings.facts.all_corners
    (tmp_path / "wrong").mkdir()
    path = study(tmp_path / "wrong", series("sfepy", 3), SUPPORTED.format(pressure=12.0))
    _, findings = judged(path)
    check = next(check for check in findings.checks if check.name == "given_field")
    assert check.passed is False
    assert {verdict.word for verdict in findings.verdicts.values()} == {"unproven"}


def split(file: Path, folder: Path) -> Path:
    """Write a file with every quadrilateral in one half of the body cut into two triangles."""
    raw = meshio.read(file)
    cells = raw.cells_dict["quad"]
    middles = raw.points[cells].mean(axis=1)
    cut = cells[middles[:, 0] > middles[:, 1]]
    blocks = [
        ("quad", cells[middles[:, 0] <= middles[:, 1]]),
        ("triangle", np.concatenate([cut[:, [0, 1, 2]], cut[:, [0, 2, 3]]])),
    ]
    path = folder / f"mixed-{file.stem}.vtu"
    meshio.write(path, meshio.Mesh(raw.points, blocks, point_data={"u": raw.point_data["u"]}))
    return path


def test_mixed_meshes(tmp_path: Path) -> None:
    """Triangles and quadrilaterals: the peak of both, a place in either, the energy of all."""
    files = [split(file, tmp_path) for file in series("sfepy", 3)]
    found, findings = judged(study(tmp_path, files, QUANTITIES, spots=2))
    assert findings.facts.corners is None
    assert [level.cells for level in found.ladder.levels] == [3 * 4**n * 16 for n in range(3)]
    whole, _ = judged(study(tmp_path, series("sfepy", 3), QUANTITIES))
    energies = found.ladder.column("energy"), whole.ladder.column("energy")
    assert np.abs(energies[0] / energies[1] - 1.0)[-1] < 0.01
    for name, value in {"bore_growth": GROWTH, "energy": ENERGY}.items():
        assert findings.verdicts[name].low <= value <= findings.verdicts[name].high
    fields = found.fields[-1]
    assert fields.cells.shape == (4, 768) and fields.points.shape[1] == fields.von_mises.shape[0]


def test_mixed_meshes_refuse_what_needs_one_outline(tmp_path: Path) -> None:
    files = [split(file, tmp_path) for file in series("sfepy", 3)]
    more = SUPPORTED.format(pressure=21.0)
    lines = faults(study(tmp_path, files, more))
    assert len(lines) == 3 and all("has several kinds of cells" in line for line in lines)
    own = '[quantities.f]\nmeasure = "cut_force"\nat = [35.0, 0.0]\nnormal = [0.0, 1.0]\ncomponent = "y"\n'
    assert "the meshes have several kinds of cells" in faults(study(tmp_path, files, own))[0]


def test_files_in_another_order(tmp_path: Path) -> None:
    files = series("sfepy", 3)
    straight, _ = judged(study(tmp_path, files, QUANTITIES))
    turned, _ = judged(study(tmp_path, files[::-1], QUANTITIES))
    assert [level.values for level in turned.ladder.levels] == [
        level.values for level in straight.ladder.levels
    ]
    assert any("put in order" in remark for remark in turned.ladder.remarks)


def faults(path: Path) -> list[str]:
    with pytest.raises(InputError) as caught:
        field_ladder(load(path))
    return str(caught.value).replace(f"{path.parent}/", "").splitlines()


def test_bad_files_are_named_all_at_once(tmp_path: Path) -> None:
    good = series("sfepy", 3)
    raw = meshio.read(good[0])
    raw.point_data = {"temperature": np.zeros(len(raw.points))}
    raw.write(tmp_path / "bare.vtu")
    raw = meshio.read(good[1])
    raw.point_data = {"u": np.zeros((len(raw.points), 3))}
    raw.point_data["u"][7, 1] = np.nan
    raw.write(tmp_path / "nan.vtu")
    lines = faults(study(tmp_path, [tmp_path / "bare.vtu", tmp_path / "nan.vtu", good[2]]))
    assert lines == [
        "bare.vtu: no field that is plainly the displacement; "
        "write the displacement at the nodes (fields: temperature)",
        "nan.vtu: the displacement 'u' is not finite at 1 nodes (from 0: 7); write a number at every node",
    ]


def test_a_part_that_does_not_move(tmp_path: Path) -> None:
    """As in the first step of a series in time: nothing is judged sound by mistake."""
    files = []
    for file in series("sfepy", 2):
        raw = meshio.read(file)
        raw.point_data = {"u": np.zeros((len(raw.points), 3))}
        files.append(tmp_path / f"{file.stem}.vtu")
        raw.write(files[-1])
    lines = faults(study(tmp_path, files))
    assert len(lines) == 2 and all("is zero at every node; give a file" in line for line in lines)


def test_a_series_needs_cells_of_one_kind(tmp_path: Path) -> None:
    lines = faults(study(tmp_path, [series("sfepy", 1)[0], series("ngsolve", 4)[3]]))
    assert len(lines) == 1 and "cells of another kind: quadrilaterals of degree 1" in lines[0]


def test_names_that_are_kept(tmp_path: Path) -> None:
    more = '[quantities.hot_spot_1]\nmeasure = "strain_energy"\n'
    assert faults(study(tmp_path, series("sfepy", 2), more)) == [
        "barrel.toml:10: quantities.hot_spot_1: a name that result files keep for themselves, "
        "got 'hot_spot_1'; take another"
    ]


def test_a_field_that_is_named_but_not_there(tmp_path: Path) -> None:
    path = study(tmp_path, series("sfepy", 3))
    path.write_text(path.read_text().replace("hot_spots", 'displacement = "uu"\nhot_spots'))
    lines = faults(path)
    assert len(lines) == 3 and all("no displacement 'uu' at the nodes; did you mean 'u'?" in x for x in lines)
