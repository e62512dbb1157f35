"""The fluid figure: bars as long as their volumes, nothing drawn for what is not recorded, times on the axis."""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime, timedelta
from itertools import pairwise

import pytest

from handoff.document.figures.figure import Figure
from handoff.document.figures.fluid_chart import fluid_chart
from handoff.document.figures.shapes import SMALLEST_PT
from handoff.plugin import Clock
from tests.document.figures.seen import Shape, said, shapes, size, sizes_pt

CLOCK = Clock("Europe/Dublin")
BURN = CLOCK.read("2026-03-14 13:20")
Row = tuple[object, ...]


def hour(
    index: int,
    due: object = 450.0,
    given: object = 400.0,
    unsure: object = 0.0,
    urine: object = 40.0,
    words: str = "",
) -> Row:
    return (index + 1, BURN + timedelta(hours=index), due, given, unsure, urine, words)


def figure(
    *rows: Row, now: str = "2026-03-14 23:20", target: tuple[float | None, float | None] | None = None
) -> Figure:
    (made,) = fluid_chart(rows, CLOCK, CLOCK.read(now), target)
    return made


def seen(*rows: Row, **more: object) -> dict[str, Shape]:
    return shapes(figure(*rows, **more).drawing.xml)  # type: ignore[arg-type]


def many(count: int, row: Callable[[int], Row] = hour) -> list[Row]:
    return [row(index) for index in range(count)]


def test_bars_are_as_long_as_their_volumes() -> None:
    found = seen(hour(0, given=100.0), hour(1, given=300.0, urine=20.0), hour(2, given=0.0))
    one, three = found["given, hour 1"], found["given, hour 2"]
    assert three.high == pytest.approx(3 * one.high, abs=0.01)
    assert found["urine, hour 1"].high == pytest.approx(2 * found["urine, hour 2"].high, abs=0.01)
    assert one.bottom == pytest.approx(three.bottom, abs=0.01)


def test_what_was_not_confirmed_is_hatched_and_stands_upon_what_was_given() -> None:
    found = seen(hour(0, given=200.0, unsure=100.0))
    sure, unsure = found["given, hour 1"], found["not confirmed, hour 1"]
    assert unsure.pattern
    assert not sure.pattern
    assert unsure.bottom == pytest.approx(sure.top, abs=0.01)
    assert sure.high == pytest.approx(2 * unsure.high, abs=0.01)


def test_due_is_one_line_of_steps_and_is_broken_where_no_volume_was_worked_out() -> None:
    whole = seen(*many(4))
    broken = seen(hour(0), hour(1, due=None), hour(2), hour(3))
    assert "due, hours 1 to 4" in whole
    assert [name for name in broken if name.startswith("due, ")] == ["due, hours 1 to 1", "due, hours 3 to 4"]
    assert "no due volume was worked out" in figure(hour(0, due=None)).notes[0]


def test_nothing_is_drawn_for_urine_that_is_not_recorded_and_it_says_so() -> None:
    found = seen(hour(0, urine=None), hour(1, urine=None, words="not measured"), hour(2, urine=0.0))
    assert not any(name.startswith("urine, hour") for name in found)
    assert found["no urine, hour 1"].text == "not recorded"
    assert found["no urine, hour 2"].text == "not measured"
    assert found["figure of urine, hour 3"].text == "0"


def test_narrow_hours_have_a_sign_that_the_legend_explains() -> None:
    found = seen(*many(40, lambda index: hour(index, urine=None)))
    assert found["no urine, hour 1"].text == found["legend symbol: not recorded"].text == "nr"


def test_urine_over_another_time_than_the_hour_is_not_a_full_bar() -> None:
    found = seen(hour(0), hour(1, urine=120.0, words="120 mL over 3 h"))
    assert found["urine, hour 1"].fill != "FFFFFF"
    assert (found["urine, hour 2"].fill, found["urine, hour 2"].dash) == ("FFFFFF", "sysDash")
    assert found["figure of urine, hour 2"].text == "120*"


def test_nothing_given_is_printed_as_nothing() -> None:
    assert seen(hour(0, given=0.0))["figure of given, hour 1"].text == "0"


@pytest.mark.parametrize(
    ("target", "words"),
    [
        ((41.0, 82.0), "urine target: 41 to 82 mL/h"),
        ((41.0, None), "urine target: 41 mL/h or more"),
        ((None, 82.0), "urine target: 82 mL/h or less"),
    ],
)
def test_the_target_of_urine_is_a_band_with_its_figures(
    target: tuple[float | None, float | None], words: str
) -> None:
    found = seen(*many(3), target=target)
    assert found["target of urine"].high > 1
    assert f"legend: {words}" in found


def test_no_band_is_drawn_without_a_target() -> None:
    assert "target of urine" not in seen(*many(3))


def test_an_hour_that_is_not_over_says_how_long_it_had_run() -> None:
    made = figure(*many(7), now="2026-03-14 19:30")
    found = shapes(made.drawing.xml)
    assert found["last hour: how long it had run"].text == "10 min so far"
    assert "due, hours 7 to 7" in found  # less was due in it, which is no change of the plan
    assert found["time 8"].text == "19:30"
    assert "The last hour had run for 10 min" in made.notes[0]


def test_times_are_of_the_24_hour_clock_with_the_date_where_it_changes() -> None:
    found = seen(*many(14), now="2026-03-15 03:20")
    times = [shape.text for name, shape in found.items() if name.startswith("time ")]
    assert times[0] == "13:20 14 Mar"
    assert "00:20 15 Mar" in times
    assert times[-1] == "03:20"


def test_axes_carry_their_units() -> None:
    titles = [shape.text for name, shape in seen(*many(2)).items() if name.startswith("title: ")]
    assert titles == ["Resuscitation fluid, mL in each hour", "Urine, mL in each hour"]


@pytest.mark.parametrize("count", [1, 2, 7, 24, 25, 48, 49, 720])
def test_any_number_of_hours_stays_on_the_sheet(count: int) -> None:
    made = figure(*many(count), now="2026-05-14 03:20")
    found, (wide, high) = shapes(made.drawing.xml), size(made.drawing.xml)
    for name, shape in found.items():
        assert shape.left >= -0.01 or name.startswith("time "), name
        assert shape.right <= wide + 0.01 and shape.bottom <= high + 0.01, name
    times = [shape for name, shape in found.items() if name.startswith("time ")]
    middles = [shape.left + shape.wide / 2 for shape in times]
    assert all(b - a >= 20 for a, b in pairwise(middles))
    assert min(sizes_pt(made.drawing.xml)) >= SMALLEST_PT
    assert ("hours are not drawn" in made.notes[0]) == (count > 49)


def test_nothing_is_drawn_without_hours() -> None:
    assert fluid_chart((), CLOCK, BURN) == ()
    assert fluid_chart([("1", "no time", 1, 1, 1, 1, "")], CLOCK, BURN) == ()


@pytest.mark.parametrize("value", [None, float("nan"), float("inf"), "450", True, -5.0])
def test_a_volume_that_is_no_volume_draws_no_bar(value: object) -> None:
    found = seen(hour(0, due=value, given=value, unsure=value, urine=value))
    assert not any(name.startswith(("given, hour", "not confirmed, hour", "urine, hour")) for name in found)


def test_the_alternative_text_holds_every_hour() -> None:
    text = said(figure(hour(0, unsure=50.0), hour(1, due=None, urine=None)).drawing.xml)
    assert "Hour 1 from 13:20 on 14 Mar" not in text
    assert "Hour 1 from 13:20: due 450 mL, given 400 mL, not confirmed 50 mL, urine 40 mL." in text
    assert "Hour 2 from 14:20: due not recorded, given 400 mL" in text
    assert text.endswith("urine not recorded.")


def test_the_same_hours_give_the_same_drawing() -> None:
    assert figure(*many(9)) == figure(*many(9))
    assert figure(*many(9)).drawing.xml == figure(*many(9)).drawing.xml


def test_a_moment_before_the_last_hour_ends_the_axis_with_that_hour() -> None:
    assert isinstance(CLOCK.read("2026-03-14 13:30"), datetime)
    assert seen(*many(2), now="2026-03-14 13:30")["time 3"].text == "15:20"
