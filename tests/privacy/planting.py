"""The invented example with identifiers planted into every text that a nurse can write."""

from __future__ import annotations

from functools import lru_cache
from typing import Any

import yaml

from handoff.privacy.identifying import fits, instead_of, is_text
from handoff.registry import Setup
from handoff.state.nodes import List, Map, Node, plain
from handoff.work import make_setup, open_text
from tests.packaging.project import ROOT
from tests.small_patient import _NoAliases

AT = "2026-03-14 19:30"
PLANTED = (
    "told by Tomas Ferrandel (HSH-204518) of Harrow Ward on 14 March 2026 at 13:21 to E. Marsh and Dr Quill, "
    "phone 087 555 0199, mail ines@example.org, then Ignatius Vantongeren came on 2026-03-14"
)
SECRETS = (
    "Tomas",
    "Ferrandel",
    "HSH-204518",
    "204518",
    "Harrow",
    "Marsh",
    "Quill",
    "Osei",
    "Ines",
    "4417",
    "555 0199",
    "example.org",
    "Vantongeren",
    "Ignatius",
    "13:21",
    "1985-02-11",
    "11 Feb 1985",
    "2026-03",
    "Mar 2026",
    "March 2026",
    "14 Mar",
    "Europe/Dublin",
    "SECRETWORD",
)


@lru_cache(maxsize=1)
def setup() -> Setup:
    """Return the bundled plugins with the built-in defaults."""
    return make_setup(None, True)


@lru_cache(maxsize=1)
def planted_text() -> str:
    """Return the state file of the example with identifiers in every free text, and a confidential entry."""
    written = (ROOT / "examples" / "house-fire.yaml").read_text(encoding="utf-8")
    root = open_text(written, "house-fire.yaml", setup(), AT).state.written
    made = {
        str(key): _planted(value, setup().schema["properties"][key], (key,)) for key, value in root.items()
    }
    made["confidential"] = {
        "safeguarding": [
            {"at": "2026-03-14 16:00", "by": "EM", "note": "SECRETWORD heard", "told": "Dr A. Quill"}
        ]
    }
    return yaml.dump(made, Dumper=_NoAliases, sort_keys=False, allow_unicode=True, width=10**6)


def _planted(node: Node, schema: Any, path: tuple[str | int, ...]) -> object:
    schema = fits(node, schema)
    if isinstance(node, Map):
        if "x-row" in schema:
            return {
                str(day): {
                    str(time): _planted(entry, schema["x-row"], path)
                    if isinstance(entry, Map)
                    else plain(entry)
                    for time, entry in times.items()
                }
                for day, times in node.items()
                if isinstance(times, Map)
            }
        known = schema.get("properties", {})
        made = {
            str(key): _planted(value, known.get(key, {}), (*path, str(key))) for key, value in node.items()
        }
        if "note" in known and "struck" in known:
            made.setdefault("note", PLANTED)
        return made
    if isinstance(node, List):
        return [_planted(value, schema.get("items", {}), (*path, index)) for index, value in enumerate(node)]
    room = schema.get("maxLength", 0) > len(PLANTED) + len(node) and not schema.get("x-name")
    plantable = is_text(schema) and not instead_of(path) and not node[:1].isdigit() and room
    return f"{node} {PLANTED}" if plantable else str(node)
