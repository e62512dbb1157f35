"""Corrections and strikes: the new value counts, the old stays readable, and the file keeps every byte."""

from __future__ import annotations

import pytest

from handoff.chart.asking import Ask, Refused
from handoff.state.access import value_of
from tests.chart.charts import HEAD, NOW, charted, example, is_kept, rows, tree

BOTH_QUOTES = """{scale: numeric, score: 9, note: "it's \\"bad\\""}"""
WHY = {"by": "JO", "at": "2026-03-14 19:30", "why": "misread"}


def corrected(text: str, entry: str, now: str = NOW, yes: tuple[str, ...] = ()) -> str:
    done = charted(text, by="JO", correct=entry, why="misread", now=now, yes=yes)
    assert is_kept(text, done.text)
    return done.text


def struck(text: str, entry: str) -> str:
    done = charted(text, by="JO", strike=entry, why="misread")
    assert is_kept(text, done.text)
    return done.text


def row(written: str) -> str:
    return f"{HEAD}observations:\n  2026-03-14:\n    14:15: {written}  # on arrival\n"


def series(text: str, name: str) -> list[str]:
    state = charted(text, "note read back").before.state
    return [str(value_of(reading.node) or reading.node) for reading in state.series(name)]


def test_the_new_value_is_put_around_the_old_one() -> None:
    text = row("{by: EM, pulse: 124 /min, resp: 20 /min}")
    done = charted(text, by="JO", correct="14:15 pulse 142 /min", why="misread")
    assert done.text == text.replace(
        "pulse: 124 /min",
        "pulse: {value: 142 /min, corrects: {value: 124 /min, by: JO, at: 2026-03-14 19:30, why: misread}}",
    )
    assert list(done.lines) == [
        "corrected for Sat 14 Mar 2026 14:15 by JO: misread",
        "  was: pulse 124 /min, charted by EM",
        "  is now: pulse 142 /min",
    ]
    assert series(done.text, "pulse") == ["142 /min"]


def test_the_site_of_a_value_stays_beside_it() -> None:
    text = corrected(row("{by: EM, temp: {value: 35.8 C, site: tympanic}}"), "14:15 temp 35.6 C")
    assert rows(text)["14:15"]["temp"] == {
        "value": "35.6 C",
        "corrects": {"value": "35.8 C", **WHY},
        "site": "tympanic",
    }


def test_another_site_is_put_around_the_whole_of_the_old() -> None:
    text = corrected(row("{by: EM, temp: {value: 35.8 C, site: tympanic}}"), "14:15 temp 35.8 C oral")
    assert rows(text)["14:15"]["temp"]["corrects"]["value"] == "{value: 35.8 C, site: tympanic}"


def test_what_was_confirmed_before_confirms_nothing_new() -> None:
    text = row("{by: EM, pulse: {value: 230 /min, confirmed: yes}}")
    fixed = corrected(text, "14:15 pulse 130 /min")
    assert "confirmed" not in rows(fixed)["14:15"]["pulse"]
    with pytest.raises(Ask):
        corrected(text, "14:15 pulse 232 /min")
    assert (
        rows(corrected(text, "14:15 pulse 232 /min", yes=("unusual",)))["14:15"]["pulse"]["confirmed"]
        == "yes"
    )


def test_a_correction_is_corrected_and_every_value_stays_readable() -> None:
    once = corrected(row("{by: EM, pulse: 124 /min}"), "14:15 pulse 142 /min")
    twice = corrected(once, "14:15 pulse 132 /min")
    value = rows(twice)["14:15"]["pulse"]
    assert value["value"] == "132 /min"
    assert "142 /min" in value["corrects"]["value"]
    assert "124 /min" in value["corrects"]["value"]
    assert series(twice, "pulse") == ["132 /min"]


def test_a_score_is_put_around_the_old_score() -> None:
    text = row("{by: EM, pain: {scale: numeric, score: 9, during: rest}}")
    fixed = corrected(text, "14:15 pain 6 numeric at rest")
    assert rows(fixed)["14:15"]["pain"] == {
        "scale": "numeric",
        "score": "6",
        "during": "rest",
        "corrects": {"value": "{scale: numeric, score: 9, during: rest}", **WHY},
    }


@pytest.mark.parametrize(
    ("written", "entry", "key"),
    [
        ("{by: EM, urine: 22 mL, pulse: 120 /min}", "14:15 urine 32 mL", "urine"),
        ("{by: EM, consciousness: alert, pulse: 120 /min}", "14:15 consciousness confused", "consciousness"),
        (f"{{by: EM, pain: {BOTH_QUOTES}, pulse: 120 /min}}", "14:15 pain 6 numeric", "pain"),
    ],
    ids=["no room in the schema", "a listed word", "both kinds of quotes"],
)  # fmt: skip
def test_where_the_old_cannot_stand_inside_it_is_struck_and_the_rest_written_anew(
    written: str, entry: str, key: str
) -> None:
    old, new = rows(corrected(row(written), entry))["14:15"]
    assert old["struck"] == WHY
    assert new["pulse"] == "120 /min"
    assert new["corrects"]["by"] == "JO"
    assert new["corrects"]["value"].startswith(key)
    assert new["by"] == "EM", "what is carried over is still hers"
    assert list(new)[:3] == ["by", key, "pulse"]


def test_a_row_on_lines_of_its_own_is_corrected() -> None:
    lines = ("14:15:  # arrival", "  by: EM", "  pulse: 124 /min  # felt", "  urine: 22 mL\n")
    text = f"{HEAD}observations:\n  2026-03-14:\n    " + "\n    ".join(lines)
    fixed = corrected(corrected(text, "14:15 pulse 142 /min"), "14:15 urine 32 mL")
    old, new = rows(fixed)["14:15"]
    assert old["struck"]["by"] == "JO"
    assert new["pulse"]["value"] == "142 /min"
    assert new["urine"] == "32 mL"
    assert series(fixed, "urine") == ["32 mL"]


def test_a_result_is_corrected() -> None:
    text = f"{HEAD}results:\n  - {{at: 2026-03-14 14:15, by: EM, potassium: 5.4 mmol/L, ecg: sinus rhythm}}\n"
    fixed = corrected(text, "14:15 potassium 4.4 mmol/L")
    assert tree(fixed)["results"][0]["potassium"]["corrects"]["value"] == "5.4 mmol/L"
    fixed = corrected(fixed, "14:15 ecg sinus tachycardia")
    old, new = tree(fixed)["results"]
    assert old["struck"] == WHY
    assert new["ecg"] == "sinus tachycardia"
    assert new["potassium"]["value"] == "4.4 mmol/L"


def test_a_dose_is_struck_and_charted_as_it_was() -> None:
    text = example("house-fire")
    done = charted(text, by="JO", correct="14:30 give paracetamol 500 mg IV", why="half a vial")
    doses = tree(done.text)["pain"]["doses"]
    old = next(dose for dose in doses if dose.get("drug") == "paracetamol")
    assert old["struck"]["why"] == "half a vial"
    assert doses[-1] == {
        "at": "2026-03-14 14:30",
        "drug": "paracetamol",
        "dose": "500 mg",
        "route": "IV",
        "by": "EM",
        "corrects": {"value": "dose 1 g", "by": "JO", "at": "2026-03-14 19:30", "why": "half a vial"},
    }
    assert done.lines[1].endswith("dose 1 g, route IV, charted by EM; struck out, it stays readable")


def test_of_several_doses_of_a_minute_the_nearest_is_corrected() -> None:
    text = charted(
        HEAD, "give morphine 4 mg IV", "give paracetamol 1 g IV", at="15:00", now="2026-03-14 15:00"
    ).text
    doses = tree(corrected(text, "15:00 give morphine 2 mg IV"))["pain"]["doses"]
    assert [dose["dose"] for dose in doses if "struck" not in dose] == ["1 g", "2 mg"]


def test_one_sign_of_a_check_is_corrected_and_the_others_are_carried() -> None:
    text = charted(HEAD, "stridor absent", "hoarse present", at="15:00", now="2026-03-14 15:00").text
    old, new = tree(corrected(text, "15:00 stridor present"))["airway_watch"]["signs"]
    assert "struck" in old
    assert (new["stridor"], new["hoarse voice"]) == ("present", "present")
    assert new["corrects"]["value"] == "stridor absent"


def test_a_value_entered_in_error_is_struck_where_it_stands() -> None:
    text = row("{by: EM, pulse: 124 /min, resp: 20 /min}")
    done = charted(text, by="JO", strike="14:15 pulse", why="entered in error")
    mark = "struck: {by: JO, at: 2026-03-14 19:30, why: entered in error}"
    assert done.text == text.replace("pulse: 124 /min", f"pulse: {{value: 124 /min, {mark}}}")
    assert series(done.text, "pulse") == []
    assert series(done.text, "resp") == ["20 /min"]
    assert done.lines[1] == "  pulse 124 /min, charted by EM"
    with pytest.raises(Refused, match="'pulse' fits nothing"):
        struck(done.text, "14:15 pulse")
    again = charted(done.text, "pulse 118 /min", at="14:15")
    assert series(again.text, "pulse") == ["118 /min"]
    assert "beside" not in " ".join(again.lines)


def test_a_score_is_struck_where_it_stands_alone_or_in_a_list() -> None:
    alone = struck(row("{by: EM, pain: {scale: numeric, score: 9}, resp: 20 /min}"), "14:15 pain")
    assert rows(alone)["14:15"]["pain"] == {"scale": "numeric", "score": "9", "struck": WHY}
    scores = "[{scale: numeric, score: 3, during: rest}, {scale: numeric, score: 7, during: movement}]"
    one = struck(row(f"{{by: EM, pain: {scores}}}"), "14:15 pain 7 numeric on movement")
    assert [score.get("struck") for score in rows(one)["14:15"]["pain"]] == [None, WHY]
    both = struck(row(f"{{by: EM, pain: {scores}, resp: 20 /min}}"), "14:15 pain")
    assert [score.get("struck") for score in rows(both)["14:15"]["pain"]] == [WHY, WHY]


def test_where_a_value_cannot_be_struck_by_itself_the_rest_of_its_row_is_written_anew() -> None:
    text = row("{by: EM, consciousness: alert, resp: 20 /min}")
    old, new = rows(struck(text, "14:15 consciousness"))["14:15"]
    assert old == {"by": "EM", "consciousness": "alert", "resp": "20 /min", "struck": WHY}
    assert new == {"by": "EM", "resp": "20 /min", "corrects": {"value": "consciousness alert", **WHY}}


def test_a_row_with_one_value_is_struck_whole() -> None:
    fixed = struck(row("{by: EM, pulse: 124 /min}"), "14:15 pulse 124 /min")
    assert rows(fixed)["14:15"] == {"by": "EM", "pulse": "124 /min", "struck": WHY}


@pytest.mark.parametrize(
    "entry", ["14:15", "14:15 observations", "14:15 EM", "2026-03-14 14:15 EM observations"]
)
def test_a_whole_row_is_struck_by_its_time_its_list_or_its_author(entry: str) -> None:
    fixed = struck(row("{by: EM, pulse: 124 /min, resp: 20 /min}"), entry)
    assert rows(fixed)["14:15"]["struck"] == WHY


@pytest.mark.parametrize(
    "entry", ["19:10 morphine", "19:10 give morphine 3 mg IV", "2026-03-14 19:10 pain.doses"]
)
def test_an_entry_of_a_list_is_struck_by_its_words(entry: str) -> None:
    doses = tree(struck(example("house-fire"), entry))["pain"]["doses"]
    assert [dose["at"] for dose in doses if "struck" in dose] == ["2026-03-14 19:10"]


def test_an_entry_that_stands_once_is_struck_and_not_corrected() -> None:
    text = charted(HEAD, "last food bread and soup", at="15:00", now="2026-03-14 15:00").text
    for entry in ("15:00 last food bread and soup", "15:00 nutrition.last_food", "15:00 soup"):
        assert tree(struck(text, entry))["nutrition"]["last_food"]["struck"] == WHY
    with pytest.raises(Refused, match="stands once in the file; change it by hand"):
        corrected(text, "15:00 last food bread")


def test_where_several_fit_each_is_named_by_line() -> None:
    text = row("[{by: EM, pulse: 124 /min}, {by: JO, pulse: 126 /min}]")
    with pytest.raises(Refused) as refused:
        corrected(text, "14:15 pulse 142 /min")
    assert "fits 2 entries of Sat 14 Mar 2026 14:15" in refused.value.lines[0]
    assert refused.value.lines[1:] == (
        "  line 7: observations: pulse 124 /min, charted by EM",
        "  line 7: observations: pulse 126 /min, charted by JO",
    )
    fixed = rows(corrected(text, "14:15 JO pulse 142 /min"))["14:15"]
    assert fixed[0] == {"by": "EM", "pulse": "124 /min"}
    assert fixed[1]["pulse"]["value"] == "142 /min"


@pytest.mark.parametrize(
    ("asked", "what"),
    [
        (
            {"correct": "14:15 pulse 124 /min"},
            "is what stands there for Sat 14 Mar 2026 14:15; nothing to correct",
        ),
        ({"correct": "14:15 resp 22 /min"}, "fits nothing that is charted for Sat 14 Mar 2026 14:15; there:"),
        ({"correct": "14:20 pulse 142 /min"}, "nothing is charted for Sat 14 Mar 2026 14:20"),
        ({"correct": "pulse 142 /min"}, "name the entry by its time and words"),
        ({"correct": "14:15 pulse 142"}, "'142' has no unit"),
        ({"correct": "14:15 pulse 400 /min"}, "is not possible here"),
        ({"strike": "14:15 pulse 130 /min"}, "fits nothing that is charted"),
        ({"strike": "14:15 give morphine 4 mg IV"}, "fits nothing that is charted"),
        ({"strike": "14:15 pulse 124"}, "'124' has no unit"),
        ({"strike": "14:15 puls"}, "did you mean 'pulse'"),
    ],
)
def test_what_cannot_be_changed_is_refused(asked: dict[str, str], what: str) -> None:
    with pytest.raises(Refused, match=what.replace("(", r"\(")):
        charted(row("{by: EM, pulse: 124 /min}"), by="JO", why="misread", **asked)


def test_one_score_of_two_is_corrected_and_the_other_stands() -> None:
    scores = "[{scale: numeric, score: 3, during: rest}, {scale: numeric, score: 7, during: movement, site: left hand}]"
    fixed = rows(corrected(row(f"{{by: EM, pain: {scores}}}"), "14:15 pain 8 numeric on movement"))["14:15"][
        "pain"
    ]
    assert fixed[0] == {"scale": "numeric", "score": "3", "during": "rest"}
    assert (fixed[1]["score"], fixed[1]["site"]) == ("8", "left hand")
    assert "score: 7" in fixed[1]["corrects"]["value"]


def test_one_finding_of_a_limb_is_corrected_and_the_others_are_kept() -> None:
    limbs = "[{region: right hand, pulse: weak, refill: 4 s}, {region: left hand, pulse: present}]"
    done = charted(
        row(f"{{by: EM, limbs: {limbs}}}"), by="JO", correct="14:15 limb right hand pulse absent", why="x"
    )
    first, second = rows(done.text)["14:15"]["limbs"]
    assert (first["pulse"], first["refill"]) == ("absent", "4 s")
    assert second == {"region": "left hand", "pulse": "present"}
    assert done.lines[1:] == (
        "  was: limbs region right hand, pulse weak, refill 4 s, charted by EM",
        "  is now: limbs region right hand, pulse absent, refill 4 s",
    )


def test_what_is_confidential_is_neither_told_nor_touched() -> None:
    block = "confidential: {safeguarding: [{at: 2026-03-14 14:15, note: secret}]}\n"
    text = row("{by: EM, pulse: 124 /min}") + block
    with pytest.raises(Refused) as refused:
        struck(text, "14:15 resp")
    assert "secret" not in "".join(refused.value.lines)
    assert rows(struck(text, "14:15"))["14:15"]["struck"] == WHY


def test_a_struck_entry_is_not_changed_again() -> None:
    text = struck(row("{by: EM, pulse: 124 /min}"), "14:15 pulse")
    with pytest.raises(Refused, match="nothing is charted for"):
        struck(text, "14:15 pulse")


def test_after_midnight_the_evening_is_asked_about_here_too() -> None:
    text = row("{by: EM, pulse: 124 /min}")
    with pytest.raises(Ask):
        charted(text, by="JO", correct="14:15 pulse 142 /min", why="misread", now="2026-03-15 00:20")
    assert "142 /min" in corrected(text, "14:15 pulse 142 /min", now="2026-03-15 00:20", yes=("yesterday",))


def test_a_reason_in_any_words_is_read_back() -> None:
    why = 'entered in error: "wrong" patient, bed 4 # not 3'
    done = charted(row("{by: EM, pulse: 124 /min}"), by="JO", strike="14:15", why=why)
    assert rows(done.text)["14:15"]["struck"]["why"] == why
