"""The referral list that the policy chose: which criteria are met, by what, and which cannot be judged."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from msgspec import Struct

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Part,
    Source,
    System,
    Urgency,
    Working,
    plural,
)

from .assessment import Assessment
from .criteria import Facts, Verdict, judge
from .goal import is_comfort

RANK = 70
ADVICE = ("advice from burn centre", "transfer of responsibility")
MEMORY = ".from-memory"
COMPARATOR_NOTE = (
    "each list keeps its own comparators; the list is advice, and a burn service may ask for less"
)


class Criterion(Struct, frozen=True):
    """One row of a list with its verdict."""

    tier: str
    says: str
    note: str
    verdict: Verdict
    source: Source
    decides: bool

    @property
    def text(self) -> str:
        """The criterion as said, marked where it is from memory."""
        return f"{self.says} (from memory)" if self.source.kind == "from memory" else self.says


def criteria(case: Case, facts: Facts) -> tuple[Criterion, ...]:
    """Return every row of the chosen list, judged; rows from memory decide only where the policy chose the list."""
    chosen = case.chosen("referral")
    found = []
    for identifier in (f"referral.{chosen.name}", f"referral.{chosen.name}{MEMORY}"):
        if identifier not in case.parameters:
            continue
        parameter = case.parameters[identifier]
        decides = parameter.kind != "from memory" or chosen.by_policy
        for row in parameter.value["rows"]:
            found.append(_criterion(row, facts, parameter.source, decides))
    return tuple(found)


def _criterion(row: Mapping[str, Any], facts: Facts, source: Source, decides: bool) -> Criterion:
    verdict = judge(row["when"], facts)
    return Criterion(row["tier"], row["says"], row.get("note", ""), verdict, source, decides)


def items(case: Case, facts: Facts, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return the criteria that are met, one item each, and those that cannot be judged, together."""
    rows = criteria(case, facts)
    met = [row for row in rows if row.verdict.met]
    title = _title(case)
    return (
        _summary(case, met, rows, title, assessment),
        *(_met(row, index, title, assessment) for index, row in enumerate(met, start=1)),
        *_unknown(rows, title, assessment),
        *_asks(rows, title, assessment),
    )


def _title(case: Case) -> str:
    name = case.chosen("referral").name
    return str(case.parameters.table(f"referral.{name}")["title"])


def advice_taken(case: Case, assessment: Assessment | None) -> str:
    """Return what says that the burn service already knows of the patient; empty where nothing does."""
    for what in ADVICE:
        rows = case.state.events(what)
        if rows:
            return f"{what} recorded at {case.clock.time(rows[-1].at, case.now)}"
    if assessment is not None and assessment.place == "burn unit":
        return "the patient was assessed in the burn unit"
    return ""


def _summary(
    case: Case, met: list[Criterion], rows: tuple[Criterion, ...], title: str, assessment: Assessment | None
) -> Item:
    unknown = sum(row.verdict.met is None for row in rows)
    tiers = dict.fromkeys(row.tier for row in met)
    said = [f"{tier}: {'; '.join(row.text for row in met if row.tier == tier)}" for tier in tiers]
    head = f"{plural(len(met), 'criterion', 'criteria')} met of {len(rows)}"
    known = advice_taken(case, assessment)
    shown = ". ".join(part for part in (head, *said) if part)
    shown += f". {plural(unknown, 'criterion', 'criteria')} cannot be judged" if unknown else ""
    shown += f". {known}" if known else ""
    asks = any(row.decides for row in met) and not known and not is_comfort(case)
    flag = Flag.ACTION if asks else Flag.NONE if met or not unknown else Flag.NOT_RECORDED
    return Item(
        key="area.referral",
        label=f"Referral list: {title}",
        part=Part.RECOMMENDATION,
        system=System.BURN,
        value=len(met),
        unit="criteria met",
        shown=shown,
        as_of=assessment.at if assessment else None,
        flag=flag,
        rank=RANK if asks else None,
        sources=tuple(dict.fromkeys(row.source for row in rows)),
        cautions=(COMPARATOR_NOTE, *dict.fromkeys(row.note for row in met if row.note)),
        line=assessment.line if assessment else 0,
    )


def _met(row: Criterion, index: int, title: str, assessment: Assessment | None) -> Item:
    by = "; ".join(row.verdict.by)
    return Item(
        key=f"area.referral.{index}",
        label=f"{title}: {row.text}",
        part=Part.RECOMMENDATION,
        system=System.BURN,
        shown=f"{row.tier}: met by {by}",
        as_of=assessment.at if assessment else None,
        working=Working(formula=row.says, sum=by, rule=title),
        sources=(row.source,),
        cautions=(row.note,) if row.note else (),
        detail=True,
        line=assessment.line if assessment else 0,
    )


def _unknown(rows: tuple[Criterion, ...], title: str, assessment: Assessment | None) -> tuple[Item, ...]:
    found = [row for row in rows if row.verdict.met is None and row.verdict.missing]
    if not found:
        return ()
    said = [f"{row.text} ({'; '.join(row.verdict.missing)})" for row in found]
    return (
        _list(
            "area.referral_unknown", f"{title}: cannot be judged", said, Flag.NOT_RECORDED, found, assessment
        ),
    )


def _asks(rows: tuple[Criterion, ...], title: str, assessment: Assessment | None) -> tuple[Item, ...]:
    found = [row for row in rows if row.verdict.met is None and row.verdict.ask and not row.verdict.missing]
    if not found:
        return ()
    said = [f"{row.text}: {row.verdict.ask}" for row in found]
    return (
        _list("area.referral_to_ask", f"{title}: for the nurse to judge", said, Flag.NONE, found, assessment),
    )


def _list(
    key: str, label: str, said: list[str], flag: Flag, rows: list[Criterion], assessment: Assessment | None
) -> Item:
    return Item(
        key=key,
        label=label,
        part=Part.RECOMMENDATION,
        system=System.BURN,
        shown="; ".join(said),
        as_of=assessment.at if assessment else None,
        flag=flag,
        sources=tuple(dict.fromkeys(row.source for row in rows)),
        detail=True,
    )


def actions(case: Case, facts: Facts, assessment: Assessment | None) -> tuple[Action, ...]:
    """Return the call to the burn service, where a criterion is met and nothing says that it knows."""
    met = [row for row in criteria(case, facts) if row.verdict.met and row.decides]
    if not met or advice_taken(case, assessment) or is_comfort(case):
        return ()
    return (
        Action(
            key="area.refer",
            area="referral",
            text="Ask the doctor in charge whether the burn service has been called; "
            f"{plural(len(met), 'criterion is', 'criteria are')} met on the list of {_title(case)}",
            why="; ".join(row.says for row in met),
            system=System.BURN,
            urgency=Urgency.NOW,
            sources=tuple(dict.fromkeys(row.source for row in met)),
            cautions=(COMPARATOR_NOTE,),
        ),
    )
