"""``handoff check``: is the file fit to draft from?"""

from __future__ import annotations

from handoff.cli.edge import (
    AtOption,
    BundledOption,
    FileArgument,
    PolicyOption,
    open_or_stop,
    say,
    setup_or_stop,
    who,
)


def check(
    file: FileArgument, at: AtOption = "", policy: PolicyOption = None, bundled_only: BundledOption = False
) -> None:
    """Check a patient-state file: every fault with its line and what to do.

    Example: handoff check ferrandel.yaml
    """
    loaded = open_or_stop(file, setup_or_stop(policy, bundled_only), at)
    for fault in loaded.unusual:
        say(fault.said(loaded.state.file))
    count = len(loaded.unusual)
    said = f"{count} unusual value{'s' if count > 1 else ''} to check" if count else "no faults"
    say(f"{file}: {who(loaded.state)}: {said}")
