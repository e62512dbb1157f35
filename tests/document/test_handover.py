"""What the handover says, read out of the Word file."""

from __future__ import annotations

import re

from msgspec.structs import replace

from handoff.document import draft
from handoff.document.read_back import text_of
from handoff.plugin import Flag, Part
from tests.document.fake import STEM, assessment, bare, item, state
from tests.document.reading import body, cells, headings, tables


def made(given: object) -> bytes:
    return draft(given, STEM)[f"{STEM}-handover.docx"]  # type: ignore[arg-type]


def test_headings_of_the_first_level_are_the_four_parts_then_figures_detail_and_appendix(
    handover: bytes,
) -> None:
    assert headings(handover, 1) == [
        "Situation",
        "Background",
        "Assessment",
        "Recommendation",
        "Burn chart, fluid and trends",
        "Detail by system",
        "Working and sources",
        "Not recorded",
    ]


def test_systems_are_second_level_headings_in_the_order_of_the_contract(handover: bytes) -> None:
    found = headings(handover, 2)
    assert found[:5] == ["General", "Airway", "Breathing", "Circulation", "Temperature"]
    assert found.index("Fluid and urine") < found.index("Pain and sedation")


def test_page_one_comes_before_the_situation(handover: bytes) -> None:
    page = text_of(handover)
    order = ["Could not be computed", "Tomas Ferrandel", "sick, may worsen", "NEEDS ACTION", "WHAT TO DO IF"]
    order[4:4] = ["DUE OR OVERDUE"]
    order += ["NOT RECORDED AND NEEDED FIRST", "5 entries are not recorded", "Situation"]
    places = [page.index(words) for words in order]
    assert places == sorted(places)


def test_identity_band_holds_identifiers_age_weight_allergies_decision_and_hours_since_burn(
    handover: bytes,
) -> None:
    page = text_of(handover)
    for words in (
        "born 11 Feb 1985, 41 years",
        "record number HSH-204518",
        "82 kg, before burn, estimated, 14:05",
        "penicillin (rash)",
        "full treatment, Dr A. Quill, 14:40",
        "6 h 10 min since burn",
    ):
        assert words in page


def test_what_can_kill_first_stands_first(handover: bytes) -> None:
    rows = cells(tables(handover)["NEEDS ACTION"][0])
    assert [row[0] for row in rows[1:]] == ["Airway signs present", "Right arm, circumferential"]
    assert "Swelling can close the airway" in rows[1][1]


def test_an_overdue_action_stands_under_due_with_its_reference(handover: bytes) -> None:
    rows = cells(tables(handover)["DUE OR OVERDUE"][0])
    assert ["P1 overdue", "15:30"] in [[row[0], row[2]] for row in rows]


def test_what_does_not_fit_page_one_is_named_there(handover: bytes) -> None:
    (line,) = [line for line in text_of(handover).splitlines() if line.startswith("Also due for review: ")]
    assert "Given since the burn, confirmed; Pain at rest" in line
    assert "Oxygen saturation" not in line  # the late check of vital signs says it


def test_what_is_due_is_named_up_to_eight_times_and_then_counted() -> None:
    given = assessment()
    late = tuple(
        item(f"wounds.late_{n}", f"Dressing {n}", f"soaked, {n}", Part.ASSESSMENT, flag=Flag.REVIEW)
        for n in range(14)
    )
    content = made(replace(given, items=(*given.items, *late)))
    (line,) = [line for line in text_of(content).splitlines() if line.startswith("Also due for review: ")]
    names = line.removeprefix("Also due for review: ").split("; ")
    assert len(names) == 9
    assert re.fullmatch(r"and \d+ more on page two", names[-1])


def test_one_reading_takes_one_row_of_page_one_and_its_reason_is_a_sentence_of_its_own() -> None:
    given = assessment()
    low, again = (
        replace(
            item(key, name, "2.4 mmol/L", Part.ASSESSMENT, flag=Flag.ACTION, rank=rank),
            value=2.4,
            unit="mmol/L",
            as_of=given.now,
            cautions=("measure again soon",),
        )
        for key, name, rank in (("a.low", "Glucose, low", 1), ("b.line", "Glucose beyond a line", 2))
    )
    content = made(replace(given, items=(low, again, *given.items)))
    rows = cells(tables(content)["NEEDS ACTION"][0])
    assert rows[1][:2] == ["Glucose, low", "2.4 mmol/L.  Measure again soon"]
    assert not [row for row in rows if row[0] == "Glucose beyond a line"]
    (line,) = [line for line in text_of(content).splitlines() if line.startswith("Also flagged ACTION: ")]
    assert "Glucose beyond a line" in line


def test_a_long_finding_is_cut_at_a_clause_on_page_one_and_whole_further_on() -> None:
    first, second = "signs looked for one after the other " * 4, "stridor present at 18:00"
    long = item(
        "airway_watch.long", "Airway", f"{first}; {second}", Part.ASSESSMENT, flag=Flag.ACTION, rank=1
    )
    given = assessment()
    content = made(replace(given, items=(long, *given.items)))
    key = cells(tables(content)["NEEDS ACTION"][0])[1][1]
    assert key.endswith("(more further on)")
    assert second not in key
    assert f"{first.strip()} ; {second}" in text_of(content) or f"{first}; {second}" in text_of(content)


def test_every_value_stands_with_its_time_and_its_flag_in_words(handover: bytes) -> None:
    rows = cells(tables(handover)["Airway"][0])
    assert rows == [
        ["Airway", "Value", "Time", "Flag"],
        ["Airway signs present", "3: hoarse voice, soot in mouth, singed nasal hair", "14:15", "ACTION"],
        ["Stridor", "not reassessed since 14:15", "14:15", "REVIEW"],
    ]


def test_each_part_lists_what_is_not_recorded_in_it(handover: bytes) -> None:
    page = text_of(handover)
    assert "Not recorded: Loss of consciousness" in page
    assert "Not recorded: Tetanus" in page
    assert "Not recorded: Consciousness; Sedation score" in page


def test_the_shift_has_a_line_for_each_hour_with_tasks_in_few_words(handover: bytes) -> None:
    rows = cells(tables(handover)["When"][0])
    assert [row[0] for row in rows[1:]] == ["now", "19:30", "20:00", "21:00", "this shift", "later"]
    assert rows[1][1].startswith("A1  | B1 Breaths")
    assert "20:30 " in rows[3][1]
    assert rows[-1][1].startswith("10:00 on 16 Mar ")


def test_the_shift_is_laid_out_in_full_in_the_order_of_time(handover: bytes) -> None:
    rows = cells(tables(handover)["When"][1])
    assert [row[0] for row in rows[1:]] == [
        "now",
        "19:30",
        "20:00",
        "20:30",
        "21:00",
        "this shift",
        "through the shift",
        "10:00 on 16 Mar, after this shift",
    ]
    assert "N2 Dressing change with analgesia before it" in rows[4][1]


def test_pending_results_say_who_is_telephoned(handover: bytes) -> None:
    assert cells(tables(handover)["Awaited"][0])[1] == ["repeat carboxyhaemoglobin", "20:30", "ward"]


def test_the_joint_check_and_the_acceptance_are_there(handover: bytes) -> None:
    page = text_of(handover)
    for words in (
        "Each pump",
        "alarms",
        "tube depth",
        "Emergency kit",
        "Read back by the receiver",
        "Given by",
    ):
        assert words in page


def test_burn_and_fluid_tables_print_what_the_plugins_pass_on(handover: bytes) -> None:
    found = tables(handover)
    assert ["Trunk, back", "epidermal", "3.9", "NOT counted", "no", "37"] in cells(found["Region"][0])
    assert cells(found["Hour"][0])[5] == ["5", "17:20", "748", "0", "760", "not recorded"]


def test_appendix_shows_formula_sum_inputs_with_lines_rule_and_source(handover: bytes) -> None:
    row = next(row for row in cells(tables(handover)["Figure"][0]) if "11,972 mL" in row[0])
    assert "4 mL/kg/% x 82 kg x 36.5 % = 11,972 mL" in row[1]
    assert "Rule: parkland" in row[1]
    assert row[2] == "weight 82 kg (line 12); counted burn 36.5 %; coefficient 4 mL/kg/% (line 31)"
    assert row[3] == "[1] [2]"
    assert "World Example Group. Burn care. Annex 3." in text_of(handover)


def test_a_value_of_the_appendix_only_stands_in_no_part(handover: bytes) -> None:
    page = text_of(handover)
    assert page.count("Catch-up rate") == 1
    assert page.index("Catch-up rate") > page.index("Working and sources")


def test_the_severity_is_the_nurses_word_or_said_to_be_missing() -> None:
    given = assessment()
    without = state(
        "handoff: 1\nclock: Europe/Dublin\npatient: {name: Ada Brisk}\ninjury: {at: 2026-03-14 13:20}\n"
    )
    content = made(replace(given, state=without))
    assert "severity not recorded by the nurse" in text_of(content)


def test_a_file_that_holds_only_a_name_says_what_is_missing_and_never_that_all_is_well() -> None:
    page = text_of(draft(bare(), STEM)[f"{STEM}-handover.docx"])
    assert "no entry was worked out for this section" in page
    assert "that does not say that the patient is well" in page
    for word in ("normal", "stable", "fine"):
        assert f" {word}" not in page.lower()


def test_failures_and_unusual_values_stand_at_the_top(handover: bytes) -> None:
    page = text_of(handover)
    assert page.index("ZeroDivisionError") < page.index("Tomas Ferrandel\n")
    assert "fluid.given[2].volume: 9000 mL is unusual" in page


def test_a_table_that_is_not_as_agreed_is_named_at_the_top_and_the_document_is_made() -> None:
    given = assessment()
    broken = {
        name: replace(found, values={"burns": 3, "hours": ("x",)}) for name, found in given.findings.items()
    }
    content = made(replace(given, findings=broken))
    assert "Burned regions" not in headings(content, 2)
    assert "table 'hours' of the plugin 'fluid': 1 row cannot be printed" in text_of(content)


def test_a_month_of_hours_and_sixty_burns_all_stand_in_their_tables() -> None:
    given = assessment()
    burns, hours = given.findings["area"].values["burns"], given.findings["fluid"].values["hours"]
    assert isinstance(burns, tuple)
    assert isinstance(hours, tuple)
    many = {"burns": burns[:1] * 60, "hours": hours[:1] * 720}
    found = {name: replace(part, values=many) for name, part in given.findings.items()}
    content = tables(made(replace(given, findings=found)))
    assert (len(content["Region"][0]._tbl.tr_lst), len(content["Hour"][0]._tbl.tr_lst)) == (61, 721)


def test_the_body_has_no_empty_heading(handover: bytes) -> None:
    assert all(headings(handover, level) and all(headings(handover, level)) for level in (1, 2))
    assert body(handover) is not None
