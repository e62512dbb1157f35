"""Pain scores, sedation, analgesic totals and the next painful procedure."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="pain",
    title="Pain, sedation and analgesia",
    package="handoff.bundled.pain",
    compute=later("handoff.bundled.pain.compute", "compute"),
    requires=("area",),
    check=later("handoff.bundled.pain.check", "check"),
)
