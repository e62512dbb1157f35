"""A dose or a drug rate ten times off for the weight is asked about; what was given is never printed as 0."""

from __future__ import annotations

from typing import Any

import pytest

from .build import assessed, patient_state

AT = "2026-03-14 14:00"


def asked(kg: str | None = "10 kg", /, **dose: str) -> list[str]:
    entry = {"at": AT, "drug": "morphine", "dose": "1 mg", "route": "IV", **dose}
    return warnings({"doses": [entry]}, kg)


def rate_asked(rate: str, **more: str) -> list[str]:
    line = {"line": "S1", "drug": "morphine", "from": AT, "rate": rate, **more}
    return warnings({"infusions": [line]}, "10 kg")


def warnings(pain: dict[str, Any], kg: str | None) -> list[str]:
    weights = {"weights": [{"value": kg, "kind": "before burn", "known": "measured"}]} if kg else {}
    found = assessed(patient_state(pain, **weights))
    return [f"{fault.path}: {fault.what}" for fault in found.warnings if fault.path.startswith("pain")]


@pytest.mark.parametrize(
    ("right", "slip"),
    [
        ({"dose": "1 mg"}, {"dose": "10 mg"}),
        ({"dose": "1 mg"}, {"dose": "0.04 mg"}),
        ({"drug": "paracetamol", "dose": "150 mg"}, {"drug": "paracetamol", "dose": "1 g"}),
        ({"drug": "paracetamol", "dose": "150 mg"}, {"drug": "paracetamol", "dose": "15 mg"}),
        ({"drug": "fentanyl", "dose": "10 mcg"}, {"drug": "fentanyl", "dose": "100 mcg"}),
        ({"drug": "ketamine", "dose": "10 mg"}, {"drug": "ketamine", "dose": "100 mg"}),
        ({"drug": "midazolam", "dose": "1 mg"}, {"drug": "midazolam", "dose": "10 mg"}),
    ],
)
def test_a_slip_of_ten_in_a_child_is_asked_about(right: dict[str, str], slip: dict[str, str]) -> None:
    assert asked(**right) == []
    (found,) = asked(**slip)
    assert found.startswith(f"pain.doses[1].dose: {slip['dose']} of ")
    assert "at 10 kg before burn; usual " in found
    assert asked(**slip, confirmed="yes") == []


def test_the_lines_themselves_are_usual() -> None:
    assert asked(dose="3 mg") == []
    assert asked(dose="0.05 mg") == []
    assert asked(dose="3.1 mg") == [
        "pain.doses[1].dose: 3.1 mg of morphine IV is unusual "
        "(0.31 mg/kg at 10 kg before burn; usual 0.005 to 0.3 mg/kg)"
    ]


@pytest.mark.parametrize("kg", ["82 kg", None])
def test_a_milligram_of_paracetamol_written_for_a_gram_is_asked_about(kg: str | None) -> None:
    assert asked(kg, drug="paracetamol", dose="1 g") == []
    assert asked(kg, drug="paracetamol", dose="1 mg") == [
        "pain.doses[1].dose: 1 mg of paracetamol IV is unusual (below 10 mg)"
    ]


def test_a_rate_of_an_infusion_is_held_against_the_weight() -> None:
    assert rate_asked("0.2 mg/h") == []
    assert rate_asked("0 mg/h") == []
    assert rate_asked("2 mL/h", concentration="1 mg/mL") == []
    assert rate_asked("20 mL/h", concentration="1 mg/mL") == [
        "pain.infusions[1].rate: 20 mL/h of morphine is unusual "
        "(2 mg/kg/h at 10 kg before burn; usual 0.001 to 0.2 mg/kg/h)"
    ]
    assert rate_asked("3 mg/h", confirmed="yes") == []


@pytest.mark.parametrize(
    ("dose", "key", "said"),
    [
        ({"drug": "paracetamol", "dose": "0.04 mg", "route": "oral"}, "pain.paracetamol_24h", "40 mcg"),
        ({"drug": "morphine", "dose": "10 mcg"}, "pain.opioid_equivalent_24h", "30 mcg"),
        ({"drug": "fentanyl", "dose": "0.02 mcg"}, "pain.opioid_equivalent_24h", " mcg"),
    ],
)
def test_what_was_given_is_never_printed_as_nothing(dose: dict[str, str], key: str, said: str) -> None:
    entry = {"at": AT, "drug": "morphine", "dose": "1 mg", "route": "IV", **dose}
    found = assessed(patient_state({"doses": [entry]}))
    item = found.item(key)
    assert item is not None
    assert said in item.shown
    assert not item.shown.startswith("0 mg")
    assert item.working is not None
    assert "= 0 mg" not in item.working.sum
    printed = [one.shown for one in found.items if one.key.startswith("pain.")]
    assert not [text for text in printed if " 0 mg " in text or " 0 mcg " in text]
