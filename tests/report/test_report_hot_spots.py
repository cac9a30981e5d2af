"""The table of hot spots: place, value on every mesh, interval, verdict, averaging, corner."""

from dataclasses import replace

import pytest

from convergence.report.sections_hot_spots import hot_spots, hot_spots_section
from convergence.results import Findings, Level


@pytest.fixture
def spotted(findings: Findings) -> Findings:
    """The first two quantities as hot spots, the first one on the inner corner of the part."""
    corner = (findings.facts.corners or ())[0]
    first, second = findings.quantities[:2]
    names = {first.name: "hot_spot_1", second.name: "hot_spot_2"}
    quantities = tuple(replace(q, name=names.get(q.name, q.name)) for q in findings.quantities)
    levels = []
    for number, level in enumerate(findings.ladder.levels):
        values = {names.get(name, name): value for name, value in level.values.items()}
        spot = {"hot_spot_1": 100.0 + 20.0 * number, "hot_spot_1.spread": 0.21}
        place = dict(zip(("hot_spot_1.x", "hot_spot_1.y"), corner.path[0], strict=True))
        levels.append(Level(level.h, level.cells, level.dofs, 0.0, {**values, **spot, **place}))
    verdicts = {names.get(name, name): verdict for name, verdict in findings.verdicts.items()}
    kinds = {names.get(name, name): kind for name, kind in findings.facts.kinds.items()}
    return replace(
        findings,
        quantities=quantities,
        ladder=replace(findings.ladder, levels=tuple(levels)),
        verdicts=verdicts,
        facts=replace(findings.facts, kinds={**kinds, "hot_spot_1": "peak_stress"}),
    )


def test_the_table(spotted: Findings, on_page) -> None:
    assert [quantity.name for quantity in hot_spots(spotted)] == ["hot_spot_1", "hot_spot_2"]
    shown = on_page(hot_spots_section(spotted))
    corner = (spotted.facts.corners or ())[0]
    assert f"corner {corner.name}" in shown and "21 %" in shown
    for number in range(1, 1 + len(spotted.ladder.levels)):
        assert f"mesh {number}" in shown
        assert f"{100 + 20 * (number - 1)}" in shown
    assert "nan" not in shown and 'href="#quantity-1"' in shown


def test_no_section_without_spots(findings: Findings) -> None:
    assert hot_spots(findings) == []
