"""The tables and the schema agree, and every number can be traced."""

from __future__ import annotations

import json
from typing import Any

import pytest

from handoff.plugin import Parameters
from handoff.registry import parameters_of, part_of

from .build import bundled

PLUGIN = bundled("pain")
PARAMETERS: Parameters = parameters_of(PLUGIN)
SCHEMA: dict[str, Any] = json.loads(part_of(PLUGIN, "schema.json") or "{}")
DEFS = SCHEMA["$defs"]


def spellings(table: str) -> list[str]:
    found = []
    for name, entry in PARAMETERS.table(table).items():
        found += [name, *entry.get("also", ())]
    return found


def test_the_schema_knows_every_drug_every_route_and_every_scale_of_the_tables() -> None:
    assert DEFS["drug"]["else"]["enum"] == spellings("drugs")
    assert DEFS["route"]["enum"] == spellings("routes")
    assert DEFS["scale"]["else"]["enum"] == [name.removeprefix("scale.") for name in PARAMETERS.ids("scale.")]


@pytest.mark.parametrize("table", ["drugs", "routes"])
def test_no_spelling_means_two_things(table: str) -> None:
    found = spellings(table)
    assert len(found) == len(set(found))


def test_the_schema_knows_every_group_of_drugs() -> None:
    groups = [entry["group"] for entry in PARAMETERS.table("drugs").values()]
    groups = [group for group in groups if group != "paracetamol"]  # only paracetamol itself counts as such
    assert DEFS["drug"]["then"]["properties"]["group"]["enum"] == list(dict.fromkeys(groups))


@pytest.mark.parametrize("identifier", PARAMETERS.ids("factors."))
def test_a_factor_belongs_to_an_opioid_that_is_in_the_list(identifier: str) -> None:
    opioids = [name for name, entry in PARAMETERS.table("drugs").items() if entry["group"] == "opioid"]
    headings = {entry["factors"] for entry in PARAMETERS.table("routes").values()}
    for heading, factors in PARAMETERS.table(identifier).items():
        if heading == "called":
            continue
        assert heading in headings
        for name, factor in factors.items():
            assert name.removesuffix("_per_mcg").removesuffix("_per_mcg_h") in opioids
            assert factor > 0
            assert name.endswith("_per_mcg_h") == (heading == "transdermal")


@pytest.mark.parametrize("identifier", PARAMETERS.ids("cut."))
def test_cut_points_rise_and_end_with_their_scale(identifier: str) -> None:
    bounds = list(PARAMETERS.table(identifier)["bounds"].values())
    assert bounds == sorted(set(bounds))
    highest = {"cpot": 8, "bps": 12}.get(identifier.removeprefix("cut."), 10)
    assert bounds[-1] == highest


@pytest.mark.parametrize("choice", list(PARAMETERS.choices))
def test_every_rule_set_of_a_choice_is_there(choice: str) -> None:
    prefixes = {
        "opioid_factors": "factors.", "paracetamol_limit": "paracetamol.", "ibuprofen_limit": "ibuprofen.",
        "reassess": "reassess.", "pain_classes": "cut.", "flacc_classes": "cut.", "oral_lead": "lead.oral.",
    }  # fmt: skip
    for name in PARAMETERS.choices[choice].among:
        if choice not in ("bps_class", "other_routes"):  # these say how a table is used
            assert PARAMETERS.ids(prefixes[choice] + name)
    assert PARAMETERS.choices[choice].why


def test_an_unusual_dose_is_named_for_listed_drugs_and_headings() -> None:
    headings = {entry["factors"] for entry in PARAMETERS.table("routes").values()}
    for drug, limits in PARAMETERS.table("unusual_dose").items():
        assert drug in PARAMETERS.table("drugs")
        assert set(limits) <= headings


def test_no_label_row_allows_more_at_a_lower_weight() -> None:
    rows = PARAMETERS.table("paracetamol.eu_label")["rows"]
    tops = [
        min(row["daily_mg_per_kg"] * row["up_to_kg"], row.get("daily_cap_mg", float("inf")))
        if "up_to_kg" in row
        else row["daily_mg"]
        for row in rows
    ]
    assert tops == sorted(tops)
    assert [row.get("above_kg", 0) for row in rows[1:]] == [row["up_to_kg"] for row in rows[:-1]]


def test_every_number_says_where_it_comes_from() -> None:
    for identifier in PARAMETERS.ids():
        source = PARAMETERS.source_of(identifier)
        assert source.kind in ("common practice", "from memory") or source.citation
        assert source.locator
