"""`meshassay new MODEL`: a commented study file that runs."""

import click


@click.command()
@click.argument("model")
def new(model: str) -> None:
    """Print a study file of a model, ready to run: meshassay new lug > lug.toml.

    In place of a model, a mesh file: its study names the boundaries, regions and points that the file has.
    """
    from pathlib import Path

    from convergence.mesh_template import mesh_template
    from convergence.template import study_template

    path = Path(model)
    text = mesh_template(path) if path.suffix else study_template(model)
    click.echo(text, nl=False)
