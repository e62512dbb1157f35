"""Floor F1: a bare process that imports docxtpl and fills the two finished documents' templates. By path, alone."""

import json
import sys
from pathlib import Path

from docxtpl import DocxTemplate


def render(folder: Path) -> None:
    """Fill both templates in ``folder`` from the contexts that lie beside them."""
    for name in ("handover", "care-plan"):
        template = DocxTemplate(folder / f"{name}.docx")
        context = json.loads((folder / f"{name}.json").read_text(encoding="utf-8"))
        template.render(context, autoescape=True)
        template.save(folder / f"{name}-filled.docx")


if __name__ == "__main__":
    render(Path(sys.argv[1]))
