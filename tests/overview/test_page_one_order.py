"""The ordering rule of page one, held against whole patients: what can kill, or cost a limb, first."""

from __future__ import annotations

import re
from datetime import timedelta
from itertools import pairwise
from typing import Any

from handoff.document.page_one import page_one
from handoff.document.schedule import Shift
from handoff.plugin import Flag, Item
from tests.packaging.project import ROOT
from tests.small_patient import assessed, state_text

NAMES = [
    "area",
    "fluid",
    "electrical",
    "airway_watch",
    "pain",
    "early_warning",
    "infection",
    "wounds",
    "overview",
]
LADDER = re.compile(r"^\| (\d+)-(\d+) \|", re.MULTILINE)


def struck_by_current(**more: Any) -> Any:
    arm = {"region": "right arm", "site": "radial", "pulse": "absent", "refill": "absent", "warmth": "cold"}
    rows = {
        f"{hour}:00": {
            "urine": {"volume": "20 mL", "over": "1 h"},
            "pulse": "110 /min",
            "bp": "128/80 mmHg",
            "limbs": [arm],
        }
        for hour in (16, 17, 18, 19)
    }
    return assessed(
        NAMES,
        state_text(
            rows,
            patient={
                "weights": [{"value": "91 kg", "kind": "before burn", "known": "measured"}],
                "allergies": "none known",
            },
            injury={"causes": [{"kind": "electrical", "voltage": "11 kV"}]},
            area=[
                {
                    "at": "2026-03-14 09:00",
                    "method": "lund-browder",
                    "burns": [
                        {"region": "trunk", "face": "front", "of_region": "100 %", "depth": "deep partial"},
                        {"region": "left thigh", "of_region": "100 %", "depth": "deep partial"},
                    ],
                }
            ],
            events=[{"at": "2026-03-14 18:50", "what": "arrhythmia", "said": "run of ectopics"}],
            **more,
        ),
    )


def ranked(assessment: Any) -> list[Item]:
    found = [one for one in assessment.items if one.rank is not None and one.flag is Flag.ACTION]
    return sorted(found, key=lambda one: (one.rank, one.key))


def test_the_heart_then_the_unburned_arm_without_a_pulse_stand_above_urine() -> None:
    keys = [one.key for one in ranked(struck_by_current())]
    arm = next(key for key in keys if key.startswith("area.perfusion"))
    assert keys.index("electrical.rhythm") < keys.index("electrical.monitoring") < keys.index(arm)
    assert keys.index(arm) < keys.index("fluid.urine_rate")


def test_page_one_prints_them_in_that_order_and_the_tasks_follow() -> None:
    made = struck_by_current()
    shift = Shift(made.now, made.now + timedelta(hours=12), made.state.clock)
    page = page_one(made, shift)
    printed = [row.what for row in page.actions]
    assert printed[0] == "Arrhythmia after electrical injury"
    said = [task.text for task in page.tasks]
    heart, arm, urine = (
        next(place for place, text in enumerate(said) if word in text)
        for word in ("monitor", "right arm", "Urine")
    )
    assert heart < arm < urine
    assert "burn service" in page.more_tasks


def test_every_rank_stands_on_a_rung_of_the_written_ladder() -> None:
    text = (ROOT / "docs" / "decisions" / "page-one-order.md").read_text("utf-8")
    rungs = [(int(low), int(high)) for low, high in LADDER.findall(text)]
    assert rungs == sorted(rungs)
    assert all(before[1] < after[0] for before, after in pairwise(rungs))
    for one in struck_by_current().items:
        if one.rank is not None:
            assert any(low <= one.rank <= high for low, high in rungs), one.key
