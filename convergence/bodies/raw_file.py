"""A file as it is, read by meshio but for VTU: every way to fail becomes one message, nothing is printed."""

import contextlib
import io
import re
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Any

import numpy as np

from convergence.bodies.vtu_file import read_vtu
from convergence.errors import Fault, InputError

WANTED = "give a mesh file, for instance .vtu, .vtk, .xdmf, .msh, .inp, .med"
# numbers of legacy VTK files, as its C++ types on the machines it runs on
LEGACY_NUMBERS = {
    **{"int": "int32", "unsigned_int": "uint32", "long": "int64", "unsigned_long": "uint64"},
    **{"char": "int8", "unsigned_char": "uint8", "short": "int16", "unsigned_short": "uint16"},
    **{"vtkidtype": "int64", "vtktypeint64": "int64", "vtktypeuint64": "uint64"},
}


def read_raw(path: Path, step: int | None = None) -> tuple[Any, list[str]]:
    """Return the meshio.Mesh of a file and remarks on the reading; InputError says why there is none.

    Of a series in time the last step is taken, or that of number `step`, counted from 1.
    """
    _require_file(path)
    said: list[str] = []
    for read in _readers(path):
        heard = io.StringIO()
        try:
            with contextlib.redirect_stdout(heard), contextlib.redirect_stderr(heard):
                mesh, remarks = read(path, step)
        except ModuleNotFoundError as error:
            right = "pip install 'meshassay[files]', or save as .vtu"
            raise InputError([Fault(str(path), f"this kind needs the package {error.name}", right)]) from None
        except MemoryError:
            raise InputError([Fault(str(path), "does not fit in memory", "use a smaller mesh")]) from None
        except (Exception, SystemExit) as error:
            said.append(_reason(error, heard.getvalue()))
        else:
            return mesh, remarks + _heard(heard.getvalue())
    why = "; or ".join(dict.fromkeys(said))
    right = f"it is damaged, or of another kind than {path.suffix}"
    raise InputError([Fault(str(path), f"cannot be read ({why})", right)])


def _readers(path: Path) -> Sequence[Callable[[Path, int | None], tuple[Any, list[str]]]]:
    """Return what can read a file of this name."""
    import meshio

    _mend_tables()
    kinds = [
        kind for end, kinds in meshio.extension_to_filetypes.items() if _ends(path, end) for kind in kinds
    ]
    if not kinds:
        known = " ".join(sorted(meshio.extension_to_filetypes))
        raise InputError([Fault(str(path), "a kind of file that is not known", f"known: {known}")])
    return [_reader(kind) for kind in dict.fromkeys(kinds)]


def _mend_tables() -> None:
    """Give meshio (5.3.5) what its tables lack or have wrong: a kind of cell, numbers of legacy VTK files."""
    from meshio import _mesh
    from meshio.vtk import _vtk_42, _vtk_51

    _mesh.topological_dimension["wedge15"] = 3
    for tables in (_vtk_42, _vtk_51):
        tables.vtk_to_numpy_dtype_name.update(LEGACY_NUMBERS)


def _ends(path: Path, end: str) -> bool:
    return path.name.lower().endswith(end)


def _reader(kind: str) -> Callable[[Path, int | None], tuple[Any, list[str]]]:
    def read(path: Path, step: int | None) -> tuple[Any, list[str]]:
        import meshio

        if kind == "xdmf" and b'CollectionType="Temporal"' in path.read_bytes():
            return _step(path, step)
        if kind == "vtu":
            return read_vtu(path), []
        mesh = meshio.read(path, file_format=kind)
        if _ends(path, ".inp"):
            _name_cells(path, mesh)
        return mesh, []

    return read


def _step(path: Path, step: int | None) -> tuple[Any, list[str]]:
    """Return the mesh and one step of a series in time."""
    import meshio

    with meshio.xdmf.TimeSeriesReader(path) as series:
        points, cells = series.read_points_cells()
        taken = series.num_steps if step is None else step
        if not 1 <= taken <= series.num_steps:
            raise ValueError(f"step {taken} is not among its {series.num_steps} steps")
        time, point_data, cell_data = series.read_data(taken - 1)
    mesh = meshio.Mesh(points, cells, point_data=point_data, cell_data=cell_data)
    return mesh, [f"step {taken} of {series.num_steps} (time {time:g}) is read"]


def _name_cells(path: Path, mesh: Any) -> None:
    """Give each block of cells of an .inp file the name it has there: meshio confuses names that recur."""
    lines = path.read_text(errors="replace").splitlines()
    heads = [line for line in lines if re.match(r"\*element\s*(,|$)", line, flags=re.IGNORECASE)]
    if len(heads) != len(mesh.cells):
        return
    found = [re.search(r"elset\s*=\s*\"?([^,\"]+)", head, flags=re.IGNORECASE) for head in heads]
    names = [match[1].strip() if match else "" for match in found]
    for name in filter(None, dict.fromkeys(names)):
        none, counts = np.array([], dtype=int), map(len, mesh.cells)
        mesh.cell_sets[name] = [
            np.arange(count) if own == name else none for own, count in zip(names, counts, strict=True)
        ]


def _require_file(path: Path) -> None:
    where = str(path)
    if path.is_dir():
        raise InputError([Fault(where, "a folder", WANTED)])
    try:
        with path.open("rb") as file:
            start = file.read(1)
    except FileNotFoundError:
        raise InputError([Fault(where, "no such file", WANTED)]) from None
    except OSError as error:
        raise InputError([Fault(where, f"cannot be read ({error.strerror})", WANTED)]) from None
    if not start:
        raise InputError([Fault(where, "the file is empty", WANTED)])


def _reason(error: BaseException, heard: str) -> str:
    """Return what the reader said, in one line."""
    if isinstance(error, UnicodeDecodeError):
        return "binary where text is expected"
    other = re.fullmatch(r"len\(points\) = (\d+), but len\(point_data\[\"(.*)\"\]\) = (\d+)", str(error))
    if other:
        return f"field {other[2]!r} is of another mesh: {other[3]} values for {other[1]} nodes"
    words = heard if isinstance(error, SystemExit) else str(error)
    lines = [line.strip() for line in words.splitlines() if line.strip() and not line.startswith("Error:")]
    return lines[0][:200] if lines else "it is not what its name says"


def _heard(text: str) -> list[str]:
    """Return what the reader warned of, in a remark each; its lines are broken anywhere."""
    said = re.split(r"\b(?:Warning|Info|Error): ", " ".join(text.split()))[1:]
    return [f"reader: {words.strip()}" for words in list(dict.fromkeys(said))[:5]]
