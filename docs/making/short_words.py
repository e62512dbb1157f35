"""The page of short words: every entry that ``handoff chart`` understands, by plugin."""

from __future__ import annotations

from docs.making.text import code, codes, page, table
from handoff.chart.lexicon import lexicon
from handoff.chart.listing import by_group, listed_words, rows
from handoff.registry import Setup

HEADS = ("for example", "what it charts", "how it is said")


def short_words(setup: Setup) -> str:
    """Return the page of short words for the plugins of ``setup``."""
    sections = []
    for group, meanings in by_group(lexicon(setup)):
        lines = [(code(example), means, codes(says)) for example, means, says in rows(meanings)]
        words = [f"- {called}: {codes(listed)}" for called, listed in listed_words(meanings).items()]
        listed = f"Listed words:\n\n{chr(10).join(words)}" if words else ""
        sections.append("\n\n".join(part for part in (f"## {group}", table(HEADS, lines), listed) if part))
    return page("What can be charted in short words", INTRODUCTION, *sections)


INTRODUCTION = """
`handoff chart FILE "urine 35 mL" "pulse 118 /min" --at 15:00 --by EM` puts entries into a
patient-state file and leaves every other byte of it as it was. Each entry is a phrase in quotes. This
page lists what is understood; `handoff chart --words` lists the same for the plugins in use.

- `<name>` stands for what you fill in. A quantity carries its unit: `35 mL`. A listed word may be
  written in capitals or not. `<line>` of a running line is a name that stands in the file.
- `--at 15:00` is today; without it the entry is for now. A time that has not come yet today is asked
  about: after midnight `23:50` is yesterday's. An entry for more than an hour ago is marked as late.
- `--by EM` signs it; the variable `HANDOFF_BY` spares you the typing.
- An unusual value, and a value that is charted already for that minute, are asked about. Where nobody
  can answer, nothing is written until `--confirm` says so.
- `--correct "14:15 pulse 142 /min" --why "misread"` keeps the old value readable under the new one.
  `--strike "14:15 pulse" --why "entered in error, wrong patient"` keeps the entry, and counts it nowhere.
- A phrase that is not understood, or that could mean two things, writes nothing.
"""
