"""What is marked on pictures of the part: numbered peaks, hatched zones, shades that print in grey."""

import re
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest
from matplotlib.colors import LinearSegmentedColormap

from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.mapped import MappedField
from convergence.report._marks import peaks
from convergence.report.figures_error import error_map
from convergence.report.figures_map import COLOURS, map_figure
from convergence.report.figures_stress import stress_figure
from convergence.report.sections_fields import stress_section
from convergence.results import Findings


@pytest.fixture
def mapped(fields: list[Fields]) -> MappedField:
    """Half-widths of a tenth to ten times the accepted 5 %, on the second mesh."""
    relative = 0.05 * np.geomspace(0.1, 10.0, fields[1].points.shape[1])
    shares = {"sound": 0.5, "refine": 0.5}
    numbers = (0.05, 0.5, 1.0, (0.0, 0.0), 0, 0)
    return MappedField("s", "MPa", 0.05, "largest", len(relative), 1.0, shares, *numbers, relative)


def test_peaks_at_one_place_share_a_mark(findings: Findings) -> None:
    assert [(peak.number, peak.names, peak.place) for peak in peaks(findings, 2)] == [
        (1, ("fillet_stress",), (62.0, 60.0)),
        (2, ("corner_stress",), (60.0, 60.0)),
    ]
    level = findings.ladder.levels[-1]
    moved = replace(level, values={**level.values, "fillet_stress.x": 60.0})
    together = replace(findings, ladder=replace(findings.ladder, levels=(moved,)))
    assert [peak.names for peak in peaks(together, 2)] == [("fillet_stress", "corner_stress")]


def test_hot_spots_have_the_numbers_of_their_table(findings: Findings) -> None:
    """The first quantity is no hot spot and comes after hot spot 3."""
    level = findings.ladder.levels[-1]
    values = {name.replace("corner_stress", "hot_spot_3"): value for name, value in level.values.items()}
    quantities = [replace(q, name=q.name.replace("corner_stress", "hot_spot_3")) for q in findings.quantities]
    spotted = replace(
        findings,
        quantities=tuple(quantities),
        ladder=replace(findings.ladder, levels=(replace(level, values=values),)),
    )
    found = peaks(spotted, 2)
    assert [(peak.number, peak.names) for peak in found] == [(3, ("hot_spot_3",)), (4, ("fillet_stress",))]


def test_numbers_of_figure_and_table_agree(
    findings: Findings, fields: list[Fields], on_page: Callable[..., str]
) -> None:
    picture = stress_figure(fields[1], np.eye(2), findings, "MPa")
    table = on_page(stress_section(findings, picture))
    for number, name in ((1, "fillet_stress"), (2, "corner_stress")):
        assert f"{number}: place of {name}</text>" in picture.svg and f">{number}</text>" in picture.svg
        assert re.search(f'<th scope="row">{number}</th>.*?{name}', table, re.DOTALL)


def test_singular_zones_are_hatched_on_every_map(
    findings: Findings, fields: list[Fields], mapped: MappedField, units: Units
) -> None:
    field, flat = fields[1], np.eye(2)
    for corners in (findings.facts.corners or (), ()):
        told = replace(findings, facts=replace(findings.facts, corners=corners))
        for picture in (
            stress_figure(field, flat, told, "MPa"),
            error_map(field, flat, units, corners=corners),
            map_figure(field, flat, mapped, "m", corners),
        ):
            assert picture is not None
            assert ("Hatched: singular corners" in picture.caption) == bool(corners)
            assert ("<pattern" in picture.svg) == bool(corners)


def test_shades_of_the_map_are_darker_the_wider() -> None:
    """The weights of red, green and blue in a grey are those of ITU-R BT.601."""
    colours = LinearSegmentedColormap.from_list("width", COLOURS)(np.linspace(0.0, 1.0, 101))
    greys = colours[:, :3] @ (0.299, 0.587, 0.114)
    assert np.all(np.diff(greys) < 0.0)
    assert greys[49] - greys[51] > 0.1, "a step at the tolerance"
