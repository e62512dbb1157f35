"""The early warning score with its parts, children's ranges by age, consciousness and the coma scale."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="early_warning",
    title="Early warning score and consciousness",
    package="handoff.bundled.early_warning",
    compute=later("handoff.bundled.early_warning.compute", "compute"),
)
