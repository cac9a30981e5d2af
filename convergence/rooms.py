"""The folder is the registry: members of a room are its files, without furniture (`_name.py`).

A member's file has one public function of the same name; facts that belong to it (formal order,
record) stand beside it in the file.
"""

import ast
import importlib
from pathlib import Path
from typing import Any

from convergence.errors import Fault, InputError, nearest

HOME = Path(__file__).parent
OPEN_ROOMS = ("models", "quantities", "estimators", "checks")


def names(room: str) -> list[str]:
    """Return the members of a room, sorted."""
    return sorted(path.stem for path in (HOME / room).glob("*.py") if not path.stem.startswith("_"))


def find(room: str, name: str, where: str | None = None) -> Any:
    """Return the member's function; `InputError` with the nearest name where there is none."""
    if name not in names(room):
        what = f"unknown name in {room}"
        raise InputError([Fault(where or room, what, nearest(str(name), names(room)), name)])
    return getattr(importlib.import_module(f"convergence.{room}.{name}"), name)


def beside(room: str, name: str, what: str) -> Any:
    """Return what stands beside a member in its file, or None."""
    return getattr(importlib.import_module(f"convergence.{room}.{name}"), what, None)


def shelf(room: str) -> dict[str, str]:
    """Return name -> first docstring line of every member, read without importing any."""
    lines = {}
    for name in names(room):
        text = ast.get_docstring(ast.parse((HOME / room / f"{name}.py").read_text(encoding="utf-8")))
        lines[name] = (text or "").split("\n")[0]
    return lines
