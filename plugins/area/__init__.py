"""Burned area, depth, special sites, referral criteria and circumferential watch."""

from handoff.plugin import Plugin

from .check import check
from .compute import compute

plugin = Plugin(
    name="area",
    title="Burned area and depth",
    package="handoff.bundled.area",
    compute=compute,
    check=check,
)
