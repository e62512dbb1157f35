"""The two shapes of item that plugins share."""

from __future__ import annotations

from datetime import UTC, datetime

from handoff import plugin
from handoff.plugin import Flag, Part, Source, System, fact, gap
from tests.packaging.project import ROOT

PAPER = Source("a-paper", "A Author. A paper. 2020.", "p. 1", "study")
OTHER = Source("another", "B Author. Another. 2021.", "p. 2", "study")


def test_an_item_with_sources_cites_each_once_in_their_order() -> None:
    item = fact("demo.one", "One", "1 mL", system=System.FLUID, sources=[OTHER, PAPER, OTHER])
    assert item.sources == (OTHER, PAPER)
    assert not item.repeats


def test_an_item_without_a_source_only_repeats_what_was_charted() -> None:
    item = fact("demo.one", "One", "as charted", system=System.SKIN)
    assert item.repeats
    assert (item.part, item.flag, item.rank, item.detail) == (Part.ASSESSMENT, Flag.NONE, None, False)


def test_everything_that_is_given_stands_in_the_item() -> None:
    seen = datetime(2026, 3, 14, 15, 0, tzinfo=UTC)
    item = fact(
        "demo.one", "One", "2 points", system=System.AIRWAY, value=2, unit="points", part=Part.SITUATION,
        as_of=seen, flag=Flag.ACTION, cautions=["a method"], rank=12, detail=True, line=7,
    )  # fmt: skip
    given = (item.key, item.label, item.shown, item.system, item.value, item.unit, item.part)
    assert given == ("demo.one", "One", "2 points", System.AIRWAY, 2, "points", Part.SITUATION)
    assert (item.as_of, item.flag, item.cautions) == (seen, Flag.ACTION, ("a method",))
    assert (item.rank, item.detail, item.line) == (12, True, 7)


def test_a_gap_is_not_recorded_or_names_what_is_missing() -> None:
    blank = gap("demo.one", "One", system=System.FLUID, unit="mL", rank=3)
    assert (blank.shown, blank.value, blank.flag) == ("not recorded", None, Flag.NOT_RECORDED)
    assert (blank.unit, blank.rank, blank.repeats) == ("mL", 3, True)
    wanting = gap("demo.one", "One", "weight", system=System.FLUID, sources=[PAPER], cautions=["one"])
    assert wanting.shown == "not computed: weight"
    assert (wanting.flag, wanting.sources, wanting.cautions) == (Flag.NOT_RECORDED, (PAPER,), ("one",))


def test_the_contract_offers_both_so_that_no_plugin_keeps_its_own_copy() -> None:
    assert {"fact", "gap", "NOT_RECORDED"} <= set(plugin.__all__)
    copies = [
        path.name for path in (ROOT / "plugins").glob("*/*.py") if "\ndef fact(" in path.read_text("utf-8")
    ]
    assert copies == []
