"""Make the images of pages that the tests compare: ``python -m tests.document.make_pages``.

Run it where the fonts of ``.ci/run`` are installed, look at what changed, and keep the images with the
change that caused it.
"""

from __future__ import annotations

import subprocess
import sys
from collections.abc import Mapping
from pathlib import Path
from tempfile import TemporaryDirectory

from tests.conftest import needs_tool
from tests.document.pixels import Grey, from_pgm, to_png
from tests.document.printing import converted, example_documents, pages

KEPT = Path(__file__).parent / "pages"
DOTS = 40
"""Dots an inch: enough to see a table move, too few to tell letters."""

PLAN_PAGES = 2
"""Pages of a care plan that are kept; the others are more of the same."""

DETAIL = "Detail by system"
"""The handover is kept up to this heading: the two pages and the figures."""


def images(pdfs: Mapping[str, Path], folder: Path) -> dict[str, Grey]:
    """Return the images of the pages that are compared, by name; ``folder`` takes what is made on the way."""
    made = {}
    for stem, pdf in pdfs.items():
        last = _last(pdf, stem)
        command = [needs_tool("pdftoppm"), "-r", str(DOTS), "-gray", "-l", str(last), str(pdf)]
        subprocess.run([*command, str(folder / stem)], check=True, timeout=60)
        for path in sorted(folder.glob(f"{stem}-[0-9]*.pgm")):
            made[f"{stem}-{int(path.stem.rpartition('-')[2])}.png"] = from_pgm(path.read_bytes())
    return made


def _last(pdf: Path, stem: str) -> int:
    if stem.endswith("care-plan"):
        return min(PLAN_PAGES, len(pages(pdf)))
    before = [number for number, page in enumerate(pages(pdf)) if f"\n{DETAIL}\n" in f"\n{page}"]
    return before[0]


def main() -> None:
    """Make every image anew and drop those of pages that are no more."""
    KEPT.mkdir(exist_ok=True)
    with TemporaryDirectory() as folder:
        made = images(converted(example_documents(), "pdf", Path(folder)), Path(folder))
        for old in KEPT.glob("*.png"):
            if old.name not in made:
                old.unlink()
        for name, image in made.items():
            (KEPT / name).write_bytes(to_png(image))
    sys.stdout.write(f"{len(made)} pages in {KEPT}\n")


if __name__ == "__main__":
    main()
