"""The table [map]: files of two independent programs against the exact field; its file and its faults."""

import json
from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.bodies.pointwise import PointwiseMap
from convergence.cli.main import outcome
from convergence.errors import InputError
from convergence.field_levels import field_ladder
from convergence.field_map import field_map, summaries
from convergence.judgement import facts_of
from convergence.study import load

FILES = Path(__file__).parent / "bodies" / "files"
# thick cylinder of 30 and 45 mm under 21 MPa inside, plane strain: Lamé 1852, Timoshenko & Goodier art. 28
PRESSURE, INNER, OUTER, YOUNG, POISSON = 21.0, 30.0, 45.0, 210000.0, 0.3
STUDY = """
title = "Barrel"
[fields]
files = [{files}]
kind = "plane strain"
hot_spots = 0
[material]
young = 210000.0
poisson = 0.3
[map]
{said}
"""


def study(folder: Path, program: str, said: str = "", count: int = 3) -> Path:
    names = ", ".join(json.dumps(str(file)) for file in sorted(FILES.glob(f"cylinder-{program}-*"))[-count:])
    path = folder / "barrel.toml"
    path.write_text(STUDY.format(files=names, said=said))
    return path


def mapped(path: Path) -> PointwiseMap:
    found = field_ladder(load(path))
    assert found.study.fields is not None and found.study.fields.map is not None
    corners = facts_of(found.study).corners or ()
    (one,) = field_map(found.study.fields.map, found.ladder.h, found.pieces, corners, False)
    return one


def exact(nodes: np.ndarray) -> dict[str, np.ndarray]:
    """Displacement along the radius, and the von Mises stress."""
    share = PRESSURE * INNER**2 / (OUTER**2 - INNER**2)
    radius = np.hypot(*nodes)
    hoop, radial = share * (1.0 + (OUTER / radius) ** 2), share * (1.0 - (OUTER / radius) ** 2)
    across = POISSON * (hoop + radial)
    moved = (1.0 + POISSON) / YOUNG * share * ((1.0 - 2.0 * POISSON) * radius + OUTER**2 / radius)
    squares = (hoop - radial) ** 2 + (hoop - across) ** 2 + (radial - across) ** 2
    return {"displacement magnitude": moved, "stress von_mises": np.sqrt(0.5 * squares)}


@pytest.mark.parametrize("program", ["ngsolve", "sfepy"])
def test_maps_of_two_programs_hold_the_exact_field(tmp_path: Path, program: str) -> None:
    """Intervals are made to hold 95 of 100 limits. The files have single precision, 1e-7 of the largest."""
    found = mapped(study(tmp_path, program))
    wanted = exact(found.finest.nodes[:, found.nodes])
    for field in found.fields:
        limit = wanted[field.reading.name]
        slack = 1e-7 * limit.max()
        held = (field.low - slack <= limit) & (limit <= field.high + slack)
        assert held.mean() >= 0.95, field.reading.name
        assert field.share("singular") == 0.0  # a ring has no corner that grows
    assert found.fields[0].share("sound") == 1.0  # of displacement, whatever is known of corners


def test_a_box_and_the_stresses_asked_for(tmp_path: Path) -> None:
    said = (
        'stresses = ["yy"]\nlow = [29.0, -1.0]\nhigh = [46.0, 5.0]\nscale = "local"\nstress_tolerance = 0.1'
    )
    found = mapped(study(tmp_path, "ngsolve", said))
    nodes = found.finest.nodes[:, found.nodes]
    assert 0 < nodes.shape[1] < found.finest.nodes.shape[1] and nodes[1].max() <= 5.0
    assert [field.reading.name for field in found.fields] == ["displacement magnitude", "stress yy"]
    (_, summary) = summaries([found], load(study(tmp_path, "ngsolve")).units)
    assert summary.nodes == nodes.shape[1] and summary.unit == "MPa" and summary.scale == "local"
    assert sum(summary.shares.values()) == pytest.approx(1.0)
    at = np.abs(nodes - np.array(summary.worst_place)[:, None]).max(axis=0).argmin()
    assert found.fields[1].relative[at] == summary.worst


def test_judge_writes_the_map_and_says_so(tmp_path: Path) -> None:
    out = tmp_path / "out"
    assert outcome(["judge", str(study(tmp_path, "ngsolve")), "--out", str(out)]) in (0, 1)
    told = json.loads((out / "findings.json").read_text())["map"]["stress von_mises"]
    back = meshio.read(out / "map.vtu")
    words = back.point_data["stress von_mises verdict 0 sound, 1 refine, 2 singular, 3 unproven"]
    assert told["nodes"] == len(words) and told["shares"]["sound"] == pytest.approx((words == 0).mean())
    assert (out / "figures" / "map-stress-von-mises.svg").is_file()
    assert "Pointwise map" in (out / "report.html").read_text()


@pytest.mark.parametrize(
    ("said", "count", "message"),
    [
        ("low = [0.0, 0.0]", 3, "unsuitable high"),
        ("low = [0.0, 0.0]\nhigh = [1.0, 0.0]", 3, "unsuitable high, got (1.0, 0.0)"),
        ('stresses = ["xz"]', 3, "not one of the choices"),
        ("", 2, "too few files for a map, got 2; 3 or more, each on a finer mesh"),
    ],
)
def test_faults_are_told(tmp_path: Path, said: str, count: int, message: str) -> None:
    with pytest.raises(InputError) as caught:
        load(study(tmp_path, "ngsolve", said, count))
    assert message in str(caught.value)


def test_only_result_files_are_mapped(tmp_path: Path) -> None:
    path = tmp_path / "arm.toml"
    path.write_text('title = "Arm"\n[table]\nfile = "arm.csv"\n[map]\n')
    with pytest.raises(InputError, match=r"\[?map"):
        load(path)
