"""Unsafe abbreviations, number forms and vague words in free text, by published lists kept in ``rules.yaml``."""

from handoff.shift.wording.find import Finding, check_lines, check_state, count_in_state
from handoff.shift.wording.table import Rules, load_rules

__all__ = ["Finding", "Rules", "check_lines", "check_state", "count_in_state", "load_rules"]
