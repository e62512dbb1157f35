"""A figure is read as it was meant, or refused with how to write it; never a thousandfold, never by guess."""

from __future__ import annotations

import re

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from handoff.state.access import amount, number, pressure_pair
from handoff.state.nodes import Text
from handoff.state.quantity import QuantityError, comma_cure, read_quantity
from handoff.state.units import ALIASES, KINDS

kinds = st.sampled_from(sorted(KINDS))
units = st.sampled_from(sorted({*ALIASES, *(unit for known in KINDS.values() for unit in known)}))
figures = st.one_of(
    st.from_regex(r"[+-]?[0-9]{1,5}(\.[0-9]{1,4})?", fullmatch=True),
    st.from_regex(r"[0-9.,+\-/eE ]{1,9}", fullmatch=True),
)
texts = st.one_of(
    st.text(max_size=20),
    st.builds(
        lambda figure, gap, unit: f"{figure}{gap}{unit}",
        figures,
        st.sampled_from(["", " ", "  ", "\u00a0"]),
        units,
    ),
)
TAKEN = re.compile(r"[+-]?([1-9][0-9]*|0)(\.[0-9]+)?( *\S.*)? *|[0-9]+/[0-9]+ *mm ?Hg")


@given(kinds, texts)
@example("mass", "")
@example("mass", "82")
@example("mass", "82 kg\n")
@example("mass", "82 kg\x00")
@example("mass", "9" * 400 + " kg")
@example("pressure_pair", "104/62 mmHg")
@example("pressure_pair", "104/62")
@example("pressure_pair", "/")
@example("fraction", "\ud800")
def test_a_text_is_a_quantity_or_an_error_with_its_cure(kind: str, text: str) -> None:
    try:
        quantity = read_quantity(kind, text)
    except QuantityError as refused:
        assert refused.what
        assert refused.cure
        return
    assert TAKEN.fullmatch(text)
    assert quantity.unit in KINDS[kind]
    written = re.match(r"[+-]?[0-9.]+", text)
    assert written
    assert quantity.number == float(written[0])
    assert amount(Text.at(text), quantity.unit, kind) == quantity.number


REFUSED = [
    # kind, text, what is said, cure
    ("volume", "1,200 mL", "has a comma in the number", "write 1200 mL, or 1.2 mL, whichever is meant"),
    ("volume", "1,250 mL", "has a comma in the number", "write 1250 mL, or 1.25 mL, whichever is meant"),
    ("volume", "1,5 L", "has a comma in the number", "write a decimal point: 1.5 L"),
    ("volume", "0,125 L", "has a comma in the number", "write a decimal point: 0.125 L"),
    ("volume", "1,200,000 mL", "has a comma in the number", "write 1200000 mL"),
    ("volume", "1,200.5 mL", "has a comma in the number", "write 1200.5 mL"),
    ("volume", "-1,5 L", "has a comma in the number", "write a decimal point: -1.5 L"),
    ("volume", "1.200 mL", "can be read as 1200 or as 1.2", "write 1200 mL, or 1.2 mL with fewer"),
    ("volume", "12.345 mL", "can be read as 12345 or as 12.345", "write 12345 mL, or"),
    ("voltage", "11.000 V", "can be read as 11000 or as 11", "write 11000 V, or 11 V"),
    ("enzyme", "12.000 U/L", "can be read as 12000 or as 12", "write 12000 U/L"),
    ("dose", "1.250 mg", "can be read as 1250 or as 1.25", "write 1250 mg, or 1.25 mg"),
    ("volume", "1 200 mL", "has a space in the number", "write it without: 1200, not 1 200"),
    ("volume", "1'200 mL", "unknown unit ''200 mL'", "use mL or L"),
    ("dose", "05 mg", "begins with a zero", "write 5 mg, or 0.5 mg"),
    ("dose", "00.5 mg", "begins with a zero", "write 0.5 mg"),
    ("dose", "007 mg", "begins with a zero", "write 7 mg, or 0.07 mg"),
    ("dose", ".5 mg", "has no zero before the point", "write 0.5 mg"),
    ("dose", "-.5 mg", "has no zero before the point", "write -0.5 mg"),
    ("dose", "5. mg", "is not a quantity", "write 12 mg"),
    ("dose", "5mg", "the number and the unit run together", "write 5 mg"),
    ("dose", "5", "has no unit", "write 5 mg or 5 mcg"),
    ("dose", "five mg", "is not a quantity", "write 12 mg"),
    ("dose", "5 MG", "unknown unit 'MG'", "use mg, mcg"),
    ("dose", "5 mg IV", "unknown unit 'mg IV'", "use mg"),
    ("dose", "5-10 mg", "unknown unit '-10 mg'", "use mg"),
    ("dose", "5/10 mg", "unknown unit '/10 mg'", "use mg"),
    ("dose", "5 x 10 mg", "unknown unit", "use mg"),
    ("dose", "> 5 mg", "is not a quantity", "write 12 mg"),
    ("dose", "~5 mg", "is not a quantity", "write 12 mg"),
    ("dose", "5 mg?", "unknown unit 'mg?'", "use mg"),
    ("dose", "5 µg", "unsafe abbreviation", "write mcg"),
    ("dose", "5 μg", "unsafe abbreviation", "write mcg"),
    ("dose", "5 kg", "unit of another kind of quantity (mass)", "dose is due: use mg"),
    ("dose", "1e3 mg", "has an exponent", "write the number out"),
    ("dose", "1E3mg", "has an exponent", "write the number out"),
    ("dose", "inf mg", "is not a measured number", "write 12 mg"),
    ("dose", "-.inf", "is not a measured number", "write 12 mg"),
    ("dose", "NaN", "is not a measured number", "write 12 mg"),
    ("dose", "1_000 mg", "unknown unit '_000 mg'", "use mg"),
    ("dose", "0x1F mg", "unknown unit 'x1F mg'", "use mg"),
    ("dose", "5\u00a0mg", "holds a no-break space (character 2)", "type an ordinary space"),
    ("dose", "5\u202fmg", "holds a no-break space (character 2)", "type an ordinary space"),
    ("dose", "5 mg\u3000", "holds a no-break space", "type an ordinary space"),
    ("dose", "٥ mg", "(arabic-indic digit five)", "type it again"),
    ("dose", "５ mg", "(fullwidth digit five)", "type it again"),
    ("dose", "৪ mg", "(bengali digit four)", "type it again"),
    ("dose", "5 mɡ", "(latin small letter script g)", "type it again"),
    ("dose", "½ mg", "(vulgar fraction one half)", "type it again"),
    ("dose", "1²", "(superscript two)", "type it again"),
    ("electrolyte", "−4 mmol/L", "(minus sign)", "type it again"),
    ("electrolyte", "–4 mmol/L", "(en dash)", "type it again"),
    ("temperature", "36.4 ℃", "(degree celsius)", "type it again"),
    ("temperature", "36.4 ºC", "(masculine ordinal indicator)", "type it again"),
    ("temperature", "36.4 С", "(cyrillic capital letter es)", "type it again"),
    ("temperature", "36·4 C", "(middle dot)", "type it again"),
    ("temperature", "36.4", "has no unit", "write 36.4 C or 36.4 F"),
    ("pressure_pair", "62/104 mmHg", "diastolic at or above the systolic", "write systolic/diastolic"),
    ("pressure_pair", "104/62", "has no unit", "write 104/62 mmHg"),
    ("pressure_pair", "104 mmHg", "is not a blood pressure", "write systolic/diastolic: 104/62 mmHg"),
    ("pressure_pair", "104/62/70 mmHg", "unknown unit '/70 mmHg'", "use mmHg"),
    ("pressure_pair", "104 / 62 mmHg", "is not a blood pressure", "write systolic/diastolic: 104/62 mmHg"),
    ("pressure_pair", "١٠٤/٦٢ mmHg", "(arabic-indic digit one)", "type it again"),
]


@pytest.mark.parametrize(("kind", "text", "what", "cure"), REFUSED, ids=[ascii(case[1]) for case in REFUSED])
def test_a_figure_that_could_be_misread_is_refused(kind: str, text: str, what: str, cure: str) -> None:
    with pytest.raises(QuantityError) as refused:
        read_quantity(kind, text)
    assert what in refused.value.what
    assert refused.value.cure.startswith(cure)


@pytest.mark.parametrize(
    ("kind", "text", "value", "unit"),
    [
        ("mass", "3.450 kg", 3.45, "kg"),
        ("volume", "1.250 L", 1.25, "L"),
        ("dose", "0.125 mg", 0.125, "mg"),
        ("dose", "0.500 mg", 0.5, "mg"),
        ("dose", "6.125 mg", 6.125, "mg"),
        ("dose", "1250 mg", 1250, "mg"),
        ("volume", "0 mL", 0, "mL"),
        ("volume", "0.0 mL", 0, "mL"),
        ("fraction", "0.51", 0.51, ""),
        ("percent", "30%", 30, "%"),
        ("percent", "30  %", 30, "%"),
        ("temperature", "36.4 °C", 36.4, "C"),
        ("electrolyte", "-4 mmol/L", -4, "mmol/L"),
        ("electrolyte", "+4 mmol/L", 4, "mmol/L"),
        ("count_per_litre", "12.4 x10^9/L", 12.4, "x10^9/L"),
    ],
)
def test_a_figure_as_it_is_charted_is_read(kind: str, text: str, value: float, unit: str) -> None:
    quantity = read_quantity(kind, text)
    assert (quantity.number, quantity.unit, quantity.text) == (value, unit, text)


@given(st.integers(1, 999), st.integers(0, 999))
def test_no_cure_for_a_comma_changes_the_figure_without_saying_so(whole: int, part: int) -> None:
    cure = comma_cure(f"{whole},{part:03} mL")
    ways = re.findall(r"[0-9.]+(?= mL)", cure)
    assert len(ways) == 2
    assert float(ways[0]) == whole * 1000 + part
    assert float(ways[1]) == float(f"{whole}.{part:03}")
    assert all(read_quantity("mass", f"{way} kg").number == float(way) for way in ways)


@given(st.text(max_size=12))
@example("nan")
@example("inf")
@example("1e5")
@example("1_0")
@example(" 5")
@example("٥")
def test_a_bare_number_is_plain_figures_or_none(text: str) -> None:
    found = number(Text.at(text))
    assert (found is not None) == bool(re.fullmatch(r"[+-]?[0-9]+(\.[0-9]+)?", text))


def test_a_pressure_pair_is_both_figures() -> None:
    assert pressure_pair(Text.at("104/62 mmHg")) == (104, 62)
    assert pressure_pair(Text.at("104 mmHg")) is None
    assert pressure_pair(Text.at("١٠٤/٦٢ mmHg")) is None
    quantity = read_quantity("pressure_pair", "104/62 mmHg")
    assert (quantity.number, quantity.second) == (104, 62)
