"""The tables, the schema and the code name the same things."""

from __future__ import annotations

import json

from handoff.bundled.airway_watch import charted, concern, facts, oxygen, schedule
from handoff.bundled.airway_watch.exposure import exposure

from handoff.registry import part_of

from .build import airway, case_of, minute, setup_of, state_data

PARAMETERS = setup_of().parameters["airway_watch"]
BLOCK = setup_of().schema["properties"]["airway_watch"]["properties"]
SIGN_KEYS = BLOCK["signs"]["items"]["properties"]
ENTRY_KEYS = {"at", "worse", "by", "written", "note", "confirmed", "corrects", "struck"}


def test_every_sign_of_the_schema_is_read_and_no_other() -> None:
    assert set(charted.SIGNS) == set(SIGN_KEYS) - ENTRY_KEYS
    assert len(charted.SIGNS) == len(set(charted.SIGNS))


def test_every_entry_of_every_list_can_be_looked_up_and_every_lookup_is_used() -> None:
    tables = [PARAMETERS.table(key) for key in PARAMETERS.ids("list.")]
    named = {name for table in tables for name in table["entries"]} | {
        table["needs"] for table in tables if "needs" in table
    }
    assert named == set(facts.ENTRIES)


def test_the_score_has_as_many_items_as_it_has_points() -> None:
    case = case_of(state_data({}), minute(60))
    seen = exposure(case)
    about = facts.record(case, seen, schedule.watch(case, seen))
    assert len(concern.score_entries(about)) == PARAMETERS.table("score.clark")["highest"]


def test_every_device_of_the_tables_is_one_that_can_be_charted() -> None:
    devices = set(BLOCK["oxygen"]["items"]["properties"]["device"]["enum"])
    for key in ("fio2.teaching", "fio2.textbook"):
        assert set(PARAMETERS.table(key)) - {"title"} <= devices
    assert set(PARAMETERS.table("full_oxygen")["devices"]) <= devices
    assert {oxygen.ROOM_AIR, oxygen.HYPERBARIC, *oxygen.SET_DEVICES} <= devices


def test_every_venturi_valve_has_its_percent() -> None:
    valves = set(BLOCK["oxygen"]["items"]["properties"]["valve"]["enum"])
    assert valves == {*PARAMETERS.table("fio2.venturi"), "orange"}


def test_every_rule_set_that_can_be_chosen_is_there() -> None:
    for choice in ("schedule", "half_life", "raised", "fio2", "cyanide"):
        for name in PARAMETERS.choices[choice].among:
            assert f"{choice}.{name}" in PARAMETERS


def test_what_is_from_memory_says_so() -> None:
    memory = {key for key in PARAMETERS.ids() if PARAMETERS[key].kind == "from memory"}
    assert memory == {
        "schedule.hourly-48h",
        "half_life.room_air",
        "list.sfar-2020",
        "list.abls-2018",
        "fio2.venturi_orange",
    }
    assert "From memory" in PARAMETERS.source_of("half_life.room_air").shown()


def test_the_plugin_is_the_one_that_it_says() -> None:
    assert (airway.name, airway.requires) == ("airway_watch", ("area",))
    assert json.loads(part_of(airway, "schema.json") or "")["title"]
