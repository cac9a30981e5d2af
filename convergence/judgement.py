"""Study facts and a ladder -> findings; nothing is solved and no file is read or written here."""

from collections.abc import Mapping
from dataclasses import replace

import numpy as np

from convergence import rooms
from convergence.checks._instead import instead_columns
from convergence.checks.linear_range import own_peaks
from convergence.companions import together
from convergence.corner import Corner
from convergence.corners.singular_corners import singular_corners, unexamined_corners
from convergence.fem.material import Material
from convergence.fem.problem import AnyPart, Problem
from convergence.histories.table import table
from convergence.intervals import Interval, interval
from convergence.ladder_spec import Formulation
from convergence.one_sided import one_sided
from convergence.results import Check, Companion, Estimate, Facts, Findings, Ladder, Quantity, Yield
from convergence.study import Study
from convergence.verdicts import verdict

BALANCES = ("equilibrium.force", "energy_balance.difference", "solver_residual.relative")


def facts_of(study: Study) -> Facts:
    """Return what theory and the study say beside the numbers."""
    quantities = study.quantities
    facts = Facts(dimension=study.dimension, balance=study.balance)
    if study.ladder is None:
        return replace(facts, yields={"": _yield(study.materials["material"])})
    problem = study.problem()
    given = study.fields
    corners = None if given and len(given.pieces) > 1 else singular_corners(problem)
    unexamined = unexamined_corners(problem) if corners is not None else ()
    return replace(
        facts,
        degree=study.ladder.degree,
        size=problem.part.size,
        corners=corners,
        covered={q.name: _covered(q, problem.part, corners or ()) for q in quantities},
        all_corners=given is None or bool(problem.supports),
        unexamined=unexamined,
        doubtful={q.name: _covered(q, problem.part, unexamined) for q in quantities},
        components={q.name: str(q.arguments.get("component", "")) for q in quantities},
        regions={q.name: str(q.arguments.get("region") or "") for q in quantities},
        yields={region: _yield(material) for region, material in problem.materials.items()},
        sides={q.name: _side(q, problem, study.ladder.formulation) for q in quantities if not given},
    )


def _yield(material: Material) -> Yield | None:
    strength = material.yield_strength
    return None if strength is None else Yield(strength, material.yield_source)


def _covered(quantity: Quantity, part: AnyPart, corners: tuple[Corner, ...]) -> tuple[Corner, ...]:
    """Return those of some corners that are within the reach of a quantity."""
    if quantity.measure is None:  # of files, over the whole part
        return corners
    covers = rooms.beside("quantities", quantity.measure_name, "covers")
    if covers is None:
        return ()
    return tuple(corner for corner in corners if covers(part, corner, quantity.arguments))


def _side(quantity: Quantity, problem: Problem, formulation: Formulation) -> int:
    """Return on which side of its values theory has the limit, 0 where it does not say."""
    side = rooms.beside("quantities", quantity.measure_name, "side")
    return int(side(problem, quantity.arguments)) if side and formulation == "displacement" else 0


def judge(
    ladder: Ladder,
    quantities: tuple[Quantity, ...],
    facts: Facts,
    title: str,
    companion: Companion | None = None,
) -> Findings:
    """Return estimates, checks and a verdict for every quantity of a ladder."""
    intervals = {q.name: _interval(ladder, q, _scale(ladder, q, facts)) for q in quantities}
    if companion:
        intervals |= {q.name: _together(intervals[q.name], companion, q, facts) for q in companion.quantities}
    intervals = {
        name: one_sided(found, ladder.column(name), facts.sides.get(name, 0))
        for name, found in intervals.items()
    }
    peaks = {
        name: _interval(ladder, Quantity(name, kind="peak_stress", degree=facts.degree))
        for name in own_peaks(ladder)
    }
    facts = replace(
        facts, kinds={q.name: q.kind for q in quantities}, units={q.name: q.unit for q in quantities}
    )
    others = {
        name: interval(ladder.h, f, kind="point_stress", degree=facts.degree)
        for name, f in instead_columns(ladder, facts).items()
    }
    stated = intervals | peaks | others
    facts = replace(
        facts,
        intervals={name: (found.low, found.high) for name, found in stated.items()},
        growing={n: (i.order_low, i.order_high) for n, i in intervals.items() if i.growth == "shown"},
    )
    checks = tuple(rooms.find("checks", name)(ladder, facts) for name in rooms.names("checks"))
    return Findings(
        title=title,
        ladder=ladder,
        quantities=quantities,
        facts=facts,
        estimates={quantity.name: _estimates(ladder, quantity) for quantity in quantities},
        checks=checks,
        verdicts={
            q.name: verdict(q, intervals[q.name], spoiled(checks, q.name), ladder, facts) for q in quantities
        },
        companion=companion,
    )


def _together(main: Interval, companion: Companion, quantity: Quantity, facts: Facts) -> Interval:
    other = _interval(companion.ladder, quantity, _scale(companion.ladder, quantity, facts))
    return together(main, other, table())


def _interval(ladder: Ladder, quantity: Quantity, scale: float = 0.0) -> Interval:
    f = ladder.column(quantity.name)
    noise = _solver_noise(ladder) * max(_largest(f), scale)
    return interval(
        ladder.h,
        f,
        kind=quantity.kind,
        degree=quantity.degree,
        resolution=max(ladder.resolution.get(quantity.name, 0.0), noise),
    )


def _estimates(ladder: Ladder, quantity: Quantity) -> dict[str, Estimate]:
    """Return what the published methods say of the levels with a value; the interval is not made from it."""
    f = ladder.column(quantity.name)
    known = np.isfinite(f)
    return {
        name: rooms.find("estimators", name)(ladder.h[known], f[known], formal_order=quantity.formal_order)
        for name in rooms.names("estimators")
    }


def _scale(ladder: Ladder, quantity: Quantity, facts: Facts) -> float:
    """Return what is large for this kind of quantity: one that is zero by symmetry is noise of that size."""
    if facts.size is None:
        return 0.0
    if quantity.kind == "displacement":
        return facts.size * _largest(ladder.column("linear_range.displacement"))
    if quantity.kind in ("point_stress", "peak_stress"):
        return max((_largest(ladder.column(name)) for name in own_peaks(ladder)), default=0.0)
    if quantity.kind in ("reaction", "resultant"):
        forces = (f"equilibrium.{what}_{axis}" for what in ("load", "reaction") for axis in "xyz")
        arm = facts.size if quantity.measure_name.endswith("moment") else 1.0
        return arm * max(_largest(ladder.column(name)) for name in forces)
    return 0.0


def _solver_noise(ladder: Ladder) -> float:
    """Return how far the worst level is from balance, as a share: smaller differences are no evidence."""
    return max(_largest(ladder.column(name)) for name in BALANCES)


def _largest(values: np.ndarray) -> float:
    return float(np.max(np.abs(values), initial=0.0, where=np.isfinite(values)))


def spoiled(checks: tuple[Check, ...], name: str) -> Mapping[str, str]:
    """Return verdict word -> reason for the failed checks that concern a quantity."""
    reasons: dict[str, str] = {}
    for check in checks:
        for key in (name, ""):
            if check.passed is False and key in check.spoils:
                reasons.setdefault(check.leads_to, check.spoils[key])
    return reasons
