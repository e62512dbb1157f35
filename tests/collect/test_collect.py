"""Ticks of a care plan that came back: read after any save, shown where in doubt, written by insertion."""

from __future__ import annotations

import shutil
import subprocess
from functools import lru_cache
from pathlib import Path

import pytest

from handoff.collect.collecting import Collected, collect
from handoff.collect.identity import NotThisPlan
from handoff.collect.package import returned
from handoff.document.documents import draft
from handoff.shift.due import due_list
from handoff.shift.wording.word_text import NotADocument
from handoff.state.access import words
from handoff.state.nodes import List, Map, plain
from handoff.work import assess_loaded, open_text
from tests.chart.charts import example, setup
from tests.collect.filling import (
    changed,
    filled,
    saved_elsewhere,
    without,
    without_bookmarks,
    without_controls,
    zipped,
)
from tests.document.reading import WORD, parts

MADE_AT, NEXT_MORNING = "2026-03-14 19:30", "2026-03-15 07:30"
STATE = example("house-fire")
TICKS = {
    "A2:1815-overdue": "19:35 JO",
    "A2:2015": "20:20 JO",
    "A2:0015": "0:20 JO",
    "A2:2215": "JO",
    "A1:once": "1950 KL",
}


@lru_cache(maxsize=1)
def plan() -> bytes:
    assessment = assess_loaded(open_text(STATE, "house-fire.yaml", setup(), MADE_AT), setup())
    return draft(assessment, "plan")["plan-care-plan.docx"]


def read(document: bytes, text: str = STATE, now: str = NEXT_MORNING) -> Collected:
    return collect(text, "house-fire.yaml", setup(), returned(document), now)


def entries(done: Collected) -> list[dict[str, str]]:
    block = done.charted.after.state.root.get("collected", List.at(()))
    assert isinstance(block, List)
    return [{str(key): str(value) for key, value in plain(entry).items()} for entry in block]  # type: ignore[attr-defined]


def test_ticks_times_and_initials_stand_in_the_file_with_their_task() -> None:
    done = read(filled(plan(), TICKS))
    found = {(entry["ref"], entry["box"]): entry for entry in entries(done)}
    assert done.problems == ()
    assert {place: (one.get("done"), one.get("by")) for place, one in found.items()} == {
        ("A2", "1815-overdue"): ("2026-03-14 19:35", "JO"),
        ("A2", "2015"): ("2026-03-14 20:20", "JO"),
        ("A2", "0015"): ("2026-03-15 00:20", "JO"),
        ("A2", "2215"): (None, "JO"),
        ("A1", "once"): ("2026-03-14 19:50", "KL"),
    }
    assert found["A2", "2015"]["task"] == "airway_watch.check"
    assert found["A2", "0015"]["due"] == "2026-03-15 00:15"
    assert found["A2", "1815-overdue"]["due"] == "2026-03-14 18:15"
    assert {entry["plan"] for entry in found.values()} == {MADE_AT}


def test_every_byte_that_stood_there_stands_there_still() -> None:
    text = STATE.replace("\n", "\r\n")
    done = read(filled(plan(), TICKS), text)
    assert done.charted.text.startswith(text.rstrip("\r\n"))
    assert "\n" not in done.charted.text.replace("\r\n", "")


def test_ticks_do_not_change_the_digest_and_a_new_value_does() -> None:
    done = read(filled(plan(), TICKS))
    assert done.charted.before.state.digest == done.charted.after.state.digest
    assert any("the file is as it was when the plan was made" in line for line in done.said)
    moved = read(filled(plan(), TICKS), STATE.replace("pulse: 112 /min", "pulse: 113 /min"))
    assert any("the file has moved on since the plan was made" in line for line in moved.said)
    assert moved.charted.lines == done.charted.lines


@pytest.mark.parametrize(
    "save",
    [
        lambda content: changed(content, saved_elsewhere),
        lambda content: changed(content, without_controls),
        lambda content: changed(content, without_bookmarks),
        lambda content: changed(changed(content, saved_elsewhere), without_bookmarks),
        lambda content: without(content, "docProps/core.xml"),
    ],
    ids=[
        "another processor",
        "controls lost",
        "bookmarks lost",
        "tags and bookmarks lost",
        "properties lost",
    ],
)
def test_whatever_a_save_leaves_the_same_is_read(save: object) -> None:
    document = filled(plan(), TICKS)
    assert callable(save)
    saved = read(save(document))
    assert saved.problems == ()
    assert entries(saved) == entries(read(document))


@pytest.mark.skipif(shutil.which("soffice") is None, reason="needs LibreOffice")
def test_libreoffice_saves_and_the_same_is_read(tmp_path: Path) -> None:
    document = tmp_path / "plan.docx"
    document.write_bytes(filled(plan(), TICKS, {"text:X1": "Turn to the left", "due:X1:1": "21:00"}))
    office = ["soffice", f"-env:UserInstallation={(tmp_path / 'lo').as_uri()}", "--headless"]
    subprocess.run(
        [*office, "--convert-to", "docx", "--outdir", str(tmp_path / "saved"), str(document)],
        check=True,
        capture_output=True,
        timeout=120,
    )
    saved = read((tmp_path / "saved" / "plan.docx").read_bytes())
    assert entries(saved) == entries(read(document.read_bytes()))
    assert saved.problems == read(document.read_bytes()).problems


def test_properties_of_the_plan_lost_leave_the_tick_without_its_task() -> None:
    saved = read(without(filled(plan(), TICKS), "docProps/custom.xml"))
    assert len(entries(saved)) == len(TICKS)
    assert all("task" not in entry and entry["text"] for entry in entries(saved))


def test_a_row_added_by_hand_is_read_with_its_text() -> None:
    document = filled(
        plan(),
        {"X1:1": "21:10 KL"},
        {"text:X1": "Turn to the left", "due:X1:1": "21:00", "text:X2": "Ring the sister"},
    )
    done = read(document)
    (entry,) = entries(done)
    assert (entry["text"], entry["due"], entry["done"], entry["by"]) == (
        "Turn to the left",
        "2026-03-14 21:00",
        "2026-03-14 21:10",
        "KL",
    )
    assert done.problems == (
        "X2 'Ring the sister': added by hand and not ticked; plan it for the next shift",
    )


def test_a_second_time_nothing_is_written() -> None:
    once = read(filled(plan(), TICKS))
    again = read(filled(plan(), TICKS), once.charted.text)
    assert (again.charted.lines, again.charted.text) == ((), once.charted.text)
    assert f"{len(TICKS)} ticks of this plan collected before, as they are" in again.said


def test_what_differs_from_an_earlier_collection_is_shown_and_the_file_keeps_it() -> None:
    once = read(filled(plan(), {"A2:2015": "20:20 JO", "A2:2115": "21:15 JO"}))
    again = read(filled(plan(), {"A2:2015": "20:40 KL"}), once.charted.text)
    assert again.charted.text == once.charted.text
    assert again.problems == (
        "A2 20:15: collected before with done 2026-03-14 20:20; by JO; "
        "the document now says done 2026-03-14 20:40; by KL; the file keeps it",
        "A2 21:15: collected before as done, and is not ticked now; the file keeps it",
    )


def test_a_time_that_is_none_is_kept_in_words_and_never_read_as_a_moment() -> None:
    (entry,) = entries(read(filled(plan(), {"A2:2015": "25:61 JO"})))
    assert entry["note"] == "written beside it: 25:61 JO"
    assert "done" not in entry


def test_a_time_that_has_not_come_yet_is_not_read_as_done() -> None:
    (entry,) = entries(read(filled(plan(), {"A2:2015": "22:00 JO"}), now="2026-03-14 21:00"))
    assert "done" not in entry and entry["note"] == "written beside it: 22:00 JO"


def test_initials_without_a_tick_are_shown_and_not_read() -> None:
    done = read(filled(plan(), {}, {"by:A2:2015": "20:20 JO"}))
    assert done.charted.text == STATE
    assert done.problems == ("A2 20:15: not ticked, but '20:20 JO' is written beside it; not collected",)


def _rename(kind: str) -> object:
    def change(root: object) -> None:
        for node in root.iter(f"{WORD}{kind}"):  # type: ignore[attr-defined]
            for key, value in node.attrib.items():
                if value in ("row:A1", "row_A1"):
                    node.set(key, value.replace("A1", "A4"))

    return change


@pytest.mark.parametrize("kind", ["tag", "bookmarkStart"])
def test_a_row_whose_names_disagree_is_shown_and_not_read(kind: str) -> None:
    change = _rename(kind)
    assert callable(change)
    done = read(changed(filled(plan(), {"A1:once": "19:50 KL"}), change))
    assert done.charted.text == STATE
    assert any(
        "a row is named differently by what is left of it (printed A1" in line for line in done.problems
    )
    assert any(line.startswith("A1: the row was not found") for line in done.problems)


def test_a_box_that_looks_otherwise_than_it_is_kept_is_not_read() -> None:
    def change(root: object) -> None:
        for node in root.iter(f"{WORD}t"):  # type: ignore[attr-defined]
            if node.text == "\u2612":
                node.text = "\u2610"

    done = read(changed(filled(plan(), {"A2:2015": "20:20 JO"}), change))
    assert done.charted.text == STATE
    assert done.problems == ("A2 20:15: the box looks empty and is kept as the other; not read",)


def test_a_box_whose_printed_time_was_changed_is_not_read() -> None:
    def change(root: object) -> None:
        node = next(n for n in root.iter(f"{WORD}t") if (n.text or "").strip("\u00a0 ") == "20:15")  # type: ignore[attr-defined]
        node.text = "\u00a020:45\u00a0"

    done = read(changed(filled(plan(), {"A2:2015": "20:20 JO"}), change))
    assert done.charted.text == STATE
    assert done.problems == ("A2 20:45: its tag belongs to another box (A2 2015); it was not read",)


def test_a_copied_row_is_not_read() -> None:
    def change(root: object) -> None:
        from copy import deepcopy

        row = next(
            n
            for n in root.iter(f"{WORD}tr")
            if any(t.get(f"{WORD}val") == "row:A1" for t in n.iter(f"{WORD}tag"))
        )  # type: ignore[attr-defined]
        row.addnext(deepcopy(row))

    done = read(changed(filled(plan(), {"A1:once": "19:50 KL"}), change))
    assert done.charted.text == STATE
    assert "A1: the row stands more than once in the document; none was read" in done.problems


@pytest.mark.parametrize(
    ("old", "new", "told"),
    [
        ("HSH-204518", "HSH-204519", "record number: HSH-204518 and HSH-204519"),
        ("born: 1985-02-11", "born: 1985-11-02", "birth date: 11 Feb 1985 and 2 Nov 1985"),
        ("name: Tomas Ferrandel", "name: Tomas Ferrandez", "name: Tomas Ferrandel and Tomas Ferrandez"),
    ],
)
@pytest.mark.parametrize("bare", [False, True])
def test_the_plan_of_another_patient_is_refused(old: str, new: str, told: str, bare: bool) -> None:
    document = filled(plan(), TICKS)
    if bare:
        document = without(document, "docProps/custom.xml")
        told = "the document does not print"
    with pytest.raises(NotThisPlan, match=told):
        read(document, STATE.replace(old, new))


def test_a_plan_whose_print_names_another_than_its_properties_is_refused() -> None:
    def change(root: object) -> None:
        for node in root.iter(f"{WORD}t"):  # type: ignore[attr-defined]
            node.text = (node.text or "").replace("Tomas Ferrandel", "Anna Berg")

    document = filled(plan(), TICKS)
    for name in parts(document):
        if name.startswith(("word/document", "word/header")):
            document = changed(document, change, name)
    with pytest.raises(NotThisPlan, match="does not print Tomas Ferrandel"):
        read(document)


def test_a_handover_is_no_care_plan() -> None:
    assessment = assess_loaded(open_text(STATE, "house-fire.yaml", setup(), MADE_AT), setup())
    with pytest.raises(NotThisPlan, match="no care plan"):
        read(draft(assessment, "plan")["plan-handover.docx"])


def _with(name: str, part: bytes) -> bytes:
    return zipped({**parts(plan()), name: part})


@pytest.mark.parametrize(
    ("document", "told"),
    [
        (lambda: b"not a zip", "not a Word document"),
        (lambda: plan()[: len(plan()) // 2], "not a Word document"),
        (lambda: zipped({"mimetype": b"text"}), "not a Word document"),
        (lambda: _with("word/document.xml", b"<a>" + b" " * 40_000_000 + b"</a>"), "unpacks to more"),
        (lambda: _with("word/header9.xml", b"<a>" + b" " * 40_000_000 + b"</a>"), "unpacks to more"),
        (lambda: _with("../escaped.xml", b"<a/>"), "names that Word never gives"),
        (lambda: _with("/escaped.xml", b"<a/>"), "names that Word never gives"),
        (lambda: _with("word\\escaped.xml", b"<a/>"), "names that Word never gives"),
        (lambda: zipped({**parts(plan()), **{f"x{n}": b"" for n in range(2000)}}), "more parts"),
        (lambda: _with("word/document.xml", b'<!DOCTYPE a [<!ENTITY b "c">]><a>&b;</a>'), "document type"),
        (lambda: _with("word/document.xml", b"<a"), "damaged"),
    ],
)
def test_a_document_that_is_none_or_means_harm_is_refused(document: object, told: str) -> None:
    assert callable(document)
    with pytest.raises(NotADocument, match=told):
        returned(document())


def test_the_next_plan_and_the_due_list_know_what_was_ticked() -> None:
    def due(text: str) -> dict[str, tuple[str, str]]:
        assessment = assess_loaded(open_text(text, "house-fire.yaml", setup(), NEXT_MORNING), setup())
        return {line.ref: (line.time, line.text) for line in due_list(assessment).lines}

    done = read(filled(plan(), TICKS))
    before, after = due(STATE)["A2"], due(done.charted.text)["A2"]
    assert before[0] == "since 18:15 on 14 Mar"
    assert after[0] == "since 04:20"
    assert after[1].endswith("ticked done 00:20 by JO")
    assert due(done.charted.text)["A1"][0] == "now"
    next_plan = draft(
        assess_loaded(open_text(done.charted.text, "f", setup(), NEXT_MORNING), setup()), "plan"
    )["plan-care-plan.docx"]
    assert "Ticked done 00:20 by JO in a care plan; chart what was found." in returned(next_plan).printed


def test_a_tick_that_was_struck_out_counts_nowhere() -> None:
    done = read(filled(plan(), {"A2:2015": "20:20 JO"}))
    text = done.charted.text.replace(
        "by: JO, written: 2026-03-15 07:30}",
        "by: JO, written: 2026-03-15 07:30, struck: {by: EM, at: 2026-03-15 07:30, why: not done}}",
    )
    state = open_text(text, "f", setup(), NEXT_MORNING)
    block = state.state.written["collected"]
    assert isinstance(block, List) and isinstance(block[0], Map) and words(block[0].get("ref")) == "A2"
    assert all("Ticked" not in " ".join(a.cautions) for a in assess_loaded(state, setup()).actions)
