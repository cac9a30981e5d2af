"""The packaged table and the outcomes it was measured with, from the bank."""

import csv
import io
import json
from collections.abc import Callable, Mapping, Sequence
from dataclasses import asdict, dataclass
from datetime import date
from pathlib import Path
from typing import Any

import numpy as np

from convergence.calibration.bank import write_packed
from convergence.calibration.binomial import binomial_interval
from convergence.calibration.companions import companion_factors, companion_outcomes, companion_pairs
from convergence.calibration.fit import weighed
from convergence.calibration.growth import is_settled
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.left_out import (
    KNOWLEDGE,
    Outcome,
    all_weights,
    finite,
    outcomes,
    told_as,
    told_left_out,
)
from convergence.calibration.promises import promises
from convergence.calibration.stretches import stretches
from convergence.calibration.sub_ladders import SubLadder, sub_ladders
from convergence.checks._corner import STRESS_KINDS
from convergence.coverage import WITH_COMPANION, Companion, Coverage, Knowledge
from convergence.histories.calibrated import LEAST_TO_SHOW, read
from convergence.histories.table import LEAST_EXPONENT, OUTCOME, OUTCOMES, TABLE, Table, as_table
from convergence.histories.width import MOST_LEVELS

FALSE_ALARM = 0.015
MISSED = 0.015
MOST = 550  # sub-ladders of a family: as many as 16 GB of evidence hold
MOST_UNSEEN = 450  # of a family that no table is made of: two minutes to judge
DIGITS = 4


@dataclass(frozen=True, eq=False)
class Calibrated:
    """The table as it is written, and every outcome by what was known.

    `aside` are those of ladders the table is not made for, `unseen` those of families that no table is made
    of; both are judged with it.
    """

    table: Mapping[str, Any]
    outcomes: Mapping[Knowledge, Sequence[Outcome]]
    aside: Mapping[Knowledge, Sequence[Outcome]]
    unseen: Mapping[Knowledge, Sequence[Outcome]]


def calibrate(
    ladders: Sequence[KnownLadder],
    unseen: Sequence[KnownLadder],
    made: date,
    say: Callable[[str], None],
) -> Calibrated:
    """Fit weights and stretches to all families, and judge each family without it.

    Ladders of parts with a corner of an exponent below LEAST_EXPONENT have no part in it.
    """
    slow = [ladder for ladder in ladders if is_slow(ladder)]
    ladders = [ladder for ladder in ladders if not is_slow(ladder)]
    subs = sub_ladders(ladders, MOST)
    say(f"{len(subs)} sub-ladders of {len(ladders)} ladders")
    bank = [weighed(sub) for sub in subs]
    weights: dict[str, np.ndarray] = {}
    stretch: dict[str, Any] = {}
    judged: dict[Knowledge, list[Outcome]] = {}
    growing = np.zeros(0)
    for known in KNOWLEDGE:
        told = told_left_out(bank, known, say)
        found, growing = all_weights(bank, known)
        weights |= found
        stretch[known] = stretches([one for one, _ in told if not one.sub.of.singular], known)
        judged[known] = outcomes(told, known)
        say(f"{known}: judged")
    pairs = companion_pairs(judged["kind and degree"])
    together = _coverages(WITH_COMPANION, companion_outcomes(pairs))
    factors = companion_factors(pairs)
    stretch[WITH_COMPANION] = {levels: {"always": float(np.log(one))} for levels, one in factors.items()}
    table: dict[str, Any] = {
        "made_of": _made_of(ladders, subs, made),
        "weights": {name: _rounded(values) for name, values in weights.items()},
        "growing": _rounded(growing),
        "growth": {known: _growth(judged[known]) for known in KNOWLEDGE},
        "stretch": {known: _short(by_levels) for known, by_levels in stretch.items()},
        "coverage": {known: _coverages(known, judged[known]) for known in KNOWLEDGE},
        "next_mesh": {},
    }
    table["coverage"][WITH_COMPANION] = together
    say("promises of the next mesh")
    table["next_mesh"] = {name: asdict(one) for name, one in promises(ladders, as_table(table)).items()}
    say("families that no table is made of")
    taught = as_table(table)
    aside = {known: finite(of) for known, of in judged_with(sub_ladders(slow, MOST), taught).items()}
    return Calibrated(table, judged, aside, judged_with(sub_ladders(unseen, MOST_UNSEEN), taught))


def _made_of(ladders: Sequence[KnownLadder], subs: Sequence[SubLadder], made: date) -> dict[str, Any]:
    return {
        "date": made.isoformat(),
        "families": sorted({ladder.family for ladder in ladders}),
        "ladders": len(ladders),
        "sub_ladders": len(subs),
    }


def is_slow(ladder: KnownLadder) -> bool:
    """Return whether a part has a corner that makes its values converge more slowly than is calibrated."""
    return ladder.exponent is not None and ladder.exponent < LEAST_EXPONENT


def judged_with(subs: Sequence[SubLadder], taught: Table) -> dict[Knowledge, list[Outcome]]:
    """Return interval and odds of growth of sub-ladders by a table that they have no part in."""
    found: dict[Knowledge, list[Outcome]] = {}
    for known in KNOWLEDGE:
        told = [read(sub.h, sub.f, *told_as(known, sub), taught) for sub in subs]
        found[known] = [
            Outcome(sub, one.low, one.high, one.odds) for sub, one in zip(subs, told, strict=True)
        ]
    return found


def write_calibrated(found: Calibrated, table: Path = TABLE, rows: Path = OUTCOMES) -> None:
    """Write the table and the outcomes beside the code that reads them."""
    table.write_text(json.dumps(found.table, indent=1) + "\n", encoding="utf-8")
    text = io.StringIO()
    columns = csv.writer(text, lineterminator="\n")
    columns.writerow(OUTCOME.names or ())
    for bare, told in zip(found.outcomes["nothing"], found.outcomes["kind and degree"], strict=True):
        of = bare.sub.of
        if of.singular:
            continue
        numbers = [f"{value:.3g}" for one in (bare, told) for value in _standing(one)]
        columns.writerow((bare.sub.levels, of.kind, of.degree, of.dimension, of.source, *numbers))
    write_packed(text.getvalue(), rows)


def coverage_of(known: Knowledge | Companion, levels: int, group: Sequence[Outcome]) -> Coverage:
    """Return the measured coverage of some outcomes with its 95 % binomial interval."""
    cases, covered = len(group), sum(one.is_covered for one in group)
    low, high = binomial_interval(covered, cases)
    ratio = float(np.median([one.half / one.sub.error for one in group]))
    return Coverage(known, levels, cases, covered, low, high, ratio)


def _standing(one: Outcome) -> tuple[float, float]:
    """Return half-width over span of the values, and error of the best estimate over half-width."""
    return one.half / float(np.ptp(one.sub.f)), abs(one.best - one.sub.of.limit) / one.half


def _coverages(known: Knowledge | Companion, judged: Sequence[Outcome]) -> dict[str, Any]:
    found = {}
    for levels in range(2, MOST_LEVELS + 1):
        group = [one for one in finite(judged) if min(one.sub.levels, MOST_LEVELS) == levels]
        if group:
            found[str(levels)] = asdict(coverage_of(known, levels, group))
    return found


def _growth(judged: Sequence[Outcome]) -> dict[str, float]:
    """Return the odds above which few stresses with a limit lie, and below which few without one are missed.

    Of those without a limit the ones that are called neither singular nor unproven are missed.
    """
    many = [one for one in judged if one.sub.levels >= LEAST_TO_SHOW]
    stresses = [one.growth for one in finite(many) if one.sub.of.kind in STRESS_KINDS]
    shown = float(np.quantile(stresses, 1.0 - FALSE_ALARM))
    singular = [one for one in many if one.sub.of.singular]
    hidden = [one for one in singular if one.growth < shown]
    doubtful = sorted(one.growth for one in hidden if not is_settled(one))
    may_be_missed = int(MISSED * len(singular)) - (len(hidden) - len(doubtful))
    possible = min(doubtful[max(may_be_missed, 0)], shown)
    return {"shown": round(shown, DIGITS), "possible": round(possible, DIGITS)}


def _short(by_levels: Mapping[str, Mapping[str, float]]) -> dict[str, dict[str, float]]:
    return {
        levels: {name: round(value, DIGITS) for name, value in stretch.items()}
        for levels, stretch in by_levels.items()
    }


def _rounded(weights: np.ndarray) -> list[float]:
    return [float(f"{value:.{DIGITS}g}") for value in weights.ravel()]
