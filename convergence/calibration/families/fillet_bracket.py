"""An L-shaped bracket of a davit with a fillet between its legs, loaded at the end of its lower leg.

The upper leg is welded on along its end, or rests on pads along its back. Weakest exponents (Williams 1952):
a welded end, clamped-free at 90 degrees, 0.758 in plane stress with nu = 0.3 and 0.692 in plane strain with
nu = 0.33; a pad that ends on a straight side, roller-free at 180 degrees, 1/2. All of them lie far from the
fillet, whose peak is finite.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading

Place = tuple[float, float]


def fillet_bracket() -> list[DrawnCase]:
    """Return a large and two small fillets of welded brackets, and a bracket on two pads."""
    return [_tenth(), _thirtieth(), _sixtieth(), _on_pads()]


@dataclass(frozen=True)
class _Bracket:
    """Two legs of equal length, the corner of their backs at 0; `pressed`: length of the loaded top side."""

    leg: float
    thick: float
    radius: float
    pad: float = 0.0
    pressed: float = 0.0

    @property
    def arc_ends(self) -> tuple[Place, Place]:
        start, end = self.thick + self.radius, self.thick
        return (start, end), (end, start)

    @property
    def fillet(self) -> Place:
        reach = self.thick + self.radius * (1.0 - 0.5**0.5)
        return reach, reach

    @property
    def weld_ends(self) -> tuple[Place, Place]:
        return (0.0, self.leg), (self.thick, self.leg)

    @property
    def pad_ends(self) -> tuple[Place, Place]:
        return (0.0, self.pad), (0.0, self.leg - self.pad)

    @property
    def press_start(self) -> Place:
        return self.leg - self.pressed, self.thick

    def face(self) -> Any:
        plan = WorkPlane().MoveTo(0.0, 0.0)
        plan.LineTo(self.leg, 0.0, "bottom").LineTo(self.leg, self.thick, "tip")
        if self.pressed:
            plan.LineTo(*self.press_start, "pressed")
        plan.LineTo(*self.arc_ends[0], "top").Direction(-1.0, 0.0)
        for _ in range(2):
            plan.Arc(self.radius, -45.0)
        plan.LineTo(self.thick, self.leg, "inner").LineTo(0.0, self.leg, "upper_end")
        if self.pad:
            plan.LineTo(*self.pad_ends[1], "upper_pad").LineTo(*self.pad_ends[0], "back")
        return plan.Close("lower_pad" if self.pad else "back").Face()

    def case(
        self,
        name: str,
        kind: DrawnKind,
        size: float,
        load: Mapping[str, tuple[float, float]],
        *,
        material: Elastic,
        exponent: float,
        extra: tuple[Reading, ...],
    ) -> DrawnCase:
        welded = {"upper_end": {"x": 0.0, "y": 0.0}}
        on_pads = {"lower_pad": {"x": 0.0}, "upper_pad": {"x": 0.0}, "upper_end": {"y": 0.0}}
        return DrawnCase(
            name=name,
            kind=kind,
            shape=self.face(),
            size=size,
            held=on_pads if self.pad else welded,
            tractions=load,
            materials={"": material},
            corners=(
                *(self.pad_ends if self.pad else self.weld_ends),
                *((self.press_start,) if self.pressed else ((self.leg, 0.0), (self.leg, self.thick))),
            ),
            exponent=exponent,
            readings=(*extra, *_readings(self)),
        )


def _tenth() -> DrawnCase:
    bracket = _Bracket(leg=100.0, thick=25.0, radius=10.0)
    return bracket.case(
        "davit bracket, radius a tenth of the leg",
        "plane_stress",
        11.0,
        {"tip": (0.0, -6.0)},
        material=Elastic(),
        exponent=0.7583,
        extra=(*_weld_peaks(bracket), _mean("bottom", "y"), _pull("tip", "y")),
    )


def _thirtieth() -> DrawnCase:
    bracket = _Bracket(leg=90.0, thick=18.0, radius=3.0, pressed=20.0)
    return bracket.case(
        "pressed near the tip, radius a thirtieth",
        "plane_stress",
        8.0,
        {"pressed": (0.0, -5.0)},
        material=Elastic(),
        exponent=0.7583,
        extra=(*_weld_peaks(bracket), _mean("tip", "x"), _pull("pressed", "y")),
    )


def _sixtieth() -> DrawnCase:
    bracket = _Bracket(leg=120.0, thick=30.0, radius=2.0)
    return bracket.case(
        "aluminium, tip pulled askew, radius a sixtieth",
        "plane_strain",
        15.0,
        {"tip": (9.0, -4.0)},
        material=Elastic(young=70_000.0, poisson=0.33),
        exponent=0.6920,
        extra=(*_weld_peaks(bracket), _mean("inner", "x"), _mean("bottom", "y")),
    )


def _on_pads() -> DrawnCase:
    bracket = _Bracket(leg=100.0, thick=20.0, radius=5.0, pad=30.0, pressed=25.0)
    return bracket.case(
        "on two pads, radius a twentieth",
        "plane_stress",
        11.0,
        {"pressed": (0.0, -8.0)},
        material=Elastic(),
        exponent=0.5,
        extra=(
            *(_pad_peak(label, place, bracket) for label, place in zip("ab", bracket.pad_ends, strict=True)),
            Reading("pad force", "reaction", "reaction", {"boundary": "upper_pad", "component": "x"}),
            _pull("pressed", "y"),
            _mean("bottom", "y"),
        ),
    )


def _weld_peaks(bracket: _Bracket) -> tuple[Reading, ...]:
    near = {"near": bracket.weld_ends[1], "radius": 0.6 * bracket.thick}
    other = {"near": bracket.weld_ends[0], "radius": 0.6 * bracket.thick}
    return (
        Reading("weld nodal", "peak_stress", "peak", {"component": "first_principal", **near}, True),
        Reading(
            "weld gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss", **near}, True
        ),
        Reading(
            "weld back", "peak_stress", "peak", {"component": "von_mises", "way": "direct", **other}, True
        ),
    )


def _pad_peak(label: str, place: Place, bracket: _Bracket) -> Reading:
    near = {"near": place, "radius": 0.6 * bracket.thick}
    way = "nodal" if label == "a" else "direct"
    return Reading(
        f"pad {label}", "peak_stress", "peak", {"component": "von_mises", "way": way, **near}, True
    )


def _mean(boundary: str, component: str) -> Reading:
    place = {"boundary": boundary, "component": component}
    return Reading(f"{boundary} {component}", "displacement", "mean_displacement", place)


def _pull(boundary: str, component: str) -> Reading:
    place = {"boundary": boundary, "component": component}
    return Reading(f"{boundary} force", "resultant", "section_force", place)


def _readings(bracket: _Bracket) -> tuple[Reading, ...]:
    at = bracket.fillet
    near = {"near": at, "radius": bracket.radius + 0.6 * bracket.thick}
    far = (0.44 * bracket.thick, 0.63 * bracket.leg)
    up = bracket.thick + 1.5 * bracket.radius
    line = {"start": (bracket.thick, up), "end": (0.0, up), "component": "yy"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("turn", "rotation", "rotation", {"start": (0.0, 0.0), "end": (bracket.thick, 0.0)}),
        Reading("fillet nodal", "point_stress", "stress", {"at": at, "component": "first_principal"}),
        Reading("leg", "point_stress", "stress", {"at": far, "component": "yy", "way": "direct"}),
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises", **near}),
        Reading(
            "peak direct", "peak_stress", "peak", {"component": "first_principal", "way": "direct", **near}
        ),
        Reading("peak gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss", **near}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )
