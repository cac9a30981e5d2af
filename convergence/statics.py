"""Statics of printed forces: whether the loads and reactions of a printout balance.

A body at rest has no sum of forces and no sum of moments about any point (Newton; textbook statics). What is
left over is stated as a share of the load: forces over the sum of the magnitudes of the loads, moments over
the larger of two, the largest moment of a single load about the point, and that sum times the extent of the
points. Accepted: 0.1 % (common practice).

Every printed force and moment may be off by half a unit of its last digit; these add up to the rounding of a
sum. An out-of-balance within it proves nothing. Coordinates are taken as exact.
"""

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

import numpy as np

from convergence import numbers
from convergence.errors import require

Word = Literal["balanced", "within rounding", "out of balance"]
SEVERITY: tuple[Word, ...] = ("balanced", "within rounding", "out of balance")
COMPONENTS = ("Fx", "Fy", "Fz", "Mx", "My", "Mz")
IN_PLANE = ("Fx", "Fy", "Mz")
ACCEPTED = 0.001
ROUND_OFF = 1e-12  # of the sum of the sizes of what is added


@dataclass(frozen=True, eq=False)
class Actions:
    """Forces and moments at points, arrays (3, n) but for `is_load` (n); roundings are half-units."""

    is_load: np.ndarray
    names: tuple[str, ...]
    force: np.ndarray
    moment: np.ndarray
    point: np.ndarray
    force_rounding: np.ndarray
    moment_rounding: np.ndarray

    def of(self, rows: np.ndarray) -> "Actions":
        """Return those of some rows, a mask."""
        return Actions(
            self.is_load[rows],
            tuple(name for name, chosen in zip(self.names, rows, strict=True) if chosen),
            self.force[:, rows],
            self.moment[:, rows],
            self.point[:, rows],
            self.force_rounding[:, rows],
            self.moment_rounding[:, rows],
        )


@dataclass(frozen=True)
class Printout:
    """The actions of every load case of one table, "" where it names none; units are "" where not stated.

    `components` are those that it can balance: no moments where no force has a point.
    """

    source: str
    cases: Mapping[str, Actions]
    components: tuple[str, ...]
    force_unit: str = ""
    length_unit: str = ""
    remarks: tuple[str, ...] = ()

    @property
    def dimension(self) -> int:
        return 3 if "Fz" in self.components else 2


@dataclass(frozen=True)
class Component:
    """One sum: of the loads, of the reactions, what the rest is measured by, and how far digits move it."""

    name: str
    loads: float
    reactions: float
    missing: float
    scale: float
    rounding: float
    word: Word

    @property
    def share(self) -> float:
        return _share(self.missing, self.scale)


@dataclass(frozen=True)
class Balance:
    """The balance of one load case about a point; `reversed`: it would hold with the reactions turned."""

    case: str
    about: tuple[float, ...]
    tolerance: float
    components: tuple[Component, ...]
    reversed: bool
    actions: Actions
    printout: Printout

    @property
    def passed(self) -> bool | None:
        """Return None where only the rounding of the printout stands in the way."""
        return {"balanced": True, "within rounding": None, "out of balance": False}[self.worst.word]

    @property
    def worst(self) -> Component:
        return max(self.components, key=lambda one: (SEVERITY.index(one.word), one.share))

    @property
    def coarse(self) -> bool:
        """Return whether rounding alone could move a sum by more than the tolerance."""
        return any(_share(one.rounding, one.scale) > self.tolerance for one in self.components)


def balances(
    printout: Printout, about: tuple[float, ...] | None = None, tolerance: float = ACCEPTED
) -> dict[str, Balance]:
    """Return the balance of every case about a point, the origin where none is given.

    Raises `Unsuitable` where the point has not as many coordinates as the table.
    """
    about = about or (0.0,) * printout.dimension
    right = f"give {printout.dimension} coordinates, as the table has"
    require((len(about) == printout.dimension, "about", about, right))
    return {case: _balance(printout, case, about, tolerance) for case in printout.cases}


def _balance(printout: Printout, case: str, about: tuple[float, ...], tolerance: float) -> Balance:
    actions = printout.cases[case]
    centre = np.array([*about, 0.0][:3])[:, None]
    arm = actions.point - centre
    all_six = np.vstack([actions.force, actions.moment + np.cross(arm, actions.force, axis=0)])
    moved = actions.moment_rounding + _reach(arm, actions.force_rounding)
    half = np.vstack([actions.force_rounding, moved]).sum(axis=1)
    sizes = np.abs(all_six).sum(axis=1) + np.append(
        np.zeros(3), _reach(arm, np.abs(actions.force)).sum(axis=1)
    )
    scales = np.repeat(_scales(actions, all_six), 3)
    loads, reactions = (all_six[:, of].sum(axis=1) for of in (actions.is_load, ~actions.is_load))
    missing, if_turned = (
        np.where(np.abs(total) <= ROUND_OFF * sizes, 0.0, total)
        for total in (loads + reactions, loads - reactions)
    )
    used = [COMPONENTS.index(name) for name in printout.components]
    components = tuple(
        Component(
            name=COMPONENTS[k],
            loads=float(loads[k]),
            reactions=float(reactions[k]),
            missing=float(missing[k]),
            scale=float(scales[k]),
            rounding=float(half[k]),
            word=_word(missing[k], scales[k], half[k], tolerance),
        )
        for k in used
    )
    turned = all(_word(if_turned[k], scales[k], half[k], tolerance) != "out of balance" for k in used)
    failed = any(one.word == "out of balance" for one in components)
    return Balance(case, about, tolerance, components, turned and failed, actions, printout)


def _reach(arm: np.ndarray, size: np.ndarray) -> np.ndarray:
    """Return the cross product of sizes, where every term adds."""
    x, y, z = np.abs(arm)
    fx, fy, fz = size
    return np.array([y * fz + z * fy, z * fx + x * fz, x * fy + y * fx])


def _scales(actions: Actions, all_six: np.ndarray) -> tuple[float, float]:
    """Return what forces and moments are measured by: the loads, the reactions where no load is a force."""
    sizes, moments = np.linalg.norm(all_six[:3], axis=0), np.linalg.norm(all_six[3:], axis=0)
    measured = actions.is_load if np.any(sizes[actions.is_load]) else ~actions.is_load
    force = float(sizes[measured].sum())
    extent = float(np.linalg.norm(np.ptp(actions.point, axis=1)))
    single = float(np.max(moments[actions.is_load], initial=0.0))
    return force, max(single, force * extent)


def _share(part: float, whole: float) -> float:
    if part == 0.0:
        return 0.0
    return abs(part) / whole if whole > 0.0 else math.inf


def _word(missing: float, scale: float, rounding: float, tolerance: float) -> Word:
    if _share(missing, scale) <= tolerance:
        return "balanced"
    return "within rounding" if abs(missing) <= (1.0 + 1e-9) * rounding else "out of balance"


def finding(balance: Balance) -> str:
    """Return the outcome in words: the worst component, about which point, and what the digits allow."""
    worst, allowed = balance.worst, numbers.plain_percent(balance.tolerance)
    said = {
        "balanced": "Loads and reactions of the printout balance",
        "within rounding": "Whether loads and reactions balance cannot be told from the printed digits",
        "out of balance": "Loads and reactions of the printout do not balance",
    }[worst.word]
    words = [f"{said}{_worst(worst, balance.tolerance)} (allowed {allowed})"]
    if "Mz" in balance.printout.components:
        words[0] += f", moments about {place(balance.about)} {balance.printout.length_unit}".rstrip()
    if balance.reversed:
        words.append(
            "With the signs of the reactions turned they would: list the forces of the supports on the part"
        )
    elif worst.word != "out of balance" and balance.coarse:
        words.append("The rounding of the printout is wider than the tolerance: print more digits")
    elif worst.share and all(abs(one.missing) <= one.rounding for one in balance.components):
        words.append("What is left is within the rounding of the printed digits")
    return ". ".join(words) + "."


def _worst(worst: Component, tolerance: float) -> str:
    if not worst.share:
        return " to the last digit"
    share = numbers.percent(worst.share, tolerance)
    return f": the worst component, {worst.name}, is off by {share} of the load"


def place(point: tuple[float, ...]) -> str:
    """Return "(x, y)" or "(x, y, z)"."""
    return f"({', '.join(numbers.compact(x, 6) for x in point)})"


def moment_unit(printout: Printout) -> str:
    """Return the unit of a moment, "" where the table states none."""
    return f"{printout.force_unit} {printout.length_unit}".strip() if printout.length_unit else ""
