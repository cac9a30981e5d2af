"""The page of the bench from made-up results, the refusal without its peer, and a small study of its own."""

import sys
from dataclasses import replace
from pathlib import Path

import pytest

from convergence.bench import __main__ as bench
from convergence.bench import maps
from convergence.bench.ours import study
from convergence.bench.page import Pair, Solo, write

OURS = {"unknowns": 1_000_000, "lived": 4.0, "peak": 0.9}
PEER = {"assembly": 2.0, "solution": 6.0, "peak": 1.8}
RECOVERED = {"recovery": 1.0, "solution": 2.0, "iteration": 0.1, "floor": 0.05, "triad": 20.0}
RUN = {"run": 6.0, "solving": 4.0, "unknowns": 1_000_000}
STEPS = {"reading": 4.0, "recovery": 10.0, "judging": 20.0, "writing": 5.0}
MAPPED = ({"seconds": 80.0}, STEPS | {"lived": 40.0, "nodes": 1_080_793, "peak": 2.5})
HELD = [
    {"model": "curved_bar", "shape": "triangle", "degree": degree, "field": "stress von_mises"}
    | {"nodes": 1000, "held": held}
    for degree, held in ((1, 990), (2, 960))
]


def page(tmp_path: Path, solo: Solo) -> str:
    pairs = [Pair("triangles", 5, "cholesky", OURS | {"lived": lived}, PEER) for lived in (4.0, 2.0, 8.0)]
    write(tmp_path, "Load of the machine before measuring: 0.1.", pairs, [], solo)
    return (tmp_path / "performance.md").read_text(encoding="utf-8")


def test_ratios_are_medians_with_their_spread(tmp_path: Path) -> None:
    text = page(
        tmp_path,
        Solo(
            [RECOVERED],
            [RUN, RUN | {"run": 5.0}, RUN | {"run": 8.0}],
            [("triangles", OURS, OURS | {"lived": 5.0})],
            [MAPPED],
            HELD,
        ),
    )
    assert (
        "| triangles | 5 | 1,000,000 | cholesky | 4.0 | 8.0 | 0.50 [0.25 … 1.00] | 0.90 | 1.80 | 0.50 |"
        in text
    )
    assert "0.50 of the 2.0 s of that level" in text
    assert "100 ms, 2.0 times the 50 ms" in text
    assert "a run adds 0.50 [0.25 … 1.00] of the solving, in the median of 3, every" in text
    assert "triangles 1.25 [1.25 … 1.25]" in text
    assert "1,080,793 nodes" in text and "0.50 of the 80.0 s" in text and "2.50 GB" in text
    assert (
        "97.5% lie in their" in text
        and "96.0%, stress von mises of the curved bar, triangles of degree 2" in text
    )
    assert {file.name for file in tmp_path.iterdir()} == {
        *("performance.md", "performance-growth.svg", "performance-memory.svg")
    }


def test_the_page_says_that_nothing_was_compiled(tmp_path: Path) -> None:
    assert "numba is not installed here" in page(tmp_path, Solo([RECOVERED], [RUN], [], [MAPPED], HELD))


def test_without_its_peer_the_bench_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(bench.importlib.util, "find_spec", lambda name: None)
    monkeypatch.setattr(sys, "argv", ["bench", "--levels", "2", "--pairs", "1"])
    with pytest.raises(SystemExit, match=r"NGSolve is not installed; .* pip install 'meshassay\[bench\]'"):
        bench.main()


def test_a_small_study_is_measured() -> None:
    result = study("triangles", 2, {"recovery", "iteration"})
    assert result["unknowns"] == 16490 and len(result["seconds"]) == 2
    assert result["recovery"] > 0.0 and result["iteration"] > result["floor"] > 0.0


@pytest.mark.slow
def test_a_small_map_is_measured(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Nodes of the lattice on the third level: 25 outwards, 33 around, 9 through."""
    monkeypatch.setattr(maps, "CASE", replace(maps.CASE, coarsest=(3, 2, 1)))
    own, found = maps.solved(tmp_path, 3), maps.judged(tmp_path)
    assert own["nodes"] == found["nodes"] == 25 * 33 * 9
    assert (tmp_path / "map.vtu").is_file()
    assert all(found[step] > 0.0 for step in STEPS)
