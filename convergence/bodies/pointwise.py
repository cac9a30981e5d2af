"""The pointwise map: every node of the finest mesh judged by itself, from the values of all meshes there.

What a node is told is what `calibrated` says of its values on the finest three meshes, as a quantity read
at that place would be told. Values of a coarse mesh inside its cells are less exact than at its nodes, so
orders scatter from node to node. Of 282,000 nodal values with known limits the intervals held 99.5 %, of any
one field on one kind of cells 95 % or more (own computation, `bench.map_coverage`).
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from dataclasses import fields as dataclass_fields
from typing import Literal, get_args

import numpy as np

from convergence.bodies.carry import Carried, carry
from convergence.bodies.nodal_fields import STRESS, NodalFields
from convergence.fem.stress import Component, component
from convergence.histories.many import GROWTH, LEVELS, Many, many
from convergence.results import Kind, VerdictWord
from convergence.sequences import observed_orders

WORDS: tuple[VerdictWord, ...] = get_args(VerdictWord)  # by code
NOISE = 1e-6  # of the span of a field
SETTLED = 0.03  # half-width over scale below which no singular value of the bank lies
Scale = Literal["largest", "local"]


@dataclass(frozen=True)
class Reading:
    """One number of a field that is judged at every node, and what is accepted there.

    component: an axis, "magnitude", of a stress a component of `fem.stress`; "" for a field of one number.
    The tolerance is a share of the largest absolute value of all judged nodes, or of the local value.
    """

    field: str
    component: str
    kind: Kind
    tolerance: float
    scale: Scale = "largest"

    @property
    def name(self) -> str:
        return f"{self.field} {self.component}".strip()

    def of(self, fields: Mapping[str, np.ndarray]) -> np.ndarray:
        """Return the number (n,) from the fields (components, n)."""
        values = fields[self.field]
        if self.component == "":
            return np.asarray(values[0])
        if self.component == "magnitude":
            return np.asarray(np.sqrt((values**2).sum(axis=0)))
        if self.component in ("x", "y", "z"):
            return np.asarray(values["xyz".index(self.component)])
        named: Component = self.component  # type: ignore[assignment]
        return component(values, named)


@dataclass(frozen=True, eq=False)
class JudgedField:
    """What the nodes (n,) say of one reading; NaN where there is nothing to say.

    `half_width` is that about the finest value, `low` and `high` the interval, `limit` the best estimate;
    `relative` is the half-width over the scale of the tolerance; `order` that of three levels; `growth` and
    `word` are codes of GROWTH and WORDS; `is_constant` where the levels differ by noise only.
    """

    reading: Reading
    values: np.ndarray
    limit: np.ndarray
    low: np.ndarray
    high: np.ndarray
    half_width: np.ndarray
    relative: np.ndarray
    order: np.ndarray
    growth: np.ndarray
    word: np.ndarray
    is_constant: np.ndarray

    def share(self, word: VerdictWord) -> float:
        """Return the share of the nodes with a verdict."""
        return float(np.mean(self.word == WORDS.index(word)))


@dataclass(frozen=True, eq=False)
class PointwiseMap:
    """What the chosen nodes of the finest mesh are told.

    Of these nodes, `outside` lie in no cell of each coarser mesh but near one; `missing` have no value there.
    """

    finest: NodalFields
    nodes: np.ndarray
    sizes: np.ndarray
    outside: tuple[int, ...]
    missing: tuple[int, ...]
    fields: tuple[JudgedField, ...]


def pointwise(
    finest: NodalFields,
    coarser: Sequence[Sequence[NodalFields]],
    sizes: Sequence[float],
    readings: Sequence[Reading],
    *,
    nodes: np.ndarray | None = None,
    singular: np.ndarray | None = None,
    corners_known: bool = False,
) -> PointwiseMap:
    """Judge nodes of the finest mesh from coarser meshes, coarse to fine, each the pieces that it has.

    `sizes` are the cell sizes of all meshes, three or more; the finest three count. `nodes` are those
    wanted, all where None. `singular` (n,) says which of them stand at singular places; `corners_known` that
    all such places are known: growth that three levels cannot exclude is then no reason for doubt.
    """
    before, h = coarser[1 - LEVELS :], np.array(sizes[-LEVELS:], dtype=float)
    chosen = np.arange(finest.nodes.shape[1]) if nodes is None else nodes
    carried = [carry(pieces, finest, chosen) for pieces in before]
    own = Carried({name: field[:, chosen] for name, field in finest.fields.items()}, 0, 0)
    spots = np.zeros(len(chosen), dtype=bool) if singular is None else singular
    fields = []
    for reading in readings:
        f = np.array([reading.of(one.fields) for one in (*carried, own)], dtype=float)
        every = (finest, *(piece for pieces in before for piece in pieces))
        resolution = max(piece.resolution.get(reading.field, 0.0) for piece in every)
        fields.append(_judged(reading, h, f, finest.kind.degree, resolution, spots, corners_known))
    return PointwiseMap(
        finest=finest,
        nodes=chosen,
        sizes=h,
        outside=tuple(one.outside for one in carried),
        missing=tuple(one.missing for one in carried),
        fields=tuple(fields),
    )


def _judged(
    reading: Reading,
    h: np.ndarray,
    f: np.ndarray,
    degree: int,
    resolution: float,
    singular: np.ndarray,
    corners_known: bool,
) -> JudgedField:
    values = f[-1]
    told = values[np.isfinite(values)]
    noise = max(2.0 * resolution, NOISE * float(np.ptp(told)) if len(told) else 0.0)
    still = np.ptp(f, axis=0) <= noise
    found = _intervals(reading, h, f, degree, resolution, still, noise)
    half = found.about(values)
    largest = float(np.abs(told).max(initial=0.0))
    scale = np.full(len(values), largest) if reading.scale == "largest" else np.abs(values)
    with np.errstate(divide="ignore", invalid="ignore"):
        relative = half / scale
    doubted = (found.growth > 0) & (half > SETTLED * scale)
    if corners_known:
        doubted &= False
    elif reading.field != STRESS:
        doubted &= found.growth == GROWTH.index("shown")
    word = np.where(half <= reading.tolerance * scale, WORDS.index("sound"), WORDS.index("refine"))
    word[doubted | ~np.isfinite(half)] = WORDS.index("unproven")
    word[still & (half > reading.tolerance * scale)] = WORDS.index("unproven")
    if reading.field == STRESS:
        word[singular] = WORDS.index("singular")
    return JudgedField(
        reading=reading,
        values=values,
        limit=found.limit,
        low=found.low,
        high=found.high,
        half_width=half,
        relative=relative,
        order=np.where(still, np.nan, observed_orders(h, f)),
        growth=found.growth,
        word=word.astype(np.int8),
        is_constant=still,
    )


def _intervals(
    reading: Reading,
    h: np.ndarray,
    f: np.ndarray,
    degree: int,
    resolution: float,
    still: np.ndarray,
    noise: float,
) -> Many:
    """Return the calibrated intervals, and those of values that do not move by more than noise."""
    values, half = f[-1], np.maximum(noise, np.ptp(f, axis=0))
    unknown, none = np.full(len(values), np.nan), np.zeros(len(values), dtype=np.int8)
    found = Many(values.copy(), values - half, values + half, unknown, unknown.copy(), none)
    moving = np.flatnonzero(~still)
    if len(moving):
        told = many(h, f[:, moving], kind=reading.kind, degree=degree, resolution=resolution)
        for name in (field.name for field in dataclass_fields(Many)):
            getattr(found, name)[moving] = getattr(told, name)
    return found
