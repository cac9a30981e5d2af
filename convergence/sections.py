"""The tables of a study file, each bound to a function; the faults of all of them are gathered."""

from collections.abc import Callable, Iterable, Mapping
from pathlib import Path
from typing import Any, TypeVar

from convergence.bind import bind
from convergence.dimensions import Units
from convergence.errors import Fault, InputError, Unsuitable
from convergence.quantity_tables import Thing, name_fault
from convergence.tomlfile import TomlFile

T = TypeVar("T")
BODY_TABLES = ("material", "boundaries", "supports", "loads")  # of a study on meshes of files


class Sections:
    """One file that is being read. `units` are those of the file as soon as they are known."""

    def __init__(self, file: TomlFile, units: Units):
        self.file, self.units = file, units
        self.faults: list[Fault] = []

    def fault(self, keys: tuple[str, ...], what: str, right: str, found: object = None) -> None:
        """Keep a fault of a key, of its table where the key is not there, of the file where neither is."""
        at = keys if keys in self.file.lines else keys[:-1]
        self.faults.append(Fault(self.file.where(*at), what, right, found))

    def refuse(self, what: str, *names: str) -> None:
        """Keep a fault for each of some tables that is there; `what` ends before its name."""
        for name in names:
            if name in self.file.data:
                self.fault((name,), f"{what} {name}", f"remove [{name}]")

    def keep(self, found: T, faults: Iterable[Fault]) -> T:
        """Keep faults and hand on what came with them."""
        self.faults += faults
        return found

    def table(self, section: str) -> dict[str, Any]:
        """Return a table of the file, an empty one where it is missing or no table."""
        found = self.file.data.get(section, {})
        if isinstance(found, dict):
            return found
        self.fault((section,), "not a table", f"write [{section}] and its keys below", found)
        return {}

    def beside(self, file: str) -> Path:
        """Return the path of a file that the study names; a copy of the study has a copy beside it."""
        path = self.file.path.parent / file
        copy = self.file.path.parent / Path(file).name
        return copy if copy.exists() and not path.exists() else path

    def bound(
        self,
        function: Callable[..., Any],
        table: Mapping[str, Any],
        *section: str,
        given: Iterable[str] = (),
        also: Iterable[str] = (),
    ) -> dict[str, Any] | None:
        """Return the arguments of a table, None where it has faults."""

        def where(key: str) -> str:
            return self.file.where(*section, key if key in table else "")

        arguments, faults = bind(function, table, where=where, units=self.units, given=given, also=also)
        self.faults += faults
        return None if faults else arguments

    def called(self, function: Callable[..., T], arguments: Mapping[str, Any], *section: str) -> T | None:
        """Return what the function makes of its arguments, None where it refuses them."""
        try:
            return function(**arguments)
        except Unsuitable as error:
            for key, found, right in error.problems:
                self.fault((*section, key), f"unsuitable {key}", right, found)
        except InputError as error:
            self.faults += error.faults
        return None

    def read(self, function: Callable[..., T], section: str) -> T | None:
        """Return what the function makes of a whole table."""
        arguments = self.bound(function, self.table(section), section)
        return None if arguments is None else self.called(function, arguments, section)

    def named(self, section: str, thing: Thing) -> list[str]:
        """Return the names of the [SECTION.NAME] tables that can be read."""
        good = []
        for name, table in self.table(section).items():
            keys = (section, name)
            fault = name_fault(name, self.file.where(*keys), thing)
            if fault:
                self.faults.append(fault)
            elif not isinstance(table, dict):
                self.fault(keys, "not a table", f"write [{section}.{name}] and its keys below", table)
            else:
                good.append(name)
        return good
