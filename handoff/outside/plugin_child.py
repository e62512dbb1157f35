"""The process of its own that runs a plugin from outside: asked on its input, answers on its output."""

from __future__ import annotations

import hashlib
import json
import os
import pickle
import sys
from collections.abc import Callable, Mapping
from importlib import metadata, resources
from typing import Any

from handoff.contract import breach
from handoff.outside.carried import Described, Told, packed
from handoff.outside.limits import ReachedOut, keep_in, limit
from handoff.outside.stopped import Stopped, place_of
from handoff.plugin import Case, Plugin


def main() -> None:
    """Answer one question about one plugin as JSON, and end whatever the plugin left running."""
    asked = pickle.load(sys.stdin.buffer)  # noqa: S301 (written by the process that started this one)
    answer = os.dup(1)
    nowhere = os.open(os.devnull, os.O_RDWR)
    for stream in (0, 1):  # what a plugin prints is no answer
        os.dup2(nowhere, stream)
    sys.path[:] = asked["path"]
    limit()
    keep_in()
    said = json.dumps(_said(asked)).encode()
    while said:
        said = said[os.write(answer, said) :]
    os._exit(0)


def _said(asked: dict[str, Any]) -> dict[str, Any]:
    try:
        plugin = metadata.EntryPoint(asked["name"], asked["value"], asked["group"]).load()
    except BaseException as error:  # a plugin may fail in any way
        return {"loading": _why(error)}
    if not isinstance(plugin, Plugin):
        return {"problem": f"the entry point '{asked['name']}' is not a handoff.plugin.Plugin"}
    try:
        return _JOBS[asked["job"]](plugin, asked["case"])
    except Stopped as stopped:
        return {"problem": str(stopped)}
    except BaseException as error:
        return {"problem": _why(error)}


def _why(error: BaseException) -> str:
    if isinstance(error, MemoryError):
        return "was stopped: it fills the memory"
    if isinstance(error, ReachedOut):
        return f"was stopped: {error} {place_of(error)}".rstrip()
    return f"stopped with {type(error).__name__} {place_of(error)}".rstrip()


def _describe(plugin: Plugin, _: None) -> dict[str, Any]:
    described = Described(
        name=plugin.name,
        title=plugin.title,
        package=plugin.package,
        requires=tuple(plugin.requires),
        owns=tuple(plugin.owns),
        api_version=plugin.api_version,
        has_check=plugin.check is not None,
        schema=_text(plugin, "schema.json"),
        parameters=_text(plugin, "parameters.yaml"),
    )
    return {"described": packed(described)}


def _text(plugin: Plugin, name: str) -> str:
    path = resources.files(plugin.package).joinpath(name)
    return path.read_text(encoding="utf-8") if path.is_file() else ""


def _compute(plugin: Plugin, case: Case) -> dict[str, Any]:
    before = _print_of(case)
    found = plugin.compute(case)
    problem = breach(plugin, found) or _changed(before, case)
    return {"problem": problem} if problem else {"findings": packed(found)}


def _check(plugin: Plugin, case: Case) -> dict[str, Any]:
    before = _print_of(case)
    problems = plugin.check(case) if plugin.check else ()
    problem = _changed(before, case)
    if problem:
        return {"problem": problem}
    told = [
        Told(one.node.line, one.node.column, tuple(one.path), one.what, one.cure, one.severity.value)
        for one in problems
    ]
    return {"told": [packed(one) for one in told]}


def _changed(before: str, case: Case) -> str:
    return "" if _print_of(case) == before else "changed what it was given"


def _print_of(case: Case) -> str:
    state = case.state
    given = (state.written, state.root, state.file, state.clock.zone, case.block, case.now)
    return hashlib.sha256(pickle.dumps((given, case.parameters, case.findings))).hexdigest()


_JOBS: Mapping[str, Callable[[Plugin, Any], dict[str, Any]]] = {
    "describe": _describe,
    "compute": _compute,
    "check": _check,
}


if __name__ == "__main__":
    main()
