"""The first two days: routes that absorb poorly in a large burn."""

from __future__ import annotations

from typing import Any

import pytest

from .build import assessed, patient_state

DAY = "2026-03-14"


def burned(
    pct: float, born: str = "1985-02-11", route: str = "oral", burn: str = f"{DAY} 13:20"
) -> dict[str, Any]:
    dose = {"at": f"{DAY} 15:00", "drug": "oxycodone", "dose": "5 mg", "route": route}
    state = patient_state({"doses": [dose]}, born=born)
    burns = [{"region": "trunk", "tbsa": f"{pct} %", "depth": "deep partial"}]
    state["area"] = [{"at": f"{DAY} 14:20", "by": "E. Marsh RN", "method": "direct", "burns": burns}]
    state["injury"] = {"at": burn}
    return state


@pytest.mark.parametrize(
    ("state", "said"),
    [
        (burned(15), False),
        (burned(15.5), True),
        (burned(10, born="2020-02-11"), False),
        (burned(10.5, born="2020-02-11"), True),
        (burned(30, route="IV"), False),
        (burned(30, route="IM"), True),
        (burned(30, route="enteral tube"), True),
        (burned(30, burn="2026-03-12 20:00"), True),
        (burned(30, burn="2026-03-12 19:59"), False),
        (burned(30, burn=f"{DAY} 15:30"), False),
    ],
)
def test_a_route_that_absorbs_poorly_is_pointed_out_above_the_published_area(
    state: dict[str, Any], said: bool
) -> None:
    state["area"][0]["at"] = f"{DAY} 16:00"
    found = assessed(state).item("pain.early_absorption")
    assert (found is not None) is said
    if found is not None:
        assert found.flag.value == "due for review"
