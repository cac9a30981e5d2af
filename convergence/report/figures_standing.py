"""Where a ladder stands among the bank's ladders like it: how often intervals as wide as its own hold."""

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.coverage import Coverage
from convergence.histories import calibrated
from convergence.histories.width import MOST_LEVELS
from convergence.report import _trust, _words
from convergence.report._axes import log_ticks
from convergence.report._picture import BLUE, GREY, INK, LEVELS, RED, Picture, Rewrite, draw
from convergence.results import Ladder, Quantity, Verdict

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

NEAREST = 200
OTHERS = 400  # of the bank's other ladders, drawn for the picture
FEW = 50
CLOSE = 3.0  # widths within this factor are like each other
PALE = "#9c9c9c"
SHARES = (1e-3, 30.0)  # drawn range of true error over half-width


@dataclass(frozen=True, eq=False)
class Standing:
    """Regularity and share of the bank's ladders like one, nearest first; `at` is the ladder's regularity.

    Regularity: half-width over the span of the values. Share: true error over half-width. `what` names the
    ladders in words.
    """

    at: float
    regularity: np.ndarray
    share: np.ndarray
    what: str

    @property
    def nearest(self) -> int:
        return min(NEAREST, len(self.share))

    @property
    def covered(self) -> int:
        """Return how many of the nearest hold their limit."""
        return int((self.share[: self.nearest] <= 1.0).sum())

    @property
    def close(self) -> int:
        """Return how many are nearly as wide for their span as this one."""
        return int((np.abs(np.log(self.regularity / self.at)) <= math.log(CLOSE)).sum())

    @property
    def falls_short(self) -> bool:
        """Return whether the nearest hold less often than 95 %, beyond chance (97.5 % one-sided)."""
        from scipy.special import betaincinv

        n, k = self.nearest, self.covered
        return k < n and float(betaincinv(k + 1, n - k, 0.975)) < _trust.AIM

    def warnings(self) -> list[str]:
        """Return what makes the picture weak evidence, or evidence against the interval."""
        said = []
        if self.close < FEW:
            said.append(f"few are like it: {self.close} within a factor of {CLOSE:g} of its width")
        if self.falls_short:
            said.append("below 95 % beyond chance: take this interval with care")
        return said

    def words(self) -> str:
        """Return what a checker should read from the picture."""
        n, k = self.nearest, self.covered
        said = f"of the {n} ladders nearest in width {k} are covered ({numbers.percent(k / n, _trust.AIM)})"
        return "; ".join([said, *self.warnings()])


def standing(quantity: Quantity, verdict: Verdict, ladder: Ladder, bank: np.ndarray) -> Standing | None:
    """Return where a ladder stands among the `outcomes` of the bank, None without a calibrated interval.

    Those of its number of levels and, where known and not too few, of its kind.
    """
    values = ladder.column(quantity.name)
    values = values[np.isfinite(values)][-calibrated.FINEST_LEVELS :]
    half, span = _trust.half_width(verdict), float(np.ptp(values)) if len(values) else 0.0
    if verdict.coverage is None or not (half > 0.0 and span > 0.0):
        return None
    told = "known" if verdict.coverage.knowledge == "kind and degree" else "nothing"
    like, what = _like(quantity, verdict.coverage, bank[np.isfinite(bank[f"share_{told}"])])
    if not len(like):
        return None
    at, x, y = half / span, like[f"regularity_{told}"], like[f"share_{told}"]
    order = np.argsort(np.abs(np.log(x / at)), kind="stable")
    judged = f"each judged with its family left out, {'kind and degree' if told == 'known' else told} known"
    return Standing(at, x[order], y[order], f"{numbers.count(len(x))} bank {what}, {judged}")


def _like(quantity: Quantity, coverage: Coverage, bank: np.ndarray) -> tuple[np.ndarray, str]:
    """Return the bank's ladders of the same number of levels, and what they are in words."""
    bank = bank[np.minimum(bank["levels"], MOST_LEVELS) == coverage.levels]
    of_kind = bank[bank["kind"] == quantity.kind]
    what, kind = f"ladders of {_trust.levels_text(coverage)}", _words.plain(quantity.kind)
    if quantity.kind == "unknown":
        return bank, what
    if len(of_kind) < NEAREST:
        return bank, f"{what} (of all kinds, as only {len(of_kind)} are of the kind {kind})"
    return of_kind, f"{kind} {what}"


def standing_figure(
    stem: str,
    quantity: Quantity,
    verdict: Verdict,
    ladder: Ladder,
    bank: np.ndarray,
    comma: Rewrite | None = None,
) -> Picture | None:
    """Return the figure, None where the quantity has no calibrated interval."""
    found = standing(quantity, verdict, ladder, bank)
    if found is None:
        return None

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        low, high = np.quantile(found.regularity, (0.005, 0.995))
        log_ticks(axes, min(low, found.at) / 1.5, max(high, found.at) * 1.5, which="x")
        log_ticks(axes, *SHARES)
        _band(axes, found)
        _dots(axes, found)
        axes.set_xlabel("half-width / span of the values: regular left, irregular right")
        axes.set_ylabel("true error / half-width")
        n, k = found.nearest, found.covered
        share = numbers.percent(k / n, _trust.AIM)
        said = f"{k} of the {n} bank ladders most like this one are covered: {share}"
        axes.set_title("\n".join([said, *found.warnings()]), loc="left")
        figure.legend(loc="outside lower center", ncols=2)

    caption = (
        f"{found.what}: {found.words()}. Shaded: the widths of those counted, which are all drawn; of the"
        f" others {OTHERS} at most. A cross is an interval that missed its limit."
    )
    alt = f"True error over half-width of bank ladders against their regularity; {found.words()}"
    return draw(stem, (5.2, 4.1), alt, caption, paint, _hints(found), comma=comma)


def _hints(found: Standing) -> list[str]:
    """Return what the marks of the nearest stand for, the covered ones first as they are drawn."""
    held = found.share[: found.nearest] <= 1.0
    return [
        f"number {1 + place} of the {found.nearest} nearest: half-width"
        f" {numbers.compact(found.regularity[place], 2)} of the span of its values, true error"
        f" {numbers.beside_limit(float(found.share[place]), 1.0, digits=2)} of the half-width; {word}"
        for word, rows in (("covered", held), ("missed", ~held))
        for place in np.flatnonzero(rows)
    ]


def _band(axes: "Axes", found: Standing) -> None:
    near = found.regularity[: found.nearest]
    axes.axvspan(near.min(), near.max(), color=BLUE, alpha=0.14, linewidth=0)
    axes.axvline(found.at, color=BLUE, linewidth=2.0, label="this ladder")
    axes.axhline(1.0, color=INK, linewidth=1.2)
    left, right = np.log(axes.get_xlim())
    x, side = (0.01, "left") if math.log(found.at) > 0.5 * (left + right) else (0.99, "right")
    for y, word, up in ((10.0, "missed", "bottom"), (0.01, "covered", "top")):
        axes.text(x, y, word, transform=axes.get_yaxis_transform(), ha=side, va=up, color=INK)


def _dots(axes: "Axes", found: Standing) -> None:
    """Draw every one of the nearest, and of the others evenly over their widths."""
    count, n = len(found.share), found.nearest
    others = n + np.argsort(found.regularity[n:], kind="stable")
    step = np.unique(np.linspace(0, max(len(others) - 1, 0), OTHERS).astype(int))
    others = others[step] if count > n else others
    _marks(axes, found, others, "other ladders", (PALE, GREY), 2.2, False)
    _marks(axes, found, np.arange(n), "most like this one", (INK, RED), 3.2, True)


def _marks(
    axes: "Axes",
    found: Standing,
    drawn: np.ndarray,
    what: str,
    colours: tuple[str, str],
    size: float,
    hinted: bool,
) -> None:
    """Draw some ladders: a dot where the limit is covered, a cross where it is missed."""
    x, y = found.regularity[drawn], np.clip(found.share[drawn], *SHARES)
    held, dot, cross = y <= 1.0, *colours
    covered, missed = (f"{LEVELS}-{word}" if hinted else None for word in ("covered", "missed"))
    if held.any():
        label = f"{what}, covered"
        axes.plot(x[held], y[held], "o", color=dot, markersize=size, mew=0, label=label, gid=covered)
    if not held.all():
        label = f"{what}, missed"
        axes.plot(x[~held], y[~held], "x", color=cross, markersize=5.0, zorder=4, label=label, gid=missed)
