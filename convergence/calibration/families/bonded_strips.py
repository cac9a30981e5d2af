"""Materials bonded end to end, as cladding and in a lap joint: weak singularities at the ends of the bonds.

The exponents are those of the bonded wedges at the ends of the interfaces (Bogy 1971;
`convergence.corners.bonded`), 0.65 to 0.97; the weakest of a case is given.
"""

from typing import Any

from netgen.occ import Glue

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.exponents import weakest

Place = tuple[float, float]
STEEL = Elastic(210_000.0, 0.3, 12e-6)
ALUMINIUM = Elastic(70_000.0, 0.33, 23e-6)
BRONZE = Elastic(110_000.0, 0.34, 18e-6)
LAMINATE = Elastic(10_500.0, 0.35, 30e-6)
GLUE = Elastic(3_500.0, 0.38, 60e-6)


def bonded_strips() -> list[DrawnCase]:
    """Return a transition joint, three materials in bending, cooled cladding, a double lap joint."""
    return [_transition(), _three(), _cladding(), _lap_joint()]


def _transition() -> DrawnCase:
    """Half of a strip, steel to aluminium, pulled along x."""
    bond, length, half = 45.0, 100.0, 24.0
    return DrawnCase(
        name="transition joint",
        kind="plane_strain",
        shape=Glue([_block("steel", 0.0, bond, 0.0, half), _block("aluminium", bond, length, 0.0, half)]),
        size=9.0,
        held={"steel_left": {"x": 0.0}, "steel_low": {"y": 0.0}, "aluminium_low": {"y": 0.0}},
        tractions={"aluminium_right": (90.0, 0.0)},
        materials={"steel": STEEL, "aluminium": ALUMINIUM},
        corners=((bond, half),),
        exponent=weakest("plane_strain", ((STEEL, 90.0), (ALUMINIUM, 90.0))),
        readings=(
            *_fields((bond, half), "xx", (26.0, 9.0), "steel", "xy"),
            Reading("bond end", "displacement", "displacement", {"at": (bond, half), "component": "y"}),
            Reading("side", "displacement", "mean_displacement", {"boundary": "steel_top", "component": "x"}),
            Reading("axis", "point_stress", "stress", {"at": (bond - 2.0, 0.0), "component": "xx"}),
            Reading("thrust", "resultant", "section_force", {"boundary": "steel_low", "component": "y"}),
            *_line((bond + 2.0, 0.0), (bond + 32.0, 0.0), "yy"),
        ),
    )


def _three() -> DrawnCase:
    """Steel, laminate, bronze end to end, on a support at the far end, loaded on the laminate."""
    first, second, length, half = 36.0, 64.0, 104.0, 16.0
    blocks = (("steel", 0.0, first), ("laminate", first, second), ("bronze", second, length))
    return DrawnCase(
        name="three materials, bent",
        kind="plane_stress",
        shape=Glue([_block(name, left, right, -half, half) for name, left, right in blocks]),
        size=8.0,
        held={"steel_left": {"x": 0.0}, "bronze_right": {"y": 0.0}},
        tractions={"laminate_top": (0.0, -6.0), "bronze_right": (12.0, 0.0)},
        materials={"steel": STEEL, "laminate": LAMINATE, "bronze": BRONZE},
        corners=tuple((x, y) for x in (first, second, length) for y in (-half, half)),
        exponent=weakest(
            "plane_stress", ((STEEL, 90.0), (LAMINATE, 90.0)), ((LAMINATE, 90.0), (BRONZE, 90.0))
        ),
        readings=(
            *_fields((first, -half), "xx", (17.0, -5.0), "laminate", "yy"),
            Reading(
                "steel", "displacement", "mean_displacement", {"boundary": "steel_low", "component": "y"}
            ),
            Reading("turn", "rotation", "rotation", {"start": (length, -half), "end": (length, half)}),
            Reading(
                "bronze", "point_stress", "stress", {"at": (second + 2.0, 0.0), "component": "von_mises"}
            ),
            Reading("end", "resultant", "section_force", {"boundary": "bronze_right", "component": "y"}),
            *_line((50.0, -half), (50.0, half), "xx"),
        ),
    )


def _cladding() -> DrawnCase:
    """A quarter of a steel plate clad with bronze on both faces, cooled: nothing else strains it."""
    length, core, height = 55.0, 14.0, 26.0
    return DrawnCase(
        name="cooled cladding",
        kind="plane_stress",
        shape=Glue([_block("steel", 0.0, length, 0.0, core), _block("bronze", 0.0, length, core, height)]),
        size=6.0,
        held={"steel_left": {"x": 0.0}, "bronze_left": {"x": 0.0}, "steel_low": {"y": 0.0}},
        materials={"steel": STEEL, "bronze": BRONZE},
        temperature=-120.0,
        corners=((length, core),),
        exponent=weakest("plane_stress", ((STEEL, 90.0), (BRONZE, 90.0))),
        readings=(
            *_fields((length, core), "yy", (41.0, 9.0), "bronze", "xy"),
            Reading("end", "displacement", "displacement", {"at": (length, 0.0), "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (length, core), "end": (length, height)}),
            Reading("top", "point_stress", "stress", {"at": (0.6 * length, height), "component": "xx"}),
            Reading("thrust", "resultant", "section_force", {"boundary": "steel_left", "component": "x"}),
            *_line((length - 14.0, 0.0), (length - 14.0, core - 2.0), "xx"),
        ),
    )


def _lap_joint() -> DrawnCase:
    """Half of a double lap joint: a plate between two straps, an adhesive layer of 2 mm."""
    start, end, low, high = 30.0, 62.0, 6.0, 8.0
    blocks = [
        _block("plate", 0.0, end, 0.0, low, splits=(start,)),
        _block("glue", start, end, low, high),
        _block("strap", start, 100.0, high, 14.0, splits=(end,)),
    ]
    below, above = (end, high), (start, low)
    return DrawnCase(
        name="double lap joint",
        kind="plane_strain",
        shape=Glue(blocks),
        size=4.0,
        held={"plate_low": {"y": 0.0}, "strap_right": {"x": 0.0}},
        tractions={"plate_left": (-60.0, 0.0)},
        materials={"plate": ALUMINIUM, "glue": GLUE, "strap": ALUMINIUM},
        corners=(above, below, (start, high), (end, low)),
        exponent=weakest(
            "plane_strain", ((ALUMINIUM, 90.0), (GLUE, 90.0)), ((ALUMINIUM, 180.0), (GLUE, 90.0))
        ),
        readings=(
            *_fields(below, "yy", (23.0, 3.5), "glue", "xx"),
            Reading(
                "strap", "displacement", "mean_displacement", {"boundary": "strap_left", "component": "y"}
            ),
            Reading("turn", "rotation", "rotation", {"start": (start, high), "end": (start, 14.0)}),
            Reading("glue", "point_stress", "stress", {"at": (end - 6.0, 7.0), "component": "xy"}),
            Reading("plate", "point_stress", "stress", {"at": (start, 0.0), "component": "xx"}),
            *_line((end + 3.0, high), (end + 3.0, 14.0), "xx"),
        ),
    )


def _block(
    name: str, left: float, right: float, low: float, high: float, *, splits: tuple[float, ...] = ()
) -> Any:
    """Return a rectangle whose sides are called name_left and so on; its long sides are split at places."""
    face = outline(
        *((x, low, f"{name}_low") for x in (*splits, right)),
        (right, high, f"{name}_right"),
        *((x, high, f"{name}_top") for x in (*splits, left)),
        (left, low, f"{name}_left"),
    )
    face.faces.name = name
    return face


def _fields(corner: Place, across: str, inside: Place, region: str, mean: str) -> tuple[Reading, ...]:
    """Return what is read in all cases; `mean` is the component whose mean over a region is read."""
    near: dict[str, Any] = {"near": corner, "radius": 8.0}
    return (
        Reading("energy", "energy", "energy"),
        Reading(
            "inside", "point_stress", "stress", {"at": inside, "component": "von_mises", "way": "direct"}
        ),
        Reading("mean", "point_stress", "mean_stress", {"region": region, "component": mean}),
        Reading("peak", "peak_stress", "peak", {"component": "von_mises", **near}, singular=True),
        Reading(
            "direct", "peak_stress", "peak", {"component": across, "way": "direct", **near}, singular=True
        ),
        Reading(
            "gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss", **near}, singular=True
        ),
    )


def _line(start: Place, end: Place, component: str) -> tuple[Reading, ...]:
    line = {"start": start, "end": end, "component": component}
    return (
        Reading("membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )
