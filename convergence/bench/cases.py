"""What is measured: a quarter plate with a hole, flat and solid, and its meshes as one lattice.

The plate's two blocks unrolled stand on a lattice: first index from the hole outwards, second around the
hole, third through the thickness. The peer is given the places of the lattice: both solve on the same nodes.
"""

from collections.abc import Mapping
from dataclasses import dataclass, replace

import numpy as np

from convergence.fem.element import Shape
from convergence.fem.grid import Grids
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.models.perforated_plate import perforated_plate

STEEL = Material(young=210_000.0, poisson=0.3)
TENSION, THICKNESS = 60.0, 8.0
LAYER = -1


@dataclass(frozen=True)
class Case:
    """A ladder of quadratic cells: `coarsest` counts cells outwards, around half the hole, and through."""

    shape: Shape
    coarsest: tuple[int, ...]
    levels: int
    peer: str

    def counts(self, level: int) -> tuple[int, ...]:
        return tuple(count * 2**level for count in self.coarsest)


CASES = {
    "triangles": Case("triangle", (21, 12), 5, "multigrid"),
    "tetrahedra": Case("tetrahedron", (11, 6, 4), 3, "multigrid"),
    "hexahedra": Case("hexahedron", (7, 4, 2), 3, "bddc"),
}


def problem(case: Case) -> Problem:
    """Return the plate pulled at its side, with two symmetry planes, in a solid three."""
    flat = perforated_plate(material=STEEL)
    loads = (Traction("side", (TENSION, 0.0)),)
    if case.shape in ("triangle", "quadrilateral"):
        return replace(flat, thickness=1.0, loads=loads, exact=None)
    assert isinstance(flat.part, Part)
    part = SolidPart(flat.part, (("bottom", 0.0), ("top_face", THICKNESS)))
    return replace(
        flat,
        part=part,
        kind="solid",
        thickness=1.0,
        supports=(*flat.supports, Support("symmetry_z", z=0.0, boundary="bottom")),
        loads=(Traction("side", (TENSION, 0.0, 0.0)),),
        exact=None,
    )


def level_mesh(given: Problem, case: Case, level: int) -> Mesh:
    """Return the mesh of a level, 0 the coarsest."""
    return mesh(given.part, _families(given, case.counts(level)), shape=case.shape, degree=2)


def _families(given: Problem, counts: tuple[int, ...]) -> Mapping[int, int]:
    plan = given.part.plan if isinstance(given.part, SolidPart) else given.part
    assert isinstance(plan, Part)
    outwards = plan.families["hole_end", "side"]
    flat = {family: counts[0] if family == outwards else counts[1] for family in plan.families.values()}
    return flat | ({LAYER: counts[2]} if len(counts) == 3 else {})


def lattice(case: Case, level: int) -> np.ndarray:
    """Return the places (outwards, around, [through,] D) of all nodes of a level."""
    given = problem(case)
    counts = case.counts(level)
    plan = given.part.plan if isinstance(given.part, SolidPart) else given.part
    assert isinstance(plan, Part)
    grids = Grids(plan, _families(given, counts), 2)
    first, second = grids.blocks
    numbers = np.concatenate([first, second[::-1].T[:, 1:]], axis=1)
    flat = grids.places(straight_diagonals=case.shape == "triangle")[:, numbers].transpose(1, 2, 0)
    if len(counts) == 2:
        return np.asarray(flat)
    through = np.linspace(0.0, THICKNESS, 2 * counts[2] + 1)
    solid = np.empty((*flat.shape[:2], len(through), 3))
    solid[..., :2] = flat[:, :, None]
    solid[..., 2] = through
    return solid
