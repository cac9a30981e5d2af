"""Supports that several models have: two symmetry planes, and edges held at an exact displacement."""

from convergence.fem.loads import FieldFunction
from convergence.fem.problem import Support

SYMMETRY = (
    Support("symmetry_x", x=0.0, boundary="symmetry_x"),
    Support("symmetry_y", y=0.0, boundary="symmetry_y"),
)


def exact_support(
    name: str, displacement: FieldFunction, *, boundary: str | None = None, point: str | None = None
) -> Support:
    """Return a support that holds both components at the values of a displacement field."""
    return Support(
        name,
        x=lambda x, y: displacement(x, y)[0],
        y=lambda x, y: displacement(x, y)[1],
        boundary=boundary,
        point=point,
    )
