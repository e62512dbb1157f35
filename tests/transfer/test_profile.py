"""A unit writes its own profile: what it asks for, in its order; a slip is named with line and nearest name."""

from __future__ import annotations

from pathlib import Path

import pytest
from msgspec.structs import replace

from handoff.registry import prepare
from handoff.transfer.facts import FACTS
from handoff.transfer.missing import answers, missing
from handoff.transfer.profile import ProfileError, bundled, load_profile, read_profile
from handoff.work import assess_loaded, open_text
from tests.document.reading import cells, tables
from tests.shift.helpers import EXAMPLES, assessed, run, setup, text_of_example
from tests.transfer.helpers import AT, text

OWN = """\
profile: 1
name: Carrow
phones: [{who: burns registrar, number: ext 7001}]
paper: Letter
choices: {area.scores: revised-baux-and-absi, area.referral: uk-2012}
ask: [scores, weight, airway]
extra: [{label: Balance, key: fluid.balance}]
checklist: [Photographs sent to the receiver]
records: [Transfusion record]
observe_every: 10 min
"""


def test_the_bundled_profile_asks_for_every_fact_but_the_scores() -> None:
    assert bundled() == ("burn-centre",)
    assert set(load_profile("burn-centre").ask) == set(FACTS) - {"scores"}


@pytest.mark.parametrize(
    ("wrong", "right", "said"),
    [
        (
            "weigth",
            "ask: [scores, weight",
            "carrow.yaml:6:15: ask[2]: 'weigth' is not a word for this; did you mean 'weight'?",
        ),
        ("phoness:", "phones:", "carrow.yaml:3:1: phoness: unknown key 'phoness'; did you mean 'phones'?"),
        ("A5", "Letter", "carrow.yaml:4:8: paper: 'A5' is not a word for this; "),
        ("10\n", "10 min\n", "carrow.yaml:10:16: observe_every: '10' has no unit"),
    ],
)
def test_a_slip_is_named_with_its_line_and_the_nearest_word(wrong: str, right: str, said: str) -> None:
    slip = OWN.replace(right, right.replace("weight", wrong) if "weight" in right else wrong)
    with pytest.raises(ProfileError) as caught:
        read_profile(slip, "carrow.yaml")
    assert caught.value.lines[0].startswith(said)
    assert len(caught.value.lines) == 1


@pytest.mark.parametrize(
    ("profile", "said"),
    [
        ("burn-center", "--to: no profile 'burn-center'; did you mean 'burn-centre'?"),
        (
            OWN.replace("fluid.balance", "fuid.balance"),
            "extra: no plugin reports 'fuid.balance'; did you mean 'fluid'?",
        ),
        (OWN.replace("uk-2012", "uk-2112"), "'uk-2112'"),
        (OWN.replace("area.scores", "aera.scores"), "aera"),
    ],
)
def test_a_profile_that_cannot_be_used_stops_with_four_and_writes_nothing(
    profile: str, said: str, tmp_path: Path
) -> None:
    (tmp_path / "fire.yaml").write_text(text(), encoding="utf-8")
    to: object = profile
    if "\n" in profile:
        to = tmp_path / "carrow.yaml"
        to.write_text(profile, encoding="utf-8")
    done = run("transfer", tmp_path / "fire.yaml", "--at", AT, "--to", to, "--out", tmp_path / "out")
    assert done.code == 4
    assert said in done.err
    assert not (tmp_path / "out").exists()


def test_an_own_profile_sets_order_extras_numbers_scores_criteria_and_paper(tmp_path: Path) -> None:
    (tmp_path / "fire.yaml").write_text(text(), encoding="utf-8")
    (tmp_path / "carrow.yaml").write_text(OWN, encoding="utf-8")
    done = run("transfer", tmp_path / "fire.yaml", "--at", AT, "--to", tmp_path / "carrow.yaml")
    assert done.code == 0, done.err
    folder = tmp_path / "fire-transfer-2026-03-14-1930"
    report = (folder / "fire-1-phone-report.docx").read_bytes()
    rows = {row[1]: row[2] for row in cells(tables(report)["Said"][0])[1:]}
    assert list(rows) == ["Scores asked for", "Weight", "Airway plan for the journey", "Balance"]
    assert "Revised Baux sum" in rows["Scores asked for"]
    assert "63" in rows["Scores asked for"]  # 41 years + 22.1 %, without inhalation injury
    summary = (folder / "fire-2-transfer-summary.docx").read_bytes()
    assert "Scores asked for" in tables(summary)
    journey = (folder / "fire-3-journey-sheet.docx").read_bytes()
    assert cells(tables(journey)["Done"][0])[-1][2] == "Photographs sent to the receiver"
    assert cells(tables(journey)["Time"][0])[2][0].startswith("(20:25)")


def test_scores_are_worked_out_only_where_the_profile_asks() -> None:
    plain = setup()
    for profile, there in ((load_profile("burn-centre"), False), (read_profile(OWN, "carrow.yaml"), True)):
        own = prepare(profile.policy(plain.policy), plain.plugins)
        found = assess_loaded(open_text(text(), "fire.yaml", own, AT), own)
        assert (found.item("area.revised_baux") is not None) is there


@pytest.mark.parametrize("name", EXAMPLES)
def test_every_fact_is_answered_and_nothing_empty_is_said(name: str) -> None:
    assessment = assessed(text_of_example(name), EXAMPLES[name])
    found = answers(assessment, load_profile("burn-centre"))
    assert len(found) == len(FACTS) - 1
    assert all(one.text for one in found)
    assert all(one.text == "not recorded" or one.text for one in found)


def test_what_nobody_recorded_is_missing_and_what_there_may_be_none_of_is_not() -> None:
    assessment = assessed(text_of_example("nearly-empty"), EXAMPLES["nearly-empty"])
    lacking = missing(answers(assessment, load_profile("burn-centre")))
    for asked in ("Weight", "Allergies", "Airway plan for the journey", "Tetanus"):
        assert asked in lacking
    assert not {"Pumps", "Limb perfusion", "Area against earlier assessments"} & set(lacking)


def test_an_extra_figure_that_is_not_there_is_missing() -> None:
    profile = replace(load_profile("burn-centre"), extra=read_profile(OWN, "c.yaml").extra)
    assessment = assessed(text_of_example("nearly-empty"), EXAMPLES["nearly-empty"])
    assert "Balance" in missing(answers(assessment, profile))
