"""[record] of a study: what the report of an analysis must say and only the analyst knows."""

from collections.abc import Mapping
from typing import Annotated

from convergence.sections import Sections

RECORD = "record"
Record = Mapping[str, str]  # what the analyst states, in words, by key
NOTHING: Record = {}


def record(
    *,
    analyst: Annotated[str, "who made the analysis"] = "",
    checker: Annotated[str, "who checked it"] = "",
    purpose: Annotated[str, "what is decided with it"] = "",
    criteria: Annotated[str, "what is accepted, fixed before the runs"] = "",
    drawing: Annotated[str, "drawing or model of the geometry, with its revision"] = "",
    idealisation: Annotated[str, "what was left out or simplified, symmetry"] = "",
    coordinates: Annotated[str, "coordinate systems and signs"] = "",
    material_source: Annotated[str, "where the material data are from"] = "",
    load_source: Annotated[str, "where the loads are from"] = "",
    hand_values: Annotated[str, "loads and reactions by hand"] = "",
    restraint: Annotated[str, "why the supports hold the part and no more than that"] = "",
    software: Annotated[str, "another solver that was used, its version and its verification"] = "",
    independent_check: Annotated[str, "hand calculation, exact solution or second model"] = "",
    tests: Annotated[str, "comparison with tests"] = "",
    sensitivity: Annotated[str, "what uncertain inputs change"] = "",
    conclusion: Annotated[str, "the analyst's conclusion, its limits, what was not resolved"] = "",
    archive: Annotated[str, "where files are kept"] = "",
) -> Record:
    """Return what is stated."""
    return {key: words for key, words in locals().items() if words}


def read_record(sections: Sections) -> Record:
    """Read [record]; nothing where the study has none."""
    return sections.read(record, RECORD) or NOTHING
