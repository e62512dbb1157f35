"""Who the patient is, what happened, and what the nurse wrote: items that repeat what was charted."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="overview",
    title="Patient, injury and course",
    package="handoff.bundled.overview",
    compute=later("handoff.bundled.overview.compute", "compute"),
    requires=("airway_watch", "early_warning", "infection"),
    owns=("patient", "injury", "vital", "result", "line", "event", "handover"),
)
