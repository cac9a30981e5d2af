"""The mesh at which the interval is expected to fit the tolerance, promised only where the bank bears it out.

Where nothing can be promised the next step is named and, if the order holds, the size needed in the end;
where no affordable mesh would do, what would.
"""

import math
from dataclasses import dataclass

import numpy as np

from convergence import numbers
from convergence.forecast import STEEPEST_MEMORY, STEEPEST_TIME, grown
from convergence.histories.promise import (
    MOST_RATIO,
    ONE_STEP,
    PROBABILITY,
    Promise,
    promise_class,
)
from convergence.histories.table import table
from convergence.intervals import Interval
from convergence.results import Facts, Ladder, Quantity

ORDERS = (0.3, 4.0)
STEP = 2.0
LEAST_SHARE = 1e-12
AFFORDABLE_DOFS = 5e7
AFFORDABLE_GROWTH = 1e5  # of the number of cells, where the unknowns are not counted
PLACES = ("point_stress", "peak_stress", "intensity")


@dataclass(frozen=True)
class Mesh:
    """A mesh finer than the finest level by a ratio of sizes, and its cost; NaN where it is not known."""

    h: float = math.nan
    cells: float = math.nan
    dofs: float = math.nan
    seconds: float = math.nan
    memory: float = math.nan
    ratio: float = math.nan


@dataclass(frozen=True)
class Next:
    """The mesh promised to do, of NaN where none can be, and the advice in sentences."""

    mesh: Mesh = Mesh()
    advice: tuple[str, ...] = ()


def next_mesh(
    quantity: Quantity,
    found: Interval,
    tolerance: float,
    expected: float | None,
    ladder: Ladder,
    facts: Facts,
) -> Next:
    """Return what would bring the half-width about the finest value, now above it, to the tolerance (> 0).

    `expected` is the order of theory, None where it is not known.
    """
    promise = _promise(quantity, found, ladder)
    share = max(tolerance / found.half_width, LEAST_SHARE)
    ratio = promise.ratio(share) if promise else math.inf
    if ratio <= MOST_RATIO:
        mesh = finer(ladder, ratio, facts.dimension)
        between = f", with levels between, at ratios up to {ONE_STEP}" if ratio > ONE_STEP else ""
        sure = f"would do with a probability of {100 * PROBABILITY:.0f} %{between}"
        line = f"A cell size of {_size(mesh, ladder)}{_cost(mesh)} {sure}."
        return Next(mesh, (line, *_instead(mesh, quantity, facts, "That is out of reach")))
    return Next(advice=_unpromised(_order(found, expected), share, quantity, ladder, facts))


def _unpromised(
    order: float, share: float, quantity: Quantity, ladder: Ladder, facts: Facts
) -> tuple[str, ...]:
    needed = share ** (-1.0 / order)
    in_the_end, step = (finer(ladder, ratio, facts.dimension) for ratio in (needed, STEP))
    size, held = _size(in_the_end, ladder), f"if an order of {order:.2g} holds"
    count = numbers.cost(math.nan, in_the_end.dofs, math.nan, math.nan)
    none = f"No affordable mesh would do: {held}, the size must be {size}{count}"
    if instead := _instead(in_the_end, quantity, facts, none):
        return instead
    end = f" {_capital(held)}, {size}{_cost(in_the_end)} is needed in the end." if needed > STEP else ""
    return (
        "No mesh can be promised to do: of the known ladders that looked like this one too few narrowed that "
        f"far. Refine in steps: a cell size of {_size(step, ladder)}{_cost(step)} next, then judge "
        f"again.{end}",
    )


def finer(ladder: Ladder, ratio: float, dimension: int) -> Mesh:
    """Return the mesh that is finer than the finest level by a ratio, with what it will cost."""
    finest, growth = ladder.levels[-1], ratio**dimension
    counts = list((finest.h / ladder.h) ** dimension)
    return Mesh(
        finest.h / ratio,
        finest.cells * growth,
        finest.dofs * growth,
        grown(counts, [level.seconds for level in ladder.levels], growth, steepest=STEEPEST_TIME),
        grown(counts, [level.memory for level in ladder.levels], growth, steepest=STEEPEST_MEMORY),
        ratio,
    )


def _promise(quantity: Quantity, found: Interval, ladder: Ladder) -> Promise | None:
    """Return the promise for ladders like this one, None where the bank bears none out or changes grow."""
    if found.behaviour.endswith("divergence"):
        return None
    f = ladder.column(quantity.name)
    f = f[np.isfinite(f)]
    group = promise_class(quantity.kind, quantity.degree, found.half_width, abs(float(f[-1] - f[-2])))
    promise = table().next_mesh.get(group)
    return promise if promise and promise.is_good else None


def _order(found: Interval, expected: float | None) -> float:
    """Return the observed order within the orders believed in, not above that of theory."""
    order = found.order if math.isfinite(found.order) else expected or 1.0
    order = min(max(order, found.order_low), found.order_high)
    return float(min(max(order, ORDERS[0]), max(expected or ORDERS[1], ORDERS[0])))


def _instead(mesh: Mesh, quantity: Quantity, facts: Facts, why: str) -> tuple[str, ...]:
    """Return why a mesh is not affordable and what would do in its place, nothing where it is affordable."""
    dofs = float(np.fmax(mesh.dofs, mesh.cells))
    affordable = dofs <= AFFORDABLE_DOFS if dofs > 0.0 else mesh.ratio**facts.dimension <= AFFORDABLE_GROWTH
    if affordable:
        return ()
    place = quantity.kind in PLACES
    known = "" if quantity.degree else ", if these are of degree 1,"
    ways = [] if (quantity.degree or 1) > 1 else [f"cells of degree 2{known}"]
    if place or facts.exponent is not None:
        ways.append(f"a mesh graded towards {'the place' if place else 'the corners'}")
    elif quantity.kind == "unknown":
        ways.append("a mesh graded towards the place")
    said = (
        "a mean over a region or a resultant" if place else "another quantity, such as a mean or a resultant"
    )
    return (f"{why}; use {' or '.join([*ways, said])}.",)


def _size(mesh: Mesh, ladder: Ladder) -> str:
    return f"about {numbers.compact(mesh.h, 3)} {ladder.h_unit}".strip()


def _cost(mesh: Mesh) -> str:
    return numbers.cost(mesh.cells, mesh.dofs, mesh.seconds, mesh.memory)


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]
