"""An option that all commands which write a report have."""

import click

report_decimal = click.option(
    "--report-decimal",
    "mark",
    type=click.Choice(["point", "comma"]),
    help="Decimal mark of the report and its figures (default: as the study says, else point).",
)
