"""Fluid after a burn: the plan, what was given, urine, balance, perfusion and results to watch."""

from handoff.plugin import Plugin

from .check import check
from .compute import compute

plugin = Plugin(
    name="fluid",
    title="Fluid and urine",
    package="handoff.bundled.fluid",
    compute=compute,
    requires=("area",),
    check=check,
)
