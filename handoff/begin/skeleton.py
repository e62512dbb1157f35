"""A skeleton to fill in: every key of patient and injury blank, each with what belongs there."""

from __future__ import annotations

from collections.abc import Iterator

from handoff.chart import shape
from handoff.chart.shape import Schema

OPENED = ("patient", "injury")
LATER = ("handoff", "clock", *OPENED)
_COLUMN = 30
_LONGEST = 70
_HEAD = """\
# Patient file of handoff. Fill in what is known; what stays blank is not recorded.
# A comment begins with two spaces and #. Times are local: 2026-03-14 13:20. Units are written: 82 kg.
# To be filled first: patient name (or unknown, with a temporary identifier) and the time zone.
# Then: handoff check FILE tells what is wrong, by line. handoff chart --words tells what can be charted.
handoff: 1
"""


def skeleton(schema: Schema, zone: str) -> str:
    """Return the text of a skeleton file.

    Args:
        schema: The merged schema.
        zone: The time zone of this computer; empty where it does not tell.
    """
    lines = [_line("clock:" + (f" {zone}" if zone else ""), "Time zone of the unit: Europe/Dublin")]
    for block in OPENED:
        lines += ["", f"{block}:"]
        for key, form in shape.keys_of(schema["properties"][block]).items():
            lines.append(_line(f"  {key}:", _described(form)))
    lines += ["", "# What else the file may hold; take the # away, or let handoff chart write it:"]
    for key, form in schema["properties"].items():
        if key not in LATER:
            lines.append(
                f"# {key}:{' ' * max(2, _COLUMN - len('# :') - len(key))}# {_short(_described(form))}"
            )
    return _HEAD + "\n".join(lines) + "\n"


def _line(written: str, told: str) -> str:
    return f"{written:<{_COLUMN}}  # {_short(told)}"


def _described(form: Schema) -> str:
    said = str(form.get("description", ""))
    words = ", ".join(_words(form))
    return f"{said}: {words}" if words and len(words) < _LONGEST else said


def _words(form: Schema) -> Iterator[str]:
    if form.get("type") != "array":
        yield from shape.words_of(form)


def _short(text: str) -> str:
    return text if len(text) <= _LONGEST * 2 else f"{text[: _LONGEST * 2 - len(' ...')]} ..."
