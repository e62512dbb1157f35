"""Before theatre: fasting times, consent, blood."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="theatre",
    title="Theatre and fasting",
    package="handoff.bundled.theatre",
    compute=later("handoff.bundled.theatre.compute", "compute"),
)
