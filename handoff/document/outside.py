"""Fill a unit's own template: in a process of its own, with limits of time and memory, and nothing to reach."""

from __future__ import annotations

import json
import re
from base64 import b64decode, b64encode
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from handoff.document.context import Data
from handoff.document.edited import read_parts
from handoff.document.errors import DocumentError
from handoff.document.finish import Properties
from handoff.document.paper import Page
from handoff.document.sections import Mark
from handoff.outside.runner import answer_of
from handoff.outside.stopped import Stopped

STOPPED_AFTER_S = 30
"""How long the filling of one template may take; one of ours takes a second."""

CHILD = "handoff.document.outside_child"

MARKED = "\0mark"
"""Key under which a tag travels, so that it is told from a text that is printed."""

_CARRIERS = ("vbaproject", "embeddings/", "activex", "afchunk", "customui", "oleobject")
_FIELDS = re.compile(
    rb"\b(?:DDEAUTO|DDE|INCLUDETEXT|INCLUDEPICTURE|IMPORT|LINK|MACROBUTTON|AUTOTEXT|DATABASE)\b"
)
_INSTRUCTIONS = re.compile(rb"<w:instrText[^>]*>([^<]*)<|w:instr=\"([^\"]*)\"")
_OUTSIDE = re.compile(rb"<Relationship\b[^>]*TargetMode=\"External\"[^>]*>")


def outside_template(folder: str, name: str) -> bytes | None:
    """Return the unit's own template ``name`` of ``folder``, or None where there is none.

    Raises:
        DocumentError: It is there and cannot be read.
    """
    path = Path(folder) / name
    if not folder or not path.exists():
        return None
    try:
        return path.read_bytes()
    except OSError as error:
        raise DocumentError(f"the template {path} cannot be read ({error.strerror})") from None


def fill_outside(
    template: bytes,
    name: str,
    data: Mapping[str, Data],
    properties: Properties,
    page: Page,
    drawings: Mapping[str, str],
) -> tuple[bytes, list[str]]:
    """Return the finished file and every text that the template printed, as the process of its own gave them.

    Raises:
        DocumentError: The template was refused, stopped, or is at fault; names it and says why.
    """
    refuse_what_reaches_out(template, name)
    asked = {
        "template": b64encode(template).decode(),
        "name": name,
        "data": _packed(dict(data)),
        "properties": [
            properties.title,
            properties.made_at.isoformat(),
            properties.digest,
            dict(properties.made_from),
        ],
        "page": [page.paper, page.landscape],
        "drawings": dict(drawings),
    }
    try:
        answer: dict[str, Any] = json.loads(answer_of(CHILD, json.dumps(asked).encode(), STOPPED_AFTER_S))
    except Stopped as stopped:
        raise _stopped(name, str(stopped)) from None
    except ValueError:
        raise _stopped(name, "it took too much time or memory") from None
    if "fault" in answer:
        raise DocumentError(str(answer["fault"]))
    return b64decode(answer["content"]), [str(text) for text in answer["printed"]]


def _stopped(name: str, why: str) -> DocumentError:
    return DocumentError(f"the template {name} was stopped: {why}; look for a loop in it that was added")


def refuse_what_reaches_out(template: bytes, name: str) -> None:
    """Raise where a template carries a program, or fetches anything from outside itself.

    Raises:
        DocumentError: It does, or it is no Word document; says what.
    """
    try:
        parts = read_parts(template)
    except ValueError as error:
        raise DocumentError(f"the template {name} cannot be used: {error}") from None
    for part, content in parts.items():
        carrier = next((one for one in _CARRIERS if one in part.lower()), None)
        if carrier:
            raise _reaches(name, f"it carries a program or an embedded object ({part})")
        if part.endswith(".rels"):
            for found in _OUTSIDE.findall(content):
                if b"/hyperlink" not in found:
                    raise _reaches(name, f"it fetches something from outside itself (named in {part})")
        for instruction in _INSTRUCTIONS.findall(content):
            field = _FIELDS.search(b" ".join(instruction))
            if field:
                raise _reaches(name, f"it holds the field {field[0].decode()} (in {part})")


def _reaches(name: str, why: str) -> DocumentError:
    return DocumentError(f"the template {name} was refused: {why}; take it out and save it again")


def _packed(data: Data) -> Any:
    if isinstance(data, Mark):
        return {MARKED: str(data)}
    if isinstance(data, dict):
        return {key: _packed(value) for key, value in data.items()}
    if isinstance(data, list):
        return [_packed(value) for value in data]
    return data


def unpacked(data: Any) -> Data:
    """Return what :func:`fill_outside` sent, tags as tags."""
    if isinstance(data, dict):
        if list(data) == [MARKED]:
            return Mark(data[MARKED])
        return {str(key): unpacked(value) for key, value in data.items()}
    if isinstance(data, list):
        return [unpacked(value) for value in data]
    return data  # type: ignore[no-any-return]
