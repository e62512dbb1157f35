"""Every figure agrees with a second implementation in fractions over generated patients.

``python -m tests.long patients --count 20000 --only fluid`` runs it over 20,000 of them.
"""

from __future__ import annotations

from fractions import Fraction

import pytest

from tests.long.patients import count

from .build import computed, item
from .exact import Exact
from .patients import patient

PATIENTS = count(500)


def agree(value: object, exactly: Fraction | None) -> bool:
    if exactly is None or value is None:
        return value is None and exactly is None
    return value == pytest.approx(float(exactly), rel=1e-9, abs=1e-6)


@pytest.mark.parametrize("block", range(10))
def test_every_patient_comes_out_the_same_by_fractions(block: int) -> None:
    for seed in range(block, PATIENTS, 10):
        state, at = patient(seed)
        found = computed(state, at)
        for key, exactly in Exact(state, at).figures().items():
            assert agree(item(found, key).value, exactly), (
                f"seed {seed}: fluid.{key} is {item(found, key).value} ({item(found, key).shown}), "
                f"by fractions {None if exactly is None else float(exactly)}"
            )


@pytest.mark.parametrize("seed", range(0, 60))
def test_the_hours_add_up_to_the_totals(seed: int) -> None:
    state, at = patient(seed)
    found = computed(state, at)
    rows = found.values["hours"]
    assert isinstance(rows, tuple)
    if not rows or Exact(state, at).now > 48 * 60 or not state.get("fluid", {}).get("given"):
        return
    for key, column in (("given", 3), ("not_confirmed", 4)):
        assert sum(row[column] for row in rows) == pytest.approx(item(found, key).value, rel=1e-9, abs=1e-6)
    due = item(found, "due_by_now").value
    if due is not None:
        assert sum(row[2] for row in rows) == pytest.approx(due, rel=1e-9, abs=1e-6)
