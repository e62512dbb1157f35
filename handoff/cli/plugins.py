"""``handoff plugins``: which plugins run, in which order, and which rule sets are in use."""

from __future__ import annotations

from handoff.cli.edge import BundledOption, PolicyOption, say, setup_or_stop


def plugins(policy: PolicyOption = None, bundled_only: BundledOption = False) -> None:
    """List the plugins in the order they run, with their rule sets; * marks the one in use.

    Example: handoff plugins --policy unit-policy.yaml
    """
    setup = setup_or_stop(policy, bundled_only)
    for plugin in setup.plugins:
        parameters = setup.parameters[plugin.name]
        needs = f", needs {', '.join(plugin.requires)}" if plugin.requires else ""
        outside = ", outside plugin" if plugin.name in setup.outside else ""
        cited = len(parameters.ids())
        say(f"{plugin.name}: {plugin.title} ({cited} cited values{needs}{outside})")
        for name, choice in parameters.choices.items():
            chosen = parameters.chosen(name)
            marked = ", ".join(f"*{one}" if one == chosen.name else one for one in choice.among)
            by = "chosen by the policy" if chosen.by_policy else f"default: {choice.why}"
            say(f"  {plugin.name}.{name}: {marked}")
            say(f"    {by}")
