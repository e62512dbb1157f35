"""Airway signs as charted, each with its time: counted when present, never summed to an all-clear."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Input, Item, Working, plural

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
    key, label = "signs_present", "Airway signs present"
    source = case.parameters.source_of("signs.value")
    if not signs:
        return say.gap(key, label, unit="count", rank=10 if seen.watched else None, cautions=(NO_ALL_CLEAR,))
    present = [sign for sign in signs if sign.present]
    old = [sign for sign in signs if run.is_old(sign.at)]
    last = max(sign.at for sign in signs)
    if not present and old:
        # A count of 0 would say "absent" of signs that nobody has looked for since.
        shown = f"not reassessed since {say.at(case, max(sign.at for sign in old))}"
        return say.fact(
            key, label, shown, unit="count", as_of=last, flag=Flag.REVIEW, cautions=(NO_ALL_CLEAR,)
        )
    looked = plural(len(signs), "sign") + " looked for"
    shown = f"{len(present)} of {looked}"
    if present:
        shown += f": {', '.join(sign.name for sign in present)}"
    if old:
        shown += f"; {len(old)} not reassessed in time"
    return say.fact(
        key,
        label,
        shown,
        value=len(present),
        unit="count",
        as_of=last,
        flag=Flag.REVIEW if old else Flag.NONE,
        sources=(source,),
        cautions=(WEAK, NO_ALL_CLEAR),
        working=Working(
            formula="signs found when last looked for",
            sum=f"{len(present)} present of {len(signs)}",
            inputs=tuple(_input(case, sign, run) for sign in signs),
        ),
    )


def _input(case: Case, sign: Sign, run: Watch) -> Input:
    return Input(sign.name, aged(case, sign, run).removeprefix(sign.name).strip(), sign.line)


def _list(case: Case, seen: Exposure, run: Watch, signs: tuple[Sign, ...]) -> Item:
    looked = [sign.name for sign in signs]
    missing = [name for name in SUSPICION_SIGNS if name not in looked]
    parts = [aged(case, sign, run) for sign in signs if sign.present]
    parts += [aged(case, sign, run) for sign in signs if not sign.present]
    shown = "; ".join(parts) or say.NOT_RECORDED
    if signs and missing:
        shown += f"; not assessed: {', '.join(missing)}"
    old = any(run.is_old(sign.at) for sign in signs)
    flag = Flag.NOT_RECORDED if not signs else Flag.REVIEW if old and seen.watched else Flag.NONE
    return say.fact(
        "signs",
        "Airway signs",
        shown,
        as_of=max((sign.at for sign in signs), default=None),
        flag=flag,
        cautions=(NO_ALL_CLEAR,),
        line=signs[-1].line if signs else 0,
    )


def aged(case: Case, sign: Sign, run: Watch) -> str:
    """Return how one sign prints; an old absence never prints as absent."""
    when = f"{say.at(case, sign.at)}{say.person(sign.by)}"
    old = run.is_old(sign.at)
    if sign.present:
        return f"{sign.name} present {when}" + (", not reassessed since" if old else "")
    return (
        f"{sign.name} not reassessed since {say.at(case, sign.at)}" if old else f"{sign.name} absent {when}"
    )
