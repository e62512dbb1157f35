"""Every table of regions adds to 100, or to its published odd total, and keeps its shape.

Sources: Lund CC, Browder NC. Surg Gynecol Obstet 1944;79:352-358 (age rows); Prasad, Pocket
Pediatrics (fixed rows, bands); Hettiaratchy S, Papini R. BMJ 2004;329:101 (rule of nines);
Livingston EH, Lee S. J Surg Res 2000;91:106-110 (eights, fives); Williams et al., J Burn Care
Res 2013 (obesity shares). Front 48 and back 52 are arithmetic from those rows.
"""

from __future__ import annotations

from datetime import UTC, datetime

import pytest
from handoff.bundled.area import plugin
from handoff.bundled.area.age import AgeAtBurn
from handoff.bundled.area.regions import FACES, PAIRED, REGIONS, SINGLE
from handoff.bundled.area.tables import NoTableError, RegionTable, table_for

from handoff.assess import case_of
from handoff.plugin import Case
from handoff.work import open_text
from tests.area.build import setup_with, state_text

COLUMNS = {"0": 0, "1": 1, "5": 5, "10": 10, "15": 16, "adult": 40}


def case_with(**choices: str) -> Case:
    setup = setup_with(**choices)
    loaded = open_text(state_text(), "case.yaml", setup, "2026-03-14 19:30")
    return case_of(plugin, loaded.state, setup, datetime(2026, 3, 14, 19, 30, tzinfo=UTC), {})


def table(method: str, years: float, **choices: str) -> RegionTable:
    age = AgeAtBurn(int(years), years, f"{int(years)} years", ())
    return table_for(case_with(**choices), method, age)


def whole(regions: RegionTable) -> float:
    size = regions.size_pct("whole body")
    assert size is not None
    return size


@pytest.fixture(scope="module", params=COLUMNS.items(), ids=lambda item: f"column-{item[0]}")
def column(request: pytest.FixtureRequest) -> RegionTable:
    name, years = request.param
    made = table("lund-browder", years, adult_from="18-years")
    assert ("adult" if name == "adult" else f"age column {name} ") in made.name
    return made


def test_every_lund_browder_column_adds_to_exactly_100(column: RegionTable) -> None:
    assert whole(column) == 100


def test_every_column_is_48_in_front_and_52_behind(column: RegionTable) -> None:
    assert column.size_pct("whole body", "front") == 48
    assert column.size_pct("whole body", "back") == 52


def test_what_grows_with_age_is_40_in_every_column(column: RegionTable) -> None:
    growing = ["head", *(f"{side} {part}" for side in ("left", "right") for part in ("thigh", "lower leg"))]
    assert sum(column.cells[name][0] + column.cells[name][1] for name in growing) == 40


def test_a_whole_arm_is_9_and_a_half_at_every_age(column: RegionTable) -> None:
    assert column.size_pct("left arm") == column.size_pct("right arm") == 9.5


@pytest.mark.parametrize(
    ("name", "leg"), [("0", 14), ("1", 15), ("5", 17), ("10", 18), ("15", 19), ("adult", 20)]
)
def test_a_whole_leg_without_the_buttock_grows_with_age(name: str, leg: float) -> None:
    made = table("lund-browder", COLUMNS[name], adult_from="18-years")
    assert made.size_pct("left leg") == made.size_pct("right leg") == leg


@pytest.mark.parametrize(
    ("name", "head", "thigh", "lower_leg"),
    [
        ("0", 19, 5.5, 5),
        ("1", 17, 6.5, 5),
        ("5", 13, 8, 5.5),
        ("10", 11, 8.5, 6),
        ("15", 9, 9, 6.5),
        ("adult", 7, 9.5, 7),
    ],
)
def test_whole_regions_are_those_of_the_printed_table(
    name: str, head: float, thigh: float, lower_leg: float
) -> None:
    made = table("lund-browder", COLUMNS[name], adult_from="18-years")
    assert (made.size_pct("head"), made.size_pct("left thigh"), made.size_pct("right lower leg")) == (
        head,
        thigh,
        lower_leg,
    )


def test_fixed_regions_are_those_of_the_printed_table(column: RegionTable) -> None:
    sizes = {name: column.size_pct(name) for name in ("neck", "trunk", "genitalia", "left buttock")}
    assert sizes == {"neck": 2, "trunk": 26, "genitalia": 1, "left buttock": 2.5}
    limbs = {part: column.size_pct(f"right {part}") for part in ("upper arm", "forearm", "hand", "foot")}
    assert limbs == {"upper arm": 4, "forearm": 3, "hand": 2.5, "foot": 3.5}


def test_the_head_shrinks_and_the_thigh_grows_with_age() -> None:
    made = [table("lund-browder", years, adult_from="18-years") for years in COLUMNS.values()]
    heads = [one.size_pct("head") or 0 for one in made]
    thighs = [one.size_pct("left thigh") or 0 for one in made]
    assert heads == sorted(heads, reverse=True)
    assert thighs == sorted(thighs)


def test_left_equals_right(column: RegionTable) -> None:
    for part in PAIRED:
        for face in ("", *FACES):
            assert column.size_pct(f"left {part}", face) == column.size_pct(f"right {part}", face)


@pytest.mark.parametrize("years", [0, 0.5, 2, 3, 7.25, 12, 14.9, 15, 17, 40])
def test_a_straight_line_between_columns_keeps_100(years: float) -> None:
    made = table("lund-browder", years, lund_browder_age="linear-interpolation")
    assert whole(made) == pytest.approx(100)


def test_a_child_of_three_by_each_convention() -> None:
    heads = {
        bands: table("lund-browder", 3, lund_browder_age=bands).size_pct("head")
        for bands in ("completed-years", "one-band-later", "worksheet", "linear-interpolation")
    }
    assert heads == {"completed-years": 17, "one-band-later": 13, "worksheet": 17, "linear-interpolation": 15}


@pytest.mark.parametrize("variant", ["from-first-birthday", "from-birth", "under-twelve"])
@pytest.mark.parametrize("years", range(17))
def test_every_child_rule_of_nines_adds_to_100_at_every_age(variant: str, years: int) -> None:
    assert whole(table("rule of nines", years, child_nines=variant)) == 100


@pytest.mark.parametrize("years", range(5))
def test_the_handout_for_young_children_adds_to_100(years: int) -> None:
    assert whole(table("rule of nines", years, child_nines="young-child-handout")) == 100


def test_the_handout_for_young_children_says_nothing_about_a_child_of_eight() -> None:
    with pytest.raises(NoTableError, match="under 5 years"):
        table("rule of nines", 8, child_nines="young-child-handout")


@pytest.mark.parametrize("years", range(1, 10))
def test_first_birthday_variant_is_19_less_age_for_the_head(years: int) -> None:
    made = table("rule of nines", years)
    assert made.size_pct("head and neck") == 19 - years
    assert made.size_pct("left leg") == 13.5 + years / 2
    assert made.size_pct("genitalia") is None


def test_first_birthday_variant_steps_to_the_adult_at_10() -> None:
    made = table("rule of nines", 10)
    assert made.name == "rule of nines, adult"
    sizes = (made.size_pct("head and neck"), made.size_pct("left leg"), made.size_pct("genitalia"))
    assert sizes == (9, 18, 1)


def test_birth_variant_reaches_the_adult_at_9_without_a_step() -> None:
    child, adult = (table("rule of nines", years, child_nines="from-birth") for years in (8, 9))
    assert (child.size_pct("head and neck"), child.size_pct("left leg")) == (10, 17.5)
    assert adult.name == "rule of nines, adult"


def test_the_adult_rule_of_nines_front_and_back() -> None:
    made = table("rule of nines", 40)
    front = {
        name: made.size_pct(name, "front") for name in ("head and neck", "left arm", "trunk", "left leg")
    }
    assert front == {"head and neck": 4.5, "left arm": 4.5, "trunk": 18, "left leg": 9}
    assert [made.size_pct(name, "back") for name in front] == [4.5, 4.5, 18, 9]
    assert whole(made) == 100


@pytest.mark.parametrize(
    ("method", "total"), [("rule of eights", 100), ("rule of fives", 102), ("obesity shares", 96)]
)
def test_build_tables_keep_their_published_total_and_say_so(method: str, total: float) -> None:
    made = table(method, 40)
    assert whole(made) == total
    assert any(str(total) in caution for caution in made.cautions) == (total != 100)


def test_no_table_knows_a_region_that_the_file_does_not() -> None:
    for method in ("lund-browder", "rule of nines", "rule of fives", "rule of eights", "obesity shares"):
        assert set(table(method, 40).regions) <= set(REGIONS)


def test_schema_and_code_name_the_same_regions_and_depths() -> None:
    properties = setup_with().schema["properties"]["area"]["items"]["properties"]["burns"]["items"][
        "properties"
    ]
    assert set(properties["region"]["enum"]) == {*REGIONS, *PAIRED, *SINGLE}
    names = case_with().parameters.table("depth.names")
    assert set(properties["depth"]["enum"]) == {*names, "superficial"}
