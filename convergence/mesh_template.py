"""A commented study file on the mesh of a file, which names what the file has and runs as it stands."""

from collections.abc import Callable, Iterator, Mapping
from pathlib import Path
from typing import Any

import numpy as np

from convergence.bind import parameters
from convergence.bodies.boundaries import given_mesh
from convergence.bodies.file_mesh import read_file_mesh
from convergence.bodies.picking import boundary
from convergence.conditions import LOADS, SUPPORTS
from convergence.fem.given_part import GivenMesh
from convergence.fem.material import material
from convergence.mesh_study import meshes
from convergence.template import above_tables, line, section, toml

AXES = ("x", "y", "z")
WEIGHT = 7.7e-5  # of steel, in N/mm³
QUANTITIES: Mapping[str, Mapping[str, object]] = {
    "largest_displacement": {"measure": "largest_displacement"},
    "peak_stress": {"measure": "peak_stress"},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.02},
}


def mesh_template(path: Path) -> str:
    """Return the text of a study; `InputError` where the file cannot be read. Loads are to be put in by hand.

    It is held on its first boundary and bears its own weight.
    """
    found = read_file_mesh(path, fields=False)
    made = given_mesh(found, found.groups[0], {})
    axes = AXES[: made.dimension]
    down = [0.0] * (made.dimension - 1) + [-1.0]
    return "\n".join(
        [
            f"# {path.name}: {made.cell_nodes.shape[1]} {made.shape}s of degree {made.degree},",
            f"# {_box(made.nodes)}.",
            *(f"# {remark}." for remark in found.remarks),
            f"# Run it with: meshassay run {path.stem}.toml",
            "",
            *above_tables(path.stem),
            *section("meshes", meshes, first={"file": path.name}),
            *section("material", material),
            *_regions(made.regions),
            *_boundaries(made),
            "",
            "# Supports, rigid where no kind is said:",
            *_kinds(SUPPORTS),
            "[supports.hold]",
            f"boundary = {toml(next(iter(made.facets)))}",
            *(f"{axis} = 0.0" for axis in axes),
            "",
            "# Loads by kind:",
            *_kinds(LOADS),
            "[loads.weight]",
            'kind = "weight"',
            line(f"value = {WEIGHT}", "N/mm³"),
            f"direction = {toml(down)}",
            "",
            "# Load cases, each with loads of its own:",
            "# [cases.lift]",
            '# loads = ["weight"]',
            *(row for name, table in QUANTITIES.items() for row in _quantity(name, table)),
            "",
        ]
    )


def _quantity(name: str, table: Mapping[str, object]) -> list[str]:
    return ["", f"[quantities.{name}]", *(f"{key} = {toml(value)}" for key, value in table.items())]


def _regions(regions: Mapping[str, np.ndarray]) -> Iterator[str]:
    """Yield what regions there are, each of which may have its own material."""
    yield ""
    for name, cells in regions.items():
        yield f"# region {name}: {len(cells)} cells; [material.{name}] changes its material"


def _boundaries(made: GivenMesh) -> Iterator[str]:
    """Yield what boundaries and points the file has, and how others are picked."""
    yield ""
    for name, groups in made.facets.items():
        nodes = np.unique(np.concatenate([group.ravel() for group in groups]))
        count = sum(group.shape[1] for group in groups)
        yield f"# boundary {name}: {count} facets, {_box(made.nodes[:, nodes])}"
    for name, node in made.vertices.items():
        yield f"# point {name}: ({', '.join(f'{x:g}' for x in made.nodes[:, node])})"
    yield "# Other boundaries are picked by what all their facets fulfil:"
    yield "# [boundaries.NAME]"
    for parameter in parameters(boundary):
        yield line(f"# {parameter.name} =", parameter.doc)


def _kinds(functions: Mapping[str, Callable[..., Any]]) -> Iterator[str]:
    """Yield the kinds with their keys, one a line."""
    for name, function in functions.items():
        yield f"#   {name} ({', '.join(each.name for each in parameters(function, ('name',)))})"


def _box(nodes: np.ndarray) -> str:
    low, high = (", ".join(f"{x:g}" for x in corner) for corner in (nodes.min(axis=1), nodes.max(axis=1)))
    return f"from ({low}) to ({high})"
