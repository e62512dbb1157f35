"""What a plugin returned, held against the contract before anything is made of it."""

from __future__ import annotations

import math
import unicodedata
from collections.abc import Iterator
from datetime import datetime, timedelta

from handoff.parameters import Source
from handoff.plugin import Action, Findings, Flag, Item, Part, Plugin, System, Urgency, Working


def breach(plugin: Plugin, found: object) -> str:
    """Return how ``found`` breaks the contract of a plugin, in a phrase without patient data; empty if not."""
    if not isinstance(found, Findings):
        return f"returned {type(found).__name__} instead of Findings"
    words = (plugin.name, *plugin.owns)
    seen: set[str] = set()
    for part in (*found.items, *found.actions):
        if not isinstance(part, (Item, Action)) or not isinstance(part.key, str):
            return f"returned {type(part).__name__} among its findings"
        if part.key.partition(".")[0] not in words:
            return f"returned the key '{part.key}', which is not its own"
        if part.key in seen:
            return f"returned the key '{part.key}' twice"
        seen.add(part.key)
        for problem in _item(part) if isinstance(part, Item) else _action(part):
            return f"returned '{part.key}' {problem}"
    return ""


def _item(item: Item) -> Iterator[str]:
    yield from _texts(item.label, item.unit, item.shown)
    yield from _kinds((item.part, Part), (item.system, System), (item.flag, Flag))
    yield from _moments(item.as_of, item.value if isinstance(item.value, datetime) else None)
    yield from _cited(item.sources, item.cautions)
    if not isinstance(item.value, (float, int, str, datetime, type(None))):
        yield f"with a value of the kind {type(item.value).__name__}"
    if isinstance(item.value, float) and not math.isfinite(item.value):
        yield "as a number that is not finite"
    if item.working is not None and not isinstance(item.working, Working):
        yield "with a working of another kind"
    if item.value is not None and not item.sources and not item.repeats:
        yield "without a source"
    if item.value is None and item.flag is Flag.NONE and not item.shown:
        yield "with nothing to show"


def _action(action: Action) -> Iterator[str]:
    yield from _texts(action.area, action.text, action.why)
    yield from _kinds((action.system, System), (action.urgency, Urgency))
    yield from _moments(action.first_due)
    yield from _cited(action.sources, action.cautions)
    if action.every is not None and action.every < timedelta(minutes=1):
        yield "more often than once a minute"


def _texts(*texts: object) -> Iterator[str]:
    for text in texts:
        if not isinstance(text, str):
            yield f"with {type(text).__name__} where a text is due"
        elif not text.isprintable() and any(
            unicodedata.category(one) == "Cc" for one in text if one not in "\n\t"
        ):
            yield "with a control character in a text"


def _kinds(*pairs: tuple[object, type]) -> Iterator[str]:
    for value, kind in pairs:
        if not isinstance(value, kind):
            yield f"with {type(value).__name__} where a {kind.__name__} is due"


def _moments(*moments: object) -> Iterator[str]:
    for moment in moments:
        if moment is not None and (not isinstance(moment, datetime) or moment.utcoffset() is None):
            yield "with a time that has no time zone"


def _cited(sources: object, cautions: object) -> Iterator[str]:
    if not isinstance(sources, tuple) or not all(isinstance(source, Source) for source in sources):
        yield "with sources that are not a tuple of Source"
    if not isinstance(cautions, tuple) or not all(isinstance(caution, str) for caution in cautions):
        yield "with cautions that are not a tuple of texts"
