"""Itch and anxiety, each on its own scale and never added to pain."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Map, Node, Part, System, line_of, number, number_text, words

from .scores import Scale, scale_of

PLAIN = Scale("", "0 to 10", highest=10, listed=False)


def items(case: Case) -> tuple[Item, ...]:
    """Return the latest itch and the latest anxiety score, with scale, range and time."""
    return tuple(_item(case, name) for name in ("itch", "anxiety"))


def _struck(node: Node) -> bool:
    return isinstance(node, Map) and "struck" in node


def _item(case: Case, name: str) -> Item:
    key, label = f"pain.{name}", name.capitalize()
    readings = [reading for reading in case.state.series(name) if not _struck(reading.node)]
    if not readings:
        return Item(
            key=key, label=label, part=Part.ASSESSMENT, system=System.PAIN, unit="score",
            shown="not recorded", flag=Flag.NOT_RECORDED, repeats=True,
        )  # fmt: skip
    last = readings[-1]
    node, scale = last.node, PLAIN
    if isinstance(node, Map):
        scale = scale_of(case, node.get("scale")) or PLAIN
    written = words(node.get("score")) if isinstance(node, Map) else words(node)
    points = number(node.get("score")) if isinstance(node, Map) else number(node)
    said = written if points is None else number_text(points, 1)
    ranged = scale.range_text() if scale is PLAIN else f"{scale.called}, {scale.range_text()}"
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=written if points is None else points,
        unit="score",
        shown=f"{said} ({ranged}), {case.clock.time(last.at, case.now)}",
        as_of=last.at,
        repeats=True,
        line=line_of(node),
    )
