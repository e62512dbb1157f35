"""Electrical injury and lightning: rhythm, contact points, limbs that look unburned."""

from handoff.plugin import Plugin

from .compute import compute

plugin = Plugin(
    name="electrical",
    title="Electrical injury",
    package="handoff.bundled.electrical",
    compute=compute,
    requires=("area",),
)
