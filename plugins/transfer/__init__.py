"""Before a journey: who takes the patient, the airway plan, oxygen and pumps for the road."""

from handoff.plugin import Plugin, later

plugin = Plugin(
    name="transfer",
    title="Transfer to another hospital",
    package="handoff.bundled.transfer",
    compute=later("handoff.bundled.transfer.compute", "compute"),
)
