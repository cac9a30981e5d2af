"""Made-up findings and fields for the report: an L-shaped bracket and ladders with chosen behaviour."""

import math
from collections.abc import Callable, Sequence

import numpy as np
import pytest

from convergence.corner import Corner
from convergence.coverage import Coverage
from convergence.dimensions import SYSTEMS, Units
from convergence.fields import Fields
from convergence.report.as_html import as_html
from convergence.report.content import Block, Document, Section
from convergence.results import Check, Estimate, Facts, Findings, Ladder, Level, Quantity, Verdict

NAN = math.nan
Said = Section | Sequence[Block]
COVERAGE = Coverage("kind and degree", 5, 2140, 2057, 0.9521, 0.9690, 3.1)
Map = Callable[[np.ndarray, np.ndarray, np.ndarray], tuple[np.ndarray, ...]]

# corners of a hexahedron's faces, counter-clockwise from outside; corner i, j, k is number 4 i + 2 j + k
SIDES = ((0, 1, 3, 2), (4, 6, 7, 5), (0, 4, 5, 1), (2, 3, 7, 6), (0, 2, 6, 4), (1, 5, 7, 3))


def make_verdict(word: str = "sound", **changes: object) -> Verdict:
    """A verdict on 312.437 ± 1.996 with a tolerance of 2 %."""
    facts: dict[str, object] = {
        "word": word, "value": 312.437, "limit": 313.9, "low": 310.441, "high": 314.433,
        "uncertainty": 1.996, "tolerance": 0.02 * 312.437, "behaviour": "monotone",
        "observed_order": 1.94, "formal_order": 2.0, "expected_order": 2.0, "next_h": NAN,
        "next_cells": NAN, "next_dofs": NAN, "next_seconds": NAN, "next_memory": NAN,
        "order_low": 1.62, "order_high": 2.21, "coverage": COVERAGE,
        "reasons": ("The last three changes fall with the order of theory.",),
    }  # fmt: skip
    return Verdict(**{**facts, **changes})  # type: ignore[arg-type]


def converging(limit: float, first: float, order: float, h: np.ndarray) -> np.ndarray:
    """Values limit + (first - limit) (h / h of the coarsest)^order."""
    return np.asarray(limit + (first - limit) * (h / h[0]) ** order)


def make_ladder(columns: dict[str, np.ndarray], h: np.ndarray) -> Ladder:
    """A ladder on an area of 12,000 with about two cells per h squared."""
    levels = []
    for index, size in enumerate(h):
        cells = int(24_000 / size**2)
        values = {name: float(column[index]) for name, column in columns.items()}
        levels.append(Level(float(size), cells, 4 * cells + 90, 0.02 * cells**1.1, values))
    return Ladder(tuple(levels), "out/bracket/ladder.csv", "3f9a2c")


def make_fields(divisions: int) -> Fields:
    """An L-shaped part of 120 by 120 with a made-up field that peaks at the inner corner (60, 60)."""
    line = np.linspace(0.0, 120.0, 2 * divisions + 1)
    x, y = (part.ravel() for part in np.meshgrid(line, line, indexing="ij"))
    count = len(line)
    i, j = (part.ravel() for part in np.meshgrid(range(count - 1), range(count - 1), indexing="ij"))
    keep = (i < divisions) | (j < divisions)
    low = (i * count + j)[keep]
    cells = np.vstack((low, low + count, low + count + 1, low + 1))
    used, flat = np.unique(cells, return_inverse=True)
    points, cells = np.vstack((x, y))[:, used], flat.reshape(cells.shape)
    pairs = np.hstack([cells[[k, (k + 1) % 4]] for k in range(4)])
    _, first, times = np.unique(np.sort(pairs, axis=0), axis=1, return_index=True, return_counts=True)
    radius = np.hypot(points[0] - 60, points[1] - 60) + 30.0 / divisions
    middle = points[:, cells].mean(axis=1)
    return Fields(
        points=points, cells=cells, edges=pairs[:, first], boundary=pairs[:, first[times == 1]],
        displacement=np.vstack((1e-3 * points[1] ** 2 / 120, -2e-3 * points[0] ** 2 / 120)),
        von_mises=220 * radius**-0.45 + 0.4 * np.abs(points[1] - 60),
        error=1e-4 / ((np.hypot(*(middle - 60)) + 3.0) ** 2),
    )  # fmt: skip


def make_findings() -> Findings:
    """Five levels and one quantity of each verdict, one with a name that needs escaping."""
    h = 12.0 / 2.0 ** np.arange(5)
    peak = converging(313.9, 250.0, 1.94, h)
    columns = {
        "fillet_stress": peak, "fillet_stress.x": np.full(5, 62.0), "fillet_stress.y": np.full(5, 60.0),
        "tip_deflection": converging(-0.03214, -0.0312, 1.1, h),
        "corner_stress": 90.0 * (h / h[0]) ** -0.455,
        "corner_stress.x": np.full(5, 60.0), "corner_stress.y": np.full(5, 60.0),
        "<b>pin & \"reaction\"</b> $x$": np.array([NAN, 11999.2, 12003.1, 11998.7, 12001.9]),
        "energy_norm.estimated": 0.2 * (h / h[0]) ** 0.545,
        "energy_norm.exact": 0.21 * (h / h[0]) ** 0.545,
    }  # fmt: skip
    names = [name for name in columns if "." not in name]
    value = float(peak[-1])
    tip = float(columns["tip_deflection"][-1])
    verdicts = (
        make_verdict(value=value, low=value - 1.996, high=value + 1.996, tolerance=0.02 * value),
        make_verdict(
            "refine", value=tip, limit=-0.03214, low=tip - 0.0012, high=tip + 0.0012, uncertainty=0.0012,
            tolerance=0.01 * abs(tip), observed_order=1.1, formal_order=4.0, expected_order=1.09,
            next_h=0.31, next_cells=249_740.1, next_dofs=998_960.4, next_seconds=48.3,
        ),
        make_verdict(
            "singular", value=float(columns["corner_stress"][-1]), limit=NAN, low=NAN, high=NAN,
            uncertainty=NAN, tolerance=5.0, observed_order=NAN, coverage=None, behaviour="growing",
            reasons=("The inner corner at 60, 60 has the exponent 0.545.", "Report a stress 10 mm away."),
        ),
        make_verdict(
            "unproven", value=12001.9, limit=NAN, low=NAN, high=NAN, uncertainty=NAN, tolerance=60.0,
            coverage=None, observed_order=NAN, formal_order=None, expected_order=None,
            behaviour="oscillating", reasons=("Changes keep their size from level to level",),
        ),
    )  # fmt: skip
    quantities = (
        Quantity(names[0], "peak_stress", "MPa", 2.0, relative=0.02, description="Largest von Mises stress."),
        Quantity(names[1], "displacement", "mm", 4.0, relative=0.01),
        Quantity(names[2], "peak_stress", "MPa", 2.0, absolute=5.0),
        Quantity(names[3], "reaction", "N", None, relative=0.05, assumed_tolerance=True),
    )
    estimate = {
        "grid_convergence_index": Estimate(313.9, 1.94, 1.83),
        "least_squares": Estimate(314.0, 2.0, 1.996, "order taken from theory"),
        "richardson": Estimate(NAN, NAN, NAN, "needs three levels"),
    }
    checks = (
        Check(
            "force_balance", True, "Reactions and loads agree to 3e-12.", values={"residual": (1e-12, 3e-12)}
        ),
        Check("linear_range", False, "Peak stress of 314 is above yield of 300.", {"": "theory ends here"}),
        Check("solver_residual", None, "No matrix is known for a table."),
    )
    corner = Corner("inner corner", ((60.0, 60.0),), ("inner",), 270.0, ("free", "free"), 0.5445)
    return Findings(
        "Bracket of the quayside davit", make_ladder(columns, h), quantities,
        Facts(degree=2, size=120.0, corners=(corner,)), {names[0]: estimate, names[1]: estimate}, checks,
        dict(zip(names, verdicts, strict=True)),
    )  # fmt: skip


def surface(counts: tuple[int, int, int], place: Map) -> Fields:
    """The surface of a grid of hexahedra over the unit cube, mapped by `place`; equal places are joined.

    Sharp edges are those between faces more than 30 degrees apart. The stress is 1 everywhere.
    """
    lines = [np.linspace(0.0, 1.0, count + 1) for count in counts]
    grid = np.array(place(*(part.ravel() for part in np.meshgrid(*lines, indexing="ij"))))
    _, first, joined = np.unique(np.round(grid, 6), axis=1, return_index=True, return_inverse=True)
    number = joined.reshape([count + 1 for count in counts])
    i, j, k = (part.ravel() for part in np.indices(counts))
    cells = np.array([number[i + a, j + b, k + c] for a in (0, 1) for b in (0, 1) for c in (0, 1)])
    faces = np.hstack([cells[list(side)] for side in SIDES])
    _, once, times = np.unique(np.sort(faces, axis=0), axis=1, return_index=True, return_counts=True)
    faces = faces[:, np.sort(once[times == 1])]
    points = grid[:, first]
    edges, sharp = lines_of(points, faces)
    return Fields(
        points=points, cells=faces, edges=edges, boundary=edges[:, sharp],
        displacement=np.zeros_like(points), von_mises=np.ones(points.shape[1]),
        error=np.ones(faces.shape[1]),
    )  # fmt: skip


def lines_of(points: np.ndarray, faces: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """The edges of the faces, each once, and which of them are sharp."""
    a, b = points[:, faces[2]] - points[:, faces[0]], points[:, faces[3]] - points[:, faces[1]]
    normals = np.cross(a, b, axis=0)
    normals /= np.linalg.norm(normals, axis=0)
    pairs = np.sort(np.hstack([faces[[k, (k + 1) % 4]] for k in range(4)]), axis=0)
    order = np.lexsort(pairs)
    pairs, face = pairs[:, order], (order % faces.shape[1])
    assert (pairs[:, ::2] == pairs[:, 1::2]).all(), "a closed surface has two faces at every edge"
    along = (normals[:, face[::2]] * normals[:, face[1::2]]).sum(axis=0)
    return pairs[:, ::2], along < math.cos(math.radians(30.0))


def cube(divisions: int) -> Fields:
    return surface((divisions,) * 3, lambda x, y, z: (x, y, z))


def drilled(divisions: int) -> Fields:
    """A block of 40 by 40 by 20 with a hole of radius 10 along z."""

    def place(s: np.ndarray, t: np.ndarray, u: np.ndarray) -> tuple[np.ndarray, ...]:
        turn = -2 * math.pi * s
        x, y = np.cos(turn), np.sin(turn)
        square = 20.0 / np.maximum(abs(x), abs(y))
        r = 10.0 + t * (square - 10.0)
        return r * x, r * y, 20.0 * u

    return surface((8 * divisions, 2 * divisions, 2 * divisions), place)


def angle(divisions: int) -> Fields:
    """A plate 4 thick and 30 wide, bent by 90 degrees about z: a leg of 40, a bend, another leg of 40."""

    def place(s: np.ndarray, t: np.ndarray, u: np.ndarray) -> tuple[np.ndarray, ...]:
        along, depth = 3 * s, 4.0 * t
        turn = np.clip(along - 1, 0, 1) * math.pi / 2
        r = 8.0 - depth
        x = 40 * np.minimum(along, 1) + r * np.sin(turn)
        y = 8.0 - r * np.cos(turn) + 40 * np.maximum(along - 2, 0)
        return x, y, 30.0 * u

    return surface((9 * divisions, divisions, 6 * divisions), place)


@pytest.fixture(scope="session")
def findings() -> Findings:
    return make_findings()


@pytest.fixture(scope="session")
def fields() -> list[Fields]:
    return [make_fields(n) for n in (3, 6, 12, 24, 48)]


@pytest.fixture(scope="session")
def units() -> Units:
    return SYSTEMS["mm, N, MPa"]


@pytest.fixture(scope="session")
def verdict_of() -> Callable[..., Verdict]:
    return make_verdict


@pytest.fixture(scope="session")
def ladder_of() -> Callable[..., Ladder]:
    return make_ladder


@pytest.fixture(scope="session", name="cube")
def cube_of() -> Callable[[int], Fields]:
    return cube


@pytest.fixture(scope="session", name="drilled")
def drilled_of() -> Callable[[int], Fields]:
    return drilled


@pytest.fixture(scope="session", name="angle")
def angle_of() -> Callable[[int], Fields]:
    return angle


@pytest.fixture(scope="session")
def on_page() -> Callable[[Said], str]:
    """How a section, or its blocks, stand on the page, from after its title."""

    def of(said: Said) -> str:
        section = said if isinstance(said, Section) else Section("", "", "", said)
        return as_html(Document("", "", [section])).partition("</h2>")[2]

    return of
