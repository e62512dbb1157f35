"""A cannula whose name is misspelt is not counted, and so it is named."""

from __future__ import annotations

import pytest

from handoff.work import open_text
from tests.chart.charts import HEAD, NOW, setup


def warned(line: str) -> list[str]:
    read = open_text(f"{HEAD}lines:\n  - {{{line}}}\n", "patient.yaml", setup(), NOW)
    return [fault.path for fault in read.unusual]


@pytest.mark.parametrize(
    "what",
    ["IV cannnula 16 G", "IV can nula 16 G", "IV cabnula 16 G", "IV c#annula 14 G", "IV cannula 18 Gs"],
)
def test_a_name_that_is_nearly_right(what: str) -> None:
    assert warned(f'what: "{what}"') == ["lines[1].what"]
    assert warned(f'what: "{what}", confirmed: yes') == []
    assert warned(f'what: "{what}", kind: cannula') == []


@pytest.mark.parametrize(
    "what",
    ["IV cannula 16 G", "IV cannula", "arterial line 20 G", "central venous catheter", "chest drain 28 Fr"],
)
def test_other_names(what: str) -> None:
    assert warned(f'what: "{what}"') == []
