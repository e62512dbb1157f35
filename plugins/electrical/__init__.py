"""Electrical injury and lightning: rhythm, contact points, limbs that look unburned."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="electrical",
    title="Electrical injury",
    package="handoff.bundled.electrical",
    compute=later("handoff.bundled.electrical.compute", "compute"),
    requires=("area",),
)
