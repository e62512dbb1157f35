"""The table of a run, and the reasons why what survived does not matter."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from pathlib import Path
from typing import Any

import yaml

from .runner import UNNOTICED, Outcome

EXPLAINED = Path(__file__).with_name("explained.yaml")


def reasons() -> dict[tuple[str, str, str, str], str]:
    """Return why a mutant that no test notices is no gap, by file, function, before and after."""
    rows: list[dict[str, Any]] = yaml.safe_load(EXPLAINED.read_text("utf-8")) or []
    return {
        (row["file"], row.get("in", ""), change["before"], change["after"]): row["why"]
        for row in rows
        for change in row["changes"]
    }


def survivors(outcomes: Iterable[Outcome]) -> list[Outcome]:
    """Return the mutants that no test noticed."""
    return [one for one in outcomes if one.outcome == UNNOTICED]


def why(one: Outcome, known: Mapping[tuple[str, str, str, str], str]) -> str:
    """Return the reason that is written down for a survivor, or nothing."""
    return known.get((one.path, one.function, one.before, one.after), "")


def table(outcomes: list[Outcome]) -> str:
    """Return a Markdown table: each file with its mutants, those noticed, and the share."""
    lines = [
        "| file | mutants | noticed | share | survivors | of them explained |",
        "|---|--:|--:|--:|--:|--:|",
    ]
    known = reasons()
    paths = list(dict.fromkeys(one.path for one in outcomes))
    for path in [*paths, ""] if len(paths) > 1 else paths:
        part = [one for one in outcomes if path in ("", one.path)]
        left = survivors(part)
        noticed = len(part) - len(left)
        explained = sum(1 for one in left if why(one, known))
        name = f"`{path}`" if path else "all"
        share = f"{noticed / len(part) * 100:.1f} %"
        lines.append(f"| {name} | {len(part)} | {noticed} | {share} | {len(left)} | {explained} |")
    return "\n".join(lines)


def listed(outcomes: list[Outcome]) -> str:
    """Return every survivor with its reason, as Markdown."""
    known = reasons()
    lines = []
    for one in survivors(outcomes):
        lines.append(f"- `{one.path}` line {one.line}, {one.function or 'outside functions'}:")
        lines.append(f"  `{one.before}` became `{one.after}`. {why(one, known) or '**Not explained.**'}")
    return "\n".join(lines) or "None."
