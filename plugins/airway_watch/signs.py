"""Airway signs as charted, each with its time: counted when present, never summed to an all-clear."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Input, Item, Working, plural, words

from . import charted, say
from .charted import SUSPICION_SIGNS, Sign
from .exposure import Exposure
from .schedule import Watch

NO_ALL_CLEAR = "Absence of signs does not exclude inhalation injury."
WEAK = "Single signs predict inhalation injury poorly; they ask for a senior look, they decide nothing."


def items(case: Case, seen: Exposure, run: Watch) -> tuple[Item, ...]:
    """Return the count of signs present and the signs with their times."""
    signs = charted.signs(case)
    return (_count(case, seen, run, signs), _list(case, seen, run, signs))


def _count(case: Case, seen: Exposure, run: Watch, signs: tuple[Sign, ...]) -> Item:
    key, label = "airway_watch.signs_present", "Airway signs"
    source = case.parameters.source_of("signs.value")
    if not signs:
        return say.gap(key, label, unit="count", rank=10 if seen.watched else None, cautions=(NO_ALL_CLEAR,))
    signs, before = _around_tube(signs, run)
    if not signs:
        return say.fact(
            key, label, f"none looked for since the tube; {_before(case, before, run)}", unit="count"
        )
    present = [sign for sign in signs if sign.present]
    old = [sign for sign in signs if run.is_old(sign.at)]
    times = [sign.at for sign in signs]
    if not present and old:
        # A count of 0 would say "absent" of signs that nobody has looked for since.
        when = " to ".join(say.at(case, at) for at in sorted({min(times), max(times)}))
        shown = f"{_counted(present, signs)} at {when}; not reassessed since"
        flag = Flag.REVIEW if seen.watched or seen.cannot_be_judged else Flag.NONE
        return say.fact(
            key, label, shown, unit="count", as_of=max(times), flag=flag, cautions=(NO_ALL_CLEAR,)
        )
    shown = _counted(present, signs)
    if present:
        shown += f": {', '.join(sign.name for sign in present)}"
    if old:
        shown += f"; {len(old)} not reassessed in time"
    if before:
        shown += f"; {_before(case, before, run)}"
    return say.fact(
        key,
        label,
        shown,
        value=len(present),
        unit="count",
        as_of=max(times),
        flag=Flag.REVIEW if old else Flag.NONE,
        sources=(source,),
        cautions=(WEAK, NO_ALL_CLEAR),
        working=Working(
            formula="signs found when last looked for",
            sum=f"{len(present)} present of {len(signs)}",
            inputs=tuple(_input(case, sign, run) for sign in signs),
        ),
    )


def _around_tube(signs: tuple[Sign, ...], run: Watch) -> tuple[tuple[Sign, ...], tuple[Sign, ...]]:
    """Parts the signs looked for since the tube went in from those last looked for before: history, not present."""
    placed = run.tube.since
    if placed is None:
        return signs, ()
    return tuple(s for s in signs if s.at >= placed), tuple(s for s in signs if s.at < placed)


def _before(case: Case, before: tuple[Sign, ...], run: Watch) -> str:
    found = [f"{sign.name} {sign.state}" for sign in sorted(before, key=lambda sign: not sign.present)]
    placed = say.at(case, run.tube.since) if run.tube.since else ""
    return f"last looked for before the tube of {placed}: {', '.join(found)}"


def _counted(present: list[Sign], signs: tuple[Sign, ...]) -> str:
    return f"{len(present)} present of {plural(len(signs), 'sign')} looked for"


def _input(case: Case, sign: Sign, run: Watch) -> Input:
    return Input(sign.name, aged(case, sign, run).removeprefix(sign.name).lstrip(" :"), sign.line)


def _list(case: Case, seen: Exposure, run: Watch, signs: tuple[Sign, ...]) -> Item:
    every = signs
    looked = [sign.name for sign in signs]
    signs, before = _around_tube(signs, run)
    missing = [name for name in SUSPICION_SIGNS if name not in looked]
    parts = [aged(case, sign, run) for sign in signs if sign.present]
    parts += [aged(case, sign, run) for sign in signs if not sign.present]
    parts += [_before(case, before, run)] if before else []
    shown = "; ".join(parts) or say.NOT_RECORDED
    if every and missing:
        shown += f"; not assessed: {', '.join(missing)}"
    shown += "".join(f"; {note}" for note in _notes(case, every))
    old = any(run.is_old(sign.at) for sign in signs)
    flag = Flag.NOT_RECORDED if not every else Flag.REVIEW if old and seen.watched else Flag.NONE
    return say.fact(
        "airway_watch.signs",
        "Airway signs, one by one",
        shown,
        as_of=max((sign.at for sign in every), default=None),
        flag=flag,
        cautions=(NO_ALL_CLEAR,),
        line=every[-1].line if every else 0,
    )


def _notes(case: Case, signs: tuple[Sign, ...]) -> list[str]:
    """Return what was written in words beside the latest finding of each sign, with its time."""
    latest = [sign.at for sign in signs]
    return [
        f"note {say.at(case, row.at)}{say.person(words(row.entry.get('by')))}: {said}"
        for row in charted.block_rows(case, "signs")
        if (said := words(row.entry.get("note"))) and (row.at in latest or not latest or row.at > max(latest))
    ]


def aged(case: Case, sign: Sign, run: Watch) -> str:
    """Return how one sign prints; an old absence never prints as absent."""
    when = f"{say.at(case, sign.at)}{say.person(sign.by)}"
    old = run.is_old(sign.at)
    if sign.present:
        return f"{sign.name} present {when}" + (", not reassessed since" if old else "")
    if old:
        return f"{sign.name}: not reassessed since {say.at(case, sign.at)} (absent then)"
    return f"{sign.name} absent {when}"
