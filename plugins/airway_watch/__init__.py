"""Airway watch: signs and their age, timetable of checks, carbon monoxide, oxygenation, tube."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="airway_watch",
    title="Airway watch",
    package="handoff.bundled.airway_watch",
    compute=later("handoff.bundled.airway_watch.compute", "compute"),
    requires=("area",),
    check=later("handoff.bundled.airway_watch.check", "check"),
)
