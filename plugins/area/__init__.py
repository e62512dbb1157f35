"""Burned area, depth, special sites, referral criteria and circumferential watch."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="area",
    title="Burned area and depth",
    package="handoff.bundled.area",
    compute=later("handoff.bundled.area.compute", "compute"),
    check=later("handoff.bundled.area.check", "check"),
)
