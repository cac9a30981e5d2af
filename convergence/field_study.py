"""The tables of a study on result files of another solver: files, names of fields, what is measured."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Annotated, Any

import numpy as np

from convergence import __version__
from convergence.bodies.boundaries import with_common_names
from convergence.bodies.cell_summary import cell_summary
from convergence.bodies.field_names import FilePeak
from convergence.bodies.file_mesh import FileMesh
from convergence.bodies.picking import Pick
from convergence.bodies.series import check_series
from convergence.body_tables import (
    BodyKind,
    body_kind,
    read_body_materials,
    read_loads,
    read_picks,
    read_supports,
)
from convergence.corners.given_edges import with_edges
from convergence.dimensions import Bounds, PositiveLength
from convergence.fem.element import Shape
from convergence.fem.given_part import GivenPart
from convergence.fem.material import ProblemKind
from convergence.fem.problem import Problem
from convergence.field_files import displacements, is_single, peaks, read_files, shapes
from convergence.field_map import MapSpec, read_map
from convergence.field_pieces import FieldPiece
from convergence.field_quantities import field_quantities
from convergence.given_series import alike, given_of, remarks_on
from convergence.ladder_spec import LadderSpec
from convergence.results import Quantity
from convergence.sections import BODY_TABLES, Sections
from convergence.textfile import digest_of

SECTION = "fields"
Count = Annotated[int, Bounds(0, 8, closed=True)]
Step = Annotated[int, Bounds(1, 1_000_000, closed=True)]


@dataclass(frozen=True)
class Said:
    """What [fields] says."""

    files: tuple[str, ...]
    kind: BodyKind | None
    thickness: float
    displacement: str
    stress: str
    hot_spots: int
    merge: bool
    step: int | None


@dataclass(frozen=True, eq=False)
class FieldStudy:
    """Result files from coarse to fine, read. `stress` are their own peaks, () where they have none.

    `quality` is that of their cells, `single` whether the displacements have single precision; `parts` is all
    that changes a number.
    """

    files: tuple[Path, ...]
    pieces: tuple[FieldPiece, ...]
    quantities: tuple[Quantity, ...]
    ladder: LadderSpec
    hot_spots: int
    stress: tuple[FilePeak, ...]
    dofs: tuple[int, ...]
    single: bool
    remarks: tuple[str, ...]
    quality: tuple[Mapping[str, float], ...]
    parts: Mapping[str, Any] = field(default_factory=dict)
    map: MapSpec | None = None

    @property
    def problem(self) -> Problem:
        """Return the problem of the first kind of cells; of all where there is only one."""
        return self.pieces[0].problem


def fields(
    *,
    files: Annotated[tuple[str, ...], "result files, from the coarsest mesh to the finest"],
    kind: Annotated[BodyKind | None, "plane stress of a plane mesh, solid of others, if not given"] = None,
    thickness: Annotated[PositiveLength, "thickness of a plane part"] = 1.0,
    displacement: Annotated[str, "name of the displacement in the files; found by itself if plain"] = "",
    stress: Annotated[str, "name of the stress in the files; found by itself if plain"] = "",
    hot_spots: Annotated[Count, "how many hot spots are listed and judged"] = 5,
    merge: Annotated[bool, "take nodes at one place for one; a crack has two"] = False,
    step: Annotated[Step | None, "step of a series in time, the last if not given"] = None,
) -> Said:
    """Return what [fields] says."""
    return Said(files, kind, thickness, displacement, stress, hot_spots, merge, step)


def read_field_study(sections: Sections, unit_system: str) -> FieldStudy | None:
    """Read all tables of a field study, None where a file cannot be read; faults are kept in `sections`."""
    said = sections.read(fields, SECTION)
    picks = read_picks(sections)
    if said is None or sections.faults:
        return None
    if len(said.files) < 2:
        right = "two files at least, better four, each on a finer mesh"
        sections.fault((SECTION, "files"), "too few files for a series", right, len(said.files))
    read = read_files(sections, said.files, merge=said.merge, step=said.step)
    if sections.faults:
        return None
    fields_of = sections.called(displacements, {"found": read, "name": said.displacement})
    checked = sections.called(check_series, {"found": read})
    if checked is None or fields_of is None:
        return None
    found, order = checked
    moved = [fields_of[read.index(each)] for each in found]
    if len(found[-1].groups) > 1:
        _require_bare(sections, found[-1])
    kinds = shapes(sections, found)
    kind = body_kind(sections, SECTION, said.kind, found[-1].nodes)
    if sections.faults:
        return None
    pieces = [_piece(sections, said, kind, found, moved, picks, one) for one in kinds]
    good = tuple(piece for piece in pieces if piece)
    if sections.faults or not good:
        return None
    asked = {"found": found, "name": said.stress, "across": _across(good)}
    stress = sections.called(peaks, asked) or ()
    ladder = LadderSpec(None, None, 2.0, len(found), good[0].shape, good[0].degree, "displacement")
    blank = FieldStudy(
        files=tuple(each.path for each in found),
        pieces=good,
        quantities=(),
        ladder=ladder,
        hot_spots=said.hot_spots,
        stress=stress,
        dofs=tuple(each.nodes.size for each in found),
        single=all(is_single(u) for u in moved),
        remarks=(*order, *remarks_on(found)),
        quality=tuple(cell_summary(each.nodes, each.groups) for each in found),
        parts=_parts(sections, unit_system, found, kind),
        map=read_map(sections, len(found)),
    )
    return replace(blank, quantities=field_quantities(sections, blank.pieces, stress))


def _across(pieces: Sequence[FieldPiece]) -> float | None:
    """Return the stress across the plane over xx + yy, None where it depends on the place."""
    problem = pieces[0].problem
    if problem.kind == "plane stress":
        return 0.0
    materials = {material for piece in pieces for material in piece.problem.materials.values()}
    one = next(iter(materials))
    return one.poisson if problem.kind == "plane strain" and len(materials) == 1 and one.isotropic else None


def _piece(
    sections: Sections,
    said: Said,
    kind: ProblemKind,
    found: Sequence[FileMesh],
    moved: Sequence[np.ndarray],
    picks: Mapping[str, Pick],
    cells: tuple[Shape, int],
) -> FieldPiece | None:
    """Return the cells of one kind in all files, None where they are not alike."""
    groups = [next(g for g in each.groups if (g.shape, g.degree) == cells) for each in found]
    given = [given_of(sections, each, group, picks) for each, group in zip(found, groups, strict=True)]
    meshes = [made for made in given if made]
    if len(meshes) < len(found) or not alike(sections, [each.path for each in found], meshes):
        return None
    part = GivenPart(with_edges(with_common_names(meshes)[0]))
    materials = read_body_materials(sections, tuple(part.regions))
    bare = Problem("", part, materials, (), (), kind, said.thickness)
    if len(found[-1].groups) == 1:
        bare = replace(
            bare, supports=read_supports(sections, bare), loads=tuple(read_loads(sections, bare).values())
        )
    own = tuple(u[:, np.unique(group.cell_nodes)] for u, group in zip(moved, groups, strict=True))
    return FieldPiece(bare, *cells, own)


def _parts(
    sections: Sections, unit_system: str, found: Sequence[FileMesh], kind: ProblemKind
) -> dict[str, Any]:
    names = (SECTION, *BODY_TABLES, "quantities")
    return {
        "version": __version__,
        "units": unit_system,
        "files": [digest_of(each.path) for each in found],
        "tables": {name: sections.table(name) for name in names},
        "kind": kind,
    }


def _require_bare(sections: Sections, mixed: FileMesh) -> None:
    """Keep a fault for tables that a mesh of several kinds of cells cannot have."""
    for section in ("boundaries", "supports", "loads"):
        if section in sections.file.data:
            what = f"{mixed.path.name} has several kinds of cells, each with an outline of its own"
            sections.fault((section,), what, f"remove [{section}]")
