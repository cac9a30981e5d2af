"""The plots of the calibration page: coverage by group, error over half-width, U/e by levels."""

from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from convergence.calibration.groups import AIM, LEAST_LEVELS, LEVELS, SOURCE, WIDTHS, Group
from convergence.calibration.tally import OURS, Judged, Tally, rules, tally

if TYPE_CHECKING:
    from matplotlib.axes import Axes

BARE, KNOWN = OURS["nothing"], OURS["kind and degree"]
COLOURS = {BARE: "#7fa8d9", KNOWN: "#0b4f9e"}
GREY, RED = "#707070", "#b22222"
DRAWN_RULES = ("grid convergence index", "least squares")
SIGNS = ("v", "s", "D", "^", "P", "X")
SHIFTS = {BARE: -0.17, KNOWN: 0.17}
FEWEST = 20  # answers that a mark stands for
WIDEST, BARS = 2.5, 50
TICKS = (0.5, 1.0, 2.0, 5.0, 10.0, 20.0)
STYLE: Any = {"font.size": 9.0, "axes.spines.right": False, "axes.spines.top": False, "legend.frameon": False}


def draw_plots(folder: Path, of: Sequence[Group], all_of: Sequence[Judged]) -> None:
    """Write the three plots as SVG, byte for byte the same for the same numbers."""
    from matplotlib import rc_context
    from matplotlib.figure import Figure

    paints: dict[str, tuple[tuple[float, float], Callable[[Figure], None]]] = {
        "coverage": ((9.5, 6.6), lambda figure: _coverage(figure, of)),
        "errors": ((9.0, 4.0), lambda figure: _errors(figure, all_of)),
        "widths": ((9.0, 4.0), lambda figure: _widths(figure, all_of)),
    }
    for name, (size, paint) in paints.items():
        with rc_context({**STYLE, "svg.hashsalt": name}):
            figure = Figure(figsize=size, layout="constrained")
            paint(figure)
            figure.savefig(folder / f"calibration-{name}.svg", metadata={"Date": None, "Creator": None})


def _coverage(figure: Any, of: Sequence[Group]) -> None:
    """Draw coverage with its binomial interval for every group: sources and levels left, the others right."""
    left = [g for g in of if g.table == SOURCE and "(" not in g.name]
    right = [g for g in of if g.table in ("Kind of quantity", "Dimension", "Degree")]
    for axes, some in zip(figure.subplots(1, 2), (left, right), strict=True):
        _marks(axes, some)
    handles, labels = axes.get_legend_handles_labels()
    figure.legend(handles, labels, loc="outside lower center", ncols=4)


def _marks(axes: "Axes", of: Sequence[Group]) -> None:
    rows = np.arange(len(of))
    for sign, rule in zip(SIGNS, rules(), strict=True):
        counts = [tally(group.members, rule) for group in of]
        shares = [100.0 * one.share if len(one.answers) >= FEWEST else np.nan for one in counts]
        axes.plot(shares, rows, sign, color=GREY, alpha=0.7, markersize=5.0, mew=0, label=rule)
    for method, colour in COLOURS.items():
        counts = [tally(group.members, method) for group in of]
        x = 100.0 * np.array([one.share for one in counts])
        bars = np.abs(100.0 * np.array([one.bounds for one in counts]).T - x)
        at = rows + SHIFTS[method]
        axes.errorbar(x, at, xerr=bars, fmt="o", color=colour, markersize=4.5, capsize=2.0, label=method)
    axes.axvline(100.0 * AIM, color=RED, linewidth=1.2)
    axes.set_yticks(rows, [_label(group) for group in of])
    axes.set_ylim(len(of) - 0.4, -0.6)
    axes.set_xlim(38.0, 101.0)
    axes.set_xlabel("covered, % of answers (line: 95 %)")
    axes.grid(axis="x", color="#dddddd", linewidth=0.6)


def _label(group: Group) -> str:
    name = group.name.replace(" and more", "+")
    return f"{group.table.lower()} {name}" if group.table in ("Dimension", "Degree") else name


def _errors(figure: Any, all_of: Sequence[Judged]) -> None:
    """Draw histograms of the signed error over the half-width: ours left, two rules right."""
    more = [one for one in all_of if one.levels >= LEAST_LEVELS]
    sides = (
        ("calibrated, about the best estimate", COLOURS),
        ("published rules, about the finest value", dict.fromkeys(DRAWN_RULES, GREY)),
    )
    for axes, (title, methods) in zip(figure.subplots(1, 2, sharey=True), sides, strict=True):
        for (method, colour), line in zip(methods.items(), ("-", "--"), strict=True):
            _histogram(axes, tally(more, method), method, colour, line)
        for end in (-1.0, 1.0):
            axes.axvline(end, color=RED, linewidth=1.2)
        axes.set_xlabel(f"error / half-width (first and last bar: beyond {WIDEST:g})")
        axes.set_ylabel("% of ladders of 3 levels and more")
        axes.set_title(title, loc="left", fontsize=9.0)
        axes.legend(loc="upper center", bbox_to_anchor=(0.5, -0.18))


def _histogram(axes: "Axes", count: Tally, method: str, colour: str, line: str) -> None:
    shares = np.clip([answer.share for answer in count.answers], -WIDEST, WIDEST)
    axes.hist(
        shares,
        np.linspace(-WIDEST, WIDEST, BARS + 1).tolist(),
        weights=np.full(len(shares), 100.0 / len(shares)),
        histtype="step",
        color=colour,
        linestyle=line,
        linewidth=1.4,
        label=f"{method}: {100.0 * (1.0 - count.share):.1f} % outside -1 to 1",
    )


def _widths(figure: Any, all_of: Sequence[Judged]) -> None:
    """Draw the quartiles of U/e about the finest value by number of levels."""
    axes = figure.subplots()
    methods = [*COLOURS, *rules()]
    for number, method in enumerate(methods):
        at, quartiles = [], []
        for place, levels in enumerate(LEVELS):
            count = tally([one for one in all_of if one.levels == levels], method)
            if len(count.answers) >= FEWEST:
                at.append(place + 0.09 * (number - 0.5 * (len(methods) - 1)))
                quartiles.append(np.quantile([one.finest for one in count.answers], (0.25, 0.5, 0.75)))
        low, middle, high = np.array(quartiles).T
        colour, sign = COLOURS.get(method, GREY), (("o", "o", *SIGNS)[number])
        bars = np.array([middle - low, high - middle])
        axes.errorbar(at, middle, yerr=bars, fmt=sign, color=colour, markersize=4.5, lw=1.2, label=method)
    axes.set_yscale("log")
    axes.set_yticks(TICKS, [f"{tick:g}" for tick in TICKS])
    axes.minorticks_off()
    axes.axhline(1.0, color=RED, linewidth=1.0)
    for method, colour in COLOURS.items():
        axes.axhline(WIDTHS[method], color=colour, linewidth=1.0, linestyle=":")
    axes.set_xticks(range(len(LEVELS)), list(LEVELS.values()))
    axes.set_ylabel("U/e about the finest value\n(median, quartiles; dotted: aims)")
    axes.grid(axis="y", color="#dddddd", linewidth=0.6)
    figure.legend(loc="outside lower center", ncols=4)
