"""Faults that a nurse can make, each with the words that help."""

from __future__ import annotations

from typing import Any

import pytest

from .build import assessed, faults, patient_state


def row(**entry: Any) -> dict[str, Any]:
    return patient_state(None, {"2026-03-14": {"14:15": entry}})


DOSE = {"at": "2026-03-14 14:00", "drug": "morphine", "dose": "4 mg", "route": "IV"}
LINE = {"line": "S1", "drug": "morphine", "from": "2026-03-14 15:00", "rate": "2 mg/h"}
READING = "pain.patient_controlled[1].delivered"


def pump(*readings: dict[str, str]) -> dict[str, Any]:
    one = {"from": "2026-03-14 16:00", "to": "2026-03-14 16:00", "total": "2 mg"}
    delivered = [one | reading for reading in readings]
    entry = {"line": "P1", "drug": "morphine", "from": "2026-03-14 14:00", "delivered": delivered}
    return patient_state({"patient_controlled": [entry]})


TEN = "write 0 to 10, or name the scale that was used"
AT = "observations.2026-03-14.14:15"


@pytest.mark.parametrize(
    ("state", "expected"),
    [
        (
            row(pain={"scale": "numeric", "score": "11"}),
            f"{AT}.pain.score: 11 is outside the numeric rating scale (0 to 10); {TEN}",
        ),
        (
            row(pain={"scale": "bps", "score": "0"}),
            f"{AT}.pain.score: 0 is outside the BPS (3 to 12); write 3 to 12, or name the scale that was used",
        ),
        (
            row(pain={"scale": "bps", "score": "2"}),
            f"{AT}.pain.score: 2 is outside the BPS (3 to 12); write 3 to 12, or name the scale that was used",
        ),
        (
            row(pain={"scale": "cpot", "score": "9"}),
            f"{AT}.pain.score: 9 is outside the CPOT (0 to 8); write 0 to 8, or name the scale that was used",
        ),
        (
            row(pain={"scale": "faces revised", "score": "5"}),
            f"{AT}.pain.score: 5 is not a score of the Faces Pain Scale - Revised; it goes in steps of 2",
        ),
        (
            row(pain={"scale": "numeric", "score": "4.5"}),
            f"{AT}.pain.score: 4.5 is not a score of the numeric rating scale; it goes in steps of 1",
        ),
        (
            row(pain=[{"scale": "numeric", "score": "3"}, {"scale": "numeric", "score": "bad"}]),
            f"{AT}.pain[2].score: 'bad' is not a score of the numeric rating scale; {TEN}",
        ),
        (
            row(pain={"scale": {"name": "own", "lowest": "0", "highest": "8"}, "score": "9"}),
            f"{AT}.pain.score: 9 is outside the own (0 to 8); write 0 to 8, or name the scale that was used",
        ),
        (
            row(pain={"scale": "verbal", "score": "awful"}),
            f"{AT}.pain.score: 'awful' is not a word of the verbal rating scale; "
            "write none, mild, moderate, severe, or name the scale that was used",
        ),
        (row(pain={"scale": "numeric"}), f"{AT}.pain: the pain score has no score; add score: 0 to 10"),
        (
            row(pain="6"),
            f"{AT}.pain: '6' has no scale; "
            "write {scale: numeric, score: 6, during: rest}, or: asleep or not assessed",
        ),
        (
            row(sedation="2"),
            f"{AT}.sedation: '2' has no scale; write {{scale: poss, score: 2}}, or: not assessed",
        ),
        (
            row(pain={"scale": "flacc", "score": "8", "parts": ["1", "1", "2", "1", "2"]}),
            f"{AT}.pain.parts: the items add to 7, the score is 8; check both",
        ),
        (
            row(pain={"scale": "flacc", "parts": ["1", "1", "2", "1"]}),
            f"{AT}.pain.parts: these are not the items of the FLACC; write 5 whole numbers from 0 to 2",
        ),
        (
            row(pain={"scale": "bps", "parts": ["0", "1", "1"]}),
            f"{AT}.pain.parts: these are not the items of the BPS; write 3 whole numbers from 1 to 4",
        ),
        (
            row(pain={"scale": "numeric", "score": "3", "parts": ["3"]}),
            f"{AT}.pain.parts: the numeric rating scale has no items to add; write its score alone",
        ),
        (
            row(sedation={"scale": "poss", "score": "5"}),
            f"{AT}.sedation.score: '5' is not a level of POSS; write one of S, 1, 2, 3, 4",
        ),
        (
            row(sedation={"scale": "rass", "score": "-6"}),
            f"{AT}.sedation.score: -6 is outside the RASS (-5 to 4); write -5 to 4, or name the scale that was used",
        ),
        (
            row(itch={"scale": "numeric", "score": "12"}),
            f"{AT}.itch.score: 12 is outside the numeric rating scale (0 to 10); {TEN}",
        ),
        (
            patient_state({"goal": {"scale": "cpot", "score": "9"}}),
            "pain.goal.score: 9 is outside the CPOT (0 to 8); write 0 to 8, or name the scale that was used",
        ),
        (
            patient_state({"doses": [{**DOSE, "drug": "morfine"}]}),
            "pain.doses[1].drug: 'morfine' is not a word for this; did you mean 'morphine'?",
        ),
        (
            patient_state({"doses": [{key: DOSE[key] for key in ("at", "drug", "route")}]}),
            "pain.doses[1]: the dose has no dose; add dose:, or: not known for the dose",
        ),
        (
            patient_state({"doses": [{**DOSE, "contains": [{"drug": "codeine", "dose": "30 mg"}]}]}),
            "pain.doses[1]: a dose has both contains and drug or dose; keep contains for a combination product",
        ),
        (
            patient_state(
                {"doses": [{**DOSE, "at": {"earliest": "2026-03-14 10:00", "latest": "2026-03-14 09:00"}}]}
            ),
            "pain.doses[1].at: earliest lies after latest; write the earlier time as earliest",
        ),
        (
            patient_state({"doses": [{**DOSE, "dose": "4"}]}),
            "pain.doses[1].dose: '4' has no unit; write 4 mg or 4 mcg, or the words 'not known'",
        ),
        (
            patient_state({"doses": [{**DOSE, "at": "2026-03-14 21:00"}]}),
            "pain.doses[1].at: Sat 14 Mar 2026 21:00 is later than Sat 14 Mar 2026 20:00, the moment this is read for; "
            "check the date and the time, or --at",
        ),
        (
            patient_state({"infusions": [{"line": "S1", "drug": "morphine", "rate": "2 mg/h"}]}),
            "pain.infusions[1]: the rate has no start; add from: with the time at which this rate began",
        ),
        (
            patient_state({"infusions": [{"line": "S1", "drug": "morphine", "from": "2026-03-14 15:00"}]}),
            "pain.infusions[1]: the infusion has no rate; add rate: with its unit",
        ),
        (
            patient_state({"infusions": [{"line": "S1", "running": "2026-03-14 15:00"}]}),
            "pain.infusions[1]: the infusion on line S1 has no start; add an entry with drug:, from: and rate:",
        ),
        (
            patient_state({"infusions": [{"line": "S1", "from": "2026-03-14 15:00", "rate": "2 mg/h"}]}),
            "pain.infusions[1]: the infusion on line S1 has no drug; add drug:",
        ),
        (
            patient_state({"infusions": [LINE, {**LINE, "rate": "3 mg/h"}]}),
            "pain.infusions[2]: line S1 has two rates from the same minute; "
            "give each infusion its own line:, or strike out the one that is wrong",
        ),
        (
            patient_state({"infusions": [{**LINE, "stopped": "2026-03-14 14:00"}]}),
            "pain.infusions[1].stopped: it stopped before it began; check both times",
        ),
        (
            patient_state({"doses": [{**DOSE, "drug": "fentanyl", "dose": "25 mcg", "route": "patch"}]}),
            "pain.doses[1].route: a patch has a rate and no single dose; "
            "write it under infusions: with from: and rate: in mcg/h",
        ),
        (
            pump({}),
            f"{READING}[1]: the reading ends before it begins; check from: and to:",
        ),
        (
            pump({"to": "2026-03-14 18:00"}, {"from": "2026-03-14 17:00", "to": "2026-03-14 19:00"}),
            f"{READING}[2]: this reading begins before the one before ends; write each from the last",
        ),
        (
            pump({"to": "2026-03-14 18:00", "total": "2 mL"}),
            f"{READING}[1]: a volume without a concentration; add concentration: to the pump",
        ),
    ],
)
def test_a_fault_is_named_with_its_place_and_its_cure(state: dict[str, Any], expected: str) -> None:
    assert faults(state) == [expected]


@pytest.mark.parametrize(
    ("dose", "warning"),
    [
        ({"dose": "20 mg"}, ""),
        ({"dose": "21 mg"}, "21 mg of morphine IV is unusual (above 20 mg)"),
        ({"dose": "40 mg", "confirmed": "yes"}, ""),
        ({"drug": "fentanyl", "dose": "1 mg"}, "1 mg of fentanyl IV is unusual (above 500 mcg)"),
        ({"drug": "ketamine", "dose": "21 mg"}, ""),
        ({"drug": "clonidine", "dose": "21 mg"}, ""),
    ],
)
def test_a_dose_that_looks_ten_times_too_high_is_asked_about_once(dose: dict[str, str], warning: str) -> None:
    found = assessed(patient_state({"doses": [{**DOSE, **dose}]}))
    assert [fault.what for fault in found.warnings] == ([warning] if warning else [])
    total = found.item("pain.opioid_equivalent_24h")
    assert total is not None, "a warning does not stop the work"


def test_an_unusual_part_of_a_combination_product_is_found() -> None:
    parts = [{"drug": "codeine", "dose": "30 mg"}, {"drug": "paracetamol", "dose": "5 g"}]
    entry = {"at": "2026-03-14 14:00", "contains": parts, "route": "oral"}
    found = assessed(patient_state({"doses": [entry]}))
    assert [(fault.path, fault.what) for fault in found.warnings] == [
        ("pain.doses[1].contains[2].dose", "5 g of paracetamol oral is unusual (above 1,000 mg)")
    ]


def test_what_was_struck_out_is_neither_checked_nor_counted() -> None:
    struck = {"struck": {"by": "E. Marsh", "at": "2026-03-14 15:00", "why": "wrong patient"}}
    state = patient_state(
        {"doses": [{**DOSE, **struck}], "infusions": [{**LINE, **struck}]},
        {"2026-03-14": {"14:15": {"pain": {"scale": "numeric", "score": "11", **struck}}}},
    )
    found = assessed(state)
    total, latest = found.item("pain.opioid_equivalent_24h"), found.item("pain.latest")
    assert total is not None
    assert total.value is None, "what is struck out is no chart of the day"
    assert latest is not None
    assert latest.value is None


@pytest.mark.parametrize("word", ["asleep", "not assessed"])
def test_the_words_for_no_score_are_no_score(word: str) -> None:
    found = assessed(row(pain=word)).item("pain.latest")
    assert found is not None
    assert found.value is None
