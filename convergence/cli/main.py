"""The entry: commands, exit codes, and one line instead of a stack trace."""

import gc
import os
import sys

import click

from convergence import __version__, rooms
from convergence.errors import MeshassayError

DEFECT = 3
STOPPED = 130
PIPE_CLOSED = 141


class Commands(click.Group):
    """The commands are the files of this room."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        return [name for name in rooms.names("cli") if name != "main"]

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        if cmd_name not in self.list_commands(ctx):
            return None
        command: click.Command = rooms.find("cli", cmd_name)
        return command


@click.group(cls=Commands, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(__version__, prog_name="meshassay")
def commands() -> None:
    """From a mesh-convergence ladder to a statement about the discretization error.

    Exit codes: 0 all sound, 1 not all sound, 2 study or command cannot be used, 3 solving failed.
    """


def main() -> None:
    """Run a command and exit with its code; nothing but a message reaches the user.

    Threads of the matrix library only get in the way of our own, so there is one unless the user says more.
    On its way out Python would look for garbage in all that was loaded, which can take half a second.
    """
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
    code = outcome(sys.argv[1:])
    gc.freeze()
    sys.exit(code)


def outcome(arguments: list[str]) -> int:
    """Run a command; return its exit code."""
    try:
        code = commands(arguments, prog_name="meshassay", standalone_mode=False)
        sys.stdout.flush()
        return code or 0
    except click.ClickException as error:
        error.show()
        return 2
    except MeshassayError as error:
        click.echo(str(error), err=True)
        return error.exit_code
    except (click.Abort, KeyboardInterrupt):
        click.echo("stopped; solved levels are kept, the same command goes on from there", err=True)
        return STOPPED
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return PIPE_CLOSED
    except MemoryError:
        click.echo("not enough memory; ask for fewer levels or a coarser first level", err=True)
        return DEFECT
    except Exception as error:
        said = " ".join(str(error).split())
        click.echo(
            f"defect of meshassay: {type(error).__name__}: {said}; please report the command", err=True
        )
        return DEFECT
