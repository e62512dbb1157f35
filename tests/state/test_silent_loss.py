"""Legal-looking YAML that another reader would take differently from what was meant: each is refused with its place."""

from __future__ import annotations

import pytest

from handoff.state.faults import StateFaults
from handoff.state.nodes import plain
from handoff.state.reader import read_nodes
from handoff.work import open_text
from tests.small_patient import setup_of

HEAD = "handoff: 1\nclock: Europe/Dublin\n"
SMALL = HEAD + "patient: {name: Tomas Ferrandel}\ninjury: {at: 2026-03-14 13:20}\n"


def faults_of(text: str) -> list[str]:
    try:
        return [fault.said("f") for fault in read_nodes(text, "f")[1]]
    except StateFaults as refused:
        return [fault.said("f") for fault in refused.faults]


REFUSED = {
    # A number cut in two.
    "a decimal comma in braces": ("a: {b: 0,51}", "1:8: a.b: a comma in '0,51' splits the number"),
    "a decimal comma in a list": ("a: [0,51]", "1:5: a[1]: a comma in '0,51' splits the number"),
    "a decimal comma at the end of a text": ("a: {b: gave 2,5 mg}", "1:8: a.b: a comma in '2,5 mg' splits the number"),
    "thousands twice": ("a: {b: 1,200,000}", "1:8: a.b: a comma in '1,200,000' splits the number"),
    "two entries without a space": ("a: {14:15: 5,14:30: 6}", "1:12: a.14:15: a comma in '5,14:30: 6' splits"),
    # Text lost as a comment.
    "after a value": ("a: bed #3", "1:4: a: '#' after a value with fewer than two spaces"),
    "after a colon": ("a: #3 bed", "1:3: a: '#' after a colon"),
    "after a dash": ("a:\n  - #3 bed", "2:4: a[1]: '#' after a dash"),
    "after a quoted value": ("a: 'bed' #3", "1:4: a: '#' after a value"),
    "after a quoted value without a space": ("a: 'bed'#3", "1:4: a: '#' after a value"),
    "after an opening brace": ("a: {#3 bed, b: 1\n  }", "1:4: a: '#' after a value"),
    "after an opening bracket": ("a: [ #3 bed\n  ]", "1:4: a: '#' after a value"),
    "after a comma": ("a: [x, #3 bed\n  ]", "1:5: a[1]: '#' after a comma"),
    "after a comma without a space": ("a: [x,#3 bed\n  ]", "1:5: a[1]: '#' after a comma"),
    "after a quoted value in a list": ("a: ['x', #3 bed\n  ]", "1:5: a[1]: '#' after a comma"),
    "after an entry in a list": ("a: [{b: 1}, #3 bed\n  ]", "1:10: a[2]: '#' after a comma"),
    # Text lost in a header, or read as something else.
    "more than": ("a: >5", "1:4: a: '>5' begins a block of text and would be lost"),
    "more than, over a text": ("a: >5\n  b: 1", "1:4: a: '>5' begins a block of text and would be lost"),
    "a stroke": ("a: |2", "1:4: a: '|2' begins a block of text and would be lost"),
    "a backslash that is a code": (r'a: "obs\e"', "1:4: a: a backslash code for an unprintable character"),
    "a backslash before a capital": (r'a: "see \Notes"', "1:4: a: a backslash code for an unprintable character"),
    "a backslash that is no code": (r'a: "Ward\Bed"', "1:9: the line cannot be read (found unknown escape"),
    # Lines swallowed.
    "by a quote closed later": ('a: "x\nb: 1\nc: y"', "1:4: a: the quotes that open here close only on line 3"),
    "by a quote closed in a list": ("a:\n  - 'x\n  - y'\n", "2:5: a[1]: the quotes that open here close only"),
    "by a quote in braces": ("a:\n  b: {c: 'x\n  d: y'}\n", "2:10: a.b.c: the quotes that open here close only on"),
    "by a quote at another quote": ("a: 'x\nb: 'y'\n", "1:4: a: the quotes that open here close only on line 2"),
    "by an indentation": ("a: x\n  b: y", "1:4: a: the text runs on over the next line"),
    "by a dash without a space": ("a:\n  -b\n  -c\n", "2:3: a: the text runs on over the next line"),
    "by a brace left open": ("a:\n  b: {c: x\n  d: y\n", "2:10: a.b.c: the text runs on over the next line"),
    # Keys lost or joined.
    "twice in quotes": ("a: 1\n'a': 2", "2:1: the key 'a' stands twice here (also on line 1)"),
    "twice far apart": ("a: {b: 1, c: 2, d: 3, b: 4}", "1:23: a: the key 'b' stands twice here"),
    "a question": ("a:\n  ? b\n", "2:5: a: '?' begins a key"),
    "a question in braces": ("a: {? b : c}", "1:7: a: '?' begins a key"),
    "a query in braces": ("a: {?b: c}", "1:6: a: '?' begins a key"),
    "a query in a list": ("a: [?b]", "1:6: a[1]: '?' begins a key"),
    "no key": ("a: {'': 5}", "1:5: a: a key is missing"),
    "a missing space after the colon": ("a: {b:1, c: 2}", "1:5: a.b:1: no space after the colon in 'b:1'"),
    "a comma in text": ("a: {b: x, then y}", "1:11: a.then y: 'then y' has no value"),
    # Characters.
    "a no-break space after the colon": ("a:\n  b:\u00a01", "2:3: a: a no-break space at character 3"),
    "a no-break space after the dash": ("a:\n  -\u00a0b", "2:3: a: a no-break space at character 2"),
    "a no-break space as indentation": ("a:\n\u00a0\u00a0b: 1", "2:1: a no-break space at character 1"),
    "a no-break space at the end": ("a: HSH-1\u00a0", "1:4: a: a no-break space at character 6"),
    "a break of the next line": ("a: 1\x85b: 2", "1:5: a line break that editors do not show"),
    "a break of paragraphs": ("a: 1\u2029b: 2", "1:5: a line break that editors do not show"),
    "no width": ("a: HSH\u200b1", "1:7: a character that cannot be seen"),
    "a soft hyphen": ("a: HSH\u00ad1", "1:7: a character that cannot be seen"),
    "a mark of direction": ("a: HSH\u200e1", "1:7: a character that cannot be seen"),
    "a second byte-order mark": ("a: 1\n\ufeffb: 2", "2:1: a character that cannot be seen"),
    "a turned direction": ("a: \u202e08 Lm\u202c", "1:4: a hidden character that turns the reading direction"),
    "a bell": ("a: x\x07", "1:5: an unprintable character"),
    "a vertical tab": ("a: x\x0by", "1:5: an unprintable character"),
    "half a pair": ("a: \ud800", "1:4: an unprintable character"),
    "no character at all": ("a: x\uffff", "1:5: an unprintable character"),
}  # fmt: skip


@pytest.mark.parametrize(("text", "said"), REFUSED.values(), ids=list(REFUSED))
def test_it_is_refused_once_and_where_it_stands(text: str, said: str) -> None:
    (fault,) = faults_of(text)
    assert fault.startswith(f"f:{said}")


KEPT = {
    "commas and signs in a block": (
        "a: x, y; z? (5 %) - [1] {2} *3* &c. 'q' \"r\"", "x, y; z? (5 %) - [1] {2} *3* &c. 'q' \"r\"",
    ),
    "a colon inside a word": ("a: 14:15:3", "14:15:3"),
    "a number sign inside a word": ("a: bed#3", "bed#3"),
    "a comment after two spaces": ("a: bed  # 3", "bed"),
    "a question at the end": ("a: x ?", "x ?"),
    "a question before the next key": ("a:\n  - b: x ?\n    c: y", [{"b": "x ?", "c": "y"}]),
    "a question in the middle of braces": ("a: {b: x ?, c: y}", {"b": "x ?", "c": "y"}),
    "numbers with a space after the comma": ("a: [1, 2, 3]", ["1", "2", "3"]),
    "letters around a comma": ("a: [b,c]", ["b", "c"]),
    "a number before a letter": ("a: [5,b]", ["5", "b"]),
    "a quoted comma": ("a: ['0,51', \"1,200\"]", ["0,51", "1,200"]),
    "words of other readers": ("a: [yes, No, null, ~, =]", ["yes", "No", "null", "~", "="]),
    "numbers of other readers": ("a: [012, 1e3, .inf, 0x1F, 1_0, 14:30, 2026-03-14]",
                                 ["012", "1e3", ".inf", "0x1F", "1_0", "14:30", "2026-03-14"]),
    "a text in quotes over lines": ('a: "x\n  y\n\n  z"', "x y\nz"),
    "a block of text": ("a: |\n  x # y\n  - z: 1\n", "x # y\n- z: 1\n"),
    "a block of text with its sign": ("a: >-\n  x\n  y\n", "x y"),
    "a no-break space inside a text": ("a: Dr\u00a0Quill", "Dr\u00a0Quill"),
    "letters of any language": ("a: Žofia Ó Briain 日本 עברית ١", "Žofia Ó Briain 日本 עברית ١"),
    "an emoji of several parts": ("a: 👩‍⚕️ said", "👩‍⚕️ said"),
    "a tab in quotes by its code": (r'a: "x\ty"', "x\ty"),
    "a mapping in a list without braces": ("a: [b: c]", [{"b": "c"}]),
    "a comma at the end": ("a: [b, c,]", ["b", "c"]),
}  # fmt: skip


@pytest.mark.parametrize(("text", "value"), KEPT.values(), ids=list(KEPT))
def test_it_is_kept_as_it_was_typed(text: str, value: object) -> None:
    root, faults = read_nodes(text, "f")
    assert faults == []
    assert plain(root) == {"a": value}


def state_faults(text: str) -> list[str]:
    try:
        open_text(text, "f", setup_of(("overview", "area")), "2026-03-14 19:30")
    except StateFaults as refused:
        return [fault.said("f") for fault in refused.faults]
    return []


FOREIGN = {
    "a word with a no-break space": (
        "events: [{at: 2026-03-14 14:00, what: call for\u00a0help}]",
        "'call for help' holds a no-break space (character 9); type an ordinary space there",
    ),
    "a word with a letter of another alphabet": (
        "events: [{at: 2026-03-14 14:00, what: fаll}]",
        "'fаll' holds 'а' (cyrillic small letter a); type it again",
    ),
    "a key with a letter of another alphabet": (
        "event\u0455: []",
        "'event\u0455' holds '\u0455' (cyrillic small letter dze); type it again",
    ),
    "a key with a no-break space": (
        "ev\u00a0ents: []",
        "'ev ents' holds a no-break space (character 3)",
    ),
    "a time with a fullwidth colon": (
        "events: [{at: 2026-03-14 14\uff1a00, what: fall}]",
        "(fullwidth colon); type it again",
    ),
    "a date with a hyphen of a word processor": (
        "observations: {2026\u20103\u201014: {14:00: {pulse: 118 /min}}}",
        "(hyphen); type it again",
    ),
    "a time key with figures of another alphabet": (
        "observations: {2026-03-14: {١٤:٠٠: {pulse: 118 /min}}}",
        "(arabic-indic digit one); type it again",
    ),
    "a score with a figure of another alphabet": (
        "area: [{at: 2026-03-14 14:00, burns: [{region: left hand, palms: ٢, depth: deep partial}]}]",
        "(arabic-indic digit two); type it again",
    ),
    "a zone with a sign of another alphabet": (
        "clock: Europe\u2215Dublin",
        "(division slash); type it again",
    ),
}


@pytest.mark.parametrize(("block", "said"), FOREIGN.values(), ids=list(FOREIGN))
def test_what_looks_like_the_right_word_is_named_by_its_character(block: str, said: str) -> None:
    text = SMALL.replace("clock: Europe/Dublin\n", "") if block.startswith("clock") else SMALL
    (fault,) = state_faults(f"{text}{block}\n")
    assert said in fault


def test_initials_are_no_truth_values_and_quotes_say_that_a_word_is_meant() -> None:
    row = "observations: {{2026-03-14: {{14:00: {{by: {}, pulse: 118 /min}}}}}}\n"
    assert state_faults(SMALL + row.format("NO")) == []
    assert state_faults(SMALL + row.format("ON")) == []
    assert state_faults(SMALL + row.format("'no'")) == []
    for word in ("no", "No", "yes", "true", "FALSE", "null", "~", "none", "nil", "off"):
        (fault,) = state_faults(SMALL + row.format(word))
        assert f"'{word}' stands where a name, a place or a number is due" in fault


def test_a_refused_place_is_not_refused_again_by_the_schema() -> None:
    text = SMALL + "results:\n  - {at: 2026-03-14 14:15, lactate: 3,9 mmol/L, haematocrit: 0,51}\n"
    assert [fault.split(": ")[0] for fault in state_faults(text)] == ["f:6:37", "f:6:62"]


def test_a_long_value_is_cut_in_its_message() -> None:
    (fault,) = state_faults(SMALL + f"events: [{{at: 2026-03-14 14:00, what: {'x' * 3000}}}]\n")
    assert len(fault) < 700
    assert " ... " in fault


def test_a_value_over_several_lines_gives_a_message_on_one() -> None:
    (fault,) = state_faults(
        SMALL + "events:\n  - at: 2026-03-14 14:00\n    what: |\n      fall\n      and more\n"
    )
    assert fault.startswith("f:7:11: events[1].what: 'fall and more")
