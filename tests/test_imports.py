"""The house holds: imports go down, rooms are independent, files and functions stay small.

The rules read source, so they are tested themselves with sources that break them.
"""

import ast
from collections.abc import Iterator, Mapping
from pathlib import Path

import pytest

HOME = Path(__file__).parents[1] / "convergence"
FOUNDATIONS = {
    *(
        "errors",
        "dimensions",
        "stated_units",
        "rooms",
        "results",
        "fields",
        "numbers",
        "sequences",
        "textfile",
        "tomlfile",
        "bind",
    ),
    *(
        "ladder_spec",
        "quantity_tables",
        "columns",
        "sections",
        "memory",
        "corner",
        "coverage",
        "case_folders",
        "mapped",
        "statics",
    ),
}
FLOORS = (
    FOUNDATIONS,
    {"fem", "estimators", "intake", "histories"},
    {"corners"},
    {"bodies"},
    {"models", "quantities", "checks"},
    {"measured", "measuring", "cases", "conditions"},
    {"body_tables", "given_series", "field_files", "field_map", "field_pieces"},
    {"field_quantities"},
    {"model_study", "field_study", "table_study", "mesh_study", "printed_balance", "record", "study_head"},
    {"study", "template", "intervals", "forecast"},
    {"mesh_template", "next_mesh"},
    {"climbing", "field_levels", "verdicts", "companions", "one_sided", "envelope"},
    {"judgement"},
    {"comparison"},
    {"calibration"},
    {"report", "bench"},
    {"cli"},
    {"__main__"},
)
# rooms whose files build on each other in one direction; in all others a member stands alone
BUILT_UP = {"fem", "corners", "bodies", "report", "calibration", "bench", "histories"}
ONLY_IN = {
    "skfem": {"fem", "models", "quantities"},
    "meshio": {"bodies"},
    "docx": {"report"},
    "typst": {"report"},
    "ngsolve": {"bench", "calibration"},
    "netgen": {"bench", "calibration"},
    "matplotlib": {"report", "bench", "calibration"},
    "click": {"cli"},
    "rich": {"cli"},
}
FILE_LINES = 250
FUNCTION_LINES = 50


def sources() -> dict[str, str]:
    return {str(p.relative_to(HOME)): p.read_text(encoding="utf-8") for p in sorted(HOME.rglob("*.py"))}


def module_name(path: str) -> str:
    return path.removesuffix(".py").replace("/", ".")


def floor(name: str) -> int | None:
    room = name.split(".")[0]
    return next((number for number, rooms in enumerate(FLOORS) if room in rooms), None)


def imported(tree: ast.AST, modules: set[str]) -> Iterator[tuple[str, int]]:
    """Yield each imported name in full and its line; relative imports keep their dots."""
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            yield from ((alias.name, node.lineno) for alias in node.names)
        elif isinstance(node, ast.ImportFrom) and node.level:
            yield "." * node.level + (node.module or ""), node.lineno
        elif isinstance(node, ast.ImportFrom):
            for alias in node.names:
                full = f"{node.module}.{alias.name}"
                yield (
                    (full if full.removeprefix("convergence.") in modules else str(node.module)),
                    node.lineno,
                )


def own_imports(path: str, text: str, modules: set[str]) -> set[str]:
    found = (name for name, _ in imported(ast.parse(text), modules))
    return {name.removeprefix("convergence.") for name in found if name.startswith("convergence.")}


def import_faults(path: str, text: str, modules: set[str]) -> Iterator[str]:
    name = module_name(path)
    room, own = name.split(".")[0], floor(name)
    if own is None:
        yield f"{path}: has no floor"
        return
    for target, line in imported(ast.parse(text), modules):
        where, top = f"{path}:{line}", target.split(".")[0]
        if target.startswith("."):
            yield f"{where}: relative import"
        elif room not in ONLY_IN.get(top, {room}):
            yield f"{where}: {top} outside {', '.join(sorted(ONLY_IN[top]))}"
        elif target.startswith("convergence."):
            below = target.removeprefix("convergence.")
            reached, other = floor(below), below.split(".")[0]
            if room == other and "." in below:
                furniture = below.split(".")[-1].startswith("_")
                if room not in BUILT_UP and not furniture:
                    yield f"{where}: a member imports the member {below}"
            elif reached is None or reached > own or (reached == own and own != 0):
                yield f"{where}: {name} imports {below}, which is not below it"


def size_faults(path: str, text: str) -> Iterator[str]:
    lines = text.count("\n")
    if lines >= FILE_LINES:
        yield f"{path}: {lines} lines"
    for node in ast.walk(ast.parse(text)):
        if isinstance(node, ast.FunctionDef):
            length = (node.end_lineno or 0) - node.lineno + 1
            if length >= FUNCTION_LINES:
                yield f"{path}:{node.lineno}: {node.name} has {length} lines"


def habit_faults(path: str, text: str) -> Iterator[str]:
    """Yield what a room's face has beside its docstring, and what prints or logs below a command."""
    tree = ast.parse(text)
    if path.endswith("/__init__.py") and (not ast.get_docstring(tree) or len(tree.body) != 1):
        yield f"{path}: more or less than a docstring"
    if path.startswith(("cli/", "bench/")) or path == "calibration/__main__.py":
        return
    for node in ast.walk(tree):
        called = getattr(node, "func", None)
        if isinstance(called, ast.Name) and called.id == "print":
            yield f"{path}:{node.lineno}: prints"
        if isinstance(node, ast.Import) and {a.name for a in node.names} & {"logging", "warnings"}:
            yield f"{path}:{node.lineno}: logs or warns"


def cycles(graph: Mapping[str, set[str]]) -> list[str]:
    """Return the modules that are left when those that import nothing left are taken away again and again."""
    left = dict(graph)
    while free := [name for name, targets in left.items() if not targets & left.keys()]:
        for name in free:
            del left[name]
    return sorted(left)


def faults(files: Mapping[str, str]) -> list[str]:
    modules = {module_name(path) for path in files}
    found: list[str] = []
    for path, text in files.items():
        if path != "__init__.py" and not path.endswith("/__init__.py"):
            found += import_faults(path, text, modules)
        found += [*size_faults(path, text), *habit_faults(path, text)]
    graph = {module_name(path): own_imports(path, text, modules) for path, text in files.items()}
    graph.pop("__init__", None)
    return found + [f"{name}: in a circle of imports" for name in cycles(graph)]


def test_the_house_holds() -> None:
    files = sources()
    assert "errors.py" in files and "fem/part.py" in files
    assert faults(files) == []


@pytest.mark.parametrize(
    ("path", "text", "message"),
    [
        ("errors.py", "from convergence.study import load\n", "errors imports study, which is not below it"),
        ("fem/mesh.py", "from convergence.estimators import richardson\n", "which is not below it"),
        ("fem/mesh.py", "def f():\n    import convergence.cli.main\n", "fem.mesh imports cli.main"),
        (
            "models/lug.py",
            "from convergence.models.arm import arm\n",
            "a member imports the member models.arm",
        ),
        ("models/lug.py", "from convergence.models import arm\n", "a member imports the member models.arm"),
        ("models/lug.py", "from . import arm\n", "models/lug.py:1: relative import"),
        (
            "models/lug.py",
            "import matplotlib.pyplot as plt\n",
            "matplotlib outside bench, calibration, report",
        ),
        ("fem/mesh.py", "import ngsolve as ng\n", "ngsolve outside bench, calibration"),
        ("models/lug.py", "from netgen.occ import WorkPlane\n", "netgen outside bench, calibration"),
        ("calibration/bank.py", "print(1)\n", "calibration/bank.py:1: prints"),
        ("report/html.py", "import rich\n", "rich outside cli"),
        ("estimators/one.py", "from skfem.helpers import dot\n", "skfem outside fem, models, quantities"),
        ("new_thing.py", "", "new_thing.py: has no floor"),
        ("models/__init__.py", '"""A room."""\nimport numpy\n', "more or less than a docstring"),
        ("models/__init__.py", "", "more or less than a docstring"),
        ("models/lug.py", "print(1)\n", "models/lug.py:1: prints"),
        ("models/lug.py", "import warnings\n", "models/lug.py:1: logs or warns"),
        ("models/lug.py", "x = 1\n" * 250, "models/lug.py: 250 lines"),
        ("models/lug.py", "def f():\n" + "    x = 1\n" * 49, "models/lug.py:1: f has 50 lines"),
    ],
)
def test_a_broken_rule_is_found(path: str, text: str, message: str) -> None:
    house = {"errors.py": "", "study.py": "", "models/arm.py": "", "estimators/richardson.py": ""}
    assert faults(house) == []
    found = faults({**house, path: text})
    assert len(found) == 1 and message in found[0]


def test_a_circle_is_found() -> None:
    circle = {
        "fem/a.py": "from convergence.fem import b\n",
        "fem/b.py": "from convergence.fem.a import x\n",
        "fem/c.py": "from convergence.fem.a import x\n",
    }
    assert faults(circle) == [f"fem.{name}: in a circle of imports" for name in "abc"]


def test_what_is_allowed_passes() -> None:
    good = {
        "errors.py": "",
        "dimensions.py": "from convergence.errors import Fault\n",
        "fem/part.py": "import skfem\n",
        "fem/mesh.py": "from convergence.fem.part import Part\nfrom convergence import errors\n",
        "models/_shape.py": "",
        "models/lug.py": "from convergence.models._shape import x\nfrom convergence.fem.mesh import mesh\n",
        "cli/run.py": "import click\nprint(1)\n",
        "models/__init__.py": '"""A room."""\n',
        "results.py": "x = 1\n" * 249,
    }
    assert faults(good) == []
