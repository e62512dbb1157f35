"""Who the patient is, what happened, and what the nurse wrote: items that repeat what was charted."""

from handoff.bundled.overview.background import background_items
from handoff.bundled.overview.handing import handing_actions, handing_items
from handoff.bundled.overview.situation import situation_items
from handoff.bundled.overview.vitals import vital_actions, vital_items

from handoff.plugin import Case, Findings, Plugin


def compute(case: Case) -> Findings:
    """Return the items of identity, injury, vital signs, lines, events and the nurse's own words."""
    items = (*situation_items(case), *background_items(case), *vital_items(case), *handing_items(case))
    return Findings(items, (*vital_actions(case), *handing_actions(case)))


plugin = Plugin(
    name="overview",
    title="Patient, injury and course",
    package="handoff.bundled.overview",
    compute=compute,
    owns=("patient", "injury", "vital", "result", "line", "event", "handover"),
)
