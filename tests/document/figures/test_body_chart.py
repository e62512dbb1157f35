"""The body chart: shading, shares, rings, sides, legend, and what happens when there is too much of it."""

from __future__ import annotations

import itertools

import pytest

from handoff.document.figures.body import FACES
from handoff.document.figures.body_chart import body_chart
from handoff.document.figures.burned import DRAWN, WHOLES
from handoff.document.figures.depths import DEPTHS, NOT_COUNTED, UNKNOWN
from handoff.document.figures.proportions import ADULT, CHILD, INFANT, Build
from handoff.document.figures.shapes import SMALLEST_PT
from tests.document.figures.seen import Shape, said, shapes, size, sizes_pt

Row = tuple[object, ...]


def burn(
    region: str, face: str, depth: str, share: float | None, around: bool = False, counted: bool | None = True
) -> Row:
    return (region, face, depth, share, counted, around, 1)


HOUSE_FIRE = (
    burn("head", "front", "deep partial", 3.5),
    burn("neck", "front", "superficial partial", 1.0),
    burn("trunk", "front", "deep partial", 9.1),
    burn("right upper arm", "", "full thickness", 4.0, around=True),
    burn("right hand", "", "deep partial", 1.5),
    burn("trunk", "back", "epidermal", 3.9, counted=False),
)
EVERYTHING = [
    burn(region, face, depth, 1.25 + index, around=index % 3 == 0)
    for index, (region, face, depth) in enumerate(
        itertools.product(dict.fromkeys([*itertools.chain(*DRAWN.values()), *WHOLES]), ("", *FACES), DEPTHS)
    )
]


def drawn(rows: object, build: Build = ADULT) -> str:
    (figure,) = body_chart(rows, build)  # type: ignore[arg-type]
    return figure.drawing.xml


def seen(*rows: Row, build: Build = ADULT) -> dict[str, Shape]:
    return shapes(drawn(rows, build))


@pytest.mark.parametrize("build", [INFANT, CHILD, ADULT], ids=lambda build: build.name)
def test_every_region_has_a_closed_shape_on_each_face_where_it_exists(build: Build) -> None:
    found = seen(*HOUSE_FIRE, build=build)
    for face in FACES:
        for region in DRAWN[face]:
            assert found[f"{region}, {face}"].is_closed


def test_a_burned_region_has_the_pattern_of_its_depth_and_the_others_are_white() -> None:
    found = seen(*HOUSE_FIRE)
    assert found["head, front"].pattern == DEPTHS["deep partial"].look.pattern
    assert found["head, back"].pattern == ""
    assert found["head, back"].fill == "FFFFFF"
    assert found["right upper arm, back"].pattern == DEPTHS["full thickness"].look.pattern


def test_no_two_depths_share_pattern_and_ground() -> None:
    looks = [depth.look for depth in (*DEPTHS.values(), UNKNOWN)]
    patterns = [look.pattern for look in looks]
    assert len(set(patterns)) == len(patterns)
    assert patterns.count("") == 1  # the deepest is black
    grounds = [int(depth.look.fill[:2], 16) for depth in DEPTHS.values()]
    assert grounds == sorted(grounds, reverse=True)  # the deeper, the darker


def test_what_does_not_count_has_a_dotted_outline_and_no_shading() -> None:
    found = seen(*HOUSE_FIRE)
    for region in ("upper back", "lower back"):
        shape = found[f"{region}, back"]
        assert (shape.pattern, shape.fill, shape.dash) == ("", "FFFFFF", "sysDot")
    assert found["not counted: trunk, back"].text == "not counted"
    assert f"legend: {NOT_COUNTED.words}" in found


def test_a_depth_that_counts_elsewhere_is_not_shaded_where_it_does_not_count() -> None:
    assert seen(burn("head", "front", "deep partial", 1.0, counted=False))["head, front"].dash == "sysDot"


def test_a_larger_region_is_shaded_in_all_its_parts() -> None:
    found = seen(
        burn("left leg", "back", "deep partial", 9.0), burn("head and neck", "", "full thickness", 9.0)
    )
    for part in ("left thigh, back", "left lower leg, back", "left foot, back", "head, back", "neck, front"):
        assert found[part].pattern
    assert not found["left thigh, front"].pattern
    assert not found["left buttock, back"].pattern


@pytest.mark.parametrize(
    ("share", "printed"), [(9.1, "9.1 %"), (0.5, "0.5 %"), (2.85, "2.85 %"), (10.0, "10 %"), (None, "? %")]
)
def test_the_share_beside_the_figure_is_that_of_the_data(share: float | None, printed: str) -> None:
    found = seen(burn("left thigh", "front", "deep partial", share))
    assert found["share 1 of left thigh, front"].text == printed
    assert ("not recorded: left thigh, front" in found) == (share is None)


def test_shares_of_one_region_and_depth_are_added_and_those_of_several_depths_stand_apart() -> None:
    rows = [
        burn("trunk", "front", "superficial partial", 6.5),
        burn("trunk", "front", "deep partial", 1.3),
        burn("trunk", "front", "superficial partial", 1.0),
        burn("trunk", "front", "epidermal", 0.4, counted=False),
    ]
    found = seen(*rows)
    assert [found[f"share {n} of trunk, front"].text for n in (1, 2, 3)] == ["1.3 %", "7.5 %", "0.4 %"]
    assert found["chest, front"].pattern == DEPTHS["deep partial"].look.pattern
    assert "end of line of trunk, front, across" in found
    assert any("several depths" in name for name in found)


def test_a_burn_of_both_faces_has_its_share_once() -> None:
    found = seen(burn("right hand", "", "deep partial", 1.5))
    texts = [shape.text for shape in found.values()]
    assert texts.count("1.5 %") == 1
    assert found["front and back: right hand, both, front"].text == "front and back"
    assert found["see front: right hand, both, back"].text == "see front"


def test_a_circumferential_burn_has_a_ring_on_both_faces_and_the_word() -> None:
    found = seen(*HOUSE_FIRE)
    assert [name for name in found if name.startswith("ring round")] == [
        "ring round right upper arm, front",
        "ring round right upper arm, back",
        "ring round legend symbol: ring: circumferential, all the way round",
    ]
    assert found["circumferential: right upper arm, both, front"].text == "circumferential"


def test_sides_are_the_patients_own_and_are_printed() -> None:
    found = seen(*HOUSE_FIRE)
    assert found["front: patient's right"].right < found["head, front"].left
    assert found["back: patient's right"].left > found["head, back"].right
    assert found["right hand, front"].right < found["head, front"].left
    assert found["right hand, back"].left > found["head, back"].right


def test_the_legend_names_the_depths_that_occur_and_no_others() -> None:
    legend = [name for name in seen(*HOUSE_FIRE) if name.startswith("legend symbol: ")]
    assert [name.removeprefix("legend symbol: ") for name in legend] == [
        "superficial partial",
        "deep partial",
        "full thickness",
        NOT_COUNTED.words,
    ]


def test_a_depth_in_unknown_words_is_told_apart() -> None:
    assert seen(burn("head", "front", "charred", 1.0))["head, front"].pattern == UNKNOWN.look.pattern


def test_nothing_is_drawn_where_nothing_is_recorded() -> None:
    assert body_chart((), ADULT) == ()
    assert body_chart([burn("tail", "front", "deep partial", 1.0)], ADULT) == ()


def test_a_region_that_the_figure_has_not_is_named() -> None:
    rows = [burn("head", "front", "deep partial", 1.0), burn("left buttock", "front", "deep partial", 1.0)]
    (figure,) = body_chart(rows, ADULT)
    assert figure.notes[-1] == "Not drawn, no such region on the figure: left buttock, front."


@pytest.mark.parametrize("build", [INFANT, CHILD, ADULT], ids=lambda build: build.name)
def test_any_number_of_burns_leaves_the_labels_legible(build: Build) -> None:
    (figure,) = body_chart(EVERYTHING, build)
    xml = figure.drawing.xml
    found, (wide, high) = shapes(xml), size(xml)
    labels = [
        shape
        for name, shape in found.items()
        if name.startswith(("label of", "share", "not counted:", "front and back:", "see front:"))
    ]
    assert len(labels) > 40
    for one, other in itertools.combinations(labels, 2):
        assert not one.overlaps(other), (one.name, other.name)
    for shape in labels:
        assert shape.left >= 0 and shape.right <= wide and shape.bottom < high, shape.name
        outlines = [found[f"{hand} hand, {face}"] for hand in ("left", "right") for face in FACES]
        assert not any(shape.overlaps(outline) for outline in outlines), shape.name
    assert "No room beside the figure for" in figure.notes[1]
    assert len(said(xml)) <= 1500
    assert said(xml).endswith("The rest stands in the table.")


def test_no_text_is_smaller_than_can_be_read() -> None:
    assert min(sizes_pt(drawn(EVERYTHING))) >= SMALLEST_PT


def test_the_alternative_text_holds_every_burn() -> None:
    text = said(drawn(HOUSE_FIRE))
    assert text.startswith("Body chart drawn with adult proportions")
    assert "Head, front: deep partial, 3.5 % of the body." in text
    assert "Right upper arm: full thickness, 4 % of the body, circumferential." in text
    assert "Trunk, back: not counted" in text


def test_the_same_burns_give_the_same_drawing() -> None:
    assert drawn(EVERYTHING) == drawn(EVERYTHING)


@pytest.mark.parametrize("share", [float("nan"), float("inf"), "4", None])
def test_a_share_that_is_no_number_is_not_guessed(share: object) -> None:
    found = seen(("head", "front", "deep partial", share, True, None, 1))
    assert found["share 1 of head, front"].text == "? %"
