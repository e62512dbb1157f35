"""The rows and boxes of a returned care plan, found by whatever a save left: print, bookmark, tag.

Where two of them disagree, the row or box is told and not read.
"""

from __future__ import annotations

import re
from typing import Any

from msgspec import Struct, field

from handoff.document.references import BY_HAND
from handoff.document.schedule import UNTIMED

BOX, TICKS = "\u2610", ("\u2611", "\u2612")
"""An empty box, and boxes with a tick or a cross, as they are printed."""

_REF = re.compile(r"[A-Z]{1,2}[1-9][0-9]*")
_LABEL = re.compile(
    r"(?P<time>\d{2}:\d{2})(?P<day> on \d{1,2} [A-Z][a-z]{2}(?: \d{4})?)?(?P<overdue> overdue)?"
    r"(?: to \d{2}:\d{2})?(?: \(\d+ checks?\))?(?: \(time (?P<again>\d+)\))?"
)
_ON = ("1", "true", "on")


class Box(Struct, frozen=True):
    """One box: which of its row, whether it is ticked, and what is written beside it."""

    stamp: str
    label: str
    ticked: bool
    due: str
    beside: str


class Row(Struct, frozen=True):
    """One row that was found: its reference, what the task says, its boxes, and what cannot be read."""

    ref: str
    text: str
    boxes: tuple[Box, ...]
    problems: tuple[str, ...]

    @property
    def is_by_hand(self) -> bool:
        """Whether the row was left blank for a task that is added by hand."""
        return self.ref.startswith(BY_HAND)


class _Raw(Struct):
    """A box while it is read: its control, its symbol, the text behind it."""

    tag: str = ""
    state: bool | None = None
    symbol: bool | None = None
    label: str = ""
    filled: list[str] = field(default_factory=list)
    by_tag: str = ""


def rows_of(body: Any) -> tuple[list[Row], list[str]]:
    """Return the rows of a care plan in order, and what is said of rows that cannot be told apart."""
    found: list[Row] = []
    problems: list[str] = []
    for row in body.iter():
        if _bare(row) != "tr":
            continue
        refs = _references(row)
        if not refs:
            continue
        if len(set(refs.values())) > 1:
            said = ", ".join(f"{how} {ref}" for how, ref in refs.items())
            problems.append(
                f"a row is named differently by what is left of it ({said}); nothing of it was read"
            )
            continue
        found.append(_row(next(iter(refs.values())), row))
    twice = {row.ref for row in found if sum(row.ref == other.ref for other in found) > 1}
    problems += [
        f"{ref}: the row stands more than once in the document; none was read" for ref in sorted(twice)
    ]
    return [row for row in found if row.ref not in twice], problems


def _references(row: Any) -> dict[str, str]:
    """The reference of a row as it is printed, by its bookmark and by its tag, as far as they are there."""
    cells = _cells(row)
    if not cells:
        return {}
    printed = _text(cells[0]).strip()
    marks = (_value(node, "name") for node in row.iter() if _bare(node) == "bookmarkStart")
    tags = (_value(node, "val") for node in row.iter() if _bare(node) == "tag")
    marked = next((name[4:] for name in marks if _REF.fullmatch(name[4:]) and name.startswith("row_")), "")
    tagged = next((tag[4:] for tag in tags if _REF.fullmatch(tag[4:]) and tag.startswith("row:")), "")
    refs = {"printed": printed if _REF.fullmatch(printed) else "", "bookmark": marked, "tag": tagged}
    if not refs["printed"] and printed and (marked or tagged):
        refs["printed"] = printed
    return {how: ref for how, ref in refs.items() if ref}


def _row(ref: str, row: Any) -> Row:
    cells = _cells(row)
    paragraphs = [_text(node) for node in cells[1].iter() if _bare(node) == "p"] if len(cells) > 1 else []
    by_hand = ref.startswith(BY_HAND)
    text = " ".join(_filled(" ".join(paragraphs) if by_hand else next(iter(paragraphs), "")).split())
    boxes: list[Box] = []
    problems: list[str] = []
    for number, raw in enumerate(_boxes(cells[2:]), start=1):
        made, problem = _by_hand(raw, number) if by_hand else _box(raw)
        problem = problem or _disagrees(ref, made, raw)
        if problem:
            problems.append(f"{ref} {made.label or f'box {number}'}: {problem}")
        else:
            boxes.append(made)
    return Row(ref, text.removeprefix("NOW ").strip(), tuple(boxes), tuple(problems))


def _box(raw: _Raw) -> tuple[Box, str]:
    label = " ".join(raw.label.split())
    match = _LABEL.match(label)
    untimed = next((words for words in UNTIMED.values() if label.startswith(words)), "")
    beside = " ".join(raw.filled)
    ticked = bool(raw.state if raw.state is not None else raw.symbol)
    if match:
        stamp = match["time"].replace(":", "") + ("-overdue" if match["overdue"] else "")
        stamp += f"-{match['again']}" if match["again"] else ""
        read, rest = match[0], label[match.end() :]
    elif untimed:
        stamp, read, rest = "once", untimed, label[len(untimed) :]
    else:
        return Box("", label, ticked, "", ""), "the time beside the box was changed; it was not read"
    return Box(stamp, read, ticked, "", _filled(f"{rest} {beside}")), ""


def _by_hand(raw: _Raw, number: int) -> tuple[Box, str]:
    ticked = bool(raw.state if raw.state is not None else raw.symbol)
    due = _filled(raw.filled[0]) if raw.filled else ""
    beside = _filled(" ".join(raw.filled[1:]))
    loose = _filled(raw.label).removeprefix("due").strip()
    if loose:
        problem = f"'{loose}' is written outside the room for it; it was not read"
        return Box(str(number), f"box {number}", ticked, due, beside), problem
    return Box(str(number), f"box {number}", ticked, due, beside), ""


def _disagrees(ref: str, box: Box, raw: _Raw) -> str:
    if raw.state is not None and raw.symbol is not None and raw.state is not raw.symbol:
        return (
            "the box looks " + ("ticked" if raw.symbol else "empty") + " and is kept as the other; not read"
        )
    for tag, kind in ((raw.tag, "row"), (raw.by_tag, "by")):
        if tag.startswith(f"{kind}:") and tag != f"{kind}:{ref}:{box.stamp}":
            return (
                f"its tag belongs to another box ({tag.partition(':')[2].replace(':', ' ')}); it was not read"
            )
    return ""


class _Reading:
    """Reads the texts of cells in order and keeps the boxes that it met.

    A box is a control that can be ticked, or its bare symbol where a save lost the control.
    """

    def __init__(self) -> None:
        self.boxes: list[_Raw] = []
        self._controls: set[Any] = set()
        self._last: Any = None

    def take(self, node: Any) -> None:
        """Take up the next piece of text."""
        control = _control(node)
        if control is None:
            self._plain(node.text)
        elif (state := _check(control)) is not None:
            self._tick(control, state, node.text)
        elif self.boxes:
            self._room(control, node.text)
        self._last = control

    def _tick(self, control: Any, state: bool, text: str) -> None:
        if control not in self._controls:
            self._controls.add(control)
            self.boxes.append(_Raw(tag=_tag(control), state=state))
        self.boxes[-1].symbol = _symbol(text, self.boxes[-1].symbol)

    def _plain(self, text: str) -> None:
        for part in re.split(f"([{BOX}{''.join(TICKS)}])", text):
            if part == BOX or part in TICKS:
                self.boxes.append(_Raw(symbol=part in TICKS))
            elif part and self.boxes:
                self.boxes[-1].label += part

    def _room(self, control: Any, text: str) -> None:
        box = self.boxes[-1]
        if control is self._last:
            box.filled[-1] += text
            return
        box.filled.append(text)
        if _tag(control).startswith("by:"):
            box.by_tag = _tag(control)


def _boxes(cells: list[Any]) -> list[_Raw]:
    reading = _Reading()
    for cell in cells:
        for node in cell.iter():
            if _bare(node) == "t" and node.text:
                reading.take(node)
    return reading.boxes


def _cells(row: Any) -> list[Any]:
    """The cells of a row, those too that a save put into a control."""
    cells = []
    for node in row:
        if _bare(node) == "tc":
            cells.append(node)
        elif _bare(node) in ("sdt", "sdtContent"):
            cells += _cells(node)
    return cells


def _symbol(text: str, before: bool | None) -> bool | None:
    if any(tick in text for tick in TICKS):
        return True
    return False if BOX in text else before


def _control(node: Any) -> Any:
    """The control in the line that holds a text; one around whole paragraphs, as some saves leave, is none."""
    for above in node.iterancestors():
        if _bare(above) in ("p", "tc"):
            return None
        if _bare(above) == "sdt":
            return above
    return None


def _check(control: Any) -> bool | None:
    """Whether a control is a ticked box; None where it is no box. Either spelling of the state is read."""
    settings = next((node for node in control if _bare(node) == "sdtPr"), None)
    kind = None if settings is None else next((n for n in settings if _bare(n) == "checkbox"), None)
    if kind is None:
        return None
    state = next((node for node in kind if _bare(node) == "checked"), None)
    return state is not None and (_value(state, "val") or "1") in _ON


def _tag(control: Any) -> str:
    settings = next((node for node in control if _bare(node) == "sdtPr"), None)
    tag = None if settings is None else next((n for n in settings if _bare(n) == "tag"), None)
    return "" if tag is None else _value(tag, "val")


def _filled(text: str) -> str:
    """What was written into room to write: without the line that was printed there."""
    return " ".join(text.replace("_", " ").split())


def _text(node: Any) -> str:
    return "".join(part.text or "" for part in node.iter() if _bare(part) == "t")


def _value(node: Any, name: str) -> str:
    return next((value for key, value in node.attrib.items() if _bare_name(key) == name), "")


def _bare(node: Any) -> str:
    return _bare_name(node.tag) if isinstance(node.tag, str) else ""


def _bare_name(name: str) -> str:
    return name.rpartition("}")[2]
