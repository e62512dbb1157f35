"""What stands twice or contradicts itself is asked about or refused, each time with its cure."""

from __future__ import annotations

from typing import Any

import pytest

from tests.small_patient import faults_of, state_text

EARLY, LATE = "2026-03-14 09:00", "2026-03-14 10:00"


def said(**blocks: Any) -> list[str]:
    return faults_of(("overview", "area", "airway_watch"), state_text(**blocks))


def row(**values: Any) -> list[str]:
    return said(rows={"10:00": values})


@pytest.mark.parametrize(
    ("blocks", "message"),
    [
        (
            {"lines": [{"what": "cannula 16 G", "placed": LATE, "removed": EARLY}]},
            "lines[1].removed: removed Sat 14 Mar 2026 09:00 is before placed Sat 14 Mar 2026 10:00; check both times",
        ),
        (
            {"events": [{"what": "escharotomy requested", "at": LATE, "answered": EARLY}]},
            "events[1].answered: answered Sat 14 Mar 2026 09:00 is before at Sat 14 Mar 2026 10:00; check both times",
        ),
        (
            {"injury": {"at": {"earliest": LATE, "latest": EARLY}}},
            "injury.at.latest: latest Sat 14 Mar 2026 09:00 is before earliest Sat 14 Mar 2026 10:00; check both times",
        ),
    ],
)
def test_times_that_can_only_follow_each_other_are_refused_when_reversed(
    blocks: dict[str, Any], message: str
) -> None:
    assert said(**blocks) == [message]


@pytest.mark.parametrize(
    "blocks",
    [
        {"lines": [{"what": "cannula 16 G", "placed": EARLY, "removed": EARLY}]},
        {
            "lines": [
                {
                    "what": "cannula 16 G",
                    "placed": LATE,
                    "removed": EARLY,
                    "struck": {"by": "A. Marr", "at": LATE, "why": "wrong patient"},
                }
            ]
        },
    ],
)
def test_the_same_minute_and_a_struck_out_entry_are_not_refused(blocks: dict[str, Any]) -> None:
    assert said(**blocks) == []


def test_an_entry_that_stands_twice_is_asked_about_whoever_charted_it() -> None:
    vomit = {"at": EARLY, "what": "fall"}
    (found,) = said(events=[{**vomit, "by": "A. Marr"}, {**vomit, "by": "B. Toll"}])
    assert found.startswith("events[2]: the same entry stands on line ")
    assert found.endswith("strike one out, or add confirmed: yes if both happened")


@pytest.mark.parametrize("other", [{"at": LATE}, {"what": "bronchoscopy"}, {"confirmed": "yes"}])
def test_another_time_another_thing_or_a_confirmed_repeat_is_not_asked_about(other: dict[str, str]) -> None:
    first = {"at": EARLY, "what": "fall"}
    assert said(events=[first, {**first, **other}]) == []


def test_two_equal_rows_of_one_minute_are_asked_about() -> None:
    (found,) = faults_of(
        ("overview",), state_text(rows={"10:00": [{"pulse": "90 /min"}, {"pulse": "90 /min"}]})
    )
    assert found.startswith("observations.2026-03-14.10:00[2]: the same entry stands on line ")


@pytest.mark.parametrize(
    ("estimated", "shown"), [("8 years", "41 years"), ("39 years", "41 years"), ("3 months", "41 years")]
)
def test_an_estimated_age_that_the_birth_date_does_not_give_is_asked_about(
    estimated: str, shown: str
) -> None:
    (found,) = said(patient={"estimated_age": estimated})
    assert found.startswith(
        f"patient.estimated_age: estimated as {estimated}, and the birth date gives {shown};"
    )


def test_an_estimated_age_that_fits_or_stands_alone_is_not_asked_about() -> None:
    assert said(patient={"estimated_age": "41 years"}) == []
    assert said(patient={"born": None, "estimated_age": "8 years"}) == []


@pytest.mark.parametrize(
    ("word", "parts"),
    [
        ("alert", {"eye": "1"}),
        ("alert", {"motor": "4"}),
        ("responds to pain", {"eye": "4", "verbal": "5", "motor": "6"}),
        ("unresponsive", {"eye": "4", "verbal": "5", "motor": "6"}),
        ("unresponsive", {"motor": "5"}),
    ],
)
def test_a_coma_scale_that_contradicts_the_word_beside_it_is_asked_about_once(
    word: str, parts: dict[str, str]
) -> None:
    (found,) = row(consciousness=word, gcs=parts)
    assert f"consciousness '{word}' and gcs " in found
    assert "seldom stand together; check both" in found
    assert row(consciousness=word, gcs=parts, confirmed="yes") == []


@pytest.mark.parametrize(
    ("word", "parts"),
    [
        ("alert", {"eye": "4", "verbal": "5", "motor": "6"}),
        ("alert", {"eye": "not testable", "verbal": "tube", "motor": "6"}),
        ("unresponsive", {"eye": "1", "verbal": "1", "motor": "1"}),
        ("sedated", {"eye": "1", "verbal": "tube", "motor": "3"}),
    ],
)
def test_a_coma_scale_that_fits_its_word_is_not_asked_about(word: str, parts: dict[str, str]) -> None:
    assert row(consciousness=word, gcs=parts) == []


@pytest.mark.parametrize(
    ("written", "asked"), [("0.18 %", True), ("0 %", False), ("1 %", False), ("18 %", False)]
)
def test_a_carboxyhaemoglobin_written_as_a_share_is_asked_about(written: str, asked: bool) -> None:
    found = said(airway_watch={"carboxyhaemoglobin": [{"at": LATE, "value": written}]})
    assert found == said(results=[{"at": LATE, "carboxyhaemoglobin": written}]) or asked
    assert bool(found) is asked
    if asked:
        assert (
            found[0]
            .split(": ", 1)[1]
            .startswith("0.18 % is below 1 %; it would fit 18 % written as a share; check it")
        )


@pytest.mark.parametrize(("volts", "asked"), [("11 V", True), ("11 kV", False), ("230 V", False)])
def test_a_voltage_that_fits_kilovolts_is_asked_about(volts: str, asked: bool) -> None:
    cause = {"kind": "electrical", "voltage": volts}
    assert bool(said(injury={"causes": [cause]})) is asked
    assert said(injury={"causes": [{**cause, "confirmed": "yes"}]}) == []


@pytest.mark.parametrize(
    ("pressure", "saturation", "asked"),
    [
        ("12.7 mmHg", "98 %", True),
        ("12.7 kPa", "98 %", False),
        ("150 mmHg", "78 %", True),
        ("55 mmHg", "88 %", False),
        ("40 mmHg", "95 %", False),
        ("39 mmHg", "95 %", True),
        ("100 mmHg", "85 %", False),
        ("100 mmHg", "84 %", True),
    ],
)
def test_arterial_oxygen_that_hardly_goes_with_the_saturation_is_asked_about(
    pressure: str, saturation: str, asked: bool
) -> None:
    gas = {"at": LATE, "specimen": "arterial", "pao2": pressure}
    rows = {"10:15": {"spo2": saturation}}
    found = said(rows=rows, results=[gas])
    assert bool(found) is asked, found
    if asked:
        assert found[0].startswith(
            f"results[1].pao2: {pressure} seldom goes with the saturation of {saturation}"
        )
    assert said(rows=rows, results=[{**gas, "confirmed": "yes"}]) == []
    assert said(rows=rows, results=[{**gas, "specimen": "venous"}]) == []
    assert said(rows={"12:15": {"spo2": saturation}}, results=[gas]) == []
