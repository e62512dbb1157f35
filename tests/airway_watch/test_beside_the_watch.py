"""What is said of a pressure chamber, of the depth of a tube by published lines, and after an antidote."""

from __future__ import annotations

from typing import Any

from handoff.plugin import Flag
from tests.small_patient import assessed, item, state_text

NAMES = ["area", "airway_watch"]
FIRE = {"causes": [{"kind": "flame", "setting": "enclosed space", "smoke": "yes"}]}


def expected_now(at: str, level: str = "30 %") -> Any:
    block = {
        "carboxyhaemoglobin": [{"at": "2026-03-14 09:00", "value": level}],
        "oxygen": [{"from": "2026-03-14 08:30", "device": "non-rebreather mask", "flow": "15 L/min"}],
    }
    made = assessed(NAMES, state_text(injury=FIRE, airway_watch=block), at=at)
    return item(made, "airway_watch.carboxyhaemoglobin_now")


def test_a_chamber_is_named_while_a_raised_level_is_fresh_and_never_later() -> None:
    def named(one: Any) -> bool:
        return any("pressure chamber" in caution for caution in one.cautions)

    early = expected_now("2026-03-14 10:00")
    assert early.flag is Flag.ACTION
    assert named(early)
    assert any("Eichhorn" in source.citation for source in early.sources)
    assert not named(expected_now("2026-03-14 14:01", "80 %"))
    assert not named(expected_now("2026-03-14 10:00", "4 %"))


def lines_of(patient: dict[str, Any], **tube: str) -> list[Any]:
    entry = {"placed": "2026-03-14 09:00", "route": "oral", "size": "8 mm", "depth": "23 cm", **tube}
    made = assessed(NAMES, state_text(patient=patient, injury=FIRE, airway_watch={"tube": [entry]}))
    return [one for one in made.items if one.key == "airway_watch.tube_depth_by_line"]


def test_lines_for_the_depth_stay_in_the_appendix_and_bow_to_the_confirmed_mark() -> None:
    (found,) = lines_of({"height": "170 cm"})
    assert (found.detail, found.flag, found.rank) == (True, Flag.NONE, None)
    assert round(found.value, 6) == 21
    assert "20.7 cm by height and sex (Gomez 2016)" in found.shown
    assert "beats every line" in found.cautions[0]


def test_no_line_is_used_where_it_was_not_made() -> None:
    assert lines_of({"height": "170 cm"}, route="nasal") == []
    assert lines_of({"height": None}) == []
    assert lines_of({"born": "2025-01-01", "height": "75 cm"}, size="4 mm") == []
    (child,) = lines_of({"born": "2020-01-01", "height": "115 cm"}, size="5 mm")
    assert child.value == 15


def after_antidote(at: str, drug: str = "hydroxocobalamin") -> list[Any]:
    block = {"antidotes": [{"at": "2026-03-14 09:00", "drug": drug}]}
    made = assessed(NAMES, state_text(injury=FIRE, airway_watch=block), at=at)
    return [one for one in made.items if one.key == "airway_watch.antidote"]


def test_red_urine_after_the_antidote_is_explained_for_five_weeks() -> None:
    (found,) = after_antidote("2026-03-14 19:30")
    assert any("tell the laboratory" in caution for caution in found.cautions)
    assert after_antidote("2026-04-18 08:59") != []
    assert after_antidote("2026-04-18 12:00") == []
