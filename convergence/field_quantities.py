"""The quantities of a study on result files: those it asks for, or the largest displacement and stress."""

from collections.abc import Mapping, Sequence
from functools import partial
from typing import Any

from convergence import rooms
from convergence.bodies.field_names import FilePeak
from convergence.bodies.hot_spots import HotSpot
from convergence.dimensions import STRESS, Units, returned_dimension
from convergence.errors import Fault, listing
from convergence.field_pieces import TOGETHER, FieldPiece
from convergence.measured import misplaced, read_measured
from convergence.quantity_tables import ASSUMED_TOLERANCE, place_of
from convergence.results import Quantity
from convergence.sections import Sections

FILE_PEAK = "peak_in_files"
HOT_SPOT = "hot_spot_"
USUAL: Mapping[str, tuple[str, Mapping[str, Any]]] = {
    "largest_displacement": ("largest_displacement", {}),
    "peak_von_mises": ("peak_stress", {"component": "von_mises"}),
}


def field_quantities(
    sections: Sections, pieces: Sequence[FieldPiece], stress: Sequence[FilePeak]
) -> tuple[Quantity, ...]:
    """Return the quantities of [quantities], the usual ones where there are none, and the files' own peak."""
    names = sections.named("quantities", "quantity")
    for name in names:
        if name.startswith(HOT_SPOT) or name == FILE_PEAK:
            sections.fault(
                ("quantities", name), "a name that result files keep for themselves", "take another", name
            )
    first = pieces[0]
    if names:
        found = [own for name in names if (own := _asked(sections, pieces, name)) is not None]
    else:
        found = [
            made(first, name, measure, arguments, sections.units)
            for name, (measure, arguments) in USUAL.items()
        ]
    if stress:
        found.append(_of_files(first, sections.units))
    return tuple(found)


def _asked(sections: Sections, pieces: Sequence[FieldPiece], name: str) -> Quantity | None:
    """Return a quantity of the study; a name or place must belong to one kind of the cells."""
    first = pieces[0]
    alone = first.problem if len(pieces) == 1 else None
    read, faults = read_measured(sections.file, name, first.degree, first.shape, sections.units, alone)
    sections.faults += faults
    if read is None or alone is not None:
        return read.quantity if read else None
    place = place_of(sections.file, name)
    if read.measure not in TOGETHER:
        right = f"one of {listing(sorted(TOGETHER))}: the meshes have several kinds of cells"
        sections.faults.append(Fault(place("measure"), "unsuitable measure", right, read.measure))
        return None
    function = rooms.find("quantities", read.measure)
    misfits = [misplaced(function, read.arguments, place, one.problem) for one in pieces]
    fewest = min(misfits, key=len)
    sections.faults += fewest
    return read.quantity


def hot_spot_quantity(first: FieldPiece, number: int, spot: HotSpot, units: Units) -> Quantity:
    """Return a hot spot as the largest stress within its reach."""
    arguments = {"component": "von_mises", "near": spot.place, "radius": spot.reach}
    return made(first, f"{HOT_SPOT}{number}", "peak_stress", arguments, units)


def made(first: FieldPiece, name: str, measure: str, arguments: Mapping[str, Any], units: Units) -> Quantity:
    """Return a quantity that the study did not ask for, with the assumed tolerance."""
    function = rooms.find("quantities", measure)
    dimension = returned_dimension(function)
    said = ", ".join(f"{key} {_shown(value)}" for key, value in arguments.items())
    return Quantity(
        name=name,
        kind=rooms.beside("quantities", measure, "KIND"),
        unit=units.label(dimension) if dimension else "",
        degree=first.degree,
        formal_order=rooms.beside("quantities", measure, "formal_order")(
            first.degree, first.shape, arguments
        ),
        relative=ASSUMED_TOLERANCE,
        assumed_tolerance=True,
        measure=partial(function, **arguments),
        description=f"{measure} ({said})" if said else measure,
    )


def _shown(value: Any) -> str:
    if isinstance(value, tuple):
        return f"({', '.join(f'{x:.5g}' for x in value)})"
    return f"{value:.4g}" if isinstance(value, float) else str(value)


def _of_files(first: FieldPiece, units: Units) -> Quantity:
    """Return the files' own peak: how their stress was made is not known, so no order is."""
    return Quantity(
        name=FILE_PEAK,
        kind="peak_stress",
        unit=units.label(STRESS),
        degree=first.degree,
        relative=ASSUMED_TOLERANCE,
        assumed_tolerance=True,
        description="largest von Mises stress of the files themselves",
    )
