"""Catheter, gastric tube and cannulas are asked for at the named line, and known by kind or by name."""

from __future__ import annotations

import pytest

from handoff.plugin import Flag

from .build import burned, computed, item

CHILD = "2020-01-10"


@pytest.mark.parametrize(
    ("key", "pct", "born", "choices", "asked"),
    [
        ("gastric_tube_asked", "20 %", "1985-02-11", {}, False),
        ("gastric_tube_asked", "20.1 %", "1985-02-11", {}, True),
        ("catheter_asked", "20 %", "1985-02-11", {}, False),
        ("catheter_asked", "20.1 %", "1985-02-11", {}, True),
        ("catheter_asked", "15 %", CHILD, {"catheter_line": "adelaide"}, False),
        ("catheter_asked", "15.1 %", CHILD, {"catheter_line": "adelaide"}, True),
    ],
)
def test_a_tube_is_asked_for_above_its_line(
    key: str, pct: str, born: str, choices: dict[str, str], asked: bool
) -> None:
    found = computed(burned("20 kg" if born == CHILD else "80 kg", pct, born=born), **choices)
    assert (found.item(f"fluid.{key}") is not None) is asked


@pytest.mark.parametrize(
    ("line", "there"),
    [
        ({"what": "Foley 14 Fr"}, True),
        ({"what": "tube", "kind": "urinary catheter"}, True),
        ({"what": "urinary catheter", "kind": "other"}, False),
        ({"what": "suprapubic drain"}, False),
        ({"what": "central venous catheter"}, False),
    ],
)
def test_a_urinary_catheter_is_known_by_its_kind_or_its_name(line: dict[str, str], there: bool) -> None:
    shown = item(computed(burned("80 kg", "30 %", lines=[line])), "catheter_asked")
    assert (shown.flag is Flag.NONE) is there


def test_kinds_tell_cannulas_and_gastric_tubes_whatever_they_are_called() -> None:
    lines = [
        {"what": "grey 16 G left arm", "kind": "cannula"},
        {"what": "green 18 G right arm", "kind": "cannula"},
        {"what": "tube 14 Fr", "kind": "gastric tube"},
    ]
    found = computed(burned("80 kg", "30 %", lines=lines))
    assert item(found, "gastric_tube_asked").flag is Flag.NONE
    assert found.item("fluid.cannulas") is None or item(found, "cannulas").value == 2
