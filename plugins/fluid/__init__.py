"""Fluid after a burn: the plan, what was given, urine, balance, perfusion and results to watch."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="fluid",
    title="Fluid and urine",
    package="handoff.bundled.fluid",
    compute=later("handoff.bundled.fluid.compute", "compute"),
    requires=("area",),
    check=later("handoff.bundled.fluid.check", "check"),
)
