"""A case for teaching: the same findings, hours since the burn for dates, nobody to be recognised by a field.

What stands in a field of its own (name, number, place, who did it) is taken out wherever it stands,
in free text and in what the tool makes of it too. What only a reader can judge is named in a report.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from datetime import datetime
from enum import Enum
from pathlib import Path as FilePath
from typing import Any, TypeVar

from msgspec import Struct
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.parameters import Source
from handoff.policy import Policy
from handoff.privacy.free_text import DATE, NAME, NUMBER, PERSON, PLACE, TIME, Scrubber, known_terms
from handoff.privacy.identifying import Path, fits, instead_of, is_text, place_said, vocabulary
from handoff.privacy.since_burn import Mover, SinceBurn
from handoff.registry import Setup
from handoff.state.clock import PartialDate, read_date
from handoff.state.load import Loaded
from handoff.state.nodes import List, Map, Node, Text, walk
from handoff.state.patient import PatientState
from handoff.work import assess_loaded

STEM = "case"
"""What the names of the files begin with; the name of the state file may be the patient's."""

DIGEST = "deidentified"
"""Stands where the digest stood: a digest would lead back to the file."""

OLDEST = 90
"""Ages above it are told as it: so few people are older that the age alone can name them."""

DROPPED = ("confidential", "collected")
_T = TypeVar("_T")


class Report(Struct, frozen=True):
    """What was taken out, by kind; what a person must look at; what nobody looked for."""

    counted: Mapping[str, int]
    moved: int
    doubtful: tuple[str, ...]

    def lines(self) -> list[str]:
        """Return the report as lines to be printed; it names words of the file and must not travel with it."""
        said = [f"{count} {_KINDS[kind]}" for kind, count in self.counted.items() if count and kind in _KINDS]
        lines = [f"taken out: {', '.join(said) or 'nothing'}; {self.moved} times became hours since the burn"]
        lines += [f"look at it: {one}" for one in self.doubtful]
        return [*lines, *NOT_LOOKED_FOR]


_KINDS = {
    PERSON: "names of people",
    PLACE: "places",
    NUMBER: "numbers",
    DATE: "dates in text",
    TIME: "clock times in text",
    NAME: "words with a capital that may be names",
    "dropped": "blocks that never leave (confidential, collected)",
}

NOT_LOOKED_FOR = (
    "figures that follow the clock of the ward (a balance since the morning) follow hours since the burn here",
    "not looked for: names in small letters, nicknames, a job or a story that people would recognise, rare injuries",
    "read every document to its end before it leaves the unit; local rules may ask for the patient's consent",
)


def deidentified(loaded: Loaded, setup: Setup) -> tuple[Assessment, Report]:
    """Return the assessment of a loaded state without identifiers, ready for documents, and what was done.

    Name the files after :data:`STEM`, never after the state file.
    """
    state = loaded.state
    mover = Mover(_zero(state))
    trade = vocabulary(setup.schema)
    scrubber = Scrubber(known_terms(_known(state, setup.policy), trade), trade)
    made = _Maker(state, loaded.now, mover, scrubber)
    case = PatientState(made.root(setup.schema), f"{STEM}.yaml")
    case.clock = SinceBurn()
    case.__dict__["digest"] = DIGEST
    own = replace(setup, policy=replace(setup.policy, name="local policy", unit_name="", templates=""))
    unusual = tuple(_over(fault, scrubber) for fault in loaded.unusual)
    assessment = assess_loaded(Loaded(case, mover.moment(loaded.now), unusual, loaded.unchecked), own)
    found = {
        name: replace(one, items=_over(one.items, scrubber), actions=_over(one.actions, scrubber))
        for name, one in assessment.findings.items()
    }
    clean = replace(
        assessment,
        items=tuple(item for one in found.values() for item in one.items),
        actions=tuple(action for one in found.values() for action in one.actions),
        findings=found,
    )
    counted = Counter({kind: scrubber.counted[kind] for kind in _KINDS})
    return clean, Report(counted, mover.moved, tuple(f"{where}: {word}" for where, word in scrubber.doubtful))


def _zero(state: PatientState) -> datetime:
    """The burn, or the first moment of the file where the time of the burn is unknown."""
    burn = state.burn_time
    if burn is not None:
        return burn.earliest
    moments = [row.at for row in (*state.rows, *state.results, *state.dated(state.root.get("events")))]
    return min(moments) if moments else datetime.fromisoformat("2001-01-01T00:00:00+00:00")


def _known(state: PatientState, policy: Policy) -> Iterable[tuple[str, str]]:
    for path, node in walk(state.written):
        instead = instead_of(path) if isinstance(node, Text) else ""
        if instead and not _is_moment(node):
            yield str(node), instead
    for text in (policy.unit_name, policy.name):
        yield text, PLACE
    yield FilePath(state.file).stem, PERSON


def _is_moment(node: Node) -> bool:
    return isinstance(node, Text) and node[:4].isdigit() and node[4:5] == "-"


class _Maker:
    """Makes the tree of the case: every leaf by what the schema says that it is."""

    def __init__(self, state: PatientState, now: datetime, mover: Mover, scrubber: Scrubber) -> None:
        self._state, self._now, self._mover, self._scrubber = state, now, mover, scrubber

    def root(self, schema: Mapping[str, Any]) -> Map:
        """Return the whole tree."""
        pairs: list[tuple[Text, Node]] = []
        properties = schema["properties"]
        for key, value in self._state.written.items():
            if key in DROPPED:
                self._scrubber.counted["dropped"] += 1
            elif key == "observations":
                pairs.append((_text(key), self._rows(value, properties[key]["x-row"])))
            elif key == "clock":
                pairs.append((_text(key), Text.at("UTC")))
            elif key == "patient" and isinstance(value, Map):
                pairs.append((_text(key), self._patient(value, properties[key])))
            else:
                pairs.append((_text(key), self._node(value, properties.get(key, {}), (str(key),))))
        return _map(pairs, self._state.written)

    def _patient(self, patient: Map, schema: Mapping[str, Any]) -> Map:
        kept = _map(
            [
                (_text(key), value)
                for key, value in patient.items()
                if key not in ("born", "name", "identifiers", "earlier_names", "estimated_age")
            ],
            patient,
        )
        made = self._node(kept, schema, ("patient",))
        pairs: list[tuple[Text, Node]] = [(Text.at("name"), Text.at("De-identified case"))]
        age = self._state.age_at(self._now)
        if age is not None:
            said = f"{OLDEST} years" if age.years >= OLDEST else age.shown().removeprefix("about ")
            pairs.append((Text.at("estimated_age"), Text.at(said, getattr(patient.get("born"), "line", 0))))
        pairs.append(
            (Text.at("identifiers"), Map.at([(Text.at("record_number"), Text.at("removed for teaching"))]))
        )
        pairs += [(_text(key), value) for key, value in made.items()] if isinstance(made, Map) else []
        return _map(pairs, patient)

    def _rows(self, days: Node, schema: Mapping[str, Any]) -> Node:
        if not isinstance(days, Map):
            return Map.at()
        found: dict[str, dict[str, list[Node]]] = {}
        for day, times in days.items():
            for time, written in times.items() if isinstance(times, Map) else ():
                moved = self._mover.text(self._state.clock.read_time(str(day), str(time)))
                into = found.setdefault(moved[:10], {}).setdefault(moved[11:], [])
                for entry in written if isinstance(written, List) else (written,):
                    into.append(self._node(entry, schema, ("observations", str(day), str(time))))
        rows = [
            (Text.at(day), _map([(Text.at(time), List.at(entries)) for time, entries in times.items()], days))
            for day, times in found.items()
        ]
        return _map(rows, days)

    def _node(self, node: Node, schema: Mapping[str, Any], path: Path) -> Node:
        schema = fits(node, schema)
        if isinstance(node, Map):
            known, others = schema.get("properties", {}), schema.get("additionalProperties")
            pairs = []
            for key, value in node.items():
                part = known.get(key) or (others if isinstance(others, Mapping) else {})
                pairs.append((_text(key), self._node(value, part, (*path, str(key)))))
            return _map(pairs, node)
        if isinstance(node, List):
            values = [
                self._node(value, schema.get("items", {}), (*path, index)) for index, value in enumerate(node)
            ]
            return List.at(values, node.line, node.column)
        return self._leaf(node, schema, path)

    def _leaf(self, node: Text, schema: Mapping[str, Any], path: Path) -> Text:
        if "x-instant" in schema:
            return _same_place(self._mover.text(self._state.clock.read(str(node))), node)
        if "x-date" in schema:
            written = read_date(str(node), partial=True)
            return _same_place(
                self._mover.date(PartialDate(written.year, written.month or 7, written.day or 1)), node
            )
        if not is_text(schema):
            return node
        instead = instead_of(path)
        if instead:
            self._scrubber.counted[instead] += 1
            return _same_place(instead, node)
        return _same_place(self._scrubber.free_text(str(node), place_said(path, node)), node)


def _text(key: str) -> Text:
    return key if isinstance(key, Text) else Text.at(key)


def _same_place(text: str, node: Text) -> Text:
    return Text.at(text, node.line, node.column, node.start, node.end, node.plain)


def _map(pairs: Iterable[tuple[Text, Node]], node: Map) -> Map:
    return Map.at(pairs, node.line, node.column)


def _over(value: _T, scrubber: Scrubber) -> _T:
    """Return ``value`` with every printed text scrubbed; keys and published sources stay as they are."""
    made: Any = value
    if isinstance(value, str) and not isinstance(value, Enum):
        made = scrubber.printed(value)
    elif isinstance(value, Source):
        made = replace(value, citation=scrubber.printed(value.citation)) if value.kind == "local" else value
    elif isinstance(value, tuple) and not hasattr(value, "_fields"):
        made = tuple(_over(one, scrubber) for one in value)
    elif isinstance(value, Struct):
        changed = {
            one: _over(getattr(value, one), scrubber)
            for one in value.__struct_fields__
            if one not in ("key", "path", "severity", "unit")
        }
        made = replace(value, **changed)
    return made  # type: ignore[no-any-return]
