"""What was so before this shift: allergies, weights, history, first aid, tetanus, family, lines."""

from __future__ import annotations

from handoff.bundled.overview.charted import charted, with_detail

from handoff.plugin import Case, Flag, Item, Part, System, child, entries, line_of, words


def background_items(case: Case) -> tuple[Item, ...]:
    """Return the items of the background."""
    return (
        _allergies(case),
        *_weights(case),
        *_plain_facts(case),
        _family(case),
        _first_aid(case),
        _tetanus(case),
        *_lines(case),
        *_events(case),
    )


def _allergies(case: Case) -> Item:
    node = case.state.patient.get("allergies")
    said = "; ".join(with_detail(entry, "to", "reaction", "note") for entry in entries(node)) or words(node)
    flag = Flag.REVIEW if said == "unable to ask" else Flag.NONE
    return charted(
        "patient.allergies",
        "Allergies",
        said,
        Part.BACKGROUND,
        node=node,
        flag=flag,
        rank=31 if flag is Flag.REVIEW else None,
        lethal_rank=31,
    )


def _weights(case: Case) -> list[Item]:
    if not case.state.weights:
        return [charted("patient.weight", "Weight", "", Part.BACKGROUND, lethal_rank=32)]
    items = []
    for index, weight in enumerate(reversed(case.state.weights)):
        written = words(weight.node.get("value"))
        items.append(
            charted(
                "patient.weight" if index == 0 else f"patient.weight.{index + 1}",
                f"Weight, {weight.kind}",
                f"{written} ({weight.known})",
                Part.BACKGROUND,
                node=weight.node,
                as_of=weight.at,
            )
        )
    return items


def _plain_facts(case: Case) -> list[Item]:
    patient = case.state.patient
    facts = [
        ("patient.height", "Height", words(patient.get("height")), "height"),
        ("patient.history", "Past illness", "; ".join(case.state.texts(patient.get("history"))), "history"),
        ("patient.conditions", "Conditions that change a figure", _conditions(case), "conditions"),
        (
            "patient.medicines",
            "Medicines before the burn",
            "; ".join(case.state.texts(patient.get("medicines"))),
            "medicines",
        ),
        ("patient.pregnant", "Pregnancy", words(patient.get("pregnant")), "pregnant"),
        ("patient.isolation", "Isolation", words(patient.get("isolation")), "isolation"),
        (
            "patient.capacity",
            "Capacity or parental responsibility",
            words(patient.get("capacity")),
            "capacity",
        ),
    ]
    return [
        charted(key, label, shown, Part.BACKGROUND, node=patient.get(name))
        for key, label, shown, name in facts
    ]


def _conditions(case: Case) -> str:
    return ", ".join(case.state.texts(case.state.patient.get("conditions")))


def _family(case: Case) -> Item:
    node = case.state.patient.get("family")
    said = with_detail(node, "contact", "phone", "note")
    told = case.when(child(node, "told"))
    said = ", ".join(part for part in (said, f"told {case.clock.day_and_time(told)}" if told else "") if part)
    interpreter = words(child(node, "interpreter"))
    if interpreter:
        said = f"{said}; interpreter: {interpreter}" if said else f"interpreter: {interpreter}"
    return charted("patient.family", "Family and contact", said, Part.BACKGROUND, System.PEOPLE, node=node)


def _first_aid(case: Case) -> Item:
    node = case.state.injury.get("first_aid")
    if words(child(node, "none")) == "yes":
        said = "none given"
    else:
        cooled = words(child(node, "cooled_for"))
        started = case.when(child(node, "started"))
        parts = [f"cooled for {cooled}" if cooled else ""]
        parts += [f"from {case.clock.time(started, case.now)}" if started else "", words(child(node, "note"))]
        said = ", ".join(part for part in parts if part)
    return charted("injury.first_aid", "First aid", said, Part.BACKGROUND, node=node)


def _tetanus(case: Case) -> Item:
    node = case.state.injury.get("tetanus")
    parts = []
    for name, label in (("doses", "doses so far"), ("last", "last"), ("given_today", "given today")):
        said = words(child(node, name))
        parts += [f"{label}: {said or 'not recorded'}"] if node is not None else []
    return charted("injury.tetanus", "Tetanus", "; ".join(parts), Part.BACKGROUND, node=node)


def _lines(case: Case) -> list[Item]:
    lines = [entry for entry in entries(case.state.root.get("lines")) if "removed" not in entry]
    if not lines:
        return [charted("line.1", "Lines, tubes and drains", "", Part.BACKGROUND, System.LINES)]
    items = []
    for index, entry in enumerate(lines):
        placed = case.when(entry.get("placed"))
        through = words(entry.get("through_burn"))
        parts = [words(entry.get("site")), {"yes": "through burned skin"}.get(through, "")]
        if placed:
            days = (case.clock.local(case.now).date() - case.clock.local(placed).date()).days + 1
            parts.append(f"placed {case.clock.day_and_time(placed)}, day {days}")
        else:
            parts.append("date placed not recorded")
        failed = case.state.texts(entry.get("failed_sites"))
        parts += [f"failed sites: {', '.join(failed)}"] if failed else []
        avoid = words(entry.get("avoid"))
        parts += [f"avoid: {avoid}"] if avoid else []
        items.append(
            charted(
                f"line.{index + 1}",
                words(entry.get("what")),
                ", ".join(part for part in parts if part),
                Part.BACKGROUND,
                System.LINES,
                node=entry,
            )
        )
    return items


def _events(case: Case) -> list[Item]:
    items = []
    for index, row in enumerate(case.state.dated(case.state.root.get("events"))):
        entry = row.entry
        what = words(entry.get("what"))
        parts = [
            words(entry.get("site")),
            words(entry.get("said")),
            words(entry.get("outcome")),
            words(entry.get("note")),
        ]
        who = words(entry.get("who"))
        parts += [f"by {who}"] if who else []
        answered = case.when(entry.get("answered"))
        parts += [f"answered {case.clock.time(answered, case.now)}"] if answered else []
        items.append(
            Item(
                key=f"event.{index + 1}",
                label=what[:1].upper() + what[1:],
                part=Part.BACKGROUND,
                system=System.GENERAL,
                value=what,
                shown=", ".join(part for part in parts if part) or "no detail recorded",
                as_of=row.at,
                repeats=True,
                line=line_of(entry),
            )
        )
    return items
