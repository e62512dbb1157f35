"""What the transfer plugin returns: nothing where no transfer is charted."""

from __future__ import annotations

from msgspec.structs import replace

from handoff.plugin import Case, Findings, Map

from . import journey, oxygen, pumps


def compute(case: Case) -> Findings:
    """Return receiver, journey, airway plan, oxygen and pumps of a transfer."""
    if not isinstance(case.block, Map):
        return Findings()
    found = (*journey.items(case), *oxygen.items(case), *pumps.items(case))
    # The packet prints them in full; in a handover they stand in the appendix, or on page one with a flag.
    return Findings(tuple(replace(item, detail=True) for item in found))
