"""Run the plugins in dependency order and gather what they found; a failing one costs only itself."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime
from types import MappingProxyType

from msgspec import Struct

from handoff.contract import breach
from handoff.outside.stopped import Stopped, place_of
from handoff.plugin import Action, Case, Findings, Flag, Item, Plugin
from handoff.policy import Policy
from handoff.registry import Setup
from handoff.state.faults import Fault
from handoff.state.patient import PatientState
from handoff.ticks import known_done


class Failure(Struct, frozen=True):
    """What could not be computed and why; holds no patient data."""

    plugin: str
    title: str
    what: str


class Assessment(Struct, frozen=True):
    """What is known of one patient at one moment: items and actions, and what could not be computed."""

    state: PatientState
    now: datetime
    policy: Policy
    items: tuple[Item, ...]
    actions: tuple[Action, ...]
    findings: Mapping[str, Findings]
    failures: tuple[Failure, ...]
    warnings: tuple[Fault, ...]
    plugins: tuple[Plugin, ...]

    def item(self, key: str) -> Item | None:
        """Return the item of that key, or None."""
        return next((item for item in self.items if item.key == key), None)

    @property
    def shown_warnings(self) -> tuple[Fault, ...]:
        """The warnings that a document may hold: even the place of a confidential entry is confidential."""
        return tuple(one for one in self.warnings if one.path.partition(".")[0] != "confidential")

    @property
    def not_recorded(self) -> tuple[Item, ...]:
        """The items whose value is missing from the file."""
        return tuple(item for item in self.items if item.flag is Flag.NOT_RECORDED)


def assess(
    state: PatientState,
    setup: Setup,
    now: datetime,
    warnings: tuple[Fault, ...] = (),
    unchecked: Mapping[str, str] = MappingProxyType({}),
) -> Assessment:
    """Return the assessment of ``state`` at ``now``; never raises for what a plugin does.

    ``unchecked`` says for each plugin that could not check the file, by its name, why not.
    """
    findings: dict[str, Findings] = {}
    failures = [
        Failure(plugin.name, plugin.title, f"its entries were not checked: it {unchecked[plugin.name]}")
        for plugin in setup.plugins
        if plugin.name in unchecked
    ]
    for plugin in setup.plugins:
        lost = [name for name in plugin.requires if name not in findings]
        if lost:
            failures.append(
                Failure(plugin.name, plugin.title, f"not computed: it needs '{lost[0]}', which failed")
            )
            continue
        required = {name: findings[name] for name in plugin.requires}
        case = case_of(plugin, state, setup, now, required)
        try:
            found = plugin.compute(case)
            problem = breach(plugin, found)
        except Stopped as stopped:
            problem = str(stopped)
        except Exception as error:  # a plugin may fail in any way; the document must still be made
            problem = f"stopped with {type(error).__name__} {place_of(error)}".rstrip()
        if problem:
            failures.append(Failure(plugin.name, plugin.title, problem))
        else:
            findings[plugin.name] = found
    return Assessment(
        state=state,
        now=now,
        policy=setup.policy,
        items=tuple(item for found in findings.values() for item in found.items),
        actions=known_done([action for found in findings.values() for action in found.actions], state, now),
        findings=findings,
        failures=tuple(failures),
        warnings=warnings,
        plugins=setup.plugins,
    )


def case_of(
    plugin: Plugin, state: PatientState, setup: Setup, now: datetime, findings: Mapping[str, Findings]
) -> Case:
    """Return what ``plugin`` is given for ``state`` at ``now``."""
    block = state.root.get(plugin.name)
    return Case(state, block, setup.parameters[plugin.name], now, findings)
