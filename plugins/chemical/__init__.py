"""Chemical injury: how long it was rinsed, what it was, and what still has to be known."""

from handoff.plugin import Plugin

from .compute import compute

plugin = Plugin(
    name="chemical",
    title="Chemical injury",
    package="handoff.bundled.chemical",
    compute=compute,
)
