"""Published lists of airway concern and the seven-point score: prompts for a senior look, never a decision."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import Action, Case, Flag, Input, Item, Parameter, System, Urgency, Working, plural

from . import charted, facts, formula, say
from .exposure import FIRE, Exposure
from .facts import ENTRIES, Fact, Record
from .schedule import Watch

RANK, RANK_LATER = 10, 12
AT_ONCE = ("stridor", "respiratory distress")
"""Entries that keep asking for help after a review, for as long as they are charted as present."""

LESS_SPECIFIC = "list.traditional"
CALL = "Call for senior airway review; sit the patient up, stay with them"
PROMPT = "A prompt for senior airway review, not a decision about a tube."


class Listed(Struct, frozen=True):
    """One published list with the entries that the file records as met, and those it does not record."""

    parameter: Parameter
    met: tuple[tuple[str, Fact], ...]
    open_ended: tuple[tuple[str, Fact], ...]

    @property
    def title(self) -> str:
        """The name of the list."""
        title = str(self.parameter.value["title"])
        return f"{title} (from memory)" if self.parameter.kind == "from memory" else title


def lists(case: Case, about: Record) -> tuple[Listed, ...]:
    """Return every published list with what the file records of it."""
    return tuple(_looked_up(case.parameters[key], about) for key in case.parameters.ids("list."))


def _looked_up(parameter: Parameter, about: Record) -> Listed:
    table = parameter.value
    found = [(str(name), ENTRIES[str(name)](about)) for name in table["entries"]]
    open_ended = tuple((name, fact) for name, fact in found if fact.met is None)
    needed = str(table.get("needs", ""))
    if needed and not ENTRIES[needed](about).met:
        fact = ENTRIES[needed](about)
        return Listed(parameter, (), (*(((needed, fact),) if fact.met is None else ()), *open_ended))
    return Listed(parameter, tuple((name, fact) for name, fact in found if fact.met), open_ended)


def items(case: Case, seen: Exposure, run: Watch) -> tuple[Item, ...]:
    """Return the prompt for senior review, each list behind it, and the seven-point score."""
    if not seen.watched:
        return ()
    about = facts.record(case, seen, run)
    found = lists(case, about)
    return (_review(case, run, found), *(_list_item(listed) for listed in found), *_score(case, seen, about))


def _deciding(case: Case, found: tuple[Listed, ...]) -> list[Listed]:
    """A list from memory decides nothing unless local policy chose it by name."""
    chosen = case.chosen("review_lists")
    everything = chosen.name == "all" and chosen.by_policy
    return [listed for listed in found if everything or listed.parameter.kind != "from memory"]


class Review(Struct, frozen=True):
    """What asks for a senior look: how soon, the entries that are met, what got worse, the last review."""

    flag: Flag
    rank: int | None
    met: tuple[tuple[str, Fact], ...]
    last: tuple[datetime, str] | None
    worse: str

    def said(self) -> str:
        """Return what got worse and the entries as one phrase, what cannot wait first."""
        ordered = sorted(self.met, key=lambda entry: entry[0] not in AT_ONCE)
        worse = (f"worse at {self.worse}",) if self.worse else ()
        return say.and_list((*worse, *dict.fromkeys(fact.said for _, fact in ordered)))


def review(case: Case, found: tuple[Listed, ...]) -> Review:
    """Return how soon the published lists ask for a senior look at the airway."""
    met = {name: fact for listed in _deciding(case, found) for name, fact in listed.met}
    last = _last_review(case)
    reviewed, worse = last[0] if last else None, charted.worse_at(case)
    flag, rank = _urgency(case, found, reviewed, worse) if met else (Flag.NONE, None)
    newer = worse is not None and (reviewed is None or worse > reviewed)
    return Review(flag, rank, tuple(met.items()), last, say.at(case, worse) if worse and newer else "")


def _review(case: Case, run: Watch, found: tuple[Listed, ...]) -> Item:
    key, label = "airway_watch.senior_review", "Senior airway review"
    asked = review(case, found)
    seen_by = f"last reviewed {asked.last[1]}" if asked.last else "no review of the airway is recorded"
    if run.tube.since is not None:
        shown = f"tube in place since {say.at(case, run.tube.since)}; {seen_by}"
        return say.fact(key, label, shown, as_of=run.tube.since)
    if not asked.met:
        return say.fact(key, label, f"no entry of the published lists is recorded as met; {seen_by}")
    titles = [f"{listed.title} {len(listed.met)}" for listed in found if listed.met]
    ask = {Flag.ACTION: "call for it now: ", Flag.REVIEW: "ask for it: "}.get(asked.flag, "")
    return say.fact(
        key,
        label,
        f"{ask}{asked.said()}; {seen_by}",
        value=len(asked.met),
        unit="entries",
        as_of=asked.last[0] if asked.last else None,
        flag=asked.flag,
        rank=asked.rank,
        working=Working(
            formula="entries of published lists that the file records as met",
            sum=", ".join(titles),
            inputs=tuple(Input(name, fact.shown(), fact.line) for name, fact in asked.met),
        ),
        sources=[listed.parameter.source for listed in found if listed.met],
        cautions=(PROMPT, f"Entries met by list: {', '.join(titles)}."),
    )


def _last_review(case: Case) -> tuple[datetime, str] | None:
    rows = charted.block_rows(case, "reviews")
    if not rows:
        return None
    who = say.person(str(rows[-1].entry.get("who") or rows[-1].entry.get("by") or ""))
    said = str(rows[-1].entry.get("said") or "")
    return rows[-1].at, f"{say.at(case, rows[-1].at)}{who}" + (f": {said}" if said else "")


def _urgency(
    case: Case, found: tuple[Listed, ...], reviewed: datetime | None, worse: datetime | None
) -> tuple[Flag, int]:
    specific = [
        entry
        for listed in _deciding(case, found)
        if listed.parameter.id != LESS_SPECIFIC
        for entry in listed.met
    ]
    newer = worse is not None and (reviewed is None or worse > reviewed)
    if newer or any(name in AT_ONCE for name, _ in specific):
        return Flag.ACTION, RANK
    everything = [entry for listed in _deciding(case, found) for entry in listed.met]
    if reviewed is not None and all(fact.since is None or fact.since <= reviewed for _, fact in everything):
        return Flag.NONE, RANK_LATER
    return (Flag.ACTION, RANK) if specific else (Flag.REVIEW, RANK_LATER)


def _list_item(listed: Listed) -> Item:
    table = listed.parameter.value
    unread = [str(name) for name in table["not read from the file"]]
    if listed.met:
        said = say.and_list(fact.said for _, fact in listed.met)
        shown = f"{plural(len(listed.met), 'entry', 'entries')} met: {said}"
    else:
        shown = "no entry is recorded as met"
    blank = [name for name, fact in listed.open_ended if not fact.said]
    old = [f"{name} ({fact.said.removeprefix(f'{name} ')})" for name, fact in listed.open_ended if fact.said]
    if blank:
        shown += f"; not recorded: {', '.join(blank)}"
    if old:
        shown += f"; not reassessed: {', '.join(old)}"
    if unread:
        shown += f"; to be judged at the bedside: {', '.join(unread)}"
    name = listed.parameter.id.removeprefix("list.").replace("-", "_")
    return say.fact(
        f"airway_watch.list_{name}",
        f"Airway concern, {listed.title}",
        shown,
        value=len(listed.met),
        unit="entries",
        sources=(listed.parameter.source,),
        cautions=(PROMPT,),
        detail=True,
    )


def _score(case: Case, seen: Exposure, about: Record) -> tuple[Item, ...]:
    if not any(str(cause.get("kind")) in FIRE for cause in charted.causes(case)) and not seen.smoke_recorded:
        return ()
    parameter = case.parameters["score.clark"]
    entries = score_entries(about)
    points, open_ended = formula.score_points([fact.met for _, fact in entries])
    highest, limit = int(parameter.value["highest"]), float(parameter.value["meets above"])
    meets = formula.exceeds(points, limit)
    missing = [name for name, fact in entries if fact.met is None]
    shown = f"{'at least ' if missing else ''}{points} of {highest} points"
    shown += f", {'above' if meets else 'not above'} {limit:g}" if meets or not missing else ""
    if missing:
        shown += f"; not recorded: {', '.join(missing)}"
    rows = charted.check_times(case)
    return (
        say.fact(
            "airway_watch.score",
            str(parameter.value["title"]),
            shown,
            value=None if missing else points,
            unit="points",
            as_of=rows[-1] if rows else None,
            flag=Flag.NOT_RECORDED if missing else Flag.NONE,
            sources=(parameter.source,),
            cautions=("As charted at any check so far. A low score does not exclude inhalation injury.",),
            working=Working(
                formula="one point for each of seven items",
                sum=f"{points} recorded, {open_ended} not recorded",
                inputs=tuple(Input(name, fact.shown(), fact.line) for name, fact in entries),
                rule=str(parameter.value["title"]),
            ),
        ),
    )


def score_entries(about: Record) -> tuple[tuple[str, Fact], ...]:
    """Return the seven items of the score with what the file records of each."""
    mouth = about.ever("burn around mouth", "burn in mouth")
    if (
        mouth.met is None
        and facts.burned(about, about.seen.face, (), "").met is False
        and not about.seen.face
    ):
        mouth = facts.NOT_SO
    return (
        ("trapped by a fire in an enclosed space", facts.trapped(about.case)),
        ("soot in sputum", about.ever("soot in sputum")),
        ("burn around the mouth", mouth),
        ("altered consciousness at any time", facts.altered_ever(about)),
        (
            "symptoms of distress",
            about.ever("breathlessness", "choking", "wheeze", "eye or throat irritation"),
        ),
        ("signs of distress", about.ever("laboured breathing", "fast breathing", "crackles")),
        ("hoarse voice", about.ever("hoarse voice")),
    )


def actions(case: Case, seen: Exposure, run: Watch) -> tuple[Action, ...]:
    """Return the call for senior review, where the lists ask for it."""
    if not seen.watched or run.tube.in_place:
        return ()
    found = lists(case, facts.record(case, seen, run))
    asked = review(case, found)
    if asked.flag not in (Flag.ACTION, Flag.REVIEW):
        return ()
    now = asked.flag is Flag.ACTION
    return (
        Action(
            key="airway_watch.call_for_review",
            area="Airway",
            text=CALL if now else "Ask for senior airway review",
            why=asked.said(),
            system=System.AIRWAY,
            urgency=Urgency.NOW if now else Urgency.SHIFT,
            sources=tuple(dict.fromkeys(listed.parameter.source for listed in found if listed.met)),
            cautions=(PROMPT,),
        ),
    )
