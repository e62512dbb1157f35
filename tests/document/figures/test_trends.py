"""Trends: two values or more, gaps that stay gaps, scales that are never joined, the last value in print."""

from __future__ import annotations

from datetime import datetime

import pytest

from handoff.document.figures.shapes import SMALLEST_PT
from handoff.document.figures.trend_charts import line, trend_charts
from handoff.document.figures.trends import Trend, trends
from handoff.plugin import PatientState
from tests.document.fake import at, state
from tests.document.figures.seen import Shape, said, shapes, size, sizes_pt

HEAD = (
    "handoff: 1\nclock: Europe/Dublin\npatient: {name: Ada Brisk}\ninjury: {}\nobservations:\n  2026-03-14:\n"
)


def charted(*rows: str) -> PatientState:
    return state(HEAD + "".join(f"    {row}\n" for row in rows))


def found(*rows: str, now: str = "19:30") -> dict[str, Trend]:
    patient = charted(*rows)
    return {trend.name: trend for trend in trends(patient, at(patient, now))[0]}


def moment(patient: PatientState) -> datetime:
    return at(patient, "19:30")


def drawn(*rows: str) -> tuple[str, tuple[str, ...]]:
    patient = charted(*rows)
    (figure,) = trend_charts(trends(patient, moment(patient))[0], patient.clock, moment(patient))
    return figure.drawing.xml, figure.notes


def seen(*rows: str) -> dict[str, Shape]:
    return shapes(drawn(*rows)[0])


PULSE = ("14:00: {pulse: 120 /min}", "15:00: {pulse: 118 /min}", "16:00: {pulse: 112 /min}")
FULL = (
    "14:00: {pulse: 120 /min, bp: 104/62 mmHg, resp: 26 /min, spo2: 99 %, temp: 35.8 C, urine: 22 mL}",
    "15:00: {pulse: 118 /min, bp: 102/60 mmHg, resp: 24 /min, spo2: 98 %, temp: 96.8 F, urine: 41 mL}",
)


def test_each_variable_with_two_values_is_drawn_with_its_unit_and_last_value() -> None:
    panels = seen(*FULL)
    titles = [shape.text for name, shape in panels.items() if name.startswith("title: ")]
    assert titles == [
        "Pulse, /min",
        "Blood pressure, mmHg",
        "Breaths, /min",
        "SpO2, %",
        "Temperature, C",
        "Urine, mL",
    ]
    assert panels["last value: Blood pressure"].text == "102/60"
    assert panels["last value: Temperature"].text == "36"


def test_a_single_value_is_not_drawn_and_is_named() -> None:
    patient = charted("14:00: {pulse: 120 /min, resp: 20 /min}", "15:00: {pulse: 118 /min}")
    several, few = trends(patient, moment(patient))
    assert [trend.name for trend in several] == ["Pulse"]
    assert few == ("Blood pressure", "Breaths", "SpO2", "Temperature", "Pain", "Urine")


def test_a_value_that_was_not_measured_breaks_the_line() -> None:
    rows = (*PULSE, "17:00: {pulse: not measured}", "18:00: {pulse: 110 /min}", "19:00: {pulse: 109 /min}")
    assert [len(run) for run in found(*rows)["Pulse"].runs()] == [3, 2]
    assert [name for name in seen(*rows) if "part" in name] == [
        "Pulse, line 1, part 1",
        "Pulse, line 1, part 2",
    ]


def test_a_long_silence_breaks_the_line() -> None:
    rows = (
        "10:00: {pulse: 120 /min}",
        "10:30: {pulse: 118 /min}",
        "11:00: {pulse: 117 /min}",
        "19:00: {pulse: 99 /min}",
    )
    assert [len(run) for run in found(*rows)["Pulse"].runs()] == [3, 1]
    assert [name for name in seen(*rows) if "part" in name] == ["Pulse, line 1, part 1"]


def test_systolic_and_diastolic_are_two_lines() -> None:
    panels = seen(*FULL)
    upper, lower = (panels[f"Blood pressure, line {n}, part 1"] for n in (1, 2))
    assert upper.bottom < lower.top
    assert (upper.dash, lower.dash) == ("", "sysDash")


def test_scores_of_different_scales_or_circumstances_are_never_joined() -> None:
    several = found(
        "14:00: {pain: {scale: numeric, score: 9, during: rest}}",
        "15:00: {pain: [{scale: numeric, score: 6, during: rest}, {scale: numeric, score: 8, during: movement}]}",
        "16:00: {pain: {scale: cpot, parts: [1, 1, 0, 1]}}",
        "17:00: {pain: asleep}",
        "18:00: {pain: {scale: cpot, score: 2}}",
    )
    assert list(several) == ["Pain, numeric, rest", "Pain, cpot"]
    assert [value.numbers for value in several["Pain, cpot"].known] == [(3,), (2,)]


def test_pads_by_weight_stand_apart_from_volumes() -> None:
    several = found(
        "14:00: {urine: {pad: 40 g, dry: 26 g}}",
        "15:00: {urine: {pad: 12 g}}",
        "16:00: {urine: 22 mL}",
        "17:00: {urine: {volume: 41 mL, over: 1 h}}",
    )
    assert [value.numbers for value in several["Urine by pad"].known] == [(14.0,), (12.0,)]
    assert [value.numbers for value in several["Urine"].known] == [(22.0,), (41.0,)]


def test_what_is_older_than_a_day_is_left_out() -> None:
    patient = state(
        HEAD
        + "    14:00: {pulse: 120 /min}\n  2026-03-15:\n    20:00: {pulse: 90 /min}\n    21:00: {pulse: 91 /min}\n"
    )
    (pulse,) = trends(patient, at(patient, "21:30", "2026-03-15"))[0]
    assert [value.numbers for value in pulse.values] == [(90.0,), (91.0,)]


def test_a_trend_in_words_says_last_count_start_and_range() -> None:
    patient = charted(*FULL)
    several = trends(patient, moment(patient))[0]
    words = [line(trend, patient.clock, moment(patient)) for trend in several]
    assert words[0] == "Pulse: last 118 /min at 15:00; 2 values since 14:00, 118 to 120 /min."
    assert words[1] == (
        "Blood pressure: last 102/60 mmHg at 15:00; 2 values since 14:00, 102 to 104 over 60 to 62 mmHg."
    )


def test_the_alternative_text_says_every_trend() -> None:
    assert "SpO2: last 98 % at 15:00" in said(drawn(*FULL)[0])


def test_a_percentage_has_no_axis_above_the_whole() -> None:
    texts = [shape.text for name, shape in seen(*FULL).items() if name == "axis of SpO2: 100"]
    assert texts == ["100"]


def test_values_of_one_minute_are_all_drawn() -> None:
    panels = seen("19:30: [{pulse: 120 /min}, {pulse: 124 /min}]")
    assert panels["frame: Pulse"].left <= panels["Pulse, line 1, values"].left
    runs = found("14:00: [{pulse: 120 /min}, {pulse: 124 /min}]", "15:00: {pulse: 118 /min}")["Pulse"].runs()
    assert [len(run) for run in runs] == [3]


def test_equal_values_are_drawn_flat() -> None:
    curve = seen("14:00: {pulse: 80 /min}", "15:00: {pulse: 80 /min}")["Pulse, line 1, part 1"]
    assert curve.high < 0.01


@pytest.mark.parametrize("count", [2, 60, 61, 1000])
def test_many_values_stay_few_shapes_within_their_frame(count: int) -> None:
    minutes = [(12 * 60 + index * 420 // count) for index in range(count)]
    rows = [f"{m // 60:02}:{m % 60:02}: {{pulse: {60 + m % 90} /min}}" for m in dict.fromkeys(minutes)]
    panels = seen(*rows)
    frame = panels["frame: Pulse"]
    assert len(panels) < 15
    for name, shape in panels.items():
        if "line 1" in name:
            assert frame.left <= shape.left and shape.right <= frame.right, name
            assert frame.top <= shape.top and shape.bottom <= frame.bottom, name


def test_many_scales_with_long_names_stay_on_the_sheet() -> None:
    pain = ", ".join(
        f"{{scale: {{name: {'x' * 180}{index}, lowest: 0, highest: 40}}, score: 30}}" for index in range(20)
    )
    xml, notes = drawn(f"14:00: {{pain: [{pain}]}}", f"15:00: {{pain: [{pain}]}}")
    wide, high = size(xml)
    assert all(shape.right <= wide + 0.01 and shape.bottom <= high + 0.01 for shape in shapes(xml).values())
    assert "Not drawn for want of room" in notes[1]
    assert min(sizes_pt(xml)) >= SMALLEST_PT


def test_nothing_is_drawn_without_trends() -> None:
    patient = charted("14:00: {pulse: 120 /min}")
    assert trend_charts((), patient.clock, moment(patient)) == ()
