"""The main road in one place: policy and plugins ready, a file read, the assessment made."""

from __future__ import annotations

from datetime import datetime
from pathlib import Path

from msgspec.structs import replace

from handoff.assess import Assessment, assess, case_of
from handoff.outside.stopped import Stopped
from handoff.policy import load_policy
from handoff.registry import Setup, find_plugins, prepare
from handoff.state.contradictions import contradictions
from handoff.state.faults import Fault, Severity
from handoff.state.load import Loaded, load_file, load_text
from handoff.state.nodes import path_text
from handoff.state.patient import PatientState


def make_setup(policy: Path | None = None, bundled_only: bool = False) -> Setup:
    """Return policy, plugins, tables and schema ready for any number of patients.

    Raises:
        PolicyError: The policy file is at fault.
        PluginError: A plugin is at fault.
    """
    read = load_policy(policy)
    return prepare(read, find_plugins(read, bundled_only))


def checks_of(
    setup: Setup, state: PatientState, now: datetime, unchecked: dict[str, str] | None = None
) -> list[Fault]:
    """Return the faults that no schema can see, with their places: the core's and each plugin's.

    ``unchecked`` takes, for each plugin that failed, why; by its name.
    """
    faults = contradictions(state, now)
    for plugin in setup.plugins:
        if plugin.check is None:
            continue
        try:
            problems = plugin.check(case_of(plugin, state, setup, now, {}))
        except Exception as error:  # a plugin may fail in any way; the rest of the file must still be checked
            why = str(error) if isinstance(error, Stopped) else f"stopped with {type(error).__name__}"
            if unchecked is not None:
                unchecked[plugin.name] = why
            what = f"the plugin '{plugin.name}' could not check this file: it {why}"
            faults.append(Fault(1, 1, plugin.name, what, "check its entries by eye", Severity.UNUSUAL))
            continue
        for problem in problems:
            node = problem.node
            faults.append(
                Fault(
                    node.line,
                    node.column,
                    path_text(problem.path),
                    problem.what,
                    problem.cure,
                    problem.severity,
                )
            )
    return faults


def open_file(path: Path, setup: Setup, at: str = "") -> Loaded:
    """Return the validated state in ``path`` as of ``at``; raises as :func:`load_file`."""
    unchecked: dict[str, str] = {}
    loaded = load_file(path, at, setup.schema, lambda state, now: checks_of(setup, state, now, unchecked))
    return replace(loaded, unchecked=unchecked)


def open_text(text: str, file: str, setup: Setup, at: str = "") -> Loaded:
    """Return the validated state written in ``text`` as of ``at``; raises as :func:`load_text`."""
    unchecked: dict[str, str] = {}
    loaded = load_text(
        text, file, at, setup.schema, lambda state, now: checks_of(setup, state, now, unchecked)
    )
    return replace(loaded, unchecked=unchecked)


def assess_loaded(loaded: Loaded, setup: Setup) -> Assessment:
    """Return the assessment of a loaded state at its moment."""
    return assess(loaded.state, setup, loaded.now, loaded.unusual, loaded.unchecked)
