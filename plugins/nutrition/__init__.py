"""Last food, tube feeding and where the tube lies, bowels, glucose while insulin runs."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="nutrition",
    title="Feeding, bowels and glucose",
    package="handoff.bundled.nutrition",
    compute=later("handoff.bundled.nutrition.compute", "compute"),
)
