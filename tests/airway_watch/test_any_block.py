"""Whatever block the schema lets through is checked and computed without stopping, in words that are safe."""

from __future__ import annotations

import re
from typing import Any

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from handoff.state.faults import StateFaults
from handoff.work import assess_loaded, open_text

from .build import NOW, said, setup_of, state_text
from .test_tables import BLOCK, ENTRY_KEYS

TIMES = ("2026-03-14 10:00", "2026-03-14 11:15", "2026-03-14 14:40", "2026-03-14 19:30")
UNSAFE = re.compile(r"\b(normal|stable|fine|OK|intubate|ARDS)\b", re.IGNORECASE)
times = st.sampled_from(TIMES)
FREE = {
    "value": [f"{number} %" for number in ("0", "3.5", "18", "55")],
    "flow": [f"{number} L/min" for number in ("1", "6", "10", "15", "50")],
    "fio2": ["21 %", "0.4", "60 %", "100 %"],
    "size": ["8 mm"],
    "depth": ["21 cm", "23 cm", "24.5 cm"],
    "cuff_pressure": ["15 cmH2O", "25 cmH2O", "40 cmH2O"],
    "peep": ["5 cmH2O"],
    "plateau": ["25 cmH2O", "35 cmH2O"],
    "tidal_volume": ["200 mL", "440 mL", "900 mL"],
    "rate": ["18 /min"],
    "grade": ["0", "4"],
}


def value_of(name: str, schema: dict[str, Any]) -> st.SearchStrategy[str]:
    if "x-instant" in schema:
        return times
    if "enum" in schema:
        return st.sampled_from(schema["enum"])
    return st.sampled_from(FREE.get(name, ["words"]))


def entry(schema: dict[str, Any]) -> st.SearchStrategy[dict[str, str]]:
    properties = {
        key: value
        for key, value in schema["properties"].items()
        if key not in ENTRY_KEYS - {"at", "by", "worse"}
    }
    needed = set(schema.get("required", ()))
    return st.fixed_dictionaries(
        {key: value_of(key, value) for key, value in properties.items() if key in needed},
        optional={key: value_of(key, value) for key, value in properties.items() if key not in needed},
    )


def part(schema: dict[str, Any]) -> st.SearchStrategy[Any]:
    if schema.get("type") == "array":
        return st.lists(entry(schema["items"]), min_size=1, max_size=3)
    return entry(schema) if "properties" in schema else value_of("", schema)


blocks = st.fixed_dictionaries({}, optional={key: part(value) for key, value in BLOCK.items()})
injuries = st.sampled_from(
    [
        {"causes": None},
        {"at": None},
        {"causes": [{"kind": "scald"}]},
        {"causes": [{"kind": "flame", "setting": "vehicle", "trapped": "no"}]},
        {"at": {"earliest": "2026-03-14 08:00", "latest": "2026-03-14 10:00"}},
        {
            "lost_consciousness": "yes",
            "causes": [{"kind": "flame", "setting": "enclosed space", "trapped": "yes"}],
        },
    ]
)
patients = st.sampled_from(
    [
        {},
        {"born": "2022-01-01"},
        {"sex": "other"},
        {"height": "140 cm"},
        {"resuscitation": {"decision": "comfort care"}},
    ]
)
rows = st.sampled_from(
    [
        {},
        {
            "2026-03-14": {
                "11:20": {
                    "spo2": "99 %",
                    "resp": "30 /min",
                    "bp": "84/40 mmHg",
                    "consciousness": "new confusion",
                }
            }
        },
        {"2026-03-14": {"15:00": {"spo2": "91 %", "gcs": {"eye": "2", "verbal": "2", "motor": "4"}}}},
        {"2026-03-14": {"15:00": {"spo2": "no trace", "head_up_degrees": "10", "gcs": {"verbal": "tube"}}}},
    ]
)
results = st.sampled_from(
    [
        [],
        [
            {
                "at": TIMES[2],
                "pao2": "11 kPa",
                "lactate": "12 mmol/L",
                "cyanide": "1.2 mg/L",
                "carboxyhaemoglobin": "9 %",
            }
        ],
    ]
)
EVENTS = ("intubation", "extubation", "bronchoscopy")
events = st.lists(st.fixed_dictionaries({"at": times, "what": st.sampled_from(EVENTS)}), max_size=3)


@settings(max_examples=200, deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
@given(blocks, injuries, patients, rows, results, events)
def test_any_block_gives_faults_or_findings_and_never_stops(
    block: dict[str, Any], injury: Any, patient: Any, seen: Any, blood: Any, happened: Any
) -> None:
    setup = setup_of()
    text = state_text(
        block, injury=injury, patient=patient, observations=seen, results=blood, events=happened
    )
    try:
        loaded = open_text(text, "case.yaml", setup, NOW)
    except StateFaults as refused:
        assert all(fault.what and fault.cure and fault.line > 0 for fault in refused.faults)
        return
    assert not any("could not check" in fault.what for fault in loaded.unusual)
    made = assess_loaded(loaded, setup)
    assert made.failures == ()
    findings = made.findings["airway_watch"]
    text = said(findings).replace("ARDS Network", "")
    assert not UNSAFE.search(text), UNSAFE.search(text)
    assert "no inhalation injury" not in text
    for one in findings.items:
        assert one.shown
        assert "None" not in one.shown
