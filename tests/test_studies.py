"""The studies of the demo scenario, from the file to the verdict, with the verdicts one would defend."""

import math
from pathlib import Path

import pytest

from convergence.climbing import climb
from convergence.field_levels import field_ladder
from convergence.intake.ladder_file import read_ladder
from convergence.judgement import facts_of, judge
from convergence.results import Findings
from convergence.study import load

STUDIES = Path(__file__).parents[1] / "studies"
EXPECTED = {
    "accumulator": {},
    "arm": {"root_peak": "singular"},
    "arm_cases": {},
    "arm_head": {},
    "arm_hook": {"sag_under_hook": "singular", "energy": "singular", "stress_at_hook": "singular"},
    "barrel_solid": {},
    "base_block": {},
    "base_plate": {},
    "bedded_block": {},
    "bracket_filleted": {},
    "bracket_sharp": {"corner_stress": "singular"},
    "bracket_solid": {"edge_stress": "singular"},
    "brake_disc": {},
    "cover_plate": {},
    "cracked_web": {"tip_stress": "singular"},
    "cutout": {"corner_stress": "singular"},
    "cylinder": {},
    "cylinder_eye": {"bore_stress": "refine"},
    "cylinder_liner": {},
    "cylinder_warm": {},
    "end_fitting": {"cone_corner": "singular"},
    "foot_results": {
        **{name: "refine" for name in ("fillet_peak", "hot_spot_1", "hot_spot_4")},
        "hot_spot_2": "singular",
    },
    "foot_bracket": {"edge_of_foot": "singular"},
    "hinge_pin": {},
    "lug": {"base_corner": "singular"},
    "lug_solid": {"hole_peak": "refine"},
    "patch": {},
    "pin_link": {},
    "roller_plate": {"weld_toe": "singular"},
    "side_panel": {},
    "test_beam": {},
    "tie_bar": {},
    "tie_rod": {},
    "transition_joint": {"corner_stress": "singular"},
}


def findings_of(name: str, folder: Path) -> dict[str, Findings]:
    """Return the findings of a study, or those of every load case as STUDY/CASE."""
    study = load(STUDIES / f"{name}.toml")
    if study.fields:
        read = field_ladder(study)
        return {name: judge(read.ladder, read.study.quantities, facts_of(read.study), study.title)}
    if study.ladder:
        list(climb(study, folder))
    found = {}
    for case, one in (study.cases or {"": study}).items():
        ladder = one.table or read_ladder(folder / case / "ladder.csv")
        found[one.name] = judge(ladder, one.quantities, facts_of(one), one.title)
    return found


def test_every_study_is_expected() -> None:
    assert {path.stem for path in STUDIES.glob("*.toml")} == set(EXPECTED)


@pytest.mark.slow
@pytest.mark.parametrize("name", EXPECTED)
def test_study(name: str, tmp_path: Path) -> None:
    """Quantities that are not named are sound; the intervals hold the exact values where these are known."""
    for full, findings in findings_of(name, tmp_path).items():
        words = {quantity: verdict.word for quantity, verdict in findings.verdicts.items()}
        assert words == {quantity: EXPECTED[name].get(quantity, "sound") for quantity in words}
        for quantity, exact in EXACT.get(full, {}).items():
            verdict = findings.verdicts[quantity]
            assert verdict.low <= exact <= verdict.high


# Lamé; Kirsch; Timoshenko & Goodier arts. 21, 29, 32 and 33 (Golovin); equilibrium of the loads
ARM_WEIGHT = 7.7e-5 * 12.0 * (240.0 * 1200.0**2 / 2.0 - 0.1 * 1200.0**3 / 3.0)
EXACT = {
    "arm": {"mast_reaction": 6.0 * 120.0 * 12.0},
    "arm_cases/lift": {"mast_moment": 6.0 * 120.0 * 12.0 * 1200.0 + ARM_WEIGHT},
    "arm_cases/swell": {"mast_moment": 9.6 * 120.0 * 12.0 * 1200.0 + ARM_WEIGHT},
    "arm_cases/stowed": {"mast_moment": ARM_WEIGHT},
    "barrel_solid": {"bore_hoop_stress": 54.6, "end_force": 0.6 * 21.0 * 0.25 * math.pi * 30.0**2},
    "arm_hook": {"mast_moment": 8000.0 * 1200.0},
    "base_block": {"bottom_force": 4.0 * 150.0**2},
    "bedded_block": {"bed_force": 20.0 * 60.0**2, "sinking_of_bed": -20.0 * 60.0**2 / (500.0 * 200.0**2)},
    "base_plate": {"hole_stress": 180.0, "hole_stress_direct": 180.0},
    "brake_disc": {"bore_stress": 3.3 / 8 * 78.5 * (2 + (60 / 160) ** 2 * (1 - 1.9 / 3.3))},
    "foot_results": {"root_moment": 6000.0 * 103.0},
    "cylinder_eye": {"weld_force": -15000.0},
    "foot_bracket": {"foot_force": -9000.0},
    "hinge_pin": {"axial_force": -100.0 * math.pi * 20.0**2},
    "cylinder": {"bore_hoop_stress": 54.6, "wall_force": 21.0 * 30.0},
    "lug": {"net_section_force": 25000.0 * 0.9396926207859084},
    "lug_solid": {"base_force": -25000.0},
    "patch": {"inner_stress": 300.0},
    "tie_bar": {"neck_force": 18000.0},
    "tie_rod": {"pull_on_head": -(40000.0 + 7.7e-5 * 600.0 * 2400.0), "stress_at_eye": 40000.0 / 300.0},
    "arm_head": {
        "inner_stress": 51.979100717,
        "outer_stress": -31.187460430,
        "energy": 619.654405403,
        "opening": 0.12393088,
    },
    # own computation: u = A r + B/r in each layer, Hooke's law with thermal strain, four conditions solved
    "cylinder_warm": {
        "liner_hoop": -28.40205139551,
        "barrel_hoop": 79.03881772572,
        "bore_growth": 0.0391747706579,
        "energy": 72.46217805074,
    },
    "cracked_web": {"intensity": 1.187635 * 50.0 * math.sqrt(math.pi * 30.0)},  # own computation, p = 8
    "cylinder_liner": {"liner_hoop": 29.510926408, "barrel_hoop": 47.439474},
    "test_beam": {"root_stress": -6000.0 * 480.0 * 60.0 / (10.0 * 120.0**3 / 12.0)},
}
