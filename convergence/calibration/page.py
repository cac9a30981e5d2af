"""figures/calibration.md and its plots: the method, the bank, and every measured coverage.

Tables come from `tally`, `groups` and `shortfalls`; every number in a sentence is made from the numbers.
"""

import math
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Any

from convergence import numbers
from convergence.calibration import prose
from convergence.calibration.calibrate import FALSE_ALARM, MISSED, Calibrated
from convergence.calibration.companions import companion_outcomes, companion_pairs
from convergence.calibration.groups import AIM, AIMED, FAMILY, LEVELS, WIDTHS, Group, groups
from convergence.calibration.growth import Called, called
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.left_out import Outcome
from convergence.calibration.make_up import FamilyRow, counted, family_rows, left_out
from convergence.calibration.plots import draw_plots
from convergence.calibration.shortfalls import COVERED, WIDE, covered_less, summary, wider
from convergence.calibration.tally import OURS, Answer, Judged, Tally, judged, ours_of, rules, tally
from convergence.coverage import Knowledge
from convergence.histories.promise import PROBABILITY
from convergence.histories.width import MOST_LEVELS
from convergence.verdicts import SETTLED

ROUNDED = 2
COMPANION_WIDTH = 2.0
MOST_WRONG = 0.02  # of ladders of four levels and more, called neither or wrongly called singular


def write_page(folder: Path, found: Calibrated, ladders: Sequence[KnownLadder]) -> None:
    """Write calibration.md and its plots into a folder; `ladders` is the bank that `found` was made of."""
    all_of = judged(found.outcomes)
    of = groups(all_of)
    parts = [
        prose.head(found.table["made_of"]),
        prose.method(),
        _bank(ladders, found),
        prose.coverage(len(all_of)),
        _tables(of),
        _answers(all_of),
        _unseen(found),
        _companion(found),
        _aside(found),
        _growth(found),
        _promises(found.table.get("next_mesh", {})),
        _short(of),
        prose.REMARKS,
    ]
    (folder / "calibration.md").write_text("\n".join(parts), encoding="utf-8")
    draw_plots(folder, of, all_of)


def _bank(ladders: Sequence[KnownLadder], found: Calibrated) -> str:
    outcomes = [*found.outcomes["nothing"], *found.aside["nothing"]]
    head = ("family", "parts", "ladders", "judged", "singular", "meshes", "cells", "degree", "dimension")
    rows = [_family(row) for row in family_rows(ladders, outcomes)]
    counts = [
        f"{what}: " + ", ".join(f"{name.replace('_', ' ')} {number:,}" for name, number in found_counts)
        for what, attribute in (
            ("Meshes", "source"),
            ("Cells", "shape"),
            ("Degree", "degree"),
            ("Dimension", "dimension"),
            ("Kinds", "kind"),
        )
        for found_counts in [counted(ladders, attribute)]
    ]
    out = left_out(ladders, outcomes)
    lines = "\n".join(f"- {line}." for line in counts)
    return "\n".join([prose.bank(out), _table((*head, "exponents"), rows), f"Ladders by\n\n{lines}\n"])


def _family(row: FamilyRow) -> Sequence[str]:
    words = (", ".join(one) for one in (row.sources, row.shapes, row.degrees, row.dimensions))
    counts = (row.ladders, row.finite, row.singular)
    return row.name, "; ".join(row.parts), *(f"{count:,}" for count in counts), *words, row.exponents


def _tables(of: Sequence[Group]) -> str:
    methods = [*OURS.values(), *rules()]
    text = []
    for heading in dict.fromkeys(group.table for group in of):
        rows = [
            [group.name, f"{len(group.members):,}", *(_cell(group, method) for method in methods)]
            for group in of
            if group.table == heading
        ]
        text.append(f"### {heading}\n\n" + _table((heading.lower(), "cases", *methods), rows))
    return "\n".join(text)


def _cell(group: Group, method: str) -> str:
    """Return coverage and width; of ours also the interval, both widths, and in bold what falls short."""
    count = tally(group.members, method)
    if not count.answers:
        return "none"
    share = numbers.percent(count.share, AIM)
    if method not in WIDTHS:
        return f"{share}; {count.finest:.{ROUNDED}g}"
    low, high = (_bare(numbers.percent(bound, AIM)) for bound in count.bounds)
    shown = _marked(share, count.share < AIM)
    aim = math.inf if group.is_of_two_levels else WIDTHS[method]
    widths = [_width(width, aim) for width in (count.own, count.finest)]
    return f"{shown} ({low} to {high}); {' / '.join(widths)}"


def _bare(percent: str) -> str:
    return percent.removesuffix(" %")


def _width(width: float, aim: float) -> str:
    text = numbers.beside_limit(width, aim, ROUNDED) if math.isfinite(aim) else f"{width:.{ROUNDED}g}"
    return _marked(text, width > aim)


def _marked(text: str, falls_short: bool) -> str:
    return f"**{text}**" if falls_short else text


def _answers(all_of: Sequence[Judged]) -> str:
    head = ("method", "levels", "cases", "answers", "covers, of answers", "covers, of cases", "median U/e")
    rows = []
    for method in (*rules(), *OURS.values()):
        for levels, name in LEVELS.items():
            count = tally([one for one in all_of if one.levels == levels], method)
            if count.cases:
                rows.append([method, name, f"{count.cases:,}", *_answered(count)])
    return "\n".join([prose.ANSWERS, _table(head, rows)])


def _answered(count: Tally) -> list[str]:
    if not count.answers:
        return ["none"] * 4
    shares = (len(count.answers) / count.cases, count.share, count.covered / count.cases)
    return [*(numbers.percent(share, AIM) for share in shares), f"{count.finest:.{ROUNDED}f}"]


def _growth(found: Calibrated) -> str:
    text = prose.growth(_odds(found.table["growth"]), FALSE_ALARM, MISSED, SETTLED)
    return "\n".join([text, _called_table(found, found.outcomes)])


def _called_table(found: Calibrated, outcomes: Mapping[Knowledge, Sequence[Outcome]]) -> str:
    head = ("known", "ladders", "levels", "cases", "called singular", "unproven", "neither")
    rows = []
    for known, of in outcomes.items():
        counts = called(known, of, found.table["growth"][known])
        rows += [[OURS[known], *key, *_called(*key, count)] for key, count in counts.items() if count.cases]
    return _table(head, rows)


def _odds(growth: Mapping[Knowledge, Mapping[str, float]]) -> str:
    return "; ".join(
        f"{OURS[known]} {math.exp(above['shown']):.3g} and {math.exp(above['possible']):.2g}"
        for known, above in growth.items()
    )


def _called(ladders: str, levels: str, count: Called) -> list[str]:
    """Return the counts; bold: too many singular ones called neither, too many others called singular."""
    is_singular, many = ladders == "singular stresses", not levels.startswith("3")
    wrong = (many and not is_singular, False, many and is_singular)
    shown = []
    for number, is_wrong in zip((count.singular, count.unproven, count.neither), wrong, strict=True):
        share = number / count.cases
        text = f"{numbers.percent(share, MOST_WRONG)} ({number})"
        shown.append(_marked(text, is_wrong and share > MOST_WRONG))
    return [f"{count.cases:,}", *shown]


def _companion(found: Calibrated) -> str:
    """Return coverage and widths of pairs of ladders that meet."""
    pairs = companion_pairs(found.outcomes["kind and degree"])
    together = companion_outcomes(pairs)
    rows = []
    for source in sorted({one.sub.of.source for one in together}):
        rows += _by_levels(source, [one for one in together if one.sub.of.source == source])
    rows.append(["all", "3 levels and more", *_stated([ours_of(one) for one in together])])
    meet = f"{len(together):,} of {len(pairs):,} pairs meet.\n"
    head = ("meshes", "levels", "pairs", "covers", "U/e best", "U/e finest")
    return "\n".join([prose.COMPANION, meet, _table(head, rows)])


def _by_levels(name: str, outcomes: Sequence[Outcome]) -> list[list[str]]:
    """Return a row for each number of levels."""
    found: dict[int, list[Answer]] = {}
    for one in outcomes:
        found.setdefault(min(one.sub.levels, MOST_LEVELS), []).append(ours_of(one))
    return [[name, LEVELS[levels], *_stated(own)] for levels, own in sorted(found.items())]


def _stated(answers: Sequence[Answer]) -> list[str]:
    count = Tally(len(answers), answers)
    low, high = (_bare(numbers.percent(bound, AIM)) for bound in count.bounds)
    share = _marked(numbers.percent(count.share, AIM), count.share < AIM)
    widths = [_width(width, COMPANION_WIDTH) for width in (count.own, count.finest)]
    return [f"{count.cases:,}", f"{share} ({low} to {high})", *widths]


def _unseen(found: Calibrated) -> str:
    """Return coverage, widths and calls of singular values in the families that no table is made of."""
    of = groups(judged(found.unseen))
    families = [group.name for group in of if group.table == FAMILY]
    shown = [group for group in of if group.table in (*AIMED, FAMILY)]
    return "\n".join([prose.unseen(families), _tables(shown), _called_table(found, found.unseen)])


def _aside(found: Calibrated) -> str:
    """Return coverage and widths on the parts that the table is not made for."""
    rows = [row for known, of in found.aside.items() for row in _by_levels(known, of)]
    families = sorted({one.sub.of.family.replace("_", " ") for one in found.aside["nothing"]})
    exponents = [one.sub.of.exponent for one in found.aside["nothing"] if one.sub.of.exponent is not None]
    text = prose.aside(families, min(exponents), max(exponents)) if exponents else ""
    head = ("known", "levels", "cases", "covers", "U/e best", "U/e finest")
    return "\n".join([text, _table(head, rows)]) if rows else ""


def _promises(next_mesh: Mapping[str, Mapping[str, Any]]) -> str:
    rows = []
    for name, bound in next_mesh.items():
        stated = _kept(bound) if bound["cases"] else "none"
        rows.append([name.replace("_", " "), f"{bound['safety']:.2f}", f"{bound['cases']:,}", stated])
    head = ("class (kind/degree)", "bound on ratio × half-width left", "promises", "kept")
    return "\n".join([prose.promise(), _table(head, rows) if rows else "Not measured.\n"])


def _kept(bound: Mapping[str, Any]) -> str:
    share = bound["kept"] / bound["cases"]
    kept, low, high = (numbers.percent(x, PROBABILITY) for x in (share, bound["low"], bound["high"]))
    return f"{_marked(kept, share < PROBABILITY)} ({_bare(low)} to {_bare(high)})"


def _short(of: Sequence[Group]) -> str:
    less, wide = covered_less(of), wider(of)
    text = [prose.SHORT]
    for found, head, what in (
        (less, COVERED, "are covered below 95 %"),
        (wide, WIDE, "are wider than aimed"),
    ):
        text += [summary(found, of, what) + "\n", _table(head, [one.row for one in found])]
    return "\n".join(text)


def _table(head: Sequence[str], rows: Sequence[Sequence[Any]]) -> str:
    lines = [head, ["---"] * len(head), *rows]
    return "".join("| " + " | ".join(map(str, line)) + " |\n" for line in lines)
