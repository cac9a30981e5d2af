"""What stands above the tables of a study file: its title, its units, how its report writes numbers."""

from dataclasses import dataclass
from typing import Annotated

from convergence.bind import bind
from convergence.dimensions import SYSTEMS
from convergence.errors import nearest
from convergence.numbers import DecimalMark
from convergence.sections import Sections

DEFAULT_SYSTEM = "mm, N, MPa"


@dataclass(frozen=True)
class Head:
    """Title, name of the unit system, decimal mark of documents and figures."""

    title: str
    units: str
    report_decimal: DecimalMark


def head(
    *,
    title: Annotated[str, "what is studied"] = "",
    units: Annotated[str, f"consistent units, one of: {'; '.join(SYSTEMS)}"] = DEFAULT_SYSTEM,
    report_decimal: Annotated[DecimalMark, "decimal mark of the report"] = "point",
) -> Head:
    """Return what stands above the tables of a study."""
    return Head(title, units, report_decimal)


def read_head(sections: Sections, tables: tuple[str, ...]) -> Head:
    """Read what stands above these tables of a file; the sections have its units from then on."""
    said = {key: value for key, value in sections.file.data.items() if key not in tables}
    arguments, faults = bind(head, said, where=sections.file.where, units=sections.units, also=tables)
    found = sections.keep(head(**arguments), faults)
    if found.units in SYSTEMS:
        sections.units = SYSTEMS[found.units]
    else:
        sections.fault(("units",), "unknown unit system", nearest(found.units, SYSTEMS), found.units)
    return found
