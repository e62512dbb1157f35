"""Page one: what the receiver needs standing at the bed, in few lines, what can kill first on top."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from datetime import UTC, datetime

from msgspec import Struct
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document.brief import named
from handoff.document.references import by_area, references
from handoff.document.schedule import Shift, is_overdue
from handoff.document.sections import sentence, shown
from handoff.plugin import Action, Flag, Item, Urgency, entries, plural, words

MOST_ACTIONS, MOST_TASKS, MOST_DUE = 6, 5, 4
"""Lines of each table of page one; what is left is named below it and stands in full further on."""

MOST_NAMES = 8
"""Names below a table of what is due; page two holds the rest, each with its mark."""

ENOUGH_LETTERS = 90
"""A finding that has said so much is cut at the end of its clause, and says that it was."""


CHECK_OF_SIGNS, SIGNS = "vital.check", "vital."
"""The task that takes all vital signs anew, and the first word of each of them."""

_CLAUSE = re.compile(r"(?<=;)\s+|(?<=[\w)][\w)][\w)]\.)\s+|\n+")
"""Where a clause ends; the point of ``Dr B. Osei`` is not such a place."""


class KeyRow(Struct, frozen=True):
    """One line of page one: what, what was found, when, and (where it needs action) why it matters."""

    what: str
    value: str
    time: str
    why: str


class Task(Struct, frozen=True):
    """One line of what to do: its reference in the care plan and the text; the reason stands in the plan."""

    ref: str
    text: str


class IfThen(Struct, frozen=True):
    """What may happen, and what to do then."""

    event: str
    answer: str


class PageOne(Struct, frozen=True):
    """The tables of page one; ``more_`` names what did not fit into its table."""

    actions: tuple[KeyRow, ...]
    more_actions: str
    tasks: tuple[Task, ...]
    more_tasks: str
    due: tuple[KeyRow, ...]
    more_due: str
    if_then: tuple[IfThen, ...]
    gaps: str
    missing_count: str


def page_one(assessment: Assessment, shift: Shift) -> PageOne:
    """Return page one of the handover."""
    refs = references(assessment.actions)
    ranked = _by_rank(item for item in assessment.items if item.rank is not None)
    acting, again = _each_reading_once(item for item in ranked if item.flag is Flag.ACTION)
    unranked = [item for item in assessment.items if item.flag is Flag.ACTION and item.rank is None]
    ordered = [action for _, group in by_area(assessment.actions) for action in group]
    tasks = _soonest_first([action for action in ordered if action.urgency is Urgency.NOW], acting)
    due, more_due = _due(assessment, shift, refs)
    gaps = [sentence(item.label) for item in ranked if item.flag is Flag.NOT_RECORDED]
    return PageOne(
        actions=tuple(_key_row(item, shift) for item in acting[:MOST_ACTIONS]),
        more_actions="; ".join(_names([*acting[MOST_ACTIONS:], *again, *unranked])),
        tasks=tuple(_task(action, shift, refs[action.key]) for action in tasks[:MOST_TASKS]),
        more_tasks="; ".join(f"{refs[action.key]} {_named(action)}" for action in tasks[MOST_TASKS:]),
        due=due,
        more_due=more_due,
        if_then=tuple(
            IfThen(words(entry.get("if")), words(entry.get("then")))
            for entry in entries(assessment.state.handover.get("if_then"))
        ),
        gaps="; ".join(gaps),
        missing_count=plural(len(assessment.not_recorded), "entry is", "entries are"),
    )


def keys_on_page_one(assessment: Assessment, shift: Shift) -> frozenset[str]:
    """Return the keys of the items that have a row of their own on page one."""
    ranked = _by_rank(item for item in assessment.items if item.rank is not None)
    acting, _ = _each_reading_once(item for item in ranked if item.flag is Flag.ACTION)
    due = _due_in_order(assessment, shift)[:MOST_DUE]
    return frozenset(item.key for item in (*acting[:MOST_ACTIONS], *due) if isinstance(item, Item))


def _by_rank(items: Iterable[Item]) -> list[Item]:
    return sorted(items, key=lambda item: (item.rank or 0, item.key))


def _each_reading_once(items: Iterable[Item]) -> tuple[list[Item], list[Item]]:
    """Parts findings in their order from those that judge a reading again that stands above: it takes one row."""
    first: list[Item] = []
    again: list[Item] = []
    seen: list[tuple[object, str, datetime]] = []
    for item in items:
        reading = (item.value, item.unit, item.as_of) if item.unit and item.as_of else None
        (again if reading in seen else first).append(item)
        seen += [(item.value, item.unit, item.as_of)] if item.unit and item.as_of else []
    return first, again


def _soonest_first(tasks: Sequence[Action], acting: Sequence[Item]) -> list[Action]:
    """Put the task that answers the finding which can kill first on top; those without a finding keep their order.

    A task answers the findings of its plugin in its system of the body, or else of its plugin. Where one of
    them is named after its finding, as ``oversedation`` is after ``sedation``, the others of the group answer none.
    """
    place: dict[tuple[str, str], int] = {}
    for at, item in enumerate(acting):
        plugin = item.key.partition(".")[0]
        place.setdefault((plugin, item.system), at)
        place.setdefault((plugin, ""), at)
    named = [task for task in tasks if any(_is_named_after(task, item) for item in acting)]
    answered = [(task.key.partition(".")[0], task.system) for task in named]

    def soon(task: Action) -> int:
        plugin = task.key.partition(".")[0]
        if (plugin, task.system) in answered and task not in named:
            return len(acting)
        return place.get((plugin, task.system), place.get((plugin, ""), len(acting)))

    return sorted(tasks, key=soon)


def _is_named_after(task: Action, item: Item) -> bool:
    plugin, _, what = item.key.partition(".")
    of, _, answer = task.key.partition(".")
    return of == plugin and task.system is item.system and what in answer


def _names(items: Sequence[Item]) -> list[str]:
    return list(dict.fromkeys(sentence(item.label) for item in items))


def _why(item: Item) -> str:
    if item.cautions:
        return item.cautions[0]
    rule = item.working.rule if item.working else ""
    return "" if rule in shown(item) else rule


def _key_row(item: Item, shift: Shift) -> KeyRow:
    time = shift.time(item.as_of) if item.as_of else ""
    value, why = _in_short(shown(item)), _why(item)
    return KeyRow(named(item), f"{value.rstrip('.')}." if why else value, time, sentence(why))


def _review_row(item: Item, shift: Shift) -> KeyRow:
    return replace(_key_row(item, shift), value=_in_short(shown(item)), why="")


def _in_short(text: str, enough: int = ENOUGH_LETTERS) -> str:
    clauses = _CLAUSE.split(text)
    kept = [clauses[0]]
    for clause in clauses[1:]:
        if len(" ".join(kept)) >= enough:
            return f"{' '.join(kept).rstrip(';')} (more further on)"
        kept.append(clause)
    return text


def _task(action: Action, shift: Shift, ref: str) -> Task:
    late = ""
    if action.first_due and is_overdue(action, shift.start):
        late = f" (overdue since {shift.time(action.first_due)})"
    return Task(ref, f"{_in_short(action.text)}{late}")


def _named(action: Action) -> str:
    return re.split(r"[;,]|: ", action.text, maxsplit=1)[0]


def _due(assessment: Assessment, shift: Shift, refs: dict[str, str]) -> tuple[tuple[KeyRow, ...], str]:
    found = _due_in_order(assessment, shift)
    rows = tuple(
        _review_row(one, shift) if isinstance(one, Item) else _late_row(one, shift, refs)
        for one in found[:MOST_DUE]
    )
    more = [sentence(one.label) if isinstance(one, Item) else refs[one.key] for one in found[MOST_DUE:]]
    rest = more[MOST_NAMES:] if len(more) > MOST_NAMES + 1 else []
    kept = [*more[: len(more) - len(rest)], *([f"and {len(rest)} more on page two"] if rest else [])]
    return rows, "; ".join(kept)


def _due_in_order(assessment: Assessment, shift: Shift) -> list[Item | Action]:
    """What is due: findings that can kill, then tasks that are late, then the other findings.

    Where the task itself stands here, the finding that says the same is not named again.
    """
    late = [action for action in assessment.actions if is_overdue(action, shift.start)]
    said = [f"{action.key}_due" for action in late]
    checked = any(action.key == CHECK_OF_SIGNS for action in late)
    review = [
        item
        for item in assessment.items
        if item.flag is Flag.REVIEW
        and item.key not in said
        and not (checked and item.rank is None and item.key.startswith(SIGNS))
    ]
    late = sorted((action for action in late if action.urgency is not Urgency.NOW), key=_first_due)
    ranked = _by_rank(item for item in review if item.rank is not None)
    return [*ranked, *late, *(item for item in review if item.rank is None)]


def _first_due(action: Action) -> datetime:
    return action.first_due or datetime.max.replace(tzinfo=UTC)


def _late_row(action: Action, shift: Shift, refs: dict[str, str]) -> KeyRow:
    since = shift.time(action.first_due) if action.first_due else ""
    return KeyRow(f"{refs[action.key]} overdue", action.text, since, "")
