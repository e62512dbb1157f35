"""Catheters as charted: what drained at insertion belongs to a urinary catheter, and has a time."""

from __future__ import annotations

from collections.abc import Iterator

from handoff.plugin import Case, List, Map, Problem, Severity, words

from .urine import CATHETER, is_catheter


def check_tubes(case: Case) -> Iterator[Problem]:
    """Yield a warning where a drained volume stands with another kind of line, or without its time."""
    node = case.state.root.get("lines")
    for index, entry in enumerate(node) if isinstance(node, List) else ():
        if not isinstance(entry, Map) or "struck" in entry or words(entry.get("confirmed")) == "yes":
            continue
        path = ("lines", index)
        kind = words(entry.get("kind"))
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
