"""What was struck out as entered in error counts nowhere, and stays readable."""

from __future__ import annotations

import json
import re

import pytest

from handoff.items_json import as_data
from handoff.work import assess_loaded, make_setup, open_text

AT = "2026-03-14 19:30"
STRUCK = "struck: {by: EM, at: 2026-03-14 18:30, why: wrong patient}"
PATIENT = """\
handoff: 1
clock: Europe/Dublin
patient: {name: Tomas Ferrandel, born: 1985-02-11, weights: [{value: 82 kg, kind: before burn, known: measured}]}
injury: {at: 2026-03-14 13:20, causes: [{kind: flame, setting: enclosed space}]}
observations:
  2026-03-14:
    15:00: {resp: 20 /min, spo2: 98 %, pulse: 90 /min, bp: 120/70 mmHg, temp: 36.8 C, urine: 45 mL}
"""
VALUES = {
    "pulse": "150 /min",
    "resp": "34 /min",
    "bp": "70/40 mmHg",
    "spo2": "82 %",
    "temp": "34.1 C",
    "urine": "400 mL",
}


def items(text: str) -> list[object]:
    setup = make_setup()
    data = as_data(assess_loaded(open_text(text, "f", setup, AT), setup))
    kept = [{key: value for key, value in item.items() if key != "line"} for item in data["items"]]
    return json.loads(re.sub(r'"line": \d+', '"line": 0', json.dumps(kept)))


@pytest.mark.parametrize("name", VALUES)
def test_a_value_struck_out_is_as_if_it_were_not_there(name: str) -> None:
    key = "volume" if name == "urine" else "value"
    row = f"    18:00: {{{name}: {{{key}: {VALUES[name]}, {STRUCK}}}}}\n"
    without = items(PATIENT + "    18:00: {note: seen}\n")
    assert items(PATIENT + row.replace("}}\n", "}, note: seen}\n")) == without
    assert items(PATIENT + f"    18:00: {{{name}: {VALUES[name]}, note: seen}}\n") != without


def test_a_result_struck_out_is_as_if_it_were_not_there() -> None:
    there = "results: [{at: 2026-03-14 16:00, lactate: {value: 9 mmol/L, " + STRUCK + "}}]\n"
    without = items(PATIENT + "results: [{at: 2026-03-14 16:00}]\n")
    assert items(PATIENT + there) == without


@pytest.mark.parametrize(
    ("written", "said"),
    [
        ("3 weeks", "about 21 days"),
        ("5 days", "about 5 days"),
        ("8 months", "about 8 months"),
        ("1 month", "about 1 month"),
        ("18 months", "about 18 months"),
        ("45 years", "about 45 years"),
    ],
)
def test_an_estimated_age_of_any_unit_is_kept_and_stops_no_plugin(written: str, said: str) -> None:
    text = PATIENT.replace("born: 1985-02-11", f"estimated_age: {written}")
    setup = make_setup()
    loaded = open_text(text, "f", setup, AT)
    assessment = assess_loaded(loaded, setup)
    assert not assessment.failures
    age = loaded.state.age_at(loaded.now)
    assert age is not None
    assert age.shown() == said
