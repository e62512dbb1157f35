"""``handoff schema``: the merged JSON Schema for editors."""

from __future__ import annotations

import json

from handoff.cli.edge import BundledOption, PolicyOption, say, setup_or_stop


def schema(policy: PolicyOption = None, bundled_only: BundledOption = False) -> None:
    """Print the merged JSON Schema, so that an editor completes and checks the file.

    Example: handoff schema > patient-state.schema.json
    """
    from handoff.state.schema import editor_schema

    setup = setup_or_stop(policy, bundled_only)
    say(json.dumps(editor_schema(setup.schema), ensure_ascii=False, indent=1))
