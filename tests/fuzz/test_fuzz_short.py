"""A short run of each target from one seed, every shape of a large file, and what a broken promise looks like."""

from __future__ import annotations

import time

import pytest

from handoff.state.faults import Fault, StateFaults
from handoff.state.reader import read_nodes
from handoff.state.validate import MOST_FAULTS
from handoff.work import open_text
from tests.chart.charts import HEAD, NOW, setup

from .large import SHAPES
from .properties import Breach, placed
from .run import LONGEST_S, MOST_MB, Result, one, run, source
from .targets import TARGETS, Target

COUNTS = {
    "quantities": 400,
    "clock": 300,
    "reader": 200,
    "chart": 40,
    "schemas": 12,
    "returned": 8,
    "templates": 4,
}


@pytest.mark.parametrize("name", COUNTS)
def test_a_short_run_breaks_no_promise(name: str) -> None:
    result = run(name, seed=7, count=COUNTS[name])
    assert result.broken == []
    assert sum(result.outcomes.values()) == COUNTS[name]


@pytest.mark.parametrize("name", SHAPES)
def test_a_large_file_is_read_or_refused_in_time(name: str) -> None:
    text = SHAPES[name](source(1, name, 1))
    setup()
    started = time.process_time()
    try:
        open_text(text, "patient.yaml", setup(), NOW)
    except StateFaults as error:
        assert len(error.faults) <= MOST_FAULTS
        placed(error.faults[:5], text)
    assert time.process_time() - started < 2 * LONGEST_S


def test_a_fault_after_a_thousand_warnings_is_found() -> None:
    dose = "    - {at: 2026-03-14 15:00, drug: morphine, dose: 2.0 mg, route: IV, by: EM}\n"
    text = f"{HEAD}pain:\n  doses:\n{dose * (MOST_FAULTS + 5)}    - {{dose: 2}}\n"
    with pytest.raises(StateFaults) as refused:
        open_text(text, "patient.yaml", setup(), NOW)
    assert any("'2' has no unit" in fault.what for fault in refused.value.faults)


def test_a_file_of_entries_of_one_letter_is_refused_early() -> None:
    text = f"{HEAD}events: [{'a: b, ' * 160_000}]"
    with pytest.raises(StateFaults) as refused:
        read_nodes(text, "patient.yaml")
    assert "nothing but commas" in refused.value.faults[-1].what


def test_a_file_of_commas_is_refused_by_its_place() -> None:
    with pytest.raises(StateFaults) as refused:
        open_text(SHAPES["commas"](source(1, "commas", 1)), "patient.yaml", setup(), NOW)
    assert "nothing but commas" in refused.value.faults[-1].what


@pytest.mark.parametrize(
    "fault",
    [
        Fault(0, 1, "", "it is wrong", "mend it"),
        Fault(1, 99, "", "it is wrong", "mend it"),
        Fault(9, 1, "", "it is wrong", "mend it"),
        Fault(1, 1, "", "", "mend it"),
        Fault(1, 1, "", "it is wrong", ""),
    ],
)
def test_a_refusal_without_a_place_or_a_cure_is_noticed(fault: Fault) -> None:
    with pytest.raises(Breach):
        placed([fault], "handoff: 1\n")


def fails(_: object) -> str:
    raise ValueError("by hand")


def test_a_traceback_is_noticed_by_its_place() -> None:
    result = Result("by hand")
    one(Target("by hand", "", 1, lambda rng: rng.random(), fails), 1, 3, result)
    assert [said.partition(" at ")[0] for said in result.broken] == ["by hand 3: ValueError"]


def test_memory_is_measured() -> None:
    assert run("clock", 1, 1).memory_mb > 10
    assert MOST_MB == 500


def test_every_target_has_a_short_run() -> None:
    assert {target.name for target in TARGETS} == {*COUNTS, "large"}
