"""`meshassay report`: the pages of a run as HTML, PDF and Word, without solving."""

from pathlib import Path

import click

from convergence.cli._options import report_decimal
from convergence.numbers import DecimalMark


@click.command()
@click.argument("folder", type=click.Path(path_type=Path))
@click.option("--as", "forms", default="html,pdf,docx", show_default=True, help="Forms, with commas between.")
@report_decimal
@click.option("--template", type=click.Path(path_type=Path), help="Word file whose styles are used (docx).")
@click.option("--date", "day", metavar="YYYY-MM-DD", help="Date that stands in the report (default: today).")
@click.option("--out", type=click.Path(path_type=Path), help="Where it goes (default: FOLDER).")
def report(
    folder: Path,
    forms: str,
    mark: DecimalMark | None,
    template: Path | None,
    day: str | None,
    out: Path | None,
) -> int:
    """Judge the FOLDER of a run again and write its report in the forms that are handed in.

    The same folder, date and version give the same bytes. With --template the text is put after what the
    Word file holds, in its styles. Exit code 0 if every quantity is sound, 1 if not.
    """
    from convergence.cli._forms import date_of, forms_of
    from convergence.cli._judging import judge_path
    from convergence.cli._report import report as write
    from convergence.cli._report import say_where
    from convergence.cli._said import Said

    chosen, date = forms_of(forms, mark, template), date_of(day)
    judged = judge_path(folder, Said({}))
    say_where(write(judged, out or folder, forms=chosen, day=date), as_json=False)
    return 0 if judged.all_sound else 1
