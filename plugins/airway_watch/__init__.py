"""Airway watch: signs and their age, timetable of checks, carbon monoxide, oxygenation, tube."""

from handoff.plugin import Plugin

from .check import check
from .compute import compute

plugin = Plugin(
    name="airway_watch",
    title="Airway watch",
    package="handoff.bundled.airway_watch",
    compute=compute,
    requires=("area",),
    check=check,
)
