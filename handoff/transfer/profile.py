"""What a receiving centre wants: one YAML file a unit can write, read as strictly as a state file."""

from __future__ import annotations

import os
from collections.abc import Mapping
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

from msgspec import Struct, field
from msgspec.structs import replace

from handoff.policy import Policy
from handoff.state.access import amount, entries, words
from handoff.state.faults import Fault, StateFaults
from handoff.state.file_text import NotAStateFile, read_text
from handoff.state.keywords import nearest
from handoff.state.nodes import List, Map
from handoff.state.reader import read_nodes
from handoff.state.schema import expand, load_schema
from handoff.state.validate import check, without_blanks
from handoff.transfer.facts import FACTS

FOLDER = Path(__file__).parent / "profiles"
DEFAULT = "burn-centre"


class ProfileError(Exception):
    """A profile cannot be used; carries one line for each fault."""

    def __init__(self, lines: list[str]) -> None:
        super().__init__("\n".join(lines))
        self.lines = lines


class Extra(Struct, frozen=True):
    """An item that this receiver wants beside the usual: what it is called, its key, its line."""

    label: str
    key: str
    line: int


class Profile(Struct, frozen=True):
    """What a receiver wants; ``paper`` is empty where the policy's is used."""

    name: str
    file: str
    ask: tuple[str, ...]
    observe_every_min: float
    phones: tuple[tuple[str, str], ...] = ()
    paper: str = ""
    choices: Mapping[str, str] = field(default_factory=dict)
    extra: tuple[Extra, ...] = ()
    checklist: tuple[str, ...] = ()
    records: tuple[str, ...] = ()

    def policy(self, policy: Policy) -> Policy:
        """Return the unit's policy with the rule sets and the paper that this receiver wants."""
        return replace(policy, choices={**policy.choices, **self.choices}, paper=self.paper or policy.paper)


def nameless(profile: Profile) -> Profile:
    """Return what a receiver wants without who it is, for a case that is used in teaching."""
    return replace(profile, name="a receiving centre", phones=(), checklist=(), records=(), file="")


def bundled() -> tuple[str, ...]:
    """Return the names of the profiles that come with the tool."""
    return tuple(sorted(path.stem for path in FOLDER.glob("*.yaml")))


def load_profile(wanted: str) -> Profile:
    """Return the profile in the file ``wanted``, or the bundled one of that name.

    Raises:
        ProfileError: There is no such profile, or every fault of the file with its line.
    """
    path = Path(wanted)
    if wanted in bundled():
        path = FOLDER / f"{wanted}.yaml"
    elif path.suffix not in (".yaml", ".yml"):
        cure = nearest(wanted, bundled())
        raise ProfileError([f"--to: no profile '{wanted}'; {cure}, or give a file that ends in .yaml"])
    try:
        return read_profile(read_text(path), os.fspath(path))
    except NotAStateFile as error:
        raise ProfileError([str(error)]) from None


def read_profile(text: str, file: str) -> Profile:
    """Return the profile written in ``text``; ``file`` names it in messages.

    Raises:
        ProfileError: Every fault with its line and the nearest known name.
    """
    try:
        root, found = read_nodes(text, file)
    except StateFaults as error:
        raise ProfileError([fault.said(file) for fault in error.faults]) from None
    faults: list[Fault] = [*found, *check(root, profile_schema(), datetime.now(UTC), found)]
    if faults:
        raise ProfileError([fault.said(file) for fault in faults])
    kept = without_blanks(root)
    return _profile(kept if isinstance(kept, Map) else Map.at(), file)


def profile_schema() -> dict[str, Any]:
    """Return the schema of a profile, with the names of what can be asked for."""
    schema = load_schema("transfer-profile.schema.json")
    schema["properties"]["ask"]["items"]["enum"] = list(FACTS)
    expanded: dict[str, Any] = expand(schema, load_schema("common.schema.json")["$defs"])
    return expanded


def _profile(root: Map, file: str) -> Profile:
    name, dated = words(root.get("name")), words(root.get("dated"))
    choices = root.get("choices")
    return Profile(
        name=", ".join(part for part in (name, words(root.get("centre")), dated) if part),
        file=file,
        ask=_texts(root, "ask"),
        observe_every_min=amount(root.get("observe_every"), "min", "duration") or 0,
        phones=tuple(
            (words(entry.get("who")), words(entry.get("number"))) for entry in entries(root.get("phones"))
        ),
        paper=words(root.get("paper")),
        choices={str(key): words(value) for key, value in choices.items()}
        if isinstance(choices, Map)
        else {},
        extra=tuple(
            Extra(words(entry.get("label")), words(entry.get("key")), entry.line)
            for entry in entries(root.get("extra"))
        ),
        checklist=_texts(root, "checklist"),
        records=_texts(root, "records"),
    )


def _texts(root: Map, key: str) -> tuple[str, ...]:
    node = root.get(key)
    return tuple(words(entry) for entry in node) if isinstance(node, List) else ()
