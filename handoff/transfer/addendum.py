"""The addendum: what a packet that has left says wrongly, against what the file says now."""

from __future__ import annotations

from msgspec import Struct
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document.changes import Changes
from handoff.document.identity import Frame, Identity, frame, identity
from handoff.shift.since import changes
from handoff.shift.snapshot import Snapshot, snapshot_of

RULE = "Ring the receiver first and read this aloud; then send it. It goes beside the packet, which is not taken back."


class Addendum(Struct, frozen=True):
    """Everything that the addendum prints."""

    frame: Frame
    identity: Identity
    rule: str
    sent: str
    changes: Changes


def addendum(assessment: Assessment, sent: Snapshot, packet: str) -> Addendum:
    """Return the addendum to the packet ``packet``, which held ``sent``.

    Raises:
        DifferentPatients: The packet is of another patient.
        WrongOrder: The packet is later than this moment.
    """
    now = snapshot_of(assessment)
    # What a handover keeps for its appendix is what a receiver works with: it is compared as well.
    whole = replace(now, items=tuple(replace(item, detail=False) for item in now.items), plan=sent.plan)
    found = changes(sent, whole, assessment.state.clock)
    when = assessment.state.clock.day_and_time(sent.at)
    return Addendum(
        frame=frame("Addendum to a transfer packet", assessment),
        identity=identity(assessment),
        rule=RULE,
        sent=f"{packet}, made at {when} from state file version {sent.digest[:12]}",
        changes=found,
    )
