"""Where comfort is the goal of care: what matters to this patient leads, and rescue does not."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import (
    NOT_RECORDED,
    Action,
    Case,
    Flag,
    Item,
    Map,
    System,
    Urgency,
    child,
    fact,
    joined,
    words,
)

RANK = 60
LABEL = "Goals of comfort"


def _block(case: Case) -> Map:
    node = child(case.block, "comfort")
    return node if isinstance(node, Map) and "struck" not in node else Map.at()


def items(case: Case) -> tuple[Item, ...]:
    """Return what matters to this patient; nothing unless comfort is the goal, or it is charted."""
    node = _block(case)
    matters = case.state.texts(node.get("matters"))
    if not matters and not case.comfort:
        return ()
    if not matters:
        return (
            fact(
                "wellbeing.comfort",
                LABEL,
                NOT_RECORDED,
                system=System.GENERAL,
                flag=Flag.NOT_RECORDED,
                rank=RANK,
            ),
        )
    ready, stopped = words(node.get("medicines_ready")), case.state.texts(node.get("stopped"))
    said = [joined(matters)]
    said.append(f"talked over with {words(node.get('agreed_with')) or 'whom is not recorded'}")
    said.append(f"medicines for comfort prescribed: {ready or 'not recorded'}")
    said += [f"stopped: {joined(stopped)}"] if stopped else []
    lacks = case.comfort and ready != "yes"
    return (
        fact(
            "wellbeing.comfort",
            LABEL,
            "; ".join(said),
            system=System.GENERAL,
            value=joined(matters),
            as_of=case.when(node.get("at")),
            flag=Flag.ACTION if lacks else Flag.NONE,
            rank=RANK if lacks else None,
            line=node.line,
        ),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the care that comfort asks for; nothing unless it is the goal."""
    if not case.comfort:
        return ()
    node = _block(case)
    source = case.parameters.source_of("comfort.every")
    made = [
        Action(
            key="wellbeing.comfort_round",
            area="Comfort",
            text="Pain, breath, restlessness, mouth, eyes, lying as the patient likes; stay, let family stay",
            why="comfort is the goal of care",
            system=System.GENERAL,
            first_due=case.now,
            every=timedelta(hours=case.parameters.number("comfort.every")),
            urgency=Urgency.TIMED,
            sources=(source,),
        )
    ]
    if words(node.get("medicines_ready")) != "yes":
        made.append(
            Action(
                key="wellbeing.comfort_medicines",
                area="Comfort",
                text="Ask now for medicines to be ready for pain, breathlessness, restlessness and secretions",
                why="comfort is the goal of care and they are not charted as prescribed",
                system=System.GENERAL,
                urgency=Urgency.NOW,
            )
        )
    if not case.state.texts(node.get("matters")):
        made.append(
            Action(
                key="wellbeing.comfort_ask",
                area="Comfort",
                text="Ask patient and family what matters now: people, place, rites, what is feared; chart their words",
                why="what matters is not recorded",
                system=System.GENERAL,
                urgency=Urgency.NOW,
            )
        )
    return tuple(made)
