"""The commands: parse, call flow, print, exit. No work of its own, and nothing heavy imported at start."""

from __future__ import annotations

import io
import sys
from pathlib import Path
from typing import Annotated

import typer
from rich.console import Console

from calcbook import __version__
from calcbook.errors import CalcbookError, UsageFault

app = typer.Typer(
    no_args_is_help=True,
    context_settings={"help_option_names": ["-h", "--help"]},
    add_completion=False,
    pretty_exceptions_enable=False,
    rich_markup_mode=None,
    help=(
        "Traceable calculation sheets for low-voltage three-phase installations.\n\n"
        "A project is a folder with inputs.toml and circuits.csv. `calcbook run PROJECT` reads it, works out every "
        "circuit, and writes into PROJECT/sheets/: for each circuit NUMBER.html, NUMBER.pdf and its workbook "
        "NUMBER.ipynb, index.html to start from, and results.json with every number.\n\n"
        "Exit code: 0 all criteria met; 1 some criterion not met or not shown; 2 bad inputs or usage, nothing "
        "written; 3 a sheet could not be executed; 4 the machine refused (disk, rights); 130 interrupted.\n\n"
        "Results need review by a competent, where required licensed, person; local codes and the standards' current "
        "editions govern; table values must be compared with the licensed text."
    ),
)


@app.callback(invoke_without_command=True)
def _version(
    version: Annotated[bool, typer.Option("--version", help="Print the version and stop.")] = False,
) -> None:
    if version:
        typer.echo(f"calcbook {__version__}")
        raise typer.Exit


@app.command(short_help="Execute the sheets of PROJECT and publish them.")
def run(
    project: Annotated[Path, typer.Argument(help="Folder with inputs.toml and circuits.csv.", show_default=False)],
    kernel: Annotated[
        bool, typer.Option("--kernel", help="Execute each sheet in an ordinary Jupyter kernel of its own: slower.")
    ] = False,
) -> None:
    """Execute the sheets of PROJECT and publish them into PROJECT/sheets/.

    Example: calcbook run examples/tern_quay
    """
    from calcbook.flow import run_project
    from calcbook.report import Progress, print_run

    console = Console()
    with Progress(Console(stderr=True)) as progress:
        done = run_project(project, "kernel" if kernel else "warm", progress.on_plan, progress.on_done)
    print_run(console, done)
    raise typer.Exit(done.exit_code)


@app.command()
def templates(
    project: Annotated[
        Path | None, typer.Argument(help="A project whose own templates are listed too.", show_default=False)
    ] = None,
) -> None:
    """List the templates with their parameters.

    A template is an ordinary notebook: it opens in JupyterLab and runs alone under papermill, e.g.
    papermill templates/cable-current.ipynb out.ipynb -p size "35 mm2"
    """
    from calcbook.report import print_templates

    if project and not project.is_dir():
        raise UsageFault(f"{project} is not a folder; a project is a folder with inputs.toml in it")
    print_templates(Console(), project)


def main() -> None:
    """The entry point: every mistake of a user ends in one message and its exit code, never in a traceback."""
    for stream in (sys.stdout, sys.stderr):  # a terminal or pipe may know fewer characters than the inputs hold
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="backslashreplace")
    try:
        app()
    except CalcbookError as error:
        typer.echo(str(error), err=True)
        sys.exit(error.exit_code)
    except KeyboardInterrupt:
        typer.echo("interrupted", err=True)
        sys.exit(130)
    except BrokenPipeError:  # the reader of our output went away
        sys.exit(0)
