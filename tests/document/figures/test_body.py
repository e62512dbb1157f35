"""The drawn body: every region that can be charted has its closed path, on the faces where it exists."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from handoff.document.figures.body import FACES, body
from handoff.document.figures.burned import parts_of
from handoff.document.figures.proportions import ADULT, CHILD, INFANT, Build, build_for

BUILDS = (INFANT, CHILD, ADULT)
SCHEMA = Path(__file__).parents[3] / "plugins" / "area" / "schema.json"
PAIRED = ("arm", "upper arm", "forearm", "hand", "leg", "thigh", "lower leg", "foot", "buttock")
CHARTED = [name for name in json.loads(SCHEMA.read_text())["$defs"]["region"]["enum"] if name not in PAIRED]
ONE_FACE = {
    "chest": ("front",),
    "abdomen": ("front",),
    "genitalia": ("front",),
    "upper back": ("back",),
    "lower back": ("back",),
    "left buttock": ("back",),
    "right buttock": ("back",),
}


@pytest.mark.parametrize("region", CHARTED)
def test_every_region_that_can_be_charted_is_drawn_on_the_faces_where_it_exists(region: str) -> None:
    assert tuple(face for face in FACES if parts_of(region, face)) == ONE_FACE.get(region, FACES)


@pytest.mark.parametrize("build", BUILDS, ids=lambda build: build.name)
@pytest.mark.parametrize("face", FACES)
def test_every_outline_is_closed_and_lies_within_the_height_of_the_figure(build: Build, face: str) -> None:
    for name, region in body(build, face).items():
        end = region.path.steps[-1].end
        gap = abs(end.x - region.path.start.x) + abs(end.y - region.path.start.y)
        _, top, _, bottom = region.path.box()
        assert gap < build.hip * 2, name  # what is left open is closed by a straight line
        assert -15 < top < bottom < 1015, name


@pytest.mark.parametrize("build", BUILDS, ids=lambda build: build.name)
@pytest.mark.parametrize("face", FACES)
def test_a_label_points_into_its_region(build: Build, face: str) -> None:
    for name, region in body(build, face).items():
        left, top, right, bottom = region.path.box()
        assert left < region.anchor.x < right, name
        assert top < region.anchor.y < bottom, name


def test_left_and_right_mirror_each_other_and_change_places_on_the_back() -> None:
    for build in BUILDS:
        front, back = (body(build, face) for face in FACES)
        for part in ("upper arm", "forearm", "hand", "thigh", "lower leg", "foot"):
            assert front[f"left {part}"].anchor.x > 0 > front[f"right {part}"].anchor.x
            assert back[f"left {part}"].anchor.x < 0 < back[f"right {part}"].anchor.x
            assert front[f"left {part}"].anchor.x == -front[f"right {part}"].anchor.x


def test_a_ring_goes_round_its_part() -> None:
    for build in BUILDS:
        for name, region in body(build, "front").items():
            ring, path = region.ring.box(), region.path.box()
            assert path[1] - 20 < ring[1] and ring[3] < path[3] + 20, name


def test_the_younger_the_larger_the_head_and_the_shorter_the_legs() -> None:
    heads = [build.chin for build in BUILDS]
    legs = [1000 - build.crotch for build in BUILDS]
    assert heads == sorted(heads, reverse=True)
    assert legs == sorted(legs)


@pytest.mark.parametrize(
    ("years", "name"),
    [(0, "infant"), (1, "child"), (11, "child"), (12, "adult"), (90, "adult"), (None, "adult")],
)
def test_the_build_goes_by_completed_years(years: int | None, name: str) -> None:
    assert build_for(years).name == name
