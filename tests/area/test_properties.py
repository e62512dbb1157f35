"""What must hold for any burn, whatever its regions."""

from __future__ import annotations

import random

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from tests.area.build import found, state_text

REGIONS = (
    "head",
    "neck",
    "left upper arm",
    "right forearm",
    "left hand",
    "left thigh",
    "right lower leg",
    "right foot",
)
DEPTHS = (
    "superficial partial",
    "mid dermal",
    "deep dermal",
    "second degree",
    "full thickness",
    "fourth degree",
)
KEYS = ("counted", "full_thickness", "deep_partial", "superficial_partial", "not_counted")
BORN = ("2025-12-01", "2024-01-01", "2019-05-05", "2014-01-01", "2009-06-06", "1985-02-11")

burns_of_a_body = st.dictionaries(
    st.sampled_from(REGIONS),
    st.tuples(st.integers(0, 100), st.sampled_from(DEPTHS), st.sampled_from(("", "front", "back"))),
    min_size=1,
    max_size=6,
)
slow = settings(
    max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow], derandomize=True
)


def rows(body: dict[str, tuple[int, str, str]]) -> list[dict[str, str]]:
    return [
        {"region": region, "of_region": f"{share} %", "depth": depth, **({"face": face} if face else {})}
        for region, (share, depth, face) in body.items()
    ]


def totals(burns: list[dict[str, str]], born: str) -> list[float]:
    findings = found(state_text(burns, born=born))
    return [findings.number(f"area.{key}") or 0.0 for key in KEYS]


@slow
@given(burns_of_a_body, st.sampled_from(BORN), st.integers(0, 100))
def test_splitting_a_region_changes_no_total(
    body: dict[str, tuple[int, str, str]], born: str, cut: int
) -> None:
    whole = rows(body)
    share, first = int(whole[0]["of_region"].split()[0]), whole[0]
    part = share * cut // 100
    split = [{**first, "of_region": f"{part} %"}, {**first, "of_region": f"{share - part} %"}, *whole[1:]]
    assert totals(split, born) == pytest.approx(totals(whole, born))


@slow
@given(burns_of_a_body, st.sampled_from(BORN), st.randoms(use_true_random=False))
def test_the_order_of_entries_changes_nothing(
    body: dict[str, tuple[int, str, str]], born: str, shuffle: random.Random
) -> None:
    whole = rows(body)
    other = list(whole)
    shuffle.shuffle(other)
    assert totals(other, born) == totals(whole, born)


@slow
@given(burns_of_a_body, st.sampled_from(BORN), st.integers(0, 100))
def test_epidermal_burn_changes_no_counted_figure(
    body: dict[str, tuple[int, str, str]], born: str, share: int
) -> None:
    red = {"region": "trunk", "of_region": f"{share} %", "depth": "epidermal"}
    assert totals([*rows(body), red], born)[:-1] == totals(rows(body), born)[:-1]


@slow
@given(burns_of_a_body, st.sampled_from(BORN), st.sampled_from(DEPTHS), st.integers(0, 100))
def test_more_burn_never_lowers_a_total(
    body: dict[str, tuple[int, str, str]], born: str, depth: str, share: int
) -> None:
    more = {"region": "trunk", "of_region": f"{share} %", "depth": depth}
    after, before = totals([*rows(body), more], born), totals(rows(body), born)
    assert all(new >= old for new, old in zip(after, before, strict=True))


@slow
@given(burns_of_a_body, st.sampled_from(BORN))
def test_the_depths_add_to_what_counts(body: dict[str, tuple[int, str, str]], born: str) -> None:
    findings = found(state_text(rows(body), born=born))
    keys = ("full_thickness", "deep_partial", "superficial_partial", "mid_partial", "partial_undivided")
    parts = [findings.number(f"area.{key}") or 0.0 for key in keys]
    assert sum(parts) == pytest.approx(findings.number("area.counted") or 0.0)
