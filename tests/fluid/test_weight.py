"""A weight far outside the growth tables must be confirmed; the tables are those that were published."""

from __future__ import annotations

import importlib
from typing import Any

import pytest
import yaml

from handoff.registry import part_of

from .build import bundled, burned, computed, faults, item, order

formula = importlib.import_module("handoff.bundled.fluid.formula")


def charted(kg: str, born: str, **patient: Any) -> list[str]:
    weights = [{"value": kg, "kind": "before burn", "known": "measured"}]
    return faults(burned(None, "5 %", born=born, patient={"weights": weights, "sex": "female", **patient}))


def test_a_usual_weight_is_not_asked_about() -> None:
    assert charted("11.2 kg", "2024-07-02") == []
    assert charted("3.4 kg", "2026-03-10") == []
    assert charted("82 kg", "1985-02-11", height="178 cm") == []


@pytest.mark.parametrize(
    ("kg", "born", "height", "said"),
    [
        ("24.7 kg", "2024-07-02", None, "pounds taken for kilograms (25 lb is 11.2 kg)"),
        ("112 kg", "2024-07-02", None, "ten times too high (11.2 kg)"),
        ("2.4 kg", "2019-01-02", None, "ten times too low (24 kg)"),
        ("90 kg", "2012-01-01", None, "pounds taken for kilograms (90 lb is 40.8 kg)"),
        ("88 kg", "2012-01-01", "148 cm", "pounds taken for kilograms (88 lb is 39.9 kg)"),
        ("181 kg", "1985-02-11", "178 cm", "pounds taken for kilograms (181 lb is 82.1 kg)"),
        ("165 kg", "1985-02-11", None, "pounds taken for kilograms (165 lb is 74.8 kg)"),
        ("37 kg", "1985-02-11", "178 cm", "turned from pounds twice (before that 81.6 kg)"),
    ],
)
def test_a_weight_far_outside_says_what_slip_it_would_fit(
    kg: str, born: str, height: str | None, said: str
) -> None:
    (found,) = charted(kg, born, **({"height": height} if height else {}))
    assert found.startswith(f"patient.weights[1].value: {kg} is far outside")
    assert said in found
    assert found.endswith("and add the height") is (height is None)


def test_the_table_is_named_with_its_edition() -> None:
    assert "WHO Child Growth Standards, 2006" in charted("24.7 kg", "2024-07-02")[0]
    assert "WHO growth reference, 2007" in charted("88 kg", "2012-01-01", height="148 cm")[0]


def test_a_confirmed_weight_is_not_asked_about_again() -> None:
    entry = {"value": "24.7 kg", "kind": "before burn", "known": "measured", "confirmed": "yes"}
    assert faults(burned(None, "5 %", born="2024-07-02", patient={"weights": [entry]})) == []


def test_an_unknown_sex_takes_both_tables_and_an_estimated_age_its_whole_year() -> None:
    weights = [{"value": "18.5 kg", "kind": "before burn", "known": "measured"}]
    patient = {"weights": weights, "estimated_age": "2 years", "born": None, "sex": "unknown"}
    state = burned(None, "5 %", patient=patient)
    del state["patient"]["born"]
    assert faults(state) == []
    state["patient"]["weights"][0]["value"] = "24 kg"
    assert len(faults(state)) == 1


def test_without_an_age_no_table_is_applied() -> None:
    state = burned("24.7 kg", "5 %")
    del state["patient"]["born"]
    assert faults(state) == []


def tables() -> list[tuple[str, dict[str, Any]]]:
    data = yaml.safe_load(part_of(bundled("fluid"), "parameters.yaml") or "")
    return [
        (name, entry["value"])
        for name, entry in data["parameters"].items()
        if name.startswith("growth.") and isinstance(entry["value"], dict) and "l" in entry["value"]
    ]


def test_every_kept_value_is_that_of_the_published_table() -> None:
    """The whole tables are carried by a package of the registry; it is needed here only."""
    by_day = pytest.importorskip("pygrowup.tables.by_day.wfa")
    modules = {
        ("weight_for_age", "2006"): by_day,
        ("weight_for_age", "2007"): importlib.import_module("pygrowup.tables.by_month.wfa"),
        ("bmi_for_age", "2006"): importlib.import_module("pygrowup.tables.by_day.bmifa"),
        ("bmi_for_age", "2007"): importlib.import_module("pygrowup.tables.by_month.bmifa"),
        ("height_for_age", "2007"): importlib.import_module("pygrowup.tables.by_month.lfa"),
    }
    checked = 0
    for name, table in tables():
        _, what, edition, sex = name.split(".")
        year = edition.removeprefix("who-")
        published = modules[what, year].DATA[sex]
        for index, month in enumerate(table["age_months"]):
            row = published[round(month * 30.4375) if year == "2006" else month]
            for key in ("l", "m", "s"):
                assert table[key][index] == pytest.approx(float(row[key]), abs=1e-9), (
                    f"{name} at {month} months"
                )
                checked += 1
    assert checked > 300


@pytest.mark.parametrize("z", [-3.0, -1.0, 0.0, 2.5, 3.0])
@pytest.mark.parametrize("lms", [(-0.3, 11.1, 0.12), (0.0, 11.1, 0.12), (1.0, 110.0, 0.045)])
def test_a_measure_and_its_z_score_are_two_ways_of_one_thing(
    z: float, lms: tuple[float, float, float]
) -> None:
    assert formula.z_score(formula.at_z_score(z, *lms), *lms) == pytest.approx(z, abs=1e-9)


def weighed(weights: list[dict[str, str]], **choices: str) -> str:
    found = computed(burned(None, "40 %", orders=[order()], patient={"weights": weights}), **choices)
    return " ".join(item(found, "total_24h").cautions)


def test_every_figure_names_the_weight_it_used() -> None:
    before = {"value": "80 kg", "kind": "before burn", "known": "estimated"}
    today = {"value": "92 kg", "kind": "today", "known": "measured"}
    assert "Weight used: 80 kg before burn." in weighed([before, today])
    assert "not measured" in weighed([before, today])
    assert "Weight used: 92 kg today." in weighed([before, today], volume_weight="today")
    assert "may hold oedema" in weighed([today])
    assert "weight before the burn is not recorded" in weighed([today])


def test_urine_by_the_ideal_weight_where_the_policy_asks_for_it() -> None:
    weights = [
        {"value": "120 kg", "kind": "before burn", "known": "measured"},
        {"value": "70 kg", "kind": "ideal", "known": "estimated"},
    ]
    rows = {"12:00": {"urine": {"volume": "35 mL", "over": "1 h"}}}
    state = burned(None, "40 %", orders=[order()], rows=rows, patient={"weights": weights})
    ideal = item(computed(state, urine_weight="ideal"), "urine_rate")
    assert ideal.value == pytest.approx(0.5)
    assert "Weight used for urine: 70 kg ideal." in ideal.cautions
    assert item(computed(state), "urine_rate").value == pytest.approx(35 / 120)


def test_obesity_is_said_beside_the_figure() -> None:
    state = burned("120 kg", "40 %", orders=[order()], patient={"height": "170 cm"})
    assert "Body mass index 42" in " ".join(item(computed(state), "total_24h").cautions)
