"""What the file says about each entry of a published list: recorded, recorded as not so, or not recorded."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, Row, number_text, words

from . import charted, exposure, say
from .charted import ABSENT, PRESENT, Sign
from .exposure import CLOSED, DEEP, FIRE, FULL, Burn, Exposure
from .schedule import Watch

ALERT = "alert"
ALTERED = ("new confusion", "responds to voice", "responds to pain", "unresponsive")


class Fact(Struct, frozen=True):
    """Whether an entry is met (None: not recorded), how it is said, since when, and on which line."""

    met: bool | None
    said: str = ""
    since: datetime | None = None
    line: int = 0

    def shown(self) -> str:
        """Return it for a list of inputs; not met and not recorded say so."""
        return self.said or (say.NOT_RECORDED if self.met is None else "not found when looked for")


UNKNOWN = Fact(None)
NOT_SO = Fact(False)


class Record(Struct, frozen=True):
    """The case with the readings that the entries are looked up in."""

    case: Case
    seen: Exposure
    run: Watch
    signs: dict[str, Sign]

    def sign(self, name: str) -> Fact:
        """Return a sign as it was when last looked for; an old absence is not recorded."""
        sign = self.signs.get(name)
        if sign is None:
            return UNKNOWN
        if sign.present:
            return Fact(True, f"{name} ({say.at(self.case, sign.at)})", sign.since, sign.line)
        if self.run.is_old(sign.at):
            return Fact(None, f"last absent {say.at(self.case, sign.at)}, old")
        return NOT_SO

    def any_of(self, *names: str) -> Fact:
        """Return the first of several signs that is present; not so only when all were looked for."""
        found = {name: self.sign(name) for name in names}
        last = [f"{name} {fact.said}" for name, fact in found.items() if fact.met is None and fact.said]
        together = first(found.values())
        return Fact(None, "; ".join(last)) if together.met is None else together

    def ever(self, *names: str) -> Fact:
        """Return whether any of several signs was present at any check so far."""
        return first(self._ever(name) for name in names)

    def _ever(self, name: str) -> Fact:
        states = [(row, words(row.entry.get(name))) for row in charted.block_rows(self.case, "signs")]
        seen = [row for row, state in states if state == PRESENT]
        if seen:
            return Fact(True, f"{name} ({say.at(self.case, seen[-1].at)})", seen[0].at, seen[-1].line)
        return NOT_SO if any(state == ABSENT for _, state in states) else UNKNOWN


def first(facts: Iterable[Fact]) -> Fact:
    """Return the first fact that is met; not so when all are recorded as not so; otherwise not recorded."""
    found = list(facts)
    met = next((fact for fact in found if fact.met), None)
    if met is not None:
        return met
    return NOT_SO if found and all(fact.met is False for fact in found) else UNKNOWN


def record(case: Case, seen: Exposure, run: Watch) -> Record:
    """Return the case ready for looking entries up."""
    return Record(case, seen, run, {sign.name: sign for sign in charted.signs(case)})


def burned(about: Record, burns: tuple[Burn, ...], depths: tuple[str, ...], what: str) -> Fact:
    """Return whether one of ``burns`` has one of ``depths``; a depth not assessed leaves it open."""
    hit = next((burn for burn in burns if burn.depth in depths), None)
    if hit is not None:
        return Fact(True, what, line=hit.line)
    if any(burn.counted is None for burn in burns) or not exposure.burns_recorded(about.case):
        return UNKNOWN
    return NOT_SO


def _not_full(about: Record) -> Fact:
    hit = next((burn for burn in about.seen.face if burn.counted and burn.depth not in FULL), None)
    if hit is not None:
        return Fact(True, f"facial burn, {hit.depth}", line=hit.line)
    return burned(about, about.seen.face, (), "")


def _circular_neck(about: Record) -> Fact:
    hit = next(
        (burn for burn in about.seen.neck if burn.depth in DEEP and burn.circumferential is True), None
    )
    if hit is not None:
        return Fact(True, "deep burn round the neck", line=hit.line)
    return burned(about, about.seen.neck, (), "")


def _burn_size(about: Record, key: str, limit: str, at_least: bool) -> Fact:
    pct = exposure.counted_pct(about.case)
    if pct is None:
        return UNKNOWN
    edge = float(about.case.parameters.table(key)[limit])
    met = pct >= edge if at_least else pct > edge
    return Fact(True, f"{number_text(pct, say.PLACES)} %TBSA") if met else NOT_SO


def coma_score(case: Case) -> tuple[int, datetime] | None:
    """Return the latest coma score with all parts, and its time; None when there is none."""
    totals = [(row.at, total) for row in case.state.rows if (total := charted.gcs_total(row)) is not None]
    if not totals:
        return None
    at = max(at for at, _ in totals)
    return min(total for when, total in totals if when == at), at


def _low_coma_score(about: Record) -> Fact:
    latest = coma_score(about.case)
    if latest is None:
        return UNKNOWN
    total, at = latest
    edge = float(about.case.parameters.table("list.victoria")["coma score below"])
    return Fact(True, f"coma score {total} ({say.at(about.case, at)})", at) if total < edge else NOT_SO


def _altered_row(case: Case, row: Row) -> bool | None:
    level, total = words(row.entry.get("consciousness")), charted.gcs_total(row)
    if level in ALTERED or (total is not None and total < case.parameters.number("coma.full")):
        return True
    return False if level == ALERT or total is not None else None


def altered_now(about: Record) -> Fact:
    """Return whether consciousness was altered when last charted, as a sign or an observation."""
    case = about.case
    rows = [row for row in case.state.rows if _altered_row(case, row) is not None]
    charted_as = NOT_SO if rows else UNKNOWN
    if rows and any(_altered_row(case, row) for row in rows if row.at == rows[-1].at):
        charted_as = Fact(True, f"altered consciousness ({say.at(case, rows[-1].at)})", rows[-1].at)
    sign = about.signs.get("altered consciousness")
    if sign is None or (rows and rows[-1].at > sign.at):
        return charted_as
    return about.sign("altered consciousness")


def altered_ever(about: Record) -> Fact:
    """Return whether consciousness was altered at any time since the injury, as far as charted."""
    case = about.case
    lost = words(case.state.injury.get("lost_consciousness"))
    if lost == "yes":
        return Fact(True, "loss of consciousness")
    rows = [row for row in case.state.rows if _altered_row(case, row)]
    if rows:
        return Fact(True, f"altered consciousness ({say.at(case, rows[0].at)})", rows[0].at)
    sign = about.ever("altered consciousness")
    if sign.met:
        return sign
    looked = sign.met is False or any(_altered_row(case, row) is False for row in case.state.rows)
    return NOT_SO if lost == "no" and looked else UNKNOWN


def trapped(case: Case) -> Fact:
    """Return whether the patient was trapped by a fire in an enclosed space."""
    causes = charted.causes(case)
    if not causes:
        return UNKNOWN
    open_ended = False
    for cause in causes:
        kind, setting = words(cause.get("kind")), words(cause.get("setting"))
        held = words(cause.get("trapped"))
        if kind not in FIRE or setting == "open air" or held == "no":
            continue
        if setting in CLOSED and held == "yes":
            return Fact(True, "trapped by a fire in an enclosed space", line=cause.line)
        open_ended = True
    return UNKNOWN if open_ended else NOT_SO


ENTRIES: dict[str, Callable[[Record], Fact]] = {
    "full-thickness facial burn": lambda r: burned(r, r.seen.face, FULL, "full-thickness facial burn"),
    "facial burn that is not full thickness": _not_full,
    "deep face burn": lambda r: burned(r, r.seen.face, DEEP, "deep burn of the face"),
    "deep face or neck burn": lambda r: burned(
        r, (*r.seen.face, *r.seen.neck), DEEP, "deep burn of face or neck"
    ),
    "deep circular neck burn": _circular_neck,
    "whole face burned": lambda r: r.sign("whole face burned"),
    "large burn": lambda r: _burn_size(r, "list.sfar-2020", "large burn at least", at_least=True),
    "very large burn": lambda r: _burn_size(r, "list.abls-2018", "very large burn above", at_least=False),
    "suspected smoke inhalation": lambda r: Fact(True, r.seen.smoke[0]) if r.seen.smoke else UNKNOWN,
    "stridor": lambda r: r.sign("stridor"),
    "hoarse voice": lambda r: r.sign("hoarse voice"),
    "respiratory distress": lambda r: r.any_of("laboured breathing", "accessory muscle use"),
    "laboured breathing": lambda r: r.sign("laboured breathing"),
    "accessory muscle use": lambda r: r.sign("accessory muscle use"),
    "shallow breathing": lambda r: r.sign("shallow breathing"),
    "swelling at laryngoscopy": lambda r: r.sign("swelling at laryngoscopy"),
    "upper-airway trauma": lambda r: r.sign("airway trauma"),
    "altered consciousness": altered_now,
    "low coma score": _low_coma_score,
    "cannot cooperate": lambda r: r.sign("agitation"),
    "swelling of head or neck": lambda r: r.sign("swelling of face or neck"),
    "blisters or swelling of the throat": lambda r: r.sign("red or swollen throat"),
    "swelling in the mouth": lambda r: r.sign("red or swollen throat"),
    "burn in the mouth": lambda r: r.sign("burn in mouth"),
    "soot in the mouth": lambda r: r.sign("soot in mouth"),
    "difficulty swallowing": lambda r: r.any_of("difficulty swallowing", "drooling"),
    "singed facial hair": lambda r: r.sign("singed facial hair"),
    "signs of obstruction": lambda r: r.any_of("stridor", "hoarse voice", "drooling", "laboured breathing"),
    "cannot clear secretions or tires": lambda r: r.any_of("unable to clear secretions", "tiring"),
}
"""How each entry of a list in ``parameters.yaml`` is looked up in the file."""
