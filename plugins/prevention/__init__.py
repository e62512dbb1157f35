"""Whether prevention of clots and of stress ulcers was decided, by whom and when."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="prevention",
    title="Clot and ulcer prevention",
    package="handoff.bundled.prevention",
    compute=later("handoff.bundled.prevention.compute", "compute"),
    requires=("area",),
)
