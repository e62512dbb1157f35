"""Dressings, grafts and donor sites, tetanus, position by burned site, eyes, ears, mouth, pressure areas."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="wounds",
    title="Wounds, position and skin",
    package="handoff.bundled.wounds",
    compute=later("handoff.bundled.wounds.compute", "compute"),
    requires=("area",),
)
