"""Mood, sleep, body image, spiritual needs, teaching, discharge, and the goals of comfort."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="wellbeing",
    title="Mood, sleep, people and teaching",
    package="handoff.bundled.wellbeing",
    compute=later("handoff.bundled.wellbeing.compute", "compute"),
)
