"""Made-up patients read straight from plain data, and how many of them a run makes."""

from __future__ import annotations

import os
import random
from collections.abc import Iterator, Mapping
from datetime import UTC, datetime, timedelta
from typing import Any

from handoff.assess import Assessment, assess
from handoff.state.nodes import List, Map, Node, Text
from handoff.state.patient import PatientState
from tests.small_patient import setup_of

START = datetime(2026, 1, 14, 8, 0, tzinfo=UTC)
"""The burn; in winter the clock of these patients stands at UTC."""


def count(each_day: int) -> int:
    """Return how many patients are made: ``each_day``, or what the variable PATIENTS asks for."""
    return int(os.environ.get("PATIENTS", each_day))


def seeds(each_day: int) -> Iterator[tuple[int, random.Random]]:
    """Yield the number of each patient and its own source of chance, the same every time."""
    for seed in range(count(each_day)):
        yield seed, random.Random(seed)  # noqa: S311  (patients, not secrets)


def at(minutes: int) -> datetime:
    """Return the moment so many minutes after the burn."""
    return START + timedelta(minutes=minutes)


def written(minutes: int) -> str:
    """Return the moment so many minutes after the burn as the file writes it."""
    return f"{at(minutes):%Y-%m-%d %H:%M}"


def rows(found: Mapping[int, Mapping[str, Any]]) -> dict[str, dict[str, Any]]:
    """Return rows by minute after the burn as the file keeps them: by date, then by time."""
    kept: dict[str, dict[str, Any]] = {}
    for minutes in sorted(found):
        kept.setdefault(f"{at(minutes):%Y-%m-%d}", {})[f"{at(minutes):%H:%M}"] = dict(found[minutes])
    return kept


def results(found: Mapping[int, Mapping[str, Any]]) -> list[dict[str, Any]]:
    """Return results by minute after the burn as the file keeps them: a list of dated rows."""
    return [{"at": written(minutes), **found[minutes]} for minutes in sorted(found)]


def state(
    *, patient: Mapping[str, Any] | None = None, injury: Mapping[str, Any] | None = None, **blocks: Any
) -> dict[str, Any]:
    """Return a state file as plain data; a part that is None is left out."""
    whole: dict[str, Any] = {
        "handoff": "1",
        "clock": "Europe/Dublin",
        "patient": {"name": "Tomas Ferrandel", "sex": "male", "born": "1985-02-11", **(patient or {})},
        "injury": {"at": written(0), "causes": [{"kind": "scald"}], **(injury or {})},
    }
    for part in ("patient", "injury"):
        whole[part] = {key: value for key, value in whole[part].items() if value is not None}
    return {**whole, **{key: value for key, value in blocks.items() if value}}


def node(data: Any) -> Node:
    """Return plain data as the nodes that the reader makes."""
    if isinstance(data, Mapping):
        return Map.at([(Text.at(str(key)), node(value)) for key, value in data.items()])
    if isinstance(data, list | tuple):
        return List.at([node(value) for value in data])
    return Text.at(str(data))


def assessed(
    names: tuple[str, ...], data: Mapping[str, Any], now: int, choices: Mapping[str, str] | None = None
) -> Assessment:
    """Return the assessment so many minutes after the burn, without the text of a file; none may fail."""
    root = node(data)
    assert isinstance(root, Map)
    setup = setup_of(names, tuple(sorted((choices or {}).items())))
    made = assess(PatientState(root, "made-up"), setup, at(now))
    assert not made.failures, made.failures
    return made
