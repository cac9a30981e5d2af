"""figures/performance.md and its plots from measured pairs."""

import os
import platform
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from statistics import median
from typing import Any

from convergence.bench.peers import THREADS

HEAD = """# Performance against NGSolve

Quarter of a plate with a hole, quadratic cells on a curved boundary. Ours is a whole study in a process of
its own, start-up included: every level meshed, assembled and solved. NGSolve's is assembly and solution of
the finest level alone, on the same nodes and with {threads} threads; making its mesh is not counted, nor the
coarser levels that its multigrid needs. On tetrahedra that refines by bisection, whose cells are not ours and
are worse shaped, so its iterations are those of another mesh. Ratios are medians of {pairs} pairs taken in
turns, with the smallest and largest in brackets.

{machine} {load}

"""
COLUMNS = (
    *("cells", "levels", "unknowns", "NGSolve's solver", "ours, s", "NGSolve, s", "ratio"),
    *("ours, GB", "NGSolve, GB", "memory ratio"),
)


@dataclass(frozen=True)
class Pair:
    """A whole study of ours and the peer's finest level, one after the other."""

    name: str
    levels: int
    method: str
    ours: Mapping[str, Any]
    peer: Mapping[str, Any]

    @property
    def seconds(self) -> tuple[float, float]:
        return self.ours["lived"], self.peer["assembly"] + self.peer["solution"]

    @property
    def ratio(self) -> float:
        ours, peer = self.seconds
        return ours / peer


@dataclass(frozen=True)
class Solo:
    """What is measured of ours alone; `compiled` has the case, a study with numba and one without.

    `maps` have the solution that a pointwise map is made of, and the map; `held` its coverage, by field.
    """

    recoveries: Sequence[Mapping[str, Any]]
    runs: Sequence[Mapping[str, Any]]
    compiled: Sequence[tuple[str, Mapping[str, Any], Mapping[str, Any]]]
    maps: Sequence[tuple[Mapping[str, Any], Mapping[str, Any]]]
    held: Sequence[Mapping[str, Any]]


def write(folder: Path, load: str, pairs: Sequence[Pair], growth: Sequence[Pair], solo: Solo) -> None:
    """Write the page and the plots into a folder; `load` is a sentence on the machine's load."""
    groups: dict[tuple[str, str], list[Pair]] = {}
    for pair in pairs:
        groups.setdefault((pair.name, pair.method), []).append(pair)
    count = min(len(group) for group in groups.values())
    machine = f"{platform.machine()}, {os.cpu_count()} processors, Python {platform.python_version()}."
    text = HEAD.format(threads=THREADS, pairs=count, machine=machine, load=load)
    text += _line(COLUMNS) + _line(["---"] * len(COLUMNS))
    text += "".join(_row(group) for group in groups.values())
    text += _recovery(solo.recoveries) + _bandwidth(solo.recoveries) + _runs(solo.runs)
    text += _compiled(solo.compiled) + _maps(solo.maps) + _held(solo.held)
    text += "\n![Seconds over unknowns](performance-growth.svg)\n\n![Peak memory](performance-memory.svg)\n"
    (folder / "performance.md").write_text(text, encoding="utf-8")
    name = pairs[0].name
    _plots(folder, [pair for pair in (*growth, *pairs) if pair.name == name])


def _row(group: Sequence[Pair]) -> str:
    first = group[0]
    ratios = [pair.ratio for pair in group]
    memory = [median(pair_side["peak"] for pair_side in side) for side in _sides(group)]
    ours, peer = (median(values) for values in zip(*(pair.seconds for pair in group), strict=True))
    spread = f"{median(ratios):.2f} [{min(ratios):.2f} … {max(ratios):.2f}]"
    times = (f"{ours:.1f}", f"{peer:.1f}", spread)
    peaks = (f"{memory[0]:.2f}", f"{memory[1]:.2f}", f"{memory[0] / memory[1]:.2f}")
    size = f"{first.ours['unknowns']:,}"
    return _line((first.name, str(first.levels), size, first.method, *times, *peaks))


def _line(entries: Sequence[str]) -> str:
    return "| " + " | ".join(entries) + " |\n"


def _sides(group: Sequence[Pair]) -> tuple[list[Mapping[str, Any]], list[Mapping[str, Any]]]:
    return [pair.ours for pair in group], [pair.peer for pair in group]


def _recovery(recovered: Sequence[Mapping[str, Any]]) -> str:
    after, solving = (median(one[key] for one in recovered) for key in ("recovery", "solution"))
    ratio = median(one["recovery"] / one["solution"] for one in recovered)
    return (
        f"\nStress recovery and the energy norm of the error on the finest triangles: {after:.1f} s, "
        f"{ratio:.2f} of the {solving:.1f} s of that level's assembly and solution.\n"
    )


def _bandwidth(measured: Sequence[Mapping[str, Any]]) -> str:
    taken, floor, speed = (median(one[key] for one in measured) for key in ("iteration", "floor", "triad"))
    return (
        f"\nOne iteration there takes {1e3 * taken:.0f} ms, {taken / floor:.1f} times the "
        f"{1e3 * floor:.0f} ms that its matrices need at the {speed:.0f} GB/s of a triad of numpy.\n"
    )


def _runs(runs: Sequence[Mapping[str, Any]]) -> str:
    whole, solving = (median(one[key] for one in runs) for key in ("run", "solving"))
    added = sorted(one["run"] / one["solving"] - 1.0 for one in runs)
    return (
        f"\nA whole run to {runs[0]['unknowns']:,} unknowns, with start-up, quantities, checks, figures and "
        f"files, takes {whole:.1f} s, solving alone {solving:.1f} s: a run adds {median(added):.2f} "
        f"[{added[0]:.2f} … {added[-1]:.2f}] of the solving, in the median of {len(added)}, every "
        "second one measured after the solving, the others before it.\n"
    )


def _compiled(compiled: Sequence[tuple[str, Mapping[str, Any], Mapping[str, Any]]]) -> str:
    if not compiled:
        return "\nnumba is not installed here: nothing above is compiled.\n"
    text = "\nWithout numba a study takes, by its own time with it:"
    for name in dict.fromkeys(name for name, _, _ in compiled):
        ratios = [plain["lived"] / fast["lived"] for case, fast, plain in compiled if case == name]
        text += f" {name} {median(ratios):.2f} [{min(ratios):.2f} … {max(ratios):.2f}];"
    return text.rstrip(";") + ".\n"


def _maps(maps: Sequence[tuple[Mapping[str, Any], Mapping[str, Any]]]) -> str:
    solving, whole = median(own["seconds"] for own, _ in maps), median(found["lived"] for _, found in maps)
    ratio = median(found["lived"] / own["seconds"] for own, found in maps)
    steps = ", ".join(
        f"{name} {median(found[name] for _, found in maps):.1f}"
        for name in ("reading", "recovery", "judging", "writing")
    )
    peak = max(found["peak"] for _, found in maps)
    return (
        f"\nA pointwise map of {maps[0][1]['nodes']:,} nodes of quadratic tetrahedra, of three result files, "
        f"stress recovered, in a process of its own: {whole:.1f} s ({steps}), {ratio:.2f} of the "
        f"{solving:.1f} s of our own mesh, assembly and solution of the finest, and {peak:.2f} GB at most.\n"
    )


def _held(rows: Sequence[Mapping[str, Any]]) -> str:
    held, nodes = sum(row["held"] for row in rows), sum(row["nodes"] for row in rows)
    least = min(rows, key=lambda row: float(row["held"] / row["nodes"]))
    models = ", ".join(dict.fromkeys(row["model"].replace("_", " ") for row in rows))
    return (
        f"\nOf {nodes:,} known limits at nodes, three levels of ratio 1.5, {held / nodes:.1%} lie in their "
        f"interval ({models}; linear and quadratic cells); the least of a field on one kind of cells is "
        f"{least['held'] / least['nodes']:.1%}, {least['field'].replace('_', ' ')} of the "
        f"{least['model'].replace('_', ' ')}, {least['shape']}s of degree {least['degree']}.\n"
    )


def _plots(folder: Path, pairs: Sequence[Pair]) -> None:
    """Draw seconds and peak memory over unknowns, ours and the peer's solvers."""
    from matplotlib.figure import Figure

    lines: dict[str, dict[int, list[tuple[float, float]]]] = {}
    for pair in pairs:
        ours, peer = pair.seconds
        sides = (("ours, whole study", ours, pair.ours), (f"NGSolve {pair.method}, finest", peer, pair.peer))
        for label, seconds, side in sides:
            at = lines.setdefault(label, {}).setdefault(int(pair.ours["unknowns"]), [])
            at.append((seconds, side["peak"]))
    for number, (name, what) in enumerate((("growth", "seconds"), ("memory", "peak memory in GB"))):
        figure = Figure(figsize=(6.4, 4.2), layout="constrained")
        axes = figure.subplots()
        for label, points in lines.items():
            sizes = sorted(points)
            axes.loglog(sizes, [median(v[number] for v in points[n]) for n in sizes], "o-", label=label)
        axes.set_xlabel("unknowns of the finest level")
        axes.set_ylabel(what)
        axes.grid(True, which="both", alpha=0.3)
        axes.legend()
        figure.savefig(folder / f"performance-{name}.svg")
