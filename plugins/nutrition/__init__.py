"""Last food, tube feeding and where the tube lies, bowels, glucose while insulin runs."""

from handoff.plugin import Plugin

from .compute import compute

plugin = Plugin(
    name="nutrition",
    title="Feeding, bowels and glucose",
    package="handoff.bundled.nutrition",
    compute=compute,
)
