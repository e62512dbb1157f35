"""What the plugin guide shows stands in the example plugin, word for word."""

from __future__ import annotations

import re

from tests.packaging.project import ROOT

GUIDE = (ROOT / "docs" / "plugin-guide.md").read_text(encoding="utf-8")
EXCERPTS = re.findall(r"<!-- from (\S+) -->\n```\w+\n(.*?)```", GUIDE, flags=re.DOTALL)


def test_every_excerpt_of_the_guide_stands_in_the_example() -> None:
    assert len(EXCERPTS) > 5
    for name, excerpt in EXCERPTS:
        assert excerpt in (ROOT / name).read_text(encoding="utf-8"), name
