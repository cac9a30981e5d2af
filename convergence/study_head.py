"""What stands above the tables of a study file: its title and its units."""

from typing import Annotated

from convergence.bind import bind
from convergence.dimensions import SYSTEMS
from convergence.errors import nearest
from convergence.sections import Sections

DEFAULT_SYSTEM = "mm, N, MPa"


def head(
    *,
    title: Annotated[str, "what is studied"] = "",
    units: Annotated[str, f"consistent units, one of: {'; '.join(SYSTEMS)}"] = DEFAULT_SYSTEM,
) -> tuple[str, str]:
    """Return what stands above the tables of a study."""
    return title, units


def read_head(sections: Sections, tables: tuple[str, ...]) -> tuple[str, str]:
    """Read title and units of a file with these tables; the sections have its units from then on."""
    said = {key: value for key, value in sections.file.data.items() if key not in tables}
    arguments, faults = bind(head, said, where=sections.file.where, units=sections.units, also=tables)
    title, system = sections.keep(head(**arguments), faults)
    if system in SYSTEMS:
        sections.units = SYSTEMS[system]
    else:
        sections.fault(("units",), "unknown unit system", nearest(system, SYSTEMS), system)
    return title, system
