"""A ladder comes back from disk with the identical numbers; damage is said."""

import math
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.errors import InputError
from convergence.intake.ladder_file import is_ladder_file, read_ladder, write_ladder
from convergence.results import Ladder, Level

LADDER = Ladder(
    levels=(
        Level(0.1 + 0.2, 12, 70, 1e-3, {"peak": 1 / 3, "peak.x": -0.0, "a,b": 5e-324}, 81.1),
        Level(0.1, 48, 240, 0.25, {"peak": 2 / 3, "peak.x": 1e300, "only here": 1.0}),
    ),
    source="studies/lug.toml",
    fingerprint="abc123",
    remarks=("first, with a comma", "second\nline"),
    resolution={"peak": 0.05},
)


def test_the_same_ladder_comes_back(tmp_path: Path) -> None:
    path = tmp_path / "ladder.csv"
    write_ladder(LADDER, path)
    assert read_ladder(path) == LADDER
    assert path.read_text().startswith("# meshassay ladder, fingerprint abc123, levels 2\n")
    assert is_ladder_file(path)
    assert [file.name for file in tmp_path.iterdir()] == ["ladder.csv"]


def test_what_is_not_a_number_comes_back(tmp_path: Path) -> None:
    path = tmp_path / "ladder.csv"
    write_ladder(Ladder((Level(1.0, 0, 0, math.nan, {"u": math.nan, "v": math.inf}),), "t.csv"), path)
    level = read_ladder(path).levels[0]
    assert math.isnan(level.seconds) and math.isnan(level.values["u"]) and level.values["v"] == math.inf


def test_a_ladder_of_an_earlier_version_has_no_memory(tmp_path: Path) -> None:
    path = tmp_path / "ladder.csv"
    path.write_text(
        "# meshassay ladder, fingerprint f, levels 1\n"
        '# {"source": "s", "h_unit": "mm", "resolution": {}, "remarks": []}\n'
        "h,cells,dofs,seconds,u\n0.5,4,18,0.25,7.5\n# end\n"
    )
    assert read_ladder(path) == Ladder((Level(0.5, 4, 18, 0.25, {"u": 7.5}),), "s", "f", h_unit="mm")


@settings(deadline=None)
@given(st.lists(st.floats(allow_nan=False), min_size=1, max_size=4), st.text(min_size=1, max_size=5))
def test_any_number_and_name_come_back(
    tmp_path_factory: pytest.TempPathFactory, values: list[float], name: str
) -> None:
    path = tmp_path_factory.getbasetemp() / "any.csv"
    name = f"q{name}".replace("\r", "").replace("\0", "").encode("utf-8", "ignore").decode()
    ladder = Ladder(tuple(Level(1.0 / (k + 1), k, k, 0.5, {name: v}) for k, v in enumerate(values)), "s")
    write_ladder(ladder, path)
    assert read_ladder(path) == ladder


@pytest.mark.parametrize(
    ("damage", "message"),
    [
        (
            lambda text: text[: text.rindex("0.1,")] + "# end\n",
            "DIR: a damaged ladder: 1 levels of 2; remove it and run the study again",
        ),
        (lambda text: text[:-10], "DIR: a damaged ladder; remove it and run the study again"),
        (lambda text: text[:-1], "DIR: a damaged ladder; remove it and run the study again"),
        (
            lambda text: text.replace("70", "seventy"),
            "DIR: a damaged ladder; remove it and run the study again",
        ),
        (
            lambda text: text.replace("h,cells", "h,sells"),
            "DIR: a damaged ladder; remove it and run the study again",
        ),
        (lambda text: text.split("\n")[0], "DIR: a damaged ladder; remove it and run the study again"),
        (lambda text: "h,u\n1,2\n", "DIR:1: not a ladder written by a run; judge it as a table"),
    ],
)
def test_damage_is_said(tmp_path: Path, damage, message: str) -> None:  # type: ignore[no-untyped-def]
    path = tmp_path / "ladder.csv"
    write_ladder(LADDER, path)
    path.write_text(damage(path.read_text()))
    with pytest.raises(InputError) as caught:
        read_ladder(path)
    assert str(caught.value) == message.replace("DIR", str(path))


def test_a_failed_write_leaves_the_old_file(tmp_path: Path) -> None:
    path = tmp_path / "ladder.csv"
    write_ladder(LADDER, path)
    with pytest.raises(TypeError):
        write_ladder(Ladder((Level(1.0, 1, 1, 0.0, {"u": None}),), "s"), path)  # type: ignore[dict-item]
    assert read_ladder(path) == LADDER
