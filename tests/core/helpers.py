"""A small patient and hand-made plugins for tests of the core."""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime

from handoff.assess import Assessment, assess
from handoff.parameters import Parameters
from handoff.plugin import Action, Case, Findings, Item, Part, Plugin, System
from handoff.policy import Policy
from handoff.registry import Setup, in_order
from handoff.state.schema import merged_schema
from handoff.work import open_text

SMALL = """\
handoff: 1
clock: Europe/Dublin
patient: {name: Tomas Ferrandel, born: 1985-02-11, identifiers: {record_number: HSH-204518}}
injury: {at: 2026-03-14 13:20}
"""
AT = "2026-03-14 19:30"


def item(key: str, **changes: object) -> Item:
    """Return an item that repeats a charted value."""
    given: dict[str, object] = {
        "key": key,
        "label": key,
        "part": Part.ASSESSMENT,
        "system": System.GENERAL,
        "value": 1.0,
        "shown": "1",
        "repeats": True,
    }
    return Item(**{**given, **changes})  # type: ignore[arg-type]


def plugin_of(
    name: str,
    compute: Callable[[Case], Findings] | None = None,
    requires: tuple[str, ...] = (),
    **changes: object,
) -> Plugin:
    """Return a hand-made plugin; without ``compute`` it returns one item."""
    found = compute or (lambda case: Findings((item(f"{name}.one"),)))
    return Plugin(name, name.title(), "handoff.bundled.none", found, requires, **changes)  # type: ignore[arg-type]


def setup_of(*plugins: Plugin) -> Setup:
    """Return a setup of hand-made plugins without tables or schema parts."""
    ordered = in_order(plugins)
    return Setup(Policy(), ordered, {plugin.name: Parameters({}) for plugin in ordered}, merged_schema(()))


def assessment_of(*plugins: Plugin, text: str = SMALL, at: str = AT) -> Assessment:
    """Return the assessment of the small patient by hand-made plugins."""
    setup = setup_of(*plugins)
    loaded = open_text(text, "small.yaml", setup, at)
    return assess(loaded.state, setup, loaded.now, loaded.unusual)


def action(key: str, **changes: object) -> Action:
    """Return a line of the care plan."""
    given: dict[str, object] = {
        "key": key,
        "area": "Airway",
        "text": "look",
        "why": "because",
        "system": System.AIRWAY,
    }
    return Action(**{**given, **changes})  # type: ignore[arg-type]


def moment(assessment: Assessment) -> datetime:
    """Return the moment of an assessment."""
    return assessment.now
