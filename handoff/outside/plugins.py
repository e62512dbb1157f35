"""A plugin from outside as the core sees it: every call is answered by a process of its own."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from importlib import metadata
from typing import Any

from msgspec import field
from msgspec.structs import replace

from handoff.findings import Findings
from handoff.outside.stopped import Stopped
from handoff.plugin import Case, Plugin, Problem, Severity
from handoff.state.nodes import Map, Text
from handoff.state.patient import PatientState

STOPPED_AFTER_S = 10
"""How long one call may take; the bundled plugins take a hundredth of a second."""

WITHHELD = ("confidential",)
"""Blocks of the state file that no outside plugin is given."""

CHILD = "handoff.outside.plugin_child"


class OutsidePlugin(Plugin, frozen=True):
    """A plugin whose code is never loaded here; ``parts`` holds the texts of its files."""

    parts: Mapping[str, str] = field(default_factory=dict)


def load_outside(point: metadata.EntryPoint) -> OutsidePlugin:
    """Return the plugin behind ``point``, described by a process of its own.

    Raises:
        Stopped: What is behind it is no plugin. One that raises or hangs while it is loaded is
            returned all the same, with what can be read of its files, and computes nothing.
    """
    from handoff.outside.carried import Described, read  # noqa: PLC0415 (needed for a plugin from outside alone)

    try:
        said = _asked(point, "describe")
    except Stopped as stopped:
        return _lame(point, f"it does not load: {stopped}")
    if "loading" in said:
        return _lame(point, f"it does not load: {said['loading']}")
    if "problem" in said:
        raise Stopped(str(said["problem"]))
    found = read(Described, said.get("described"))
    return OutsidePlugin(
        name=found.name,
        title=found.title,
        package=found.package,
        compute=_computes(point),
        requires=found.requires,
        owns=found.owns,
        check=_checks(point) if found.has_check else None,
        api_version=found.api_version,
        parts={"schema.json": found.schema, "parameters.yaml": found.parameters},
    )


def _computes(point: metadata.EntryPoint) -> Callable[[Case], Findings]:
    def compute(case: Case) -> Findings:
        from handoff.outside.carried import read  # noqa: PLC0415

        return read(Findings, _answered(point, "compute", case).get("findings"))

    return compute


def _checks(point: metadata.EntryPoint) -> Callable[[Case], tuple[Problem, ...]]:
    def check(case: Case) -> tuple[Problem, ...]:
        from handoff.outside.carried import Told, read  # noqa: PLC0415

        told = _answered(point, "check", case).get("told")
        if not isinstance(told, list):
            raise Stopped("returned something that is not of the contract (check)")
        return tuple(_problem(read(Told, one)) for one in told)

    return check


def _problem(told: Any) -> Problem:
    try:
        severity = Severity(told.severity)
    except ValueError:
        raise Stopped("returned something that is not of the contract (severity)") from None
    return Problem(Text.at("", told.line, told.column), told.path, told.what, told.cure, severity)


def _answered(point: metadata.EntryPoint, job: str, case: Case) -> dict[str, Any]:
    said = _asked(point, job, _handed(case))
    for key in ("loading", "problem"):
        if key in said:
            raise Stopped(str(said[key]))
    return said


def _handed(case: Case) -> Case:
    """The case without what concerns nobody but the confidential sheet."""
    written = case.state.written
    if not any(key in written for key in WITHHELD):
        return case
    kept = ((written.key(key), node) for key, node in written.items() if key not in WITHHELD)
    state = PatientState(Map.at(kept, written.line, written.column), case.state.file)
    state.clock = case.state.clock
    return replace(case, state=state)


def _asked(point: metadata.EntryPoint, job: str, case: Case | None = None) -> dict[str, Any]:
    import json  # noqa: PLC0415
    import pickle  # noqa: PLC0415 (towards the process alone; its answer is JSON)
    import sys  # noqa: PLC0415

    from handoff.outside.runner import answer_of  # noqa: PLC0415

    asked = {
        "job": job,
        "name": point.name,
        "value": point.value,
        "group": point.group,
        "path": list(sys.path),
        "case": case,
    }
    try:
        said = json.loads(answer_of(CHILD, pickle.dumps(asked), STOPPED_AFTER_S))
    except (ValueError, RecursionError):
        raise Stopped("gave an answer that cannot be read") from None
    if not isinstance(said, dict):
        raise Stopped("gave an answer that cannot be read")
    return said


def _lame(point: metadata.EntryPoint, why: str) -> OutsidePlugin:
    """Stands for a plugin that does not load, so that its block is known and the documents can be made."""

    def compute(_: Case) -> Findings:
        raise Stopped(why)

    return OutsidePlugin(point.name, point.name, "", compute, parts=_parts_on_disk(point))


def _parts_on_disk(point: metadata.EntryPoint) -> dict[str, str]:
    from importlib.util import find_spec  # noqa: PLC0415
    from pathlib import Path  # noqa: PLC0415

    top, _, below = point.module.partition(".")
    found = {}
    try:
        spec = find_spec(top)  # of a name without a dot nothing is imported
        for folder in (spec and spec.submodule_search_locations) or ():
            for name in ("schema.json", "parameters.yaml"):
                path = Path(folder, *filter(None, below.split(".")), name)
                if path.is_file():
                    found[name] = path.read_text(encoding="utf-8")
    except (ImportError, OSError, ValueError):
        return {}
    return found
