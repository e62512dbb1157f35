"""What the arithmetic of rinsing refuses."""

from __future__ import annotations

import pytest
from handoff.bundled.chemical import formula

from handoff.plugin import FormulaInputError


@pytest.mark.parametrize(("covered", "wanted"), [(-1, 60), (10, -1)])
def test_neither_what_was_rinsed_nor_what_is_wanted_may_be_negative(covered: float, wanted: float) -> None:
    with pytest.raises(FormulaInputError):
        formula.minutes_left(covered, wanted)
