"""Pain scores, sedation, analgesic totals and the next painful procedure."""

from handoff.plugin import Plugin

from .check import check
from .compute import compute

plugin = Plugin(
    name="pain",
    title="Pain, sedation and analgesia",
    package="handoff.bundled.pain",
    compute=compute,
    requires=("area",),
    check=check,
)
