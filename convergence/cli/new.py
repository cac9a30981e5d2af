"""`meshassay new MODEL`: a commented study file that runs."""

import click


@click.command()
@click.argument("model")
def new(model: str) -> None:
    """Print a study file of a model, ready to run: meshassay new lug > lug.toml."""
    from convergence.template import study_template

    click.echo(study_template(model), nl=False)
