"""Temperature, sepsis triggers by a named list, toxic-shock prompts, days of lines, antibiotics."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="infection",
    title="Temperature and infection",
    package="handoff.bundled.infection",
    compute=later("handoff.bundled.infection.compute", "compute"),
    requires=("area",),
)
