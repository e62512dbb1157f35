"""Floors as a Typer application: ``nothing`` is a no-op command, ``render`` is F1 inside one (F2). By path, alone."""

import sys
from pathlib import Path
from typing import Annotated

import typer

app = typer.Typer(add_completion=True, pretty_exceptions_enable=False)
AtOption = Annotated[str, typer.Option("--at")]


@app.command()
def nothing(file: Path, at: AtOption = "") -> None:
    """Read the arguments, import the two libraries, and do nothing."""
    import jsonschema  # noqa: F401
    import yaml  # noqa: F401


@app.command()
def render(folder: Path, at: AtOption = "") -> None:
    """Fill the two templates, with the two libraries imported as well."""
    import jsonschema  # noqa: F401
    import yaml  # noqa: F401
    from floor_render import render as fill

    fill(folder)


def one_of_many() -> None:
    """Stand for a command of which only the line in the list of commands counts."""


for number in range(int(sys.argv.pop()) if "--help" in sys.argv else 0):
    app.command(f"command-{number}")(one_of_many)

if __name__ == "__main__":
    app()
