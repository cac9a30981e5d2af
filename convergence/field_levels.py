"""The ladder of a study of result files: what their displacements say on every mesh; nothing is solved."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from convergence import numbers
from convergence.bodies.field_solution import field_solution, imbalance
from convergence.bodies.hot_spots import HotSpot, hot_spots
from convergence.bodies.nodal_fields import NodalFields
from convergence.fem.averaging import stress_spread
from convergence.fem.display import MOST_FACES, display, faces
from convergence.fem.mesh import mesh
from convergence.fem.recovery import recovered_von_mises
from convergence.fem.solution import Solution
from convergence.field_map import mapped_pieces
from convergence.field_pieces import joined_fields, joined_records, measured_on
from convergence.field_quantities import FILE_PEAK, HOT_SPOT, hot_spot_quantity
from convergence.field_study import FieldStudy
from convergence.fields import Fields
from convergence.measuring import records
from convergence.results import Ladder, Level, Quantity
from convergence.study import Study

SOLVED = ("equilibrium", "energy_balance", "solver_residual")  # say how well our own equations are solved


@dataclass(frozen=True)
class FieldLadder:
    """The ladder of result files, the study with its hot spots among the quantities, and fields to draw.

    `pieces` are regions and fields of every mesh on its nodes, where the study asks for a map of them.
    """

    study: Study
    ladder: Ladder
    fields: tuple[Fields, ...]
    pieces: tuple[list[tuple[str, NodalFields]], ...] = ()


def field_ladder(study: Study) -> FieldLadder:
    """Return what the files of a study say, the finest first read: its hot spots are followed down."""
    given = study.fields
    assert given is not None
    count = len(given.files)
    finest = _solutions(given, count - 1)
    spots = _spots(given, finest) if given.hot_spots else ()
    listed = (
        hot_spot_quantity(given.pieces[0], number, spot, study.units)
        for number, spot in enumerate(spots, start=1)
    )
    study = replace(study, quantities=(*study.quantities, *listed))
    levels, fields, pieces = [], [], []
    for number in reversed(range(count)):
        solutions = finest if number == count - 1 else _solutions(given, number)
        levels.append(_level(study, given, solutions, number))
        if all(number == 0 or faces(each.mesh) <= MOST_FACES for each in solutions):
            fields.append(joined_fields([display(each) for each in solutions]))
        if given.map:
            pieces.append(mapped_pieces(solutions, given.single))
    ladder = Ladder(
        levels=tuple(reversed(levels)),
        source=", ".join(file.name for file in given.files),
        fingerprint=study.fingerprint,
        remarks=(*_places(spots), *given.remarks),
        resolution=_resolution(given, finest, study.quantities),
        h_unit=study.units.length,
    )
    return FieldLadder(study, ladder, tuple(reversed(fields)), tuple(reversed(pieces)))


def _solutions(given: FieldStudy, number: int) -> list[Solution]:
    """Return the field on one mesh of the series, a solution for each kind of its cells."""
    found = []
    for piece in given.pieces:
        part = piece.problem.part
        made = mesh(part, {0: number}, shape=piece.shape, degree=piece.degree)
        found.append(field_solution(piece.problem, made, piece.displacement[number]))
    return found


def _level(study: Study, given: FieldStudy, solutions: list[Solution], number: int) -> Level:
    own = [quantity for quantity in study.quantities if quantity.measure]
    values = measured_on(own, solutions, study.file.name)
    values |= joined_records([records(solution, SOLVED) for solution in solutions], solutions)
    problem = solutions[0].problem
    if problem.supports and problem.loads:
        values |= {f"given_field.{name}": value for name, value in imbalance(solutions[0]).items()}
    else:
        values["energy_norm.identity"] = 0.0
    if given.stress:
        peak = given.stress[number]
        values |= {"file_stress.file": peak.value, "file_stress.by_cell": float(peak.by_cell)}
        values["file_stress.recomputed"] = max(float(recovered_von_mises(s).max()) for s in solutions)
        values |= {FILE_PEAK: peak.value}
        for axis, x in zip("xyz", peak.place, strict=False):
            values |= {f"{FILE_PEAK}.{axis}": x, f"file_stress.{axis}": x}
    values |= _spreads(study, solutions, values)
    values |= {f"cell_quality.{name}": value for name, value in given.quality[number].items()}
    cells = sum(solution.mesh.cells for solution in solutions)
    measure = sum(solution.mesh.measure for solution in solutions)
    h = float((measure / cells) ** (1.0 / study.dimension))
    return Level(h, cells, given.dofs[number], float("nan"), values)


def _spots(given: FieldStudy, finest: list[Solution]) -> tuple[HotSpot, ...]:
    """Return the hot spots over all kinds of cells, the hottest first."""
    found: list[HotSpot] = []
    for piece, solution in zip(given.pieces, finest, strict=True):
        coarser = [made.nodes for made in piece.part.meshes[:-1]]
        found += hot_spots(solution.mesh, recovered_von_mises(solution), coarser)
    kept: list[HotSpot] = []
    for spot in sorted(found, key=lambda spot: -spot.stress):
        place = np.array(spot.place)
        if all(np.linalg.norm(place - other.place) > spot.reach + other.reach for other in kept):
            kept.append(spot)
    return tuple(kept[: given.hot_spots])


def _places(spots: Sequence[HotSpot]) -> tuple[str, ...]:
    """Return where the hot spots are, in words."""
    places = (f"({', '.join(numbers.compact(x, 4) for x in spot.place)})" for spot in spots)
    named = ", ".join(f"{HOT_SPOT}{number} {place}" for number, place in enumerate(places, start=1))
    return (f"places on the finest mesh: {named}",) if named else ()


def _spreads(study: Study, solutions: list[Solution], values: Mapping[str, float]) -> dict[str, float]:
    """Return half the spread of the cells' own stress around each hot spot over their average."""
    found = {}
    for quantity in study.quantities:
        place = [values.get(f"{quantity.name}.{axis}", np.nan) for axis in "xyz"[: study.dimension]]
        if not quantity.name.startswith(HOT_SPOT) or not np.isfinite(place).all():
            continue
        for solution in solutions:
            made = solution.mesh
            node = int(np.linalg.norm(made.nodes - np.array(place)[:, None], axis=0).argmin())
            if made.nodes[:, node].tolist() == place:
                regions = made.regions.values()
                region = next(cells for cells in regions if (made.cell_nodes[:, cells] == node).any())
                found[f"{quantity.name}.spread"] = stress_spread(solution, node, region)[0]
    return found


def _resolution(given: FieldStudy, finest: list[Solution], asked: Sequence[Quantity]) -> dict[str, float]:
    """Return what single precision leaves of displacements and stresses on the finest mesh."""
    if not given.single:
        return {}
    moved = max(float(np.abs(solution.displacement).max()) for solution in finest)
    h = min(solution.mesh.h for solution in finest)
    stiffest = max(m.young for piece in given.pieces for m in piece.problem.materials.values())
    step = 0.5 * float(np.finfo(np.float32).eps) * moved
    sizes = {"displacement": step, "peak_stress": stiffest * step / h, "point_stress": stiffest * step / h}
    return {quantity.name: sizes[quantity.kind] for quantity in asked if quantity.kind in sizes}
