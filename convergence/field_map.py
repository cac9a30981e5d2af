"""The pointwise map of result files: what [map] says, fields gathered mesh by mesh, their judgement."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Annotated

import numpy as np

from convergence.bodies.nodal_fields import DISPLACEMENT, STRESS, NodalFields, nodal_fields, rounding
from convergence.bodies.pointwise import WORDS, JudgedField, PointwiseMap, Reading, Scale, pointwise
from convergence.corner import Corner
from convergence.dimensions import STRESS as STRESS_DIMENSION
from convergence.dimensions import Bounds, Point, Units
from convergence.errors import require
from convergence.fem.solution import Solution
from convergence.fem.stress import Component
from convergence.histories.many import LEVELS
from convergence.mapped import MappedField
from convergence.sections import Sections

SECTION = "map"
Share = Annotated[float, Bounds(0.0, 1.0)]


@dataclass(frozen=True)
class MapSpec:
    """What [map] says; `low` and `high` are corners of a box, None where all nodes are judged."""

    displacement: float
    stress: float
    stresses: tuple[Component, ...]
    scale: Scale
    low: Point | None
    high: Point | None

    @property
    def readings(self) -> tuple[Reading, ...]:
        moved = Reading(DISPLACEMENT, "magnitude", "displacement", self.displacement, self.scale)
        stresses = (Reading(STRESS, name, "point_stress", self.stress, self.scale) for name in self.stresses)
        return (moved, *stresses)


def map_spec(
    *,
    displacement_tolerance: Annotated[Share, "accepted half-width of the displacement over the scale"] = 0.02,
    stress_tolerance: Annotated[Share, "accepted half-width of a stress over the scale"] = 0.05,
    stresses: Annotated[tuple[Component, ...], "stresses that are judged"] = ("von_mises",),
    scale: Annotated[Scale, "largest value of the judged nodes, or the local value"] = "largest",
    low: Annotated[Point | None, "lower corner of a box whose nodes are judged, all if not given"] = None,
    high: Annotated[Point | None, "upper corner of that box"] = None,
) -> MapSpec:
    """Return what [map] says; Unsuitable where the box has one corner only or no inside."""
    require(
        ((low is None) == (high is None), "high" if high is None else "low", None, "both corners of the box")
    )
    if low is not None and high is not None:
        inside = len(low) == len(high) and all(a < b for a, b in zip(low, high, strict=False))
        require((inside, "high", high, "a corner above the lower one in every coordinate"))
    return MapSpec(displacement_tolerance, stress_tolerance, stresses, scale, low, high)


def read_map(sections: Sections, levels: int) -> MapSpec | None:
    """Return the table [map] of a study of so many files, None where it has none; faults are kept."""
    if SECTION not in sections.file.data:
        return None
    if levels < LEVELS:
        sections.fault(
            (SECTION,), "too few files for a map", f"{LEVELS} or more, each on a finer mesh", levels
        )
    return sections.read(map_spec, SECTION)


def mapped_pieces(solutions: Sequence[Solution], single: bool) -> list[tuple[str, NodalFields]]:
    """Return region and fields of the pieces of a mesh over which stress is continuous.

    They are cells of one kind in one region. `single`: whether the displacements have single precision.
    """
    found = []
    for solution in solutions:
        regions = solution.mesh.regions
        for region in sorted(regions):
            piece = nodal_fields(solution, region if len(regions) > 1 else None)
            stiffness = solution.problem.materials[region].young / solution.mesh.h
            found.append((region, _of_single(piece, stiffness) if single else piece))
    return found


def _of_single(piece: NodalFields, stiffness: float) -> NodalFields:
    """Return fields that know how far single precision of the displacement may have moved them."""
    step = rounding(piece.fields[DISPLACEMENT].astype(np.float32))
    return replace(piece, resolution={DISPLACEMENT: step, STRESS: stiffness * step})


def field_map(
    spec: MapSpec,
    sizes: np.ndarray,
    levels: Sequence[Sequence[tuple[str, NodalFields]]],
    corners: Sequence[Corner],
    known: bool,
) -> tuple[PointwiseMap, ...]:
    """Return the map of every piece from the pieces of three or more levels, coarse to fine.

    `corners` are singular corners of the part, `known` whether there are no others. Nodes less than a cell of
    the finest mesh from one are singular.
    """
    maps = []
    for region, finest in levels[-1]:
        chosen = _chosen(spec, finest.nodes)
        spots = np.zeros(len(chosen), dtype=bool)
        for corner in corners:
            spots |= _distance(corner, finest.nodes[:, chosen]) < sizes[-1]
        coarser = [[piece for name, piece in level if name == region] for level in levels[:-1]]
        made = pointwise(
            finest,
            coarser,
            sizes.tolist(),
            spec.readings,
            nodes=chosen,
            singular=spots,
            corners_known=known,
        )
        maps.append(made)
    return tuple(maps)


def _chosen(spec: MapSpec, nodes: np.ndarray) -> np.ndarray:
    if spec.low is None or spec.high is None:
        return np.arange(nodes.shape[1])
    low, high = (np.array(corner)[: len(nodes), None] for corner in (spec.low, spec.high))
    return np.flatnonzero(((nodes[: len(low)] >= low) & (nodes[: len(low)] <= high)).all(axis=0))


def _distance(corner: Corner, nodes: np.ndarray) -> np.ndarray:
    if len(corner.path) == 1:
        return np.asarray(np.linalg.norm(nodes - np.array(corner.path[0])[:, None], axis=0))
    return np.array([corner.distance(tuple(place)) for place in nodes.T])


def summaries(
    maps: Sequence[PointwiseMap], units: Units, points: np.ndarray | None = None
) -> tuple[MappedField, ...]:
    """Return what the maps of all pieces say together, a line for each reading.

    `points` (D, n) are those nodes of the finest mesh that are drawn.
    """
    found = [
        _summary([one.fields[number] for one in maps], maps, units) for number in range(len(maps[0].fields))
    ]
    if points is None:
        return tuple(found)
    own, at = _drawn(maps, points)
    relative = [np.concatenate([one.fields[number].relative for one in maps]) for number in range(len(found))]
    return tuple(
        replace(one, relative=np.where(own, values[at], np.nan))
        for one, values in zip(found, relative, strict=True)
    )


def _drawn(maps: Sequence[PointwiseMap], points: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return which points are judged nodes, and the number among all judged nodes of the nearest to each."""
    from scipy.spatial import KDTree

    judged = np.concatenate([one.finest.nodes[:, one.nodes] for one in maps], axis=1)
    if judged.shape[1] == 0:
        return np.zeros(points.shape[1], dtype=bool), np.zeros(points.shape[1], dtype=int)
    distance, number = KDTree(judged.T).query(points.T)
    return np.asarray(distance == 0.0), np.asarray(number)


def _summary(parts: Sequence[JudgedField], maps: Sequence[PointwiseMap], units: Units) -> MappedField:
    reading = parts[0].reading
    words = np.concatenate([part.word for part in parts])
    places = np.concatenate([one.finest.nodes[:, one.nodes] for one in maps], axis=1)
    half = np.concatenate([part.half_width for part in parts])
    relative = np.concatenate([part.relative for part in parts])
    told = np.isfinite(relative) & (words != WORDS.index("singular"))
    worst = int(np.where(told, relative, -1.0).argmax()) if told.any() else -1
    return MappedField(
        name=reading.name,
        unit=units.label(STRESS_DIMENSION) if reading.field == STRESS else units.length,
        tolerance=reading.tolerance,
        scale=reading.scale,
        nodes=len(words),
        largest=float(max(np.nanmax(np.abs(part.values), initial=0.0) for part in parts)),
        shares={
            word: float(np.mean(words == code)) if len(words) else 0.0 for code, word in enumerate(WORDS)
        },
        typical=float(np.median(relative[told])) if told.any() else float("nan"),
        worst=float(relative[worst]) if told.any() else float("nan"),
        worst_half_width=float(half[worst]) if told.any() else float("nan"),
        worst_place=tuple(float(x) for x in places[:, worst]) if told.any() else (),
        extrapolated=sum(max(one.outside) for one in maps),
        missing=sum(max(one.missing) for one in maps),
    )
