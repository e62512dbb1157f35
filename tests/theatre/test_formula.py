"""What the arithmetic of fasting refuses."""

from __future__ import annotations

import pytest
from handoff.bundled.theatre import formula

from handoff.plugin import FormulaInputError


@pytest.mark.parametrize(("fasted", "wanted"), [(-1, 6), (3, -1)])
def test_neither_the_fast_nor_the_one_wanted_may_be_negative(fasted: float, wanted: float) -> None:
    with pytest.raises(FormulaInputError):
        formula.hours_short(fasted, wanted)
