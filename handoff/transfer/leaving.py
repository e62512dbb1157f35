"""The state file as it may leave: without the confidential block unless that was chosen."""

from __future__ import annotations

from handoff.state.faults import StateFaults
from handoff.state.nodes import Map, plain
from handoff.state.reader import read_nodes

CONFIDENTIAL = "confidential"


def state_text(text: str, file: str, *, with_confidential: bool) -> str | None:
    """Return ``text`` without its confidential block; None where the block cannot be taken out cleanly.

    Args:
        text: The state file as it is.
        file: Its name.
        with_confidential: Leave the block in.
    """
    root, _ = read_nodes(text, file)
    if with_confidential or CONFIDENTIAL not in root:
        return text
    lines = text.splitlines(keepends=True)
    first = root.key(CONFIDENTIAL).line
    begin = first - 1
    # Remarks right above and below the block may be about it, and go with it.
    while begin and lines[begin - 1].startswith("#"):
        begin -= 1
    later = [root.key(key).line for key in root if root.key(key).line > first]
    end = min(later) - 1 if later else len(lines)
    kept = "".join((*lines[:begin], *lines[end:]))
    try:
        read, _ = read_nodes(kept, file)
    except StateFaults:
        return None
    return kept if _same_but_for_it(root, read) else None


def _same_but_for_it(before: Map, after: Map) -> bool:
    wanted = {str(key): plain(value) for key, value in before.items() if str(key) != CONFIDENTIAL}
    return wanted == {str(key): plain(value) for key, value in after.items()}
