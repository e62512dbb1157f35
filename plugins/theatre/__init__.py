"""Before theatre: fasting times, consent, blood."""

from handoff.plugin import Plugin

from .compute import compute

plugin = Plugin(
    name="theatre",
    title="Theatre and fasting",
    package="handoff.bundled.theatre",
    compute=compute,
)
