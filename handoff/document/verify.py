"""Compare a made document with the file as it is now: the same clinical content, or what moved, by system."""

from __future__ import annotations

import re
from collections.abc import Iterable
from datetime import UTC, datetime
from typing import Any

from msgspec import Struct
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document.edited import is_as_drafted, read_parts
from handoff.document.identity import DIGEST_LENGTH
from handoff.document.names import WORD
from handoff.document.printable import visible
from handoff.document.read_back import text_of
from handoff.document.sections import sentence, shown
from handoff.document.style import ORDERS, in_units, styled
from handoff.plugin import Flag, Item, words
from handoff.policy import Policy
from handoff.privacy.deidentify import DIGEST as DEIDENTIFIED
from handoff.state.clock import read_date
from handoff.state.patient import PatientState

_PROTECTED = bytes.fromhex("d0cf11e0a1b11ae1")
_VERSION = re.compile(r"\b(?:state file )?version ([0-9a-f]{12})\b")


class NotOurs(Exception):
    """The document cannot be compared with a file; says why and what to do."""


class Made(Struct, frozen=True):
    """What a document says of itself: from which version of the file, for which moment, its text, its rows."""

    digest: str
    at: datetime | None
    text: str
    rows: dict[str, tuple[str, ...]]
    as_drafted: bool


class Moved(Struct, frozen=True):
    """One value that is no longer what the document says."""

    system: str
    label: str
    before: str
    now: str

    def said(self) -> str:
        """Return it in one line."""
        return f"{self.system}: {self.label}: the document says {self.before}; the file now says {self.now}"


def read_document(content: bytes) -> Made:
    """Return what a document that this tool made says of itself.

    Raises:
        NotOurs: It is protected, for teaching, or not made by this tool.
    """
    from lxml import etree  # noqa: PLC0415 (heavy: loaded when a document is read)

    if content.startswith(_PROTECTED):
        raise NotOurs(
            "it is protected by a password; open it in Word, save a copy without one, and verify that"
        )
    try:
        parts = read_parts(content)
        core = etree.fromstring(parts.get("docProps/core.xml", b"<none/>"), _parser())
        body = etree.fromstring(parts["word/document.xml"], _parser())
        text = text_of(content)
    except (ValueError, KeyError, etree.XMLSyntaxError):
        raise NotOurs("it is no Word document that can be read; check the name") from None
    said = {etree.QName(node).localname: (node.text or "") for node in core if isinstance(node.tag, str)}
    printed = _VERSION.search(text)
    digest = said.get("identifier", "") or (printed[1] if printed else "")
    if digest == DEIDENTIFIED:
        raise NotOurs("it was made for teaching and leads back to no file")
    if not re.fullmatch(r"[0-9a-f]{12}|[0-9a-f]{64}", digest):
        raise NotOurs("it does not say from which version of a file it was made; only drafted documents do")
    return Made(digest, _moment(said.get("created", "")), text, _rows(body), is_as_drafted(content))


def _parser() -> Any:
    from lxml import etree  # noqa: PLC0415 (heavy)

    return etree.XMLParser(resolve_entities=False, no_network=True, huge_tree=False)


def _moment(written: str) -> datetime | None:
    try:
        return datetime.fromisoformat(written.replace("Z", "+00:00")).astimezone(UTC)
    except ValueError:
        return None


def _rows(body: Any) -> dict[str, tuple[str, ...]]:
    """The cells of every table row by the text of the first one; the last row of a name counts."""
    found = {}
    for row in body.iter(f"{WORD}tr"):
        cells = ["".join(part.text or "" for part in cell.iter(f"{WORD}t")) for cell in row.iter(f"{WORD}tc")]
        if len(cells) > 1 and cells[0]:
            found[_flat(cells[0])] = tuple(_flat(cell) for cell in cells[1:])
    return found


def _flat(text: str) -> str:
    return " ".join(text.split())


def is_of(made: Made, state: PatientState) -> bool:
    """Return whether the document is of the patient of ``state``: a number of theirs, or name and birth date."""
    numbers = [number for _, number in state.identifiers if number]
    if any(re.search(rf"(?<!\w){re.escape(visible(number))}(?!\w)", made.text) for number in numbers):
        return True
    born = words(state.patient.get("born"))
    names = (state.name, *state.texts(state.patient.get("earlier_names")))
    named = any(visible(name) in made.text for name in names if name and name != "unknown")
    date = read_date(born).shown() if born else ""
    return named and any(styled(date, Policy(dates=order)) in made.text for order in ORDERS if date)


def matches(made: Made, state: PatientState) -> bool:
    """Return whether the clinical content of the file is that of the document."""
    return state.digest.startswith(made.digest) and len(made.digest) >= DIGEST_LENGTH


def moved(made: Made, assessment: Assessment) -> list[Moved]:
    """Return what the file says now, for the moment of the document, and the document does not, by system."""
    found = []
    policy = assessment.policy
    for one in sorted(in_units(assessment).items, key=_system):
        item = replace(one, label=styled(one.label, policy), shown=styled(one.shown, policy))
        before = _printed(made, item)
        now = _flat(visible(shown(item)))
        if before is not None and before != now:
            found.append(Moved(item.system.value, sentence(item.label), before, now))
    return found


def _system(item: Item) -> int:
    return list(type(item.system)).index(item.system)


def _printed(made: Made, item: Item) -> str | None:
    """What the document says of an item; None where it has no place for it."""
    row = made.rows.get(_flat(visible(sentence(item.label))))
    if row is not None:
        return row[0]
    if item.flag is Flag.NOT_RECORDED or _flat(visible(shown(item))) in _flat(made.text):
        return None
    return "nothing of it" if not item.detail else None


def tasks_moved(made: Made, assessment: Assessment) -> Iterable[str]:
    """Yield the tasks that the file asks for now and a care plan does not hold."""
    text = _flat(made.text)
    for action in assessment.actions:
        if _flat(visible(styled(action.text, assessment.policy))) not in text:
            yield f"{action.area}: the document does not ask for: {action.text}"
