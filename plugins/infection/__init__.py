"""Temperature, sepsis triggers by a named list, toxic-shock prompts, days of lines, antibiotics."""

from handoff.plugin import Plugin

from .compute import compute

plugin = Plugin(
    name="infection",
    title="Temperature and infection",
    package="handoff.bundled.infection",
    compute=compute,
    requires=("area",),
)
