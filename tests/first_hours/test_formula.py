"""The arithmetic of the first hours refuses what cannot be, and says which figure it was."""

from __future__ import annotations

import pytest
from handoff.bundled.first_hours.formula import minutes_short

from handoff.plugin import FormulaInputError


@pytest.mark.parametrize(
    ("wanted", "had", "named"),
    [(-1.0, 5.0, "^minutes wanted "), (20.0, -1.0, "^minutes had "), (float("nan"), 5.0, "^minutes wanted ")],
)
def test_what_cannot_be_is_refused_by_name(wanted: float, had: float, named: str) -> None:
    with pytest.raises(FormulaInputError, match=named):
        minutes_short(wanted_min=wanted, had_min=had)
