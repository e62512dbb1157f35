"""What is understood: every example of every plugin on every invented patient, and what is said of the rest."""

from __future__ import annotations

import time
from fnmatch import fnmatch
from functools import lru_cache

import pytest

from handoff.chart.asking import Refused
from handoff.chart.lexicon import lexicon
from handoff.chart.listing import lines
from handoff.chart.meanings import ADDITION, Meaning
from handoff.chart.phrases import NotUnderstood, understand
from handoff.chart.slots import Free, slot_for
from handoff.plugin import Findings, Plugin
from handoff.policy import Policy
from handoff.registry import PluginError, prepare
from handoff.work import assess_loaded
from tests.chart.charts import MOMENTS, charted, example, is_kept, setup, tree, words

EXAMPLES = [
    (meaning, said)
    for meaning in words().meanings
    for said in meaning.examples
    if meaning.kind != ADDITION  # these need an entry that stands: see test_adding
]
MUCH = (
    "tube feed 40 mL/h",
    "feeding tube confirmed",
    "bowels opened",
    "dressing chest: silver foam",
    "slept 4 h",
)
BEGUN = "start infusion A1 ketamine 10 mg/h IV"


@lru_cache(maxsize=8)
def prepared(name: str) -> str:
    """Return an invented patient with the lines that the examples speak of."""
    text, now = example(name), MOMENTS[name]
    earlier = now[:-1] + "0" if not now.endswith("0") else f"{now[:11]}{int(now[11:13]) - 1:02d}:30"
    begun = [BEGUN] if "line: R1" in text else [BEGUN, "start R1 lactated Ringer's 40 mL/h resuscitation"]
    return charted(text, *begun, at=earlier, now=now).text


@pytest.mark.parametrize("name", MOMENTS)
@pytest.mark.parametrize(("meaning", "said"), EXAMPLES, ids=[said for _, said in EXAMPLES])
def test_every_example_is_charted_where_it_belongs(name: str, meaning: Meaning, said: str) -> None:
    text = prepared(name)
    if meaning.place == "patient.allergies" and "allergies: none known" in text:
        with pytest.raises(Refused, match=r"patient\.allergies is not a list; change it by hand"):
            charted(text, said, now=MOMENTS[name])
        return
    done = charted(text, said, now=MOMENTS[name], yes=("unusual", "again"))
    assert is_kept(text, done.text)
    assert understand(said, words()).meaning is meaning
    before, after = tree(text), tree(done.text)
    rows = {"observation": ("observations",), "result": ("results",)}
    at = rows.get(meaning.kind) or meaning.path(understand(said, words()).values)
    for step in at[:-1]:
        before, after = before.get(step, {}), after[step]
    assert after[at[-1]] != before.get(at[-1])


def test_every_key_of_a_row_can_be_charted() -> None:
    row = setup().schema["properties"]["observations"]["x-row"]["properties"]
    placed = {meaning.place for meaning in words().meanings if meaning.kind == "observation"}
    signed = {"by", "written", "confirmed", "corrects", "struck"}
    assert sorted(set(row) - placed - signed) == []


def test_every_result_can_be_charted() -> None:
    row = setup().schema["properties"]["results"]["items"]["properties"]
    placed = {meaning.place for meaning in words().meanings if meaning.kind == "result"}
    signed = {"at", "by", "written", "confirmed", "corrects", "struck", "note"}
    assert sorted(set(row) - placed - signed) == []


def test_every_figure_worth_saying_is_one() -> None:
    keys = set()
    for name, now in MOMENTS.items():
        done = charted(prepared(name), *MUCH, now=now)
        keys |= {item.key for item in assess_loaded(done.after, setup()).items}
    assert [total for total in words().totals if not any(fnmatch(key, total) for key in keys)] == []


@pytest.mark.parametrize(
    ("said", "answer"),
    [
        ("pulse 118", "'118' has no unit; write 118 /min"),
        ("urine 35", "'35' has no unit; write 35 mL or 35 L"),
        ("temp 36.4", "'36.4' has no unit; write 36.4 C or 36.4 F"),
        ("give morphine 4 IV", "'4' has no unit; write 4 mg"),
        ("urine 35 cc", "'cc' is an unsafe abbreviation; write mL"),
        ("pulse 118 mmHg", "'118 mmHg' has the unit of another kind of quantity"),
        ("temp 36,4 C", "'36,4 C' has a comma in the number"),
        ("lactate .9 mmol/L", "'.9 mmol/L' has no zero before the point"),
        ("puls 118 /min", "did you mean 'pulse', as in \"pulse 118 /min\"?"),
        ("give morphin 4 mg IV", "'morphin' is not a word for drug; did you mean 'morphine'?"),
        ("strdor absent", "'strdor' is not a word for sign; did you mean 'stridor'?"),
        ("stridor abscent", "'abscent' is not a word for finding; did you mean 'absent'?"),
        ("limb right hand pulse wek", "'wek' is not a word for pulse; did you mean 'weak'?"),
        ("R9 760 mL/h", "no line 'R9' stands in fluid.given; begin one first; there: R1"),
        ("pain 6", 'missing: scale; say it like "pain 6 numeric at rest"'),
        ("give morphine 4 mg", 'missing: route; say it like "give morphine 4 mg IV"'),
        ("weight 84 kg", "missing: kind and known; say it like"),
        ("sats", 'missing: value; say it like "spo2 98 %"'),
        ("itch 4/10", "'4/10' stands where a number is due"),
        ("bp 62/104 mmHg", "has a diastolic at or above the systolic"),
        ("xyzzy", "nothing is called that; handoff chart --words lists what can be said"),
        ("", "the entry holds nothing"),
        ("note a\x07b", "a character that cannot be printed"),
    ],
)
def test_what_is_not_understood_is_named_with_its_cure(said: str, answer: str) -> None:
    words().found.clear()
    words().found["fluid.given", "line"] = ("R1",)
    with pytest.raises(NotUnderstood) as refused:
        understand(said, words())
    assert answer in str(refused.value)


@pytest.mark.parametrize(
    ("said", "value"),
    [
        ("pulse 118/min", "118 /min"),
        ("HR 118 bpm", "118 /min"),
        ("Urine 35ml", "35 mL"),
        ("sats 98%", "98 %"),
        ("temp 98.6 °F", "98.6 F"),
        ("pulse  not   measured", "not measured"),
        ("potassium 5.0 mmol/L", "5.0 mmol/L"),
        ("consciousness confused", "new confusion"),
    ],
)
def test_a_quantity_is_written_with_its_gap_and_its_one_unit(said: str, value: str) -> None:
    assert understand(said, words()).value("at", "by") == value


def test_a_phrase_that_fits_two_meanings_is_refused_and_both_are_named() -> None:
    text = charted(example("house-fire"), "start infusion R1 ketamine 10 mg/h IV", at="19:20").text
    with pytest.raises(Refused) as refused:
        charted(text, "R1 running")
    said = str(refused.value)
    assert "'R1 running' fits 2 meanings" in said
    assert "A fluid line was seen running" in said
    assert "A drug infusion was seen running" in said
    assert charted(text, "infusion R1 running").after.state.at_path("pain", "infusions") is not None
    assert charted(text, "R1 25 mg/h").text != text, "the unit tells the two apart"


def test_what_a_plugin_knows_as_its_own_words_is_not_taken_as_free_text() -> None:
    assert understand("pupils unreactive 1", words()).meaning.place == "pupils_unreactive"
    assert understand("pupils equal, 3 mm", words()).meaning.place == "pupils"


@pytest.mark.parametrize("said", ["wound ", "for at 4 mg ", "x: y, "])
def test_a_long_text_that_means_nothing_is_refused_at_once(said: str) -> None:
    begun = time.monotonic()
    for length in (99, 399, 4000):
        with pytest.raises(NotUnderstood):
            understand((said * length)[:length], words())
    assert time.monotonic() - begun < 20


def test_words_that_should_have_been_in_quotes_are_explained() -> None:
    with pytest.raises(Refused, match='put each entry in quotes: handoff chart FILE "urine 35 mL"'):
        charted(example("house-fire"), "urine", "35", "mL")


def test_the_list_holds_every_example_and_fits_the_screen() -> None:
    said = list(lines(words()))
    assert max(map(len, said)) <= 80
    flat = " ".join(" ".join(said).split())
    for meaning in words().meanings:
        assert f'"{meaning.examples[0]}": ' in flat


def one_phrase(say: str, entry: str, place: str = "events") -> str:
    phrase = f'"say": "{say}", "example": "x 1", "means": "x", "list": "{place}", "entry": {entry}'
    return f'{{"phrases": [{{{phrase}}}]}}'


@pytest.mark.parametrize(
    ("part", "fault"),
    [
        ("{", "is not JSON"),
        ('{"observations": {"puls": ["puls"]}}', "observations have no key 'puls'"),
        (one_phrase("x <a>", "{}", "no.list"), "'no.list' is not a list"),
        (one_phrase("x <a>", "{}", "pain.goal"), "'pain.goal' is not a list"),
        (one_phrase("x <a>", '{"wat": "<a>"}'), "the entry has no key 'wat'"),
        (one_phrase("x <a>", '{"said": "y"}'), "<a> goes nowhere"),
        (one_phrase("x", '{"said": "<a>"}'), "'x' never says <a>"),
        (one_phrase("x <a:y>", '{"said": "<a>"}'), "write word, known or a kind of quantity"),
    ],
)
def test_a_faulty_list_of_words_names_its_plugin(
    part: str, fault: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    plugin = Plugin("small", "Small", "handoff.bundled.overview", lambda case: Findings())
    made = prepare(Policy(), [plugin])
    monkeypatch.setattr("handoff.chart.lexicon.part_of", lambda plugin, name: part)
    with pytest.raises(PluginError) as refused:
        lexicon(made)
    assert "words.json of the plugin 'small'" in str(refused.value)
    assert fault in str(refused.value)


def test_a_plugin_without_words_is_charted_by_its_keys() -> None:
    part = setup().schema["properties"]["observations"]["x-row"]["properties"]["itch"]
    assert not isinstance(slot_for("itch", part, {}), Free)
    assert understand("itch 4", words()).value("", "") == "4"
