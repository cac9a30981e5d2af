"""The bank on disk and the packaged one: complete, known limits, no part of the demo studies."""

import inspect
import tomllib
from pathlib import Path

import numpy as np
import pytest

from convergence import rooms
from convergence.calibration.bank import BANK, UNSEEN, read_bank, write_bank
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.making import mapped_cases
from convergence.calibration.mapped_ladders import mapped_ladders
from convergence.calibration.sub_ladders import BETTER_KNOWN

STUDIES = Path(__file__).parents[2] / "studies"


def test_written_and_read_again_it_is_the_same(packaged, tmp_path: Path) -> None:
    """Twelve digits are written: what was read from them is written with the same bytes again."""
    some = packaged[::40]
    first, second = tmp_path / "first.csv.gz", tmp_path / "second.csv.gz"
    write_bank(some, first)
    read = read_bank(first)
    write_bank(reversed(read), second)
    assert first.read_bytes() == second.read_bytes()
    for one, other in zip(sorted(some, key=str), sorted(read, key=str), strict=True):
        assert np.array_equal(one.f, other.f) and np.array_equal(one.h, other.h)
        assert (one.kind, one.degree, one.singular, one.exponent) == (
            *(other.kind, other.degree, other.singular, other.exponent),
        )


def test_the_packaged_bank_is_broad_enough(packaged) -> None:
    assert len({one.family for one in packaged}) >= 16
    assert {one.kind for one in packaged} == {
        *("energy", "displacement", "rotation", "reaction", "resultant"),
        *("point_stress", "peak_stress", "intensity"),
    }
    assert {one.source for one in packaged} == {"remeshed", "nested", "perturbed", "similar"}
    assert {one.dimension for one in packaged} >= {2, 3}
    assert {one.degree for one in packaged} == {1, 2}
    assert BANK.stat().st_size < 2_000_000


def test_every_ladder_of_the_bank_is_sound(packaged) -> None:
    """Sizes are measured: a mesher may answer a finer order with a coarser mesh, but not on the whole."""
    for one in packaged:
        assert one.h[-1] < one.h[0] and one.h.min() > 0.0 and len(one.h) == len(one.f) >= 3, one
        assert np.isfinite(one.f).all(), one
        assert np.isfinite(one.limit) != one.singular, one
        assert one.singular or one.bound >= 0.0, one


def test_no_ladder_is_of_round_off(packaged) -> None:
    """The maker's bar is 1e-4 of a mean over the part; beside the largest value, a peak, 1e-6 is ample."""
    for ladders in (packaged, read_bank(UNSEEN)):
        largest: dict[tuple[str, str, str], float] = {}
        for one in ladders:
            name = one.family, one.case, one.kind
            largest[name] = max(largest.get(name, 0.0), float(np.abs(one.f).max()))
        for one in ladders:
            assert np.abs(one.f).max() > 1e-6 * largest[one.family, one.case, one.kind], one


def test_most_limits_are_known_well_enough_to_judge_by(packaged) -> None:
    """The aim is that most coarsest values can be judged: their error is twenty bounds or more."""
    finite = [one for one in packaged if not one.singular]
    known = [abs(one.f[0] - one.limit) >= BETTER_KNOWN * one.bound for one in finite]
    assert np.mean(known) > 0.9


def test_no_mapped_case_is_a_demo_study() -> None:
    """A case has the arguments of no study of its model, the defaults filled in, loads aside."""
    studies = [tomllib.loads(file.read_text(encoding="utf-8")) for file in sorted(STUDIES.glob("*.toml"))]
    models = [study["model"] for study in studies if "model" in study]
    assert len(models) > 10
    cases = mapped_cases()
    for model in models:
        name = model["name"]
        shown = _sizes(name, {key: value for key, value in model.items() if key != "name"})
        for case in cases:
            if case.model == name:
                assert _sizes(name, case.arguments) != shown, (case.name, name)


def _sizes(model: str, arguments) -> dict[str, object]:
    """Return all arguments that are numbers or words, by name."""
    parameters = inspect.signature(rooms.find("models", model)).parameters.values()
    filled = {one.name: one.default for one in parameters} | dict(arguments)
    return {name: value for name, value in filled.items() if isinstance(value, int | float | str)}


def test_the_check_finds_a_case_that_is_a_study() -> None:
    study = tomllib.loads((STUDIES / "lug.toml").read_text(encoding="utf-8"))["model"]
    name = study.pop("name")
    assert _sizes(name, study) == _sizes(name, dict(study))
    assert _sizes(name, {**study, "thickness": 1.234}) != _sizes(name, study)


@pytest.mark.parametrize("name", ["h", "f"])
def test_arrays_keep_twelve_digits(packaged, name: str, tmp_path: Path) -> None:
    path = tmp_path / "one.csv.gz"
    write_bank(packaged[:1], path)
    (one,) = read_bank(path)
    assert np.allclose(getattr(one, name), getattr(packaged[0], name), rtol=1e-11, atol=0.0)


@pytest.mark.slow
def test_a_case_made_again_is_that_of_the_bank(packaged) -> None:
    """Rods are the cheapest: twelve digits are kept, the solver is direct, so 1e-9 is ample."""
    case = next(case for case in mapped_cases() if case.model == "tie_rod")
    again = list(mapped_ladders(case))
    kept = {_name(one): one for one in packaged if one.family == case.family}
    assert len(again) > 20
    for one in again:
        other = kept[_name(one)]
        assert np.allclose(one.f, other.f, rtol=1e-9, atol=0.0) and np.allclose(one.h, other.h)
        assert one.limit == pytest.approx(other.limit, rel=1e-9, nan_ok=True)


def _name(one: KnownLadder) -> tuple[str, str, str, int]:
    return one.case, one.label, one.shape, one.degree
