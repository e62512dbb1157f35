"""Chemical injury: how long it was rinsed, what it was, and what still has to be known."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="chemical",
    title="Chemical injury",
    package="handoff.bundled.chemical",
    compute=later("handoff.bundled.chemical.compute", "compute"),
)
