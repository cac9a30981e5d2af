"""Prolongation between grids: what it reproduces, in planes and solids, with steps too."""

import numpy as np
import pytest

from convergence.fem.mesh import mesh
from convergence.fem.part import Part, finer
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart
from convergence.fem.transfer import prolongation

FLAT = Part(
    points={"a": (0, 0), "b": (3, 0), "c": (3, 2), "d": (0, 2), "e": (4, 0), "f": (4, 2)},
    blocks=(("a", "b", "c", "d"), ("f", "c", "b", "e")),
)
PLANES = (("low", 0.0), ("middle", 1.0), ("high", 4.0))
PARTS = {
    "plane": FLAT,
    "solid": SolidPart(FLAT, PLANES),
    "step": SolidPart(FLAT, PLANES, filled=((0, 1), (0,))),
    "overhang": SolidPart(FLAT, PLANES, filled=((1,), (0, 1))),
}
GRIDS = [
    ((1.0, 1), (2.0, 1)),
    ((1.0, 1), (1.5, 1)),
    ((1.0, 1), (1.0, 2)),
    ((1.5, 1), (2.0, 2)),
    ((1.0, 1), (3.0, 1)),
]


@pytest.mark.parametrize("grids", GRIDS, ids=str)
@pytest.mark.parametrize("name", PARTS)
def test_constants_and_products_of_linears_are_reproduced(
    name: str, grids: tuple[tuple[float, int], tuple[float, int]]
) -> None:
    """Coordinates are linear in the blocks' parameters, so x, y, z and x y z must come out at the fine nodes.

    Weights are shares: none negative, each row's sum one.
    """
    part = PARTS[name]
    first = {family: 2 + n % 2 for n, family in enumerate(part.divisions(size=None, divisions=1))}
    chosen = [(finer(first, ratio, 1), degree) for ratio, degree in grids]
    shape = "quadrilateral" if name == "plane" else "hexahedron"
    coarse, fine = (mesh(part, counts, shape=shape, degree=degree).nodes for counts, degree in chosen)  # type: ignore[arg-type]
    matrix = prolongation(part, chosen[0], chosen[1])
    assert matrix.shape == (fine.shape[1], coarse.shape[1])
    assert matrix.data.min() > 0.0 and matrix.sum(axis=1) == pytest.approx(1.0, rel=1e-14)
    for read, exact in ((coarse, fine), (coarse.prod(axis=0)[None], fine.prod(axis=0)[None])):
        assert np.abs((matrix @ read.T).T - exact).max() <= 1e-13 * np.abs(exact).max()


@pytest.mark.parametrize("name", PARTS)
def test_equal_grids_give_the_identity(name: str) -> None:
    part = PARTS[name]
    counts = {family: 2 + n % 2 for n, family in enumerate(part.divisions(size=None, divisions=1))}
    matrix = prolongation(part, (counts, 2), ({family: 2 * n for family, n in counts.items()}, 1))
    assert (matrix.indices == np.arange(matrix.shape[0])).all() and (matrix.data == 1.0).all()


def test_a_rod_has_none() -> None:
    with pytest.raises(TypeError, match="a part without blocks has no grids"):
        prolongation(RodPart({"a": (0.0,), "b": (1.0,)}), ({0: 2}, 1), ({0: 4}, 1))
