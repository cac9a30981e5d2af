"""A table is checked against a signature: every fault at once, defaults in the study's units."""

from typing import Annotated, Any, Literal

import pytest

from convergence.bind import REQUIRED, bind, parameters
from convergence.dimensions import (
    LENGTH,
    RATIO,
    SYSTEMS,
    BoundaryName,
    Bounds,
    Point,
    PointName,
    PositiveLength,
    Ratio,
    Stress,
)

MILLIMETRES = SYSTEMS["mm, N, MPa"]
A_POINT = "a point [x, y] [mm] or [x, y, z] in a solid"


def part(
    solution: object,
    *,
    width: Annotated[PositiveLength, "overall width"] = 80.0,
    thickness: PositiveLength,
    shape: Literal["triangle", "quadrilateral"] = "triangle",
    degree: Literal[1, 2] = 2,
    poisson: Annotated[float, RATIO, Bounds(-1.0, 0.5)] = 0.3,
    levels: Annotated[int, Bounds(1, 12, closed=True)] = 5,
    ratio: Ratio = 2.0,
    pressure: Stress | None = None,
    at: Annotated[Point | PointName, "where"] = (25.4, 50.8),
    boundary: BoundaryName = "top",
    points: tuple[Point, ...] = ((25.4, 0.0),),
    smooth: bool = True,
    material: object = None,
) -> None:
    """Stand for a model."""


def bound(**table: Any) -> tuple[dict[str, Any], list[str]]:
    arguments, faults = bind(
        part, table, where=lambda key: f"f.toml:1: {key}", units=MILLIMETRES, given={"material"}
    )
    return arguments, [str(fault) for fault in faults]


def test_a_signature_is_read() -> None:
    found = {parameter.name: parameter for parameter in parameters(part, given=["material"])}
    assert list(found)[:3] == ["width", "thickness", "shape"]
    assert "material" not in found and "solution" not in found
    assert found["width"].doc == "overall width" and found["width"].dimension is LENGTH
    assert found["width"].wanted(MILLIMETRES) == "a number [mm], 0 < value"
    assert found["thickness"].default is REQUIRED
    assert found["pressure"].optional and found["pressure"].default is None
    assert found["at"].forms == ("point", "point of a solid", "text") and found["at"].names == "point"
    assert found["at"].doc == "where"
    wanted = "a point [x, y] [mm] or [x, y, z] in a solid or a text that names a point"
    assert found["at"].wanted(MILLIMETRES) == wanted
    assert found["shape"].wanted(MILLIMETRES) == 'one of "triangle", "quadrilateral"'
    assert found["points"].many and found["points"].forms == ("point", "point of a solid")
    assert found["boundary"].names == "boundary"


def test_good_values_become_arguments() -> None:
    arguments, faults = bound(
        thickness=8,
        shape="quadrilateral",
        degree=1,
        at="tip",
        points=[[1, 2], [3.5, 4]],
        pressure=-4,
        levels=12,
    )
    assert faults == []
    assert arguments == {
        "width": 80.0,
        "thickness": 8.0,
        "shape": "quadrilateral",
        "degree": 1,
        "poisson": 0.3,
        "levels": 12,
        "ratio": 2.0,
        "pressure": -4.0,
        "at": "tip",
        "boundary": "top",
        "points": ((1.0, 2.0), (3.5, 4.0)),
        "smooth": True,
    }
    assert type(arguments["thickness"]) is float and type(arguments["levels"]) is int
    part(None, **arguments)


def test_a_point_is_two_numbers_or_three() -> None:
    assert bound(thickness=1.0, at=[1, 2])[0]["at"] == (1.0, 2.0)
    assert bound(thickness=1.0, at=[1, 2, 3])[0]["at"] == (1.0, 2.0, 3.0)
    for wrong in ([1], [1, 2, 3, 4], ["a", 2], ["a", 2, 3], [True, 2], 1.0):
        assert bound(thickness=1.0, at=wrong)[1] == [
            f"f.toml:1: at: not a point or a point of a solid or a text, got {wrong!r}; "
            "give a point [x, y] [mm] or [x, y, z] in a solid or a text that names a point"
        ]


@pytest.mark.parametrize(
    ("key", "value", "message"),
    [
        ("width", "80", "not a number, got '80'; give a number [mm], 0 < value"),
        ("width", True, "not a number, got True; give a number [mm], 0 < value"),
        ("width", 0, "out of range, got 0; give a number [mm], 0 < value"),
        ("width", float("nan"), "not a finite number, got nan; give a number [mm], 0 < value"),
        ("width", float("inf"), "not a finite number, got inf; give a number [mm], 0 < value"),
        ("width", [1.0], "not a number, got [1.0]; give a number [mm], 0 < value"),
        ("poisson", 0.5, "out of range, got 0.5; give a number, -1 < value < 0.5"),
        ("levels", 3.0, "not a whole number, got 3.0; give a whole number, 1 <= value <= 12"),
        ("levels", 13, "out of range, got 13; give a whole number, 1 <= value <= 12"),
        ("shape", "triangel", "not one of the choices, got 'triangel'; did you mean 'triangle'?"),
        ("shape", "hex", 'not one of the choices, got \'hex\'; give one of "triangle", "quadrilateral"'),
        ("degree", 3, "not one of the choices, got 3; give one of 1, 2"),
        ("degree", True, "not one of the choices, got True; give one of 1, 2"),
        ("boundary", 3, "not a text, got 3; give a text that names a boundary"),
        ("smooth", 1, "not true or false, got 1; give true or false"),
        (
            "points",
            [[1, 2], [3]],
            f"not a point or a point of a solid, got [[1, 2], [3]]; give a list, each {A_POINT}",
        ),
        ("points", 3, f"not a list, got 3; give a list, each {A_POINT}"),
        (
            "points",
            [[1, float("inf")]],
            f"not a finite number, got [[1, inf]]; give a list, each {A_POINT}",
        ),
        ("widht", 3, "unknown key; did you mean 'width'?"),
    ],
)
def test_a_wrong_value_is_said(key: str, value: Any, message: str) -> None:
    arguments, faults = bound(**{"thickness": 1.0, key: value})
    assert faults == [f"f.toml:1: {key}: {message}"]
    assert key not in arguments


def test_a_whole_number_too_large_for_a_float_is_not_finite() -> None:
    assert "not a finite number" in bound(thickness=10**400)[1][0]


def test_all_faults_come_at_once() -> None:
    faults = bound(width=-1.0, colour="red", degree=0)[1]
    assert len(faults) == 4
    assert "f.toml:1: : the key 'thickness' is missing; add thickness = a number [mm], 0 < value" in faults


def test_defaults_are_converted_and_given_values_are_not() -> None:
    inches = SYSTEMS["in, lbf, psi"]
    arguments, faults = bind(part, {"thickness": 2.0}, where=str, units=inches, given={"material"})
    assert faults == []
    # 25.4 mm are 1 in by definition; a division of doubles is exact to one unit in the last place
    assert arguments["at"] == pytest.approx((1.0, 2.0), rel=1e-15)
    assert arguments["points"][0] == pytest.approx((1.0, 0.0), rel=1e-15)
    assert arguments["thickness"] == 2.0
    assert arguments["ratio"] == 2.0 and arguments["poisson"] == 0.3 and arguments["smooth"] is True


def test_a_type_no_file_can_give_is_refused() -> None:
    def wrong(*, mesh: bytes) -> None:
        """Take what TOML has no form for."""

    with pytest.raises(TypeError, match="'mesh'"):
        parameters(wrong)
