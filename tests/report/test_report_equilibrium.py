"""The figure and the section of our own loads and reactions: arrows to scale, labels, sums, what is left."""

import json
import re
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from convergence.dimensions import SYSTEMS, Units
from convergence.fields import Fields, Forces, load_fields
from convergence.report import _acting, _scene
from convergence.report.document import write_report
from convergence.report.figures_equilibrium import MOST_FACES, _arms, equilibrium_figure
from convergence.report.sections_equilibrium import equilibrium_section
from convergence.results import Check, Findings

# 1 kN down at the end of an arm of 120 from the upright's left side, held there with -1e-9 of round-off
HELD = Forces(
    is_load=np.array([True, False]),
    names=np.array(["<b>hook</b>", "wall"]),
    place=np.array([[120.0, 0.0], [30.0, 60.0]]),
    force=np.array([[1e-9, -2e-9], [-1000.0, 1000.0]]),
    moment=np.array([[0.0, 120_000.0]]),
)


@pytest.fixture
def drawn(fields: list[Fields], units: Units) -> Callable[[Forces], str]:
    def of(forces: Forces) -> str:
        return equilibrium_figure(fields, forces, np.eye(2), units).svg

    return of


def test_arrows_have_names_sizes_and_sums(fields: list[Fields], units: Units) -> None:
    picture = equilibrium_figure(fields, HELD, np.eye(2), units)
    for words in ("&lt;b&gt;hook&lt;/b&gt;", "wall", "1000 N", "M 120000 N mm"):
        assert f"{words}</text>" in picture.svg
    assert "loads, in all (0, -1000) N" in picture.svg
    assert "reactions, in all (0, 1000) N" in picture.svg
    assert "longest arrow is 1000 N; what is left of their sum is 1e-9 N" in picture.caption
    assert "Round arrows" in picture.caption
    assert picture.hints[1] == "reaction wall (0, 1000) N, moment 120000 N mm"
    assert picture == equilibrium_figure(fields, HELD, np.eye(2), units), "the same input, the same bytes"


def test_many_actions_have_no_labels(drawn: Callable[[Forces], str]) -> None:
    many = Forces(
        is_load=np.arange(30) < 29,
        names=np.array([f"bolt {number}" for number in range(30)]),
        place=np.array([np.linspace(0.0, 120.0, 30), np.zeros(30)]),
        force=np.array([np.zeros(30), np.where(np.arange(30) < 29, -1.0, 29.0)]),
        moment=np.zeros((1, 30)),
    )
    assert "bolt" not in drawn(many)
    assert "bolt 28</text>" in drawn(Forces(*(part[..., -3:] for part in vars(many).values())))


def test_the_outline_is_that_of_a_light_mesh(fields: list[Fields], units: Units) -> None:
    """A mesh of 300² 3/4 cells is too fine; without it the figure is the same."""
    heavy = replace(fields[-1], cells=np.tile(fields[-1].cells, 4))
    assert heavy.cells.shape[1] > MOST_FACES
    light = equilibrium_figure(fields, HELD, np.eye(2), units)
    assert equilibrium_figure([*fields, heavy], HELD, np.eye(2), units).svg == light.svg


@pytest.mark.parametrize("moment", [-3.0, 5.0])
def test_a_round_arrow_turns_as_its_moment(moment: float) -> None:
    """From the first arm to the second is the short way: counter-clockwise for a positive moment."""
    across, up = _arms(np.array([moment]), np.eye(2))
    assert np.sign(across[0] * up[1] - across[1] * up[0]) == np.sign(moment)
    view = np.array([[0.6, 0.0, -0.8], [0.0, 1.0, 0.0], [0.8, 0.0, 0.6]])
    for axis in np.vstack((np.eye(3), [[0.0, 1.0, 0.01]])):
        across, up = _arms(moment * axis, view)
        seen = across[0] * up[1] - across[1] * up[0]
        towards = (view @ axis / np.linalg.norm(axis))[2]
        assert np.isclose(seen, np.sign(moment) * towards, rtol=0.0, atol=1e-12)


def test_a_solid_is_drawn_in_the_view_of_its_stress(cube: Callable[[int], Fields], units: Units) -> None:
    field = cube(4)
    forces = Forces(
        is_load=np.array([True, False]),
        names=np.array(["top", "floor"]),
        place=np.array([[0.5, 0.5], [1.0, 0.0], [0.5, 0.5]]),
        force=np.array([[10.0, -10.0], [0.0, 0.0], [0.0, 0.0]]),
        moment=np.array([[0.0, 0.0], [0.0, 0.0], [0.0, 10.0]]),
    )
    picture = equilibrium_figure([field], forces, _scene.turn(field), units)
    assert "longest arrow in space is 10 N" in picture.caption and "M 10 N mm</text>" in picture.svg
    assert all(f">{axis}</text>" in picture.svg for axis in "xyz")
    # about the origin the load turns by -10 about z, the reaction by 10
    assert np.allclose(_acting.sums(forces).left, 0.0, atol=1e-15)


def test_a_ring_and_a_rod_have_no_moments(fields: list[Fields], units: Units) -> None:
    ring = replace(HELD, moment=np.zeros((0, 2)))
    assert "whole ring" in equilibrium_figure(fields, ring, np.eye(2), units).caption
    rod = Forces(HELD.is_load, HELD.names, HELD.place[:1], np.array([[5.0, -5.0]]), np.zeros((0, 2)))
    picture = equilibrium_figure(fields, rod, np.eye(2), units)
    assert "loads, in all 5 N" in picture.svg and "ring" not in picture.caption


def test_the_table_has_sums_and_what_is_left(
    findings: Findings, fields: list[Fields], units: Units, on_page: Callable[..., str]
) -> None:
    """Moments of the sums about the origin: -120 · 1000 of the load, 120,000 of the support."""
    field = replace(fields[-1], forces=HELD)
    picture = equilibrium_figure(fields, HELD, np.eye(2), units)
    checked = replace(findings, checks=(Check("equilibrium", True, "It balances."),))
    page = on_page(equilibrium_section(checked, field, units, picture))
    cells = [re.sub("<.*?>", "", row).strip() for row in re.findall("<t[dh][^>]*>.*?</t[dh]>", page)]
    assert "It balances." in page and "Mz [N mm]" in cells
    assert cells[cells.index("&lt;b&gt;hook&lt;/b&gt;") + 1 :][:5] == ["load", "0", "-1000", "0", "(120, 30)"]
    assert cells[cells.index("all loads") + 2 :][:3] == ["0", "-1000", "-120000"]
    assert cells[cells.index("all reactions") + 2 :][:3] == ["0", "1000", "120000"]
    assert cells[cells.index("all together") + 2 :][:2] == ["-1e-9", "0"]


def test_the_report_has_the_section_where_something_acts(
    findings: Findings, fields: list[Fields], tmp_path: Path
) -> None:
    about = {"study_text": "", "study_name": "s", "command": "c", "date": "d"}
    units = SYSTEMS["mm, N, MPa"]
    acting = [*fields[:1], replace(fields[1], forces=HELD)]
    for given, there in ((acting, True), (fields[:2], False)):
        (path,) = write_report(findings, tmp_path, fields=given, units=units, **about)
        assert ('href="#balance"' in path.read_text()) is there
        assert (tmp_path / "figures" / "equilibrium.png").is_file() is there
        assert (json.loads((tmp_path / "findings.json").read_text())["acting"] is not None) is there


def test_findings_have_what_acts_as_numbers(fields: list[Fields], units: Units) -> None:
    """The same as the table: without round-off in the rows, with it in what is left."""
    found = _acting.acting_object([replace(fields[-1], forces=HELD)], units)
    assert found is not None and _acting.acting_object(fields, units) is None
    assert found["units"] == {"force": "N", "moment": "N mm", "place": "mm"}
    assert found["rows"] == [
        {"on": "<b>hook</b>", "what": "load", "place": [120, 30], "force": [0, -1000], "moment": [0]},
        {"on": "wall", "what": "reaction", "place": [0, 60], "force": [0, 1000], "moment": [120_000]},
    ]
    assert found["sums"]["loads"]["moment"] == pytest.approx([-120_000], rel=1e-12)
    assert found["sums"]["left"]["force"] == [-1e-9, 0]


def test_forces_are_kept_with_the_fields(fields: list[Fields], tmp_path: Path) -> None:
    path = tmp_path / "level-0.npz"
    fields[0].save(path)
    assert load_fields(path).forces is None
    replace(fields[0], forces=HELD).save(path)
    kept = load_fields(path)
    assert kept.forces is not None and np.array_equal(kept.points, fields[0].points)
    for name, part in vars(HELD).items():
        assert np.array_equal(getattr(kept.forces, name), part)
