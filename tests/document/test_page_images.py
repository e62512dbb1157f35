"""Pages of every example as they are printed, against the images that are kept of them."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.document.make_pages import KEPT, images
from tests.document.pixels import Grey, are_alike, difference, from_png, to_png
from tests.shift.helpers import EXAMPLES

ANEW = "look at it, then keep it: python -m tests.document.make_pages"


def kept_as(name: str) -> Grey:
    """Return the image that is kept of a page."""
    return from_png((KEPT / name).read_bytes())


def test_every_page_looks_as_it_did_when_its_image_was_kept(
    example_pdfs: dict[str, Path], tmp_path: Path
) -> None:
    made = images(example_pdfs, tmp_path)
    kept = {path.name for path in KEPT.glob("*.png")}
    assert set(made) == kept, f"other pages than are kept; {ANEW}"
    changed = [
        f"{name} ({difference(image, kept_as(name)):.0%} of it)"
        for name, image in made.items()
        if not are_alike(image, kept_as(name))
    ]
    assert changed == [], f"these pages look different; {ANEW}"


@pytest.mark.parametrize("stem", EXAMPLES)
def test_an_image_is_kept_of_the_two_pages_and_the_plan_of_each_example(stem: str) -> None:
    for name in (f"{stem}-handover-1.png", f"{stem}-care-plan-1.png"):
        assert (KEPT / name).is_file()


def test_a_page_is_told_from_another_and_from_itself_with_a_table_moved() -> None:
    one, other = kept_as("house-fire-handover-1.png"), kept_as("house-fire-handover-2.png")
    assert are_alike(one, one)
    assert not are_alike(one, other)
    assert not are_alike(one, Grey(one.width, one.height, (b"\xff" * one.width,) * one.height))
    half = one.height // 2
    moved = Grey(one.width, one.height, (*one.rows[:half], *one.rows[half - 8 : -8]))
    assert not are_alike(one, moved)


def test_a_few_pixels_are_tolerated() -> None:
    one = kept_as("house-fire-handover-1.png")
    speck = bytes([0] * 6)
    rows = tuple(speck + row[6:] if number < 6 else row for number, row in enumerate(one.rows))
    assert are_alike(one, Grey(one.width, one.height, rows))


def test_an_image_is_read_as_it_was_written() -> None:
    rows = (bytes((0, 36, 255)), bytes((109, 182, 0)))
    assert from_png(to_png(Grey(3, 2, rows))) == Grey(3, 2, rows)
