"""Puts the items of identity, injury, vital signs, lines, events and the nurse's own words together."""

from handoff.plugin import Case, Findings

from .background import background_items
from .handing import handing_actions, handing_items
from .situation import situation_items
from .vitals import vital_actions, vital_items


def compute(case: Case) -> Findings:
    """Return the items of identity, injury, vital signs, lines, events and the nurse's own words."""
    items = (*situation_items(case), *background_items(case), *vital_items(case), *handing_items(case))
    return Findings(items, (*vital_actions(case), *handing_actions(case)))
