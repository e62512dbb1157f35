"""The edge where errors become lines for a nurse and exit codes for scripts."""

from __future__ import annotations

import sys
import traceback
from collections.abc import Callable
from enum import IntEnum
from io import TextIOWrapper
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, NoReturn

import typer

if TYPE_CHECKING:
    from handoff.assess import Assessment
    from handoff.registry import Setup
    from handoff.state.load import Loaded


class Exit(IntEnum):
    """What the exit code says to a script."""

    DONE = 0
    FAULTS = 1
    USAGE = 2
    INCOMPLETE = 3
    SETUP = 4


FileArgument = Annotated[
    Path, typer.Argument(metavar="FILE", help="The patient-state file, for example ferrandel.yaml")
]
AtOption = Annotated[
    str,
    typer.Option(
        "--at", metavar="TIME", help="The moment it is written for: '2026-03-14 19:30'; now if left out"
    ),
]
PolicyOption = Annotated[
    Path | None,
    typer.Option("--policy", envvar="HANDOFF_POLICY", metavar="FILE", help="The unit's policy file"),
]
BundledOption = Annotated[bool, typer.Option("--bundled-only", help="Leave outside plugins out")]


def say(text: str) -> None:
    """Print a line for the reader."""
    typer.echo(text)


def complain(text: str) -> None:
    """Print a line on the error stream."""
    typer.echo(text, err=True)


def stop(code: Exit, *lines: str) -> NoReturn:
    """Print ``lines`` on the error stream and leave with ``code``."""
    for line in lines:
        complain(line)
    raise SystemExit(int(code))


def setup_or_stop(policy: Path | None, bundled_only: bool) -> Setup:
    """Return the prepared policy and plugins, or leave with exit code 4 and the reason."""
    from handoff.policy import PolicyError
    from handoff.registry import PluginError
    from handoff.work import make_setup

    try:
        return make_setup(policy, bundled_only)
    except PolicyError as error:
        stop(Exit.SETUP, *error.lines)
    except PluginError as error:
        stop(Exit.SETUP, f"plugin fault: {error}")


def open_or_stop(file: Path, setup: Setup, at: str) -> Loaded:
    """Return the validated state, or leave with exit code 1 (faults) or 2 (not a state file)."""
    from handoff.state.faults import StateFaults
    from handoff.state.file_text import NotAStateFile
    from handoff.state.load import MomentError
    from handoff.work import open_file

    try:
        return open_file(file, setup, at)
    except NotAStateFile as error:
        stop(Exit.USAGE, str(error))
    except MomentError as error:
        stop(Exit.USAGE, str(error))
    except StateFaults as error:
        lines = [fault.said(error.file) for fault in error.faults]
        counted = f"{len(lines)} fault{'s' if len(lines) > 1 else ''}; nothing was written"
        stop(Exit.FAULTS, *lines, counted)


def assessed(file: Path, at: str, policy: Path | None, bundled_only: bool) -> Assessment:
    """Return the assessment of ``file``, or leave with the exit code that fits."""
    from handoff.work import assess_loaded

    setup = setup_or_stop(policy, bundled_only)
    return assess_loaded(open_or_stop(file, setup, at), setup)


def who(assessment_state: object) -> str:
    """Return name, birth date and record number on one line, as every command that writes echoes them."""
    from handoff.state.access import words
    from handoff.state.clock import read_date
    from handoff.state.patient import PatientState

    if not isinstance(assessment_state, PatientState):
        return ""
    born = words(assessment_state.patient.get("born"))
    said = f"born {read_date(born).shown()}" if born else "birth date not recorded"
    numbers = [f"{kind.replace('_', ' ')} {number}" for kind, number in assessment_state.identifiers]
    return ", ".join([assessment_state.name, said, *(numbers[:1] or ["no identifier recorded"])])


def look_alikes(file: Path) -> None:
    """Name on the error stream each patient of the same folder who could be taken for the one in ``file``."""
    from handoff.shift.neighbours import neighbours

    for line in neighbours(file):
        complain(line)


def leave(assessment: Assessment) -> None:
    """Say what could not be computed and leave with exit code 3, if anything."""
    for failure in assessment.failures:
        complain(f"not computed: {failure.title}: {failure.what}")
    if assessment.failures:
        raise SystemExit(int(Exit.INCOMPLETE))


def stop_for(trouble: list[str]) -> None:
    """Leave with exit code 4 where a unit's own template was at fault; the documents were made all the same."""
    if trouble:
        lines = [f"template fault: {one}" for one in dict.fromkeys(trouble)]
        stop(
            Exit.SETUP,
            *lines,
            "the built-in template was used in its place; the document says so where it can",
        )


def guarded(run: Callable[[], object]) -> None:
    """Run the command line; no traceback reaches the reader.

    ``--debug`` shows where it stopped, without the text of the error, which may hold patient data.
    """
    debug = "--debug" in sys.argv
    if debug:
        sys.argv.remove("--debug")
    _never_stop_on_a_letter()
    try:
        run()
    except KeyboardInterrupt:
        stop(Exit.USAGE, "stopped; nothing more was written")
    except SystemExit as leaving:
        # The command line library leaves with 1 when the reader of a pipe has gone.
        if isinstance(leaving.__context__, BrokenPipeError):
            raise SystemExit(int(Exit.DONE)) from None
        raise
    except BrokenPipeError:
        raise SystemExit(int(Exit.DONE)) from None
    except OSError as error:
        stop(
            Exit.USAGE,
            f"what was to be printed could not be written ({error.strerror}); your file was not changed",
        )
    except Exception as error:  # the last guard: a fault of the tool itself
        complain(f"handoff stopped on a fault of its own ({type(error).__name__}); your file was not changed")
        if debug:
            for frame in traceback.extract_tb(error.__traceback__):
                complain(f"  {Path(frame.filename).name}:{frame.lineno} in {frame.name}")
        else:
            complain("run it again with --debug and pass on what it prints; it holds no patient data")
        raise SystemExit(int(Exit.SETUP)) from None


def _never_stop_on_a_letter() -> None:
    """Let a letter that a console cannot show be printed by its number, in place of a crash."""
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, TextIOWrapper):
            stream.reconfigure(errors="backslashreplace")
