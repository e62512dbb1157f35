"""The named list of sepsis triggers: which rows are met, which are not, which cannot be judged."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from msgspec import Struct

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Input,
    Item,
    System,
    Urgency,
    Working,
    fact,
    joined,
    line_of,
    number_text,
    plural,
)

from . import formula, patient
from .signs import Sign, label_of, sign

RANK = 43
MET, NOT_MET, UNKNOWN, NO_ROW = "met", "not met", "cannot be judged", "does not apply"
PROMPT = "A trigger to look for infection, no diagnosis; a large burn has an inflamed body by itself."
ADULTS_ONLY = ("china-2013", "qsofa-2016", "sirs-1992", "sirs-uk")


class Row(Struct, frozen=True):
    """One row of a list with its verdict and what decided it."""

    name: str
    verdict: str
    why: str
    signs: tuple[Sign, ...] = ()

    def said(self) -> str:
        """Return the row as it is printed."""
        return f"{self.name} ({self.why})" if self.why else self.name


class Triggers(Struct, frozen=True):
    """The chosen list, judged; ``decides`` is False for one from memory that the policy did not name."""

    title: str
    parameter: str
    needs: int
    rows: tuple[Row, ...]
    decides: bool

    def of(self, verdict: str) -> tuple[Row, ...]:
        """Return the rows of one verdict."""
        return tuple(row for row in self.rows if row.verdict == verdict)

    @property
    def reached(self) -> bool:
        """Whether as many rows are met as the list asks for."""
        return formula.reaches(len(self.of(MET)), self.needs)


def triggers(case: Case) -> Triggers | None:
    """Return the chosen list, judged; None where it is printed for adults and this is a child."""
    chosen = case.chosen("sepsis_list")
    child = patient.is_child(case)
    if child and chosen.name in ADULTS_ONLY:
        return None
    name = f"sepsis.{chosen.name}{'.child' if child else ''}"
    parameter = case.parameters[name]
    rows = tuple(_judge(case, row) for row in parameter.value["rows"])
    decides = parameter.kind != "from memory" or chosen.by_policy
    return Triggers(parameter.value["title"], name, int(parameter.value["needs"]), rows, decides)


def _judge(case: Case, row: Mapping[str, Any]) -> Row:
    name = str(row["name"])
    if "judge" in row:
        return Row(name, UNKNOWN, str(row["judge"]))
    stopped = _not_applying(case, row)
    if stopped is not None:
        return stopped
    ways = row["any"]
    if "ventilated" in row and patient.is_ventilated(case):
        ways = row["ventilated"]
    return _by_signs(name, [(way, sign(case, way["sign"])) for way in ways])


def _not_applying(case: Case, row: Mapping[str, Any]) -> Row | None:
    name = str(row["name"])
    if row.get("no_diabetes"):
        known = patient.has_diabetes(case)
        if known is None:
            return Row(name, UNKNOWN, "whether there is diabetes is not recorded")
        if known:
            return Row(name, NO_ROW, "diabetes before the burn")
    if "from_day" in row:
        hours = patient.hours_since_burn(case)
        if hours is None:
            return Row(name, UNKNOWN, "time of burn not recorded")
        if hours < row["from_day"] * 24:
            return Row(name, NO_ROW, f"not before day {row['from_day']} after the burn")
    return None


def _by_signs(name: str, pairs: Sequence[tuple[Mapping[str, Any], Sign]]) -> Row:
    met = [(way, one) for way, one in pairs if one.known and _is_met(way, one)]
    if met:
        said = joined([_said(way, one) for way, one in met])
        return Row(name, MET, said, tuple(one for _, one in met))
    known = tuple({one.name: one for _, one in pairs if one.known}.values())
    missing = list(
        dict.fromkeys(label_of(way["sign"]) for way, one in pairs if not one.known and not way.get("also"))
    )
    if missing:
        return Row(name, UNKNOWN, f"{joined(missing)} not recorded in the window", known)
    also = list(dict.fromkeys(label_of(way["sign"]) for way, one in pairs if not one.known))
    said = joined([f"{label_of(one.name)} {one.said}" for one in known])
    return Row(name, NOT_MET, said + (f"; {joined(also)} not recorded" if also else ""), known)


def _is_met(way: Mapping[str, Any], one: Sign) -> bool:
    if one.value is None:
        return bool(one.present)
    return formula.is_beyond(one.value, way["how"], way["line"])


def _said(way: Mapping[str, Any], one: Sign) -> str:
    said = f"{label_of(one.name)} {one.said}"
    return said if one.value is None else f"{said}, {way['how']} {number_text(way['line'], 1)}"


def items(case: Case, found: Triggers | None) -> tuple[Item, ...]:
    """Return the list with its rows; nothing where no list fits."""
    if found is None:
        return ()
    met, unknown = found.of(MET), found.of(UNKNOWN)
    if not met and not found.of(NOT_MET):
        if _is_early(case) or patient.hours_since_burn(case) is None:
            return ()
        label = f"Sepsis triggers, {found.title}"
        shown = "not computed: none of the signs of its rows is charted in the window"
        return (
            fact(
                "infection.sepsis",
                label,
                shown,
                system=System.INFECTION,
                unit="rows met",
                flag=Flag.NOT_RECORDED,
            ),
        )
    asks = found.reached and found.decides and not case.comfort
    early = _is_early(case)
    flag = Flag.NONE
    if asks:
        flag = Flag.REVIEW if early else Flag.ACTION
    return (
        fact(
            "infection.sepsis",
            f"Sepsis triggers, {found.title}",
            _shown(found),
            system=System.INFECTION,
            value=len(met),
            unit="rows met",
            as_of=max((one.at for row in found.rows for one in row.signs if one.at), default=None),
            flag=flag,
            working=Working(
                formula="each row once, however many ways it is met",
                sum=f"{len(met)} met, {len(found.of(NOT_MET))} not met, {len(unknown)} cannot be judged, "
                f"{len(found.of(NO_ROW))} do not apply; the list asks for {found.needs}",
                inputs=_inputs(found),
                rule=found.title,
            ),
            sources=(case.parameters.source_of(found.parameter), case.parameters.source_of("sepsis.window")),
            cautions=_cautions(found, early),
            rank=RANK if asks and not early else None,
            detail=not asks and early,
            line=max((line_of(one.node) for row in met for one in row.signs), default=0),
        ),
    )


def _shown(found: Triggers) -> str:
    said = [
        f"{len(found.of(MET))} of {plural(len(found.rows), 'row')} met, {found.needs} ask to look for infection"
    ]
    for verdict in (MET, NOT_MET, NO_ROW, UNKNOWN):
        rows = found.of(verdict)
        if rows:
            said.append(f"{verdict}: {', '.join(row.said() for row in rows)}")
    return "; ".join(said)


def _inputs(found: Triggers) -> tuple[Input, ...]:
    seen = {}
    for row in found.rows:
        for one in row.signs:
            seen[one.name] = Input(label_of(one.name), one.said, line_of(one.node))
    return tuple(seen.values())


def _is_early(case: Case) -> bool:
    hours = patient.hours_since_burn(case)
    return hours is not None and hours < case.parameters.number("sepsis.early")


def _cautions(found: Triggers, early: bool) -> tuple[str, ...]:
    said = [PROMPT]
    if early:
        said.append("In the first day burn shock, pain and cold meet these rows by themselves.")
    if not found.decides:
        said.append("The rows for children are from memory: they raise no flag here.")
    return tuple(said)


def actions(case: Case, found: Triggers | None) -> tuple[Action, ...]:
    """Return the prompt to look for infection, where the list is reached after the first day."""
    if found is None or not found.reached or not found.decides or case.comfort or _is_early(case):
        return ()
    return (
        Action(
            key="infection.look_for_it",
            area="Infection",
            text="Tell the doctor in charge now; look with them for a source: wounds, lines, chest, urine. "
            "Cultures before any new antibiotic",
            why=f"{len(found.of(MET))} rows of {found.title} met: {', '.join(row.name for row in found.of(MET))}",
            system=System.INFECTION,
            urgency=Urgency.NOW,
            sources=(case.parameters.source_of(found.parameter),),
            cautions=(PROMPT,),
        ),
    )
