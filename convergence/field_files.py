"""The files of a study on results of another solver: read, alike, with their fields."""

from collections.abc import Callable, Sequence
from typing import TypeVar

import numpy as np

from convergence.bodies.field_names import FilePeak, displacement, file_peak
from convergence.bodies.file_mesh import FileMesh, read_file_mesh
from convergence.errors import Fault, InputError, listing
from convergence.fem.element import Shape
from convergence.sections import Sections

T = TypeVar("T")


def read_files(sections: Sections, files: Sequence[str], *, merge: bool, step: int | None) -> list[FileMesh]:
    """Return the files that can be read; the faults of the others are kept."""
    options = {"merge": merge, "step": step}
    found = (sections.called(read_file_mesh, {"path": sections.beside(name), **options}) for name in files)
    return [each for each in found if each is not None]


def shapes(sections: Sections, found: Sequence[FileMesh]) -> list[tuple[Shape, int]]:
    """Return the kinds of cells, the same in every file."""
    kinds = [[(group.shape, group.degree) for group in each.groups] for each in found]
    for each, own in zip(found, kinds, strict=True):
        if set(own) != set(kinds[-1]):
            words, wanted = (
                listing(sorted(f"{shape}s of degree {degree}" for shape, degree in some))
                for some in (own, kinds[-1])
            )
            right = f"{wanted}, as in {found[-1].path.name}"
            sections.faults.append(Fault(str(each.path), f"cells of another kind: {words}", right))
    return kinds[-1]


def displacements(*, found: Sequence[FileMesh], name: str) -> tuple[np.ndarray, ...]:
    """Return the displacement of every file; InputError has the faults of all."""
    return _each(found, lambda one: displacement(one, name))


def peaks(*, found: Sequence[FileMesh], name: str, across: float | None) -> tuple[FilePeak, ...]:
    """Return the files' own peaks, () where not every file has a stress."""
    peaks = _each(found, lambda one: file_peak(one, name, across))
    return tuple(peak for peak in peaks if peak) if None not in peaks else ()


def _each(found: Sequence[FileMesh], read: Callable[[FileMesh], T]) -> tuple[T, ...]:
    """Return what is read of every file; InputError has the faults of all of them."""
    values: list[T] = []
    faults: list[Fault] = []
    for one in found:
        try:
            values.append(read(one))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return tuple(values)


def is_single(values: np.ndarray) -> bool:
    """Return whether all values are numbers of single precision."""
    return bool((values == values.astype(np.float32)).all())
