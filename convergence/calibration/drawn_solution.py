"""A drawn case solved by NGSolve on a given mesh: linear elasticity of any degree, straight to numbers."""

from dataclasses import dataclass
from functools import cached_property
from typing import Any

import ngsolve as ng

from convergence.calibration.drawn_case import DrawnCase, Elastic
from convergence.calibration.sampling import Samples, edges, inner, lattice, nodal_means, nodes, sampled

ON_AXIS = 1e-9  # mm: nearer than this u/r is taken as du/dr


@dataclass(frozen=True, eq=False)
class DrawnSolution:
    """Displacement of a case on a mesh. `is_reference`: of high degree, on a mesh refined towards corners."""

    case: DrawnCase
    mesh: Any
    degree: int
    displacement: Any
    is_reference: bool = False

    @cached_property
    def strain(self) -> Any:
        """Return the strain as a 3 × 3 matrix of coefficient functions."""
        return strain(self.case, self.displacement)

    @cached_property
    def stress(self) -> Any:
        """Return the stress as a 3 × 3 matrix of coefficient functions."""
        return stress(self.case, self.mesh, self.strain).Compile()

    @cached_property
    def at_nodes(self) -> Samples:
        """Return the stress of every cell at its nodes, those of a lattice in a reference."""
        dimension = self.case.dimension
        rules = lattice(dimension) if self.is_reference else nodes(dimension, self.degree)
        return sampled(self.mesh, self.stress, rules)

    @cached_property
    def at_inner_points(self) -> Samples:
        """Return the stress of every cell at its points of integration, along its edges in a reference."""
        dimension = self.case.dimension
        rules = edges(dimension) if self.is_reference else inner(dimension, self.degree)
        return sampled(self.mesh, self.stress, rules)

    @cached_property
    def averaged_stress(self) -> Any:
        """Return the means of the stress at the nodes, linear in between, 9 entries."""
        return nodal_means(self.mesh, self.stress, 9)

    @cached_property
    def rms_displacement(self) -> float:
        """Return the root mean square of the displacement over the part, in mm."""
        return self._rms(self.displacement)

    @cached_property
    def rms_stress(self) -> float:
        """Return the root mean square of the stress over the part, in MPa."""
        return self._rms(self.stress)

    def _rms(self, field: Any) -> float:
        squares = ng.Integrate(self.weight * ng.InnerProduct(field, field) * ng.dx, self.mesh)
        return float((squares / ng.Integrate(self.weight * ng.dx, self.mesh)) ** 0.5)

    @property
    def weight(self) -> Any:
        """Return the volume that a unit of area stands for."""
        return weight(self.case)


def solve_drawn(case: DrawnCase, mesh: Any, degree: int, *, reference: bool = False) -> DrawnSolution:
    """Solve by a sparse Cholesky factorization, inner unknowns condensed."""
    names = "xyz"[: case.dimension]
    held = {n: [b for b, values in case.held.items() if n in values] for n in names}
    fixed = {f"dirichlet{n}": "|".join(boundaries) for n, boundaries in held.items() if boundaries}
    space = ng.VectorH1(mesh, order=degree, **fixed)
    u, v = space.TnT()
    dx = ng.dx(bonus_intorder=0 if reference and case.dimension == 3 else 2)
    form = ng.BilinearForm(space, condense=True, symmetric=True)
    pair = ng.InnerProduct(_hooke(case, mesh, strain(case, u)), strain(case, v))
    form += weight(case) * pair * dx
    load = ng.LinearForm(space)
    for boundary, traction in case.tractions.items():
        force = ng.CoefficientFunction(tuple(traction))
        load += weight(case) * ng.InnerProduct(force, v) * ng.ds(boundary, bonus_intorder=4)
    if case.body is not None:
        load += weight(case) * ng.InnerProduct(ng.CoefficientFunction(tuple(case.body)), v) * dx
    if case.temperature is not None:
        hot = _expanding(case, mesh) * case.temperature
        load += weight(case) * hot * ng.Trace(strain(case, v)) * ng.dx(bonus_intorder=4)
    found = ng.GridFunction(space)
    for boundary, values in case.held.items():
        for name, value in values.items():
            if value:
                part = found.components["xyz".index(name)]
                part.Set(value, definedon=mesh.Boundaries(boundary))
    with ng.TaskManager():
        form.Assemble()
        load.Assemble()
        _solve(form, load, found, space)
    return DrawnSolution(case, mesh, degree, found, reference)


def _solve(form: Any, load: Any, found: Any, space: Any) -> None:
    right = load.vec.CreateVector()
    right.data = load.vec - form.mat * found.vec
    right.data += form.harmonic_extension_trans * right
    inverse = form.mat.Inverse(space.FreeDofs(True), inverse="sparsecholesky")
    found.vec.data += inverse * right
    found.vec.data += form.harmonic_extension * found.vec
    found.vec.data += form.inner_solve * right


def weight(case: DrawnCase) -> Any:
    """Return 2 π r of a ring, 1 of a plane part of unit thickness."""
    return 2.0 * ng.pi * ng.x if case.kind == "axisymmetric" else ng.CoefficientFunction(1.0)


def strain(case: DrawnCase, u: Any) -> Any:
    """Return the strain 3 × 3 of a displacement; for plane stress its zz entry is left out."""
    slope = ng.Grad(u)
    if case.dimension == 3:
        return 0.5 * (slope + slope.trans)
    shear = 0.5 * (slope[0, 1] + slope[1, 0])
    ring = ng.IfPos(ng.x - ON_AXIS, u[0] / ng.x, slope[0, 0])
    hoop = ring if case.kind == "axisymmetric" else 0.0 * u[0]
    zero = 0.0 * u[0]
    entries = (slope[0, 0], shear, zero, shear, slope[1, 1], zero, zero, zero, hoop)
    return ng.CoefficientFunction(entries, dims=(3, 3))


def stress(case: DrawnCase, mesh: Any, strained: Any) -> Any:
    """Return the stress 3 × 3 that belongs to a strain, less what the temperature takes."""
    total = _hooke(case, mesh, strained)
    if case.temperature is None:
        return total
    return total - _expanding(case, mesh) * case.temperature * _identity(case)


def _hooke(case: DrawnCase, mesh: Any, strained: Any) -> Any:
    lame, shear = _constants(case, mesh)
    return lame * ng.Trace(strained) * _identity(case) + 2.0 * shear * strained


def _identity(case: DrawnCase) -> Any:
    across = 0.0 if case.kind == "plane_stress" else 1.0
    return ng.CoefficientFunction((1, 0, 0, 0, 1, 0, 0, 0, across), dims=(3, 3))


def _constants(case: DrawnCase, mesh: Any) -> tuple[Any, Any]:
    """Return λ and μ by region, λ that of plane stress where it is."""

    def lame(m: Elastic) -> float:
        full = m.young * m.poisson / ((1.0 + m.poisson) * (1.0 - 2.0 * m.poisson))
        shear = m.young / (2.0 * (1.0 + m.poisson))
        return 2.0 * full * shear / (full + 2.0 * shear) if case.kind == "plane_stress" else full

    return _by_region(case, mesh, lame), _by_region(case, mesh, lambda m: m.young / (2.0 * (1.0 + m.poisson)))


def _expanding(case: DrawnCase, mesh: Any) -> Any:
    """Return the stress of one kelvin when all is held (in the plane of a sheet)."""

    def held_back(m: Elastic) -> float:
        loss = 1.0 - m.poisson if case.kind == "plane_stress" else 1.0 - 2.0 * m.poisson
        return m.young * m.expansion / loss

    return _by_region(case, mesh, held_back)


def _by_region(case: DrawnCase, mesh: Any, of: Any) -> Any:
    if set(case.materials) == {""}:
        return ng.CoefficientFunction(of(case.materials[""]))
    return mesh.MaterialCF({name: of(material) for name, material in case.materials.items()})
