"""Whatever block the schema lets through is checked and computed without stopping."""

from __future__ import annotations

from typing import Any

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from handoff.state.faults import StateFaults
from handoff.work import assess_loaded, open_text
from tests.area.build import setup_of, state_text

BLOCK = setup_of().schema["properties"]["area"]["items"]["properties"]
BURN = BLOCK["burns"]["items"]["properties"]
EXTENTS = {"of_region": st.integers(0, 100), "tbsa": st.integers(0, 100), "palms": st.integers(0, 12)}


def words_of(name: str, properties: dict[str, Any] = BURN) -> st.SearchStrategy[str]:
    return st.sampled_from(properties[name]["enum"])


def extent(pair: tuple[str, int]) -> dict[str, str]:
    name, number = pair
    return {name: f"{number}" if name == "palms" else f"{number} %"}


extents = st.lists(
    st.one_of(*(st.tuples(st.just(name), numbers) for name, numbers in EXTENTS.items())), max_size=2
).map(lambda pairs: {key: value for pair in pairs for key, value in extent(pair).items()})
burns = st.builds(
    lambda fixed, more, sized: {**fixed, **more, **sized},
    st.fixed_dictionaries({"region": words_of("region"), "depth": words_of("depth")}),
    st.fixed_dictionaries(
        {},
        optional={
            "side": words_of("side"),
            "face": words_of("face"),
            "circumferential": words_of("circumferential"),
            "joint": words_of("joint"),
        },
    ),
    extents,
)
blocks = st.lists(
    st.fixed_dictionaries(
        {
            "at": st.sampled_from(["2026-03-14 14:20", "2026-03-14 18:00"]),
            "burns": st.lists(burns, min_size=1, max_size=4),
        },
        optional={
            "by": st.just("EM"),
            "method": words_of("method", BLOCK),
            "place": words_of("place", BLOCK),
        },
    ),
    min_size=1,
    max_size=2,
)


@settings(max_examples=150, deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
@given(blocks, st.sampled_from(["", "2025-12-24", "2020-02-02", "1985-02-11"]))
def test_any_block_gives_faults_or_figures_and_never_stops(block: list[dict[str, Any]], born: str) -> None:
    setup = setup_of()
    try:
        loaded = open_text(state_text(area=block, born=born), "case.yaml", setup, "2026-03-14 19:30")
    except StateFaults as refused:
        assert all(fault.what and fault.cure and fault.line > 0 for fault in refused.faults)
        return
    assert not any("could not check" in fault.what for fault in loaded.unusual)
    made = assess_loaded(loaded, setup)
    assert made.failures == ()
    counted = made.item("area.counted")
    assert counted is not None
    assert counted.value is None or 0 <= float(str(counted.value)) <= 100
