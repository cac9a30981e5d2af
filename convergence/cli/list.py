"""`meshassay list ROOM`: what a room offers."""

import click

from convergence import rooms


@click.command()
@click.argument("room", type=click.Choice(rooms.OPEN_ROOMS))
def list(room: str) -> None:
    """Show what there is: models, quantities, estimators or checks."""
    shelf = rooms.shelf(room)
    width = max((len(name) for name in shelf), default=0)
    for name, line in shelf.items():
        click.echo(f"{name:<{width}}  {line}")
