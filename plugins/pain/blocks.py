"""Nerve blocks, epidurals and catheters, and measures without drugs."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Map, Part, System, child, entries, line_of, words, yes

from .names import drug_of


def items(case: Case) -> tuple[Item, ...]:
    """Return each block with its effect as last checked, and the non-drug measures."""
    written = entries(child(case.block, "blocks"))
    blocks = tuple(_block(case, entry, index) for index, entry in enumerate(written, start=1))
    return (*blocks, *_non_drug(case))


def _block(case: Case, entry: Map, index: int) -> Item:
    at, checked = case.when(entry.get("at")), case.when(entry.get("checked"))
    effect = words(entry.get("effect"))
    said = [f"{words(entry.get('what'))}{_what_was_given(case, entry)}"]
    if yes(entry.get("catheter")):
        removed = case.when(entry.get("removed"))
        said.append(f"catheter out {case.clock.time(removed, case.now)}" if removed else "catheter in place")
    said.append(f"effect: {effect or 'not recorded'}")
    if checked is not None:
        said.append(f"checked {case.clock.time(checked, case.now)}")
    return Item(
        key=f"pain.block.{index}",
        label=f"Block {index}",
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=words(entry.get("what")),
        shown="; ".join(said),
        as_of=checked or at,
        flag=Flag.NONE if effect else Flag.NOT_RECORDED,
        repeats=True,
        line=line_of(entry),
    )


def _what_was_given(case: Case, entry: Map) -> str:
    drug, at = drug_of(case, entry.get("drug")), case.when(entry.get("at"))
    said = f", {drug.name} {words(entry.get('dose'))}".rstrip() if drug is not None else ""
    return f"{said}, {case.clock.time(at, case.now)}" if at is not None else said


def _non_drug(case: Case) -> tuple[Item, ...]:
    rows = case.state.dated(child(case.block, "non_drug"))
    if not rows:
        return ()
    said = "; ".join(f"{words(row.entry.get('what'))}, {case.clock.time(row.at, case.now)}" for row in rows)
    return (
        Item(
            key="pain.non_drug",
            label="Non-drug measures",
            part=Part.ASSESSMENT,
            system=System.PAIN,
            value=words(rows[-1].entry.get("what")),
            shown=said,
            as_of=rows[-1].at,
            repeats=True,
            line=rows[-1].line,
        ),
    )
