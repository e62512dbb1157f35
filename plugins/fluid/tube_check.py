"""Catheters and cannulas as charted: what drained belongs to a catheter and has a time; a cannula is counted."""

from __future__ import annotations

from collections.abc import Iterator

from handoff.plugin import Case, List, Map, Problem, Severity, words

from .tubes import misspelt
from .urine import CATHETER, is_catheter


def check_tubes(case: Case) -> Iterator[Problem]:
    """Yield a warning for a drained volume of another line or without its time, and for a misspelt cannula."""
    node = case.state.root.get("lines")
    for index, entry in enumerate(node) if isinstance(node, List) else ():
        if not isinstance(entry, Map) or "struck" in entry or words(entry.get("confirmed")) == "yes":
            continue
        path = ("lines", index)
        kind = words(entry.get("kind"))
        if name := misspelt(entry):
            yield Problem(
                entry["what"],
                (*path, "what"),
                f"'{name}' is not counted as a cannula of a known gauge",
                "write it like IV cannula 16 G, or add kind: or confirmed: yes",
                Severity.UNUSUAL,
            )
        drained = entry.get("drained_at_insertion")
        if drained is None:
            continue
        if kind not in ("", CATHETER):
            yield Problem(
                drained,
                (*path, "drained_at_insertion"),
                f"a volume drained at insertion stands with a {kind}; it counts as urine",
                f"write kind: {CATHETER}, move the volume to fluid.losses, or add confirmed: yes",
                Severity.UNUSUAL,
            )
        elif is_catheter(entry) and "placed" not in entry:
            yield Problem(
                drained,
                (*path, "drained_at_insertion"),
                "it does not say when the catheter was placed; the volume counts in the balance since the burn only",
                "add placed: with date and time, or confirmed: yes if it is not known",
                Severity.UNUSUAL,
            )
