"""Markdown in small pieces."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

MADE = "<!-- Made by `python3 -m docs.generate`. Change the schemas and tables, not this page. -->"


def page(title: str, *parts: str) -> str:
    """Return a whole page: its title, the note on how it is made, and its parts."""
    return "\n\n".join([f"# {title}", MADE, *(part.strip() for part in parts if part.strip())]) + "\n"


def table(heads: Sequence[str], rows: Iterable[Sequence[str]]) -> str:
    """Return a table; nothing when there are no rows."""
    lines = [_row(row) for row in rows]
    if not lines:
        return ""
    return "\n".join([_row(heads), "|" + "---|" * len(heads), *lines])


def _row(cells: Sequence[str]) -> str:
    return "| " + " | ".join(" ".join(cell.replace("|", "\\|").split()) for cell in cells) + " |"


def code(word: object) -> str:
    """Return ``word`` in code letters."""
    return f"`{word}`"


def codes(words: Iterable[object]) -> str:
    """Return ``words`` in code letters, with commas."""
    return ", ".join(code(word) for word in words)
