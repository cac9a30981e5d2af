"""Meshes of files, or one mesh refined, as a part: alike from coarse to fine, with their boundaries."""

from collections.abc import Mapping, Sequence
from pathlib import Path

from convergence.bodies.boundaries import bodies_of, given_mesh, with_common_names
from convergence.bodies.file_mesh import CellGroup, FileMesh, read_file_mesh
from convergence.bodies.picking import Pick
from convergence.bodies.refinement import Refined
from convergence.bodies.series import check_series
from convergence.corners.given_edges import with_edges
from convergence.errors import Fault, Unsuitable, listing
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.sections import Sections

BOUNDARIES = "boundaries"
FEW = 20_000  # nodes


def given_series(
    sections: Sections,
    paths: Sequence[Path],
    picks: Mapping[str, Pick],
    levels: int | None,
    degree: int | None,
    merge: bool,
) -> tuple[GivenPart | None, tuple[str, ...]]:
    """Return the part of mesh files and what was done to them, None where faults were found.

    With `levels` the only file is refined to so many; `degree` is wanted of the cells, None for their own;
    `merge` joins nodes at one place.
    """
    options = {"fields": False, "merge": merge}
    reads = [sections.called(read_file_mesh, {"path": path, **options}) for path in paths]
    found = [read for read in reads if read is not None]
    if len(found) < len(paths):
        return None, ()
    checked = sections.called(check_series, {"found": found}, "meshes", "files")
    if checked is None:
        return None, ()
    ordered, order = checked
    remarks = (*order, *remarks_on(ordered))
    given = [made for mesh in ordered if (made := _given(sections, mesh, picks)) is not None]
    if len(given) < len(found) or not alike(sections, [mesh.path for mesh in ordered], given):
        return None, remarks
    given, left_out = with_common_names(given)
    remarks += left_out
    surfaces = {name: pick.on for name, pick in picks.items() if pick.on is not None}
    if levels is not None:
        return _refined(Refined(given[0], surfaces, levels, degree)), remarks
    if degree not in (None, given[0].degree):
        given = [Refined(made, surfaces, 1, degree)[0] for made in given]
    return GivenPart(with_edges(given)), remarks


def _refined(series: Refined) -> GivenPart:
    """Return a mesh and its refinements as a part; those of few nodes tell what the part is."""
    asked = max(1, sum(count <= FEW for count in series.node_counts))
    named = with_edges([series[number] for number in range(asked)])
    series.vertices = dict(named[0].vertices)
    return GivenPart(series, series.node_counts, asked)


def remarks_on(found: Sequence[FileMesh]) -> tuple[str, ...]:
    """Return what was done to the files, each thing once with the names of its files and their counts."""
    files: dict[str, list[str]] = {}
    for mesh in found:
        for remark in mesh.remarks:
            what, colon, count = remark.rpartition(": ")
            counted = bool(colon) and count.isdigit()
            name = f"{mesh.path.name} {count}" if counted else mesh.path.name
            files.setdefault(what if counted else remark, []).append(name)
    return tuple(f"{what}: {', '.join(names)}" for what, names in files.items())


def _given(sections: Sections, found: FileMesh, picks: Mapping[str, Pick]) -> GivenMesh | None:
    """Return the mesh of a file; faults of cells and of picks name the file."""
    if len(found.groups) != 1:
        kinds = listing([f"{len(g.numbers)} {g.shape}s of degree {g.degree}" for g in found.groups])
        right = "cells of one shape and degree: a mixed mesh is not solved here"
        sections.faults.append(Fault(str(found.path), f"several kinds of cells ({kinds})", right))
        return None
    made = given_of(sections, found, found.groups[0], picks)
    if made and (count := bodies_of(made)) > 1:
        right = "one body; merge = true joins the nodes of bodies that touch"
        sections.faults.append(Fault(str(found.path), f"{count} bodies that share no nodes", right))
    return made


def given_of(
    sections: Sections, found: FileMesh, group: CellGroup, picks: Mapping[str, Pick]
) -> GivenMesh | None:
    """Return the cells of a group of a file, None where picks do not suit it."""
    try:
        return given_mesh(found, group, picks)
    except Unsuitable as error:
        for key, value, right in error.problems:
            name, _, own = key.partition(".")
            sections.fault((BOUNDARIES, name, own), f"does not suit {found.path.name}", right, value)
    return None


def alike(sections: Sections, paths: Sequence[Path], given: Sequence[GivenMesh]) -> bool:
    """Return whether all meshes have the cells and regions of the first; others are faults."""
    first, good = given[0], True
    for path, made in zip(paths, given, strict=True):
        what = right = ""
        if (made.shape, made.degree, made.dimension) != (first.shape, first.degree, first.dimension):
            what = f"{made.shape}s of degree {made.degree}"
            right = f"{first.shape}s of degree {first.degree}, as in {paths[0].name}"
        elif set(made.regions) != set(first.regions):
            what = f"the regions {listing(sorted(made.regions))}"
            right = f"{listing(sorted(first.regions))}, as in {paths[0].name}"
        if what:
            sections.faults.append(Fault(str(path), f"not the part of {paths[0].name}: it has {what}", right))
            good = False
    return good
