"""What the arithmetic of feeding refuses."""

from __future__ import annotations

import pytest
from handoff.bundled.nutrition import formula

from handoff.plugin import FormulaInputError


@pytest.mark.parametrize(("hours", "limit"), [(-1, 72), (3, -1)])
def test_neither_a_time_nor_its_limit_may_be_negative(hours: float, limit: float) -> None:
    with pytest.raises(FormulaInputError):
        formula.is_longer(hours, limit)
