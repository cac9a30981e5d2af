"""`meshassay fields FILES`: a verdict on result files of another solver, or a study file of them."""

import json
from pathlib import Path

import click

from convergence.cli._options import report_decimal
from convergence.numbers import DecimalMark

KINDS = ("plane stress", "plane strain", "axisymmetric", "solid")


@click.command()
@click.argument("files", nargs=-1, required=True, type=click.Path(path_type=Path))
@click.option("--young", type=float, required=True, help="Young's modulus in the unit of stress.")
@click.option("--poisson", type=float, required=True, help="Poisson's ratio.")
@click.option("--kind", type=click.Choice(KINDS), help="Plane stress of a plane mesh, if not given.")
@click.option("--thickness", type=float, help="Thickness of a plane part, 1 if not given.")
@click.option("--units", default="mm, N, MPa", show_default=True, help="Consistent units of the files.")
@click.option("--out", type=click.Path(path_type=Path), help="Write a report into this folder.")
@click.option("--as", "forms", default="html", metavar="html,pdf,docx", help="Forms of the report (html).")
@report_decimal
@click.option("--study", "as_study", is_flag=True, help="Print a study file instead, to be added to.")
@click.option("--json", "as_json", is_flag=True, help="Print the findings as JSON.")
def fields(
    files: tuple[Path, ...],
    young: float,
    poisson: float,
    kind: str | None,
    thickness: float | None,
    units: str,
    out: Path | None,
    forms: str,
    mark: DecimalMark | None,
    as_study: bool,
    as_json: bool,
) -> int:
    """Judge result FILES of one part (.vtu, .vtk, .xdmf and others), each on a finer mesh; nothing is solved.

    Displacement and hot spots are judged by the stress that follows from displacement and material. Supports,
    loads, several materials and quantities of one's own are said in a study file: --study prints one.
    """
    lines = [
        f"title = {_text(f'Results {files[0].stem} to {files[-1].stem}')}",
        f"units = {_text(units)}",
        "",
        "[fields]",
        f"files = [{', '.join(_text(file.as_posix()) for file in files)}]",
        *([f"kind = {_text(kind)}"] if kind else []),
        *([f"thickness = {thickness!r}"] if thickness is not None else []),
        "",
        "[material]",
        f"young = {young!r}",
        f"poisson = {poisson!r}",
    ]
    study = "\n".join(lines) + "\n"
    if as_study:
        click.echo(study, nl=False)
        return 0
    return _judged(study, out, forms, mark, as_json)


def _judged(study: str, out: Path | None, forms: str, mark: DecimalMark | None, as_json: bool) -> int:
    from convergence.cli._forms import forms_of
    from convergence.cli._judging import judge_saved
    from convergence.cli._report import report, say_where
    from convergence.cli._show import show, show_json
    from convergence.study import load

    chosen = forms_of(forms, mark)
    judged = judge_saved(load(Path("fields.toml"), text=study), Path())
    if as_json:
        show_json([judged])
    else:
        show(judged)
    if out:
        say_where(report(judged, out, forms=chosen), as_json)
    return 0 if judged.all_sound else 1


def _text(plain: str) -> str:
    return json.dumps(plain, ensure_ascii=False)
