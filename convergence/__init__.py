"""From a mesh-convergence ladder to a defensible statement about the discretization error.

A study file is loaded, its ladder of meshes climbed, the ladder judged, the findings reported:
`load`, `climb`, `judge`, `write_report`. What is not used is not imported.
"""

import importlib
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from convergence.climbing import climb
    from convergence.forecast import Budget
    from convergence.intake.ladder_file import read_ladder
    from convergence.intake.table import read_table
    from convergence.judgement import judge
    from convergence.report.document import write_report
    from convergence.results import Findings, Ladder
    from convergence.study import Study, load

__version__ = "0.1.0"

__all__ = [
    "Budget",
    "Findings",
    "Ladder",
    "Study",
    "climb",
    "judge",
    "load",
    "read_ladder",
    "read_table",
    "write_report",
]

_HOMES = {
    "climb": "climbing",
    "read_ladder": "intake.ladder_file",
    "read_table": "intake.table",
    "judge": "judgement",
    "write_report": "report.document",
    "Budget": "forecast",
    "Findings": "results",
    "Ladder": "results",
    "Study": "study",
    "load": "study",
}


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'convergence' has no attribute {name!r}")
    return getattr(importlib.import_module(f"convergence.{_HOMES[name]}"), name)
