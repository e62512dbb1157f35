"""Totals, limits and due times agree with a second implementation in fractions.

``python -m tests.long patients --count 20000 --only pain`` runs it over 20,000 patients.
"""

from __future__ import annotations

from datetime import timedelta
from typing import Any

import pytest

from tests.long.patients import count

from . import exact
from .build import NOW, assessed, computed, item
from .patients import patient

PATIENTS = count(300)


def agree(value: object, exactly: Any) -> bool:
    if exactly is None or value is None:
        return value is None and exactly is None
    return value == pytest.approx(float(exactly), rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("block", range(10))
def test_every_patient_comes_out_the_same_by_fractions(block: int) -> None:
    for seed in range(block, PATIENTS, 10):
        state, choices = patient(seed)
        found = computed(state, **choices)
        values = {name: item(found, f"pain.{name}").value for name in NAMES}
        assert agree(values["opioid_equivalent_24h"], exact.opioid_mg(state, choices["opioid_factors"])), seed
        assert agree(values["paracetamol_24h"], exact.paracetamol_mg(state)), seed
        limit = exact.paracetamol_limit_mg(state, choices["paracetamol_limit"])
        assert agree(values["paracetamol_limit_24h"], limit), seed
        due = exact.reassess_minutes(state)
        assert values["reassess_due"] == (None if due is None else NOW + timedelta(minutes=due)), seed
        total = exact.paracetamol_mg(state)
        over = limit is not None and total is not None and total > limit
        assert (item(found, "pain.paracetamol_24h").flag.value == "needs action") == over, seed


NAMES = ("opioid_equivalent_24h", "paracetamol_24h", "paracetamol_limit_24h", "reassess_due")


@pytest.mark.parametrize("seed", range(12))
def test_the_generated_patients_are_files_that_the_reader_accepts(seed: int) -> None:
    state, choices = patient(seed)
    whole = assessed(state, **choices)
    assert not whole.failures
    for name in NAMES:
        there, here = whole.item(f"pain.{name}"), item(computed(state, **choices), f"pain.{name}")
        assert there is not None
        assert there.value == here.value
