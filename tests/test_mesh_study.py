"""Studies on meshes of files, from the files to the verdicts, with exact values and with every fault told."""

import math
import re
from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.cli._folder import keep_study
from convergence.cli._judging import Said, judge_path
from convergence.climbing import climb, unknowns
from convergence.errors import InputError
from convergence.judgement import facts_of, judge
from convergence.results import Findings, Ladder
from convergence.study import Study, load

INNER, OUTER, PRESSURE, YOUNG, POISSON = 30.0, 60.0, 21.0, 210000.0, 0.3
RING = f"""
title = "Barrel of the cylinder, a quarter"
[meshes]
files = ["ring-0.msh", "ring-1.msh", "ring-2.msh", "ring-3.msh"]
kind = "plane strain"
[material]
young = {YOUNG}
poisson = {POISSON}
[boundaries.bore]
circle = [0.0, 0.0]
radius = {INNER}
[boundaries.outside]
circle = [0.0, 0.0]
radius = {OUTER}
[boundaries.left]
plane = [0.0, 0.0]
normal = [1, 0]
[boundaries.low]
plane = [0.0, 0.0]
normal = [0, 1]
[supports.left]
boundary = "left"
x = 0.0
[supports.low]
boundary = "low"
normal = 0.0
[loads.oil]
kind = "pressure"
boundary = "bore"
value = {PRESSURE}
[quantities.hoop]
measure = "stress"
at = [{INNER}, 0.0]
component = "yy"
relative_tolerance = 0.02
[quantities.growth]
measure = "displacement"
at = [{OUTER}, 0.0]
component = "x"
relative_tolerance = 0.01
[quantities.wall]
measure = "reaction_force"
support = "left"
component = "x"
relative_tolerance = 0.01
"""
# Lamé 1852 (Timoshenko & Goodier, Theory of Elasticity, art. 28)
SHARE = PRESSURE * INNER**2 / (OUTER**2 - INNER**2)
EXACT = {
    "hoop": SHARE * (1.0 + OUTER**2 / INNER**2),
    "growth": 2.0 * SHARE * OUTER * (1.0 - POISSON**2) / YOUNG,
    "wall": -PRESSURE * INNER,
}


def quarter_ring(path: Path, corners: int, *, degree: int = 1) -> None:
    """Write a quarter ring of triangles made by Netgen, about `corners` around the bore."""
    geometry = pytest.importorskip("netgen.geom2d", reason="Netgen has no package for this system")
    ring = geometry.SplineGeometry()
    places = [(INNER, 0.0), (OUTER, 0.0), (OUTER, OUTER), (0.0, OUTER), (0.0, INNER), (INNER, INNER)]
    a, b, outer, c, d, inner = (ring.AppendPoint(*place) for place in places)
    ring.Append(["line", a, b])
    ring.Append(["spline3", b, outer, c])
    ring.Append(["line", c, d])
    ring.Append(["spline3", d, inner, a])
    made = ring.GenerateMesh(maxh=0.5 * math.pi * INNER / corners)
    if degree == 2:
        made.SecondOrder()
    made.Export(str(path), "Gmsh2 Format")


def written(folder: Path, text: str) -> Path:
    path = folder / "s.toml"
    path.write_text(text)
    return path


def solved(study: Study, folder: Path) -> Findings:
    levels = tuple(climb(study, folder))
    return judge(Ladder(levels, "s.toml", h_unit="mm"), study.quantities, facts_of(study), study.title)


@pytest.fixture(scope="module")
def rings(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("rings")
    for number in range(4):
        quarter_ring(folder / f"ring-{number}.msh", 4 * 2**number, degree=2)
    quarter_ring(folder / "linear.msh", 4)
    return folder


@pytest.mark.parametrize(
    "meshes",
    [
        'files = ["ring-0.msh", "ring-1.msh", "ring-2.msh", "ring-3.msh"]',
        'file = "ring-0.msh"\nlevels = 4',
        'file = "linear.msh"\nlevels = 4\ndegree = 2',
    ],
)
def test_exact_values_lie_inside_the_intervals(rings: Path, meshes: str, tmp_path: Path) -> None:
    text = RING.replace('files = ["ring-0.msh", "ring-1.msh", "ring-2.msh", "ring-3.msh"]', meshes)
    study = load(written(rings, text))
    assert study.cells == "triangles of degree 2" and study.dimension == 2
    findings = solved(study, tmp_path / "out")
    assert [level.dofs for level in findings.ladder.levels] == unknowns(study)
    for name, exact in EXACT.items():
        verdict = findings.verdicts[name]
        assert verdict.word == "sound"
        assert verdict.low <= exact <= verdict.high


def test_files_in_another_order_are_put_in_order(rings: Path) -> None:
    turned = RING.replace('"ring-0.msh", "ring-1.msh"', '"ring-1.msh", "ring-0.msh"')
    study, usual = load(written(rings, turned)), load(written(rings, RING))
    assert unknowns(study) == unknowns(usual) == sorted(unknowns(usual))
    assert any("order" in remark for remark in study.remarks)


def test_the_fingerprint_follows_what_changes_a_number(rings: Path, tmp_path: Path) -> None:
    usual = load(written(rings, RING)).fingerprint
    for old, new in (
        ("value = 21.0", "value = 22.0"),
        (f"poisson = {POISSON}", "poisson = 0.29"),
        ("plane strain", "plane stress"),
        ('"ring-2.msh", "ring-3.msh"', '"ring-3.msh"'),
    ):
        assert load(written(rings, RING.replace(old, new))).fingerprint != usual
    same = RING.replace("relative_tolerance = 0.02", "relative_tolerance = 0.03")
    assert load(written(rings, same.replace("Barrel", "The barrel"))).fingerprint == usual


def test_a_folder_of_a_run_is_judged_by_itself(rings: Path, tmp_path: Path) -> None:
    moved = tmp_path / "meshes"
    moved.mkdir()
    for name in ("ring-0.msh", "ring-1.msh", "ring-2.msh", "ring-3.msh"):
        (moved / name).write_bytes((rings / name).read_bytes())
    study = load(written(tmp_path, RING.replace('"ring-', '"meshes/ring-')))
    keep_study(study, tmp_path / "out")
    list(climb(study, tmp_path / "out"))
    for path in moved.iterdir():
        path.unlink()
    judged = judge_path(tmp_path / "out", Said({}))
    assert judged.all_sound


def bar(path: Path, *, extra: str = "") -> None:
    """Write a bar of two by one squares: a steel and a softer half, boundaries root and tip, a point foot."""
    points = np.array([[x, y, 0.0] for y in (0.0, 10.0) for x in (0.0, 20.0, 40.0)])
    cells = [("vertex", [[0]]), ("line", [[3, 0], [2, 5]]), ("quad", [[0, 1, 4, 3], [1, 2, 5, 4]])]
    tags = [np.array([7]), np.array([1, 2]), np.array([3, 4])]
    names = {"foot": [7, 0], "root": [1, 1], "tip": [2, 1], "stiff": [3, 2], "soft": [4, 2]}
    if extra == "triangle":
        points = np.vstack([points, [[50.0, 5.0, 0.0]]])
        cells.append(("triangle", [[2, 6, 5]]))
        tags.append(np.array([3]))
    found = meshio.Mesh(
        points,
        cells,
        cell_data={"gmsh:physical": tags, "gmsh:geometrical": tags},
        field_data={name: np.array(tag) for name, tag in names.items()},
    )
    meshio.write(path, found, file_format="gmsh22", binary=False)


BAR = """
[meshes]
file = "bar.msh"
levels = 2
thickness = 2.0
[material]
young = 200000.0
poisson = 0.0
[material.soft]
young = 70000.0
[supports.root]
boundary = "root"
x = 0.0
[supports.foot]
point = "foot"
y = 0.0
[loads.pull]
kind = "force"
boundary = "tip"
force = [1000.0, 0.0]
[loads.bend]
kind = "force"
boundary = "tip"
force = [0.0, 0.0]
moment = 300.0
about = [40.0, 5.0]
[cases.pull]
loads = ["pull"]
[cases.double]
loads = ["pull", "bend"]
factors = [2.0, 0.0]
[quantities.stretch]
measure = "displacement"
at = [40.0, 5.0]
component = "x"
"""


def test_regions_have_their_own_material_and_cases_their_own_loads(tmp_path: Path) -> None:
    """u = F (L1/E1 + L2/E2) / A is in the space of every mesh, so all levels have it; 1e-9 is round-off."""
    bar(tmp_path / "bar.msh")
    study = load(written(tmp_path, BAR))
    assert study.loads() == {"pull": "1 × pull", "double": "2 × pull, 0 × bend"}
    assert study.problem().names()["region"] == ("stiff", "soft")
    list(climb(study, tmp_path / "out"))
    exact = 1000.0 * (20.0 / 200000.0 + 20.0 / 70000.0) / (10.0 * 2.0)
    for name, factor in (("pull", 1.0), ("double", 2.0)):
        case = study.cases[name]
        for level in climb(case, tmp_path / "each" / name):
            assert level.values["stretch"] == pytest.approx(factor * exact, rel=1e-9)
    assert study.cases["pull"].fingerprint != study.cases["double"].fingerprint


SIDE = "[boundaries.side]\nplane = [0.0, -3.0]\nnormal = [0, 1]\n[cases.pull]"
FAULTS = [
    (
        '"root"\nx',
        '"rot"\nx',
        "s.toml:12: supports.root.boundary: the model has no such boundary, got 'rot'; ",
    ),
    (
        '"foot"\ny',
        '"fot"\ny',
        "supports.foot.point: the model has no such point, got 'fot'; did you mean 'foot'?",
    ),
    (
        "[material.soft]",
        "[material.sof]",
        "material.sof: the mesh has no such region, got 'sof'; did you mean 'soft'",
    ),
    ("x = 0.0\n", "", "supports.root: unsuitable x; at least one of x, y, z and normal"),
    ("x = 0.0\n", "w = 0.0\n", "supports.root.w: unknown key"),
    ('kind = "force"', 'kind = "pull"', "loads.pull.kind: unknown kind, got 'pull'"),
    ('kind = "force"\n', "", "loads.pull: the key 'kind' is missing; add kind = one of bearing, force, "),
    ("force = [1000.0, 0.0]", "force = [1.0, 0.0, 0.0]", "loads.pull.force: a vector of another dimension"),
    ("moment = 300.0", "moment = [1.0, 2.0, 3.0]", "loads.bend.moment: unsuitable moment"),
    (
        'loads = ["pull"]',
        'loads = ["pul"]',
        "cases.pull.loads: no such load, got 'pul'; did you mean 'pull'?",
    ),
    ("factors = [2.0, 0.0]", "factors = [2.0]", "cases.double.factors: unsuitable factors, got (2.0,)"),
    ("levels = 2", 'levels = 2\nkind = "solid"', "meshes.kind: the meshes have 2 dimensions, got 'solid'"),
    ('file = "bar.msh"', 'file = "no.msh"', "no.msh: no such file"),
    ("levels = 2", 'files = ["bar.msh"]', "meshes.files: unsuitable files, got ('bar.msh',); either "),
    (
        'file = "bar.msh"\nlevels = 2',
        'files = ["bar.msh", "a/bar.msh"]',
        "unsuitable files, got ('bar.msh', 'a/bar.msh'); names",
    ),
    ("[meshes]", "[ladder]\n[meshes]", "ladder: the meshes of files are the levels: they have no ladder"),
    (
        "[cases.pull]",
        SIDE,
        "boundaries.side.plane: does not suit bar.msh, got (0.0, -3.0); what picks a facet: ",
    ),
    ("[cases.pull]", SIDE.replace("side", "rest"), "boundaries.rest: a name the mesh keeps for itself"),
    (
        "young = 70000.0",
        "yield_strength = 200.0",
        "material.soft.yield_strength: a yield strength without its",
    ),
    ("at = [40.0, 5.0]", "at = [40.0, 25.0]", "quantities.stretch.at: outside the part"),
]


@pytest.mark.parametrize(("old", "new", "message"), FAULTS)
def test_a_fault_of_a_mesh_study(tmp_path: Path, old: str, new: str, message: str) -> None:
    bar(tmp_path / "bar.msh")
    assert old in BAR
    with pytest.raises(InputError) as caught:
        load(written(tmp_path, BAR.replace(old, new)))
    assert any(message in str(fault) for fault in caught.value.faults), caught.value


def test_bodies_that_share_no_nodes_are_refused_or_joined(tmp_path: Path) -> None:
    halves = np.array([[x, y, 0.0] for y in (0.0, 10.0) for x in (0.0, 10.0, 20.0, 20.0, 30.0, 40.0)])
    quads = [[k, k + 1, k + 7, k + 6] for k in (0, 1, 3, 4)]
    cells = [("line", [[6, 0], [5, 11]]), ("quad", quads)]
    marks = [np.array([1, 2]), np.array([3, 3, 4, 4])]
    names = {"root": [1, 1], "tip": [2, 1], "stiff": [3, 2], "soft": [4, 2]}
    data = {"gmsh:physical": marks, "gmsh:geometrical": marks}
    apart = meshio.Mesh(halves, cells, cell_data=data, field_data={k: np.array(v) for k, v in names.items()})
    meshio.write(tmp_path / "bar.msh", apart, file_format="gmsh22", binary=False)
    text = BAR.replace('point = "foot"', 'boundary = "root"')
    with pytest.raises(InputError, match="2 bodies that share no nodes; one body; merge = true joins"):
        load(written(tmp_path, text))
    joined = load(written(tmp_path, text.replace("levels = 2", "levels = 2\nmerge = true")))
    assert joined.problem().part.meshes[0].nodes.shape[1] == 10


def test_a_ring_cannot_reach_over_its_axis(tmp_path: Path) -> None:
    bar(tmp_path / "bar.msh")
    text = (tmp_path / "bar.msh").read_text()
    (tmp_path / "bar.msh").write_text(re.sub(r"^([14]) 0\.0\S+", r"\1 -3.0", text, flags=re.MULTILINE))
    with pytest.raises(
        InputError, match=r"meshes.kind: the mesh reaches x = -3, got 'axisymmetric'; x from 0"
    ):
        load(written(tmp_path, BAR.replace("levels = 2", 'kind = "axisymmetric"')))


def test_cases_without_a_case_are_told(tmp_path: Path) -> None:
    bar(tmp_path / "bar.msh")
    text = BAR[: BAR.index("[cases.pull]")] + "[cases]\n" + BAR[BAR.index("[quantities.stretch]") :]
    with pytest.raises(InputError, match=r"cases: no case; add \[cases.NAME\]"):
        load(written(tmp_path, text))


def test_several_kinds_of_cells_are_refused(tmp_path: Path) -> None:
    bar(tmp_path / "bar.msh", extra="triangle")
    with pytest.raises(InputError, match="cells of one shape and degree"):
        load(written(tmp_path, BAR))


def finer_bar(path: Path, parts: str) -> None:
    """Write the bar in two by four squares with the names of no boundary."""
    x, y = np.meshgrid(np.linspace(0.0, 40.0, 5), np.linspace(0.0, 10.0, 3))
    points = np.array([x.ravel(), y.ravel(), np.zeros(15)]).T
    cells = [[5 * j + i, 5 * j + i + 1, 5 * j + i + 6, 5 * j + i + 5] for j in range(2) for i in range(4)]
    material = np.array([3, 3, 4, 4] * 2)
    names = {"stiff": np.array([3, 2]), parts: np.array([4, 2])}
    data = {"gmsh:physical": [material], "gmsh:geometrical": [material]}
    found = meshio.Mesh(points, [("quad", cells)], cell_data=data, field_data=names)
    meshio.write(path, found, file_format="gmsh22", binary=False)


TWO = BAR.replace('file = "bar.msh"\nlevels = 2', 'files = ["bar.msh", "fine.msh"]')


def test_regions_of_another_name_are_refused(tmp_path: Path) -> None:
    bar(tmp_path / "bar.msh")
    finer_bar(tmp_path / "fine.msh", "tough")
    with pytest.raises(InputError, match=r"the regions stiff, tough; soft, stiff, as in bar\.msh"):
        load(written(tmp_path, TWO))


def test_boundaries_that_one_file_has_not_are_left_out(tmp_path: Path) -> None:
    bar(tmp_path / "bar.msh")
    finer_bar(tmp_path / "fine.msh", "soft")
    with pytest.raises(InputError, match="no such boundary, got 'root'"):
        load(written(tmp_path, TWO))
    picks = "".join(
        f"[boundaries.{name}]\nplane = [{x}, 0.0]\nnormal = [1, 0]\n"
        for name, x in (("root", 0.0), ("tip", 40.0))
    )
    study = load(written(tmp_path, TWO.replace('point = "foot"', 'boundary = "root"') + picks))
    assert study.remarks[-1] == "boundaries and points that not all of the files have are left out: foot"
    assert [mesh.nodes.shape[1] for mesh in study.problem().part.meshes] == [6, 15]
