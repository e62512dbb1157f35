"""The documents of each patient of a ward, laid out below one folder as the files are."""

from __future__ import annotations

from pathlib import Path

from handoff.assess import Assessment
from handoff.document import DocumentError, draft
from handoff.document.kept import changed_by_hand
from handoff.files import CannotWrite, write_all
from handoff.items_json import as_json


def draft_below(assessment: Assessment, root: Path, folder: Path, replace: bool) -> tuple[str, ...]:
    """Write handover, care plan and items.json of one patient; return what could not be written, a line each.

    Args:
        assessment: The patient's.
        root: The folder of the patients' files; what lies below it has the same place below ``folder``.
        folder: Where the documents go.
        replace: Write over documents that were changed by hand, and keep a copy of each.
    """
    file = Path(assessment.state.file)
    place = folder / file.parent.relative_to(root)
    try:
        made = draft(assessment, file.stem)
        made[f"{file.stem}.items.json"] = as_json(assessment).encode()
        changed = changed_by_hand(place, made)
        if changed and not replace:
            return (f"documents not written: {changed[0].path} was changed by hand; add --replace",)
        write_all(place, made | {one.copy_name: one.content for one in changed})
    except (DocumentError, CannotWrite, OSError) as error:
        return (f"documents not written: {error}",)
    return ()
