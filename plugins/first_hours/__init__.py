"""The survey of the first hours: each step with its finding, time and who did it."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="first_hours",
    title="First-hours survey",
    package="handoff.bundled.first_hours",
    compute=later("handoff.bundled.first_hours.compute", "compute"),
)
