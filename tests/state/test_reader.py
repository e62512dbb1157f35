"""Whatever is written, the reader keeps all of it or says where it does not; it never fails in another way."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
import yaml
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st

from handoff.state.characters import refused_characters
from handoff.state.faults import Fault, StateFaults
from handoff.state.load import load_text
from handoff.state.nodes import List, Map, Node, Text, plain, walk
from handoff.state.reader import read_nodes
from handoff.work import open_text
from tests.small_patient import setup_of

STATES = Path(__file__).parents[1] / "states"
WRITTEN = [path.read_text(encoding="utf-8") for path in sorted(STATES.glob("valid/*.yaml"))]
BASE_LOADER = getattr(yaml, "CBaseLoader", yaml.BaseLoader)

signs = st.sampled_from(list("abz09 \n\n  :-,#?&*!|>'\"%@`{}[]\\.~<=/+\t\r\u00a0\u2028é😀\ufeff\x00"))
pieces = st.sampled_from(
    [": ", "- ", " #", "  # ", "\n  ", "\n", "{", "}", "[", "]", ", ", "a: ", "b", "'", '"', "|\n", ">\n", "? ",
     "---\n", "...\n", "&a ", "*a", "!t ", "<<: ", "0,51", "14:30", "2026-03-14", "%YAML 1.1\n", "\\", "\r\n", "\t"]
)  # fmt: skip
yaml_like = st.lists(st.one_of(signs, pieces), max_size=40).map("".join)


@st.composite
def a_written_file_with_slips(draw: st.DrawFn) -> str:
    """A real file in which some characters were lost, doubled, typed wrongly or moved to another line."""
    text = draw(st.sampled_from(WRITTEN))
    for _ in range(draw(st.integers(1, 4))):
        place = draw(st.integers(0, len(text)))
        length = draw(st.sampled_from([0, 0, 1, 1, 2, 8]))
        text = text[:place] + draw(st.one_of(st.just(""), signs, pieces)) + text[place + length :]
    return text


texts = st.one_of(st.text(max_size=60), yaml_like, a_written_file_with_slips())


def read(text: str) -> tuple[Map | None, list[Fault]]:
    try:
        return read_nodes(text, "f.yaml")
    except StateFaults as refused:
        assert refused.faults
        return None, refused.faults


def check_places(faults: list[Fault], text: str) -> None:
    lines = len(re.findall(r"\r\n|\r|\n", text)) + 1
    for fault in faults:
        assert 1 <= fault.line <= lines + 1
        assert fault.column >= 1
        said = fault.said("f.yaml")
        assert re.fullmatch(rf"f\.yaml:{fault.line}:{fault.column}: \S.*; \S.*", said)
        assert said.isprintable()


@given(texts)
@example("\ud800")
@example("? ")
@example("? a\n: b\n")
@example("{? }")
@example("[{a: b}: c]")
@example(": \n")
@example("{: }")
@example("- " * 30)
@example("a: '\n'")
@example("\ufeff")
@example("\ufeffa: 1\n")
@example("a: |5\n")
@example("a:\n  - - - b\n")
@settings(max_examples=500, suppress_health_check=[HealthCheck.too_slow])
def test_any_text_is_read_or_refused_with_places(text: str) -> None:
    _, faults = read(text)
    check_places(faults, text)


@given(st.one_of(yaml_like, a_written_file_with_slips()))
@settings(max_examples=300, suppress_health_check=[HealthCheck.too_slow])
def test_any_text_is_a_state_or_refused_with_places(text: str) -> None:
    try:
        loaded = open_text(text, "f.yaml", setup_of(("overview", "area")), "2026-03-14 19:30")
    except StateFaults as refused:
        check_places(refused.faults, text)
    else:
        check_places(list(loaded.unusual), text)


@given(st.one_of(yaml_like, a_written_file_with_slips()))
@settings(max_examples=500, suppress_health_check=[HealthCheck.too_slow])
def test_what_is_read_without_a_fault_is_what_yaml_says_with_every_value_as_text(text: str) -> None:
    root, faults = read(text)
    if root is not None and not faults:
        assert plain(root) == yaml.load(text, Loader=BASE_LOADER)  # noqa: S506  (builds text only)


def spans(node: Node) -> Iterator[tuple[int, int]]:
    for _, below in walk(node):
        if isinstance(below, Map):
            yield from ((key.start, key.end) for key in below if isinstance(key, Text))
        elif isinstance(below, Text):
            yield below.start, below.end


@given(st.one_of(yaml_like, a_written_file_with_slips()))
@settings(max_examples=500, suppress_health_check=[HealthCheck.too_slow])
def test_every_letter_is_in_a_value_in_a_key_or_in_a_comment(text: str) -> None:
    root, faults = read(text)
    if root is None or faults:
        return
    left = list(text)
    for start, end in spans(root):
        left[start:end] = " " * (end - start)
    lines = re.split(r"\r\n|\r|\n", "".join(left))
    outside = [re.sub(r"(^|\s|[\]}'\"])#.*$", "", line) for line in lines]
    assert set("".join(outside)) <= set(" {}[],:-."), outside


@given(st.one_of(yaml_like, a_written_file_with_slips()))
@settings(max_examples=300, suppress_health_check=[HealthCheck.too_slow])
def test_a_place_is_where_the_value_stands(text: str) -> None:
    root, faults = read(text)
    if root is None or faults:
        return
    starts = [0, *(match.end() for match in re.finditer(r"\r\n|\r|\n", text))]
    for _, node in walk(root):
        assert starts[node.line - 1] + node.column - 1 == node.start
        if isinstance(node, Text) and node.plain:
            assert text[node.start : node.end].rstrip(" \r\n") == node
        elif isinstance(node, Text):
            assert text[node.start] in "'\"|>"
        elif node.flow and text[node.start] in "[{":  # [a: b] holds a mapping without braces
            assert text[node.start] + text[node.end - 1] == ("[]" if isinstance(node, List) else "{}")


def is_printable(value: str) -> bool:
    return not refused_characters(value.replace("\t", " ")) and "\r" not in value


words = st.text(max_size=60).filter(is_printable)
long_words = st.text(alphabet=st.characters(codec="ascii", categories=["L", "N", "P", "Zs"]), max_size=300)
keys = st.text(min_size=1, max_size=20).filter(
    lambda key: is_printable(key) and "\n" not in key and key != "<<"
)
data: Any = st.recursive(
    st.one_of(words, long_words),
    lambda below: st.one_of(st.lists(below, max_size=4), st.dictionaries(keys, below, max_size=4)),
    max_leaves=12,
)


@given(
    st.dictionaries(keys, data, max_size=5),
    st.sampled_from("'\""),
    st.booleans(),
    st.sampled_from([None, True]),
)
@settings(max_examples=300, suppress_health_check=[HealthCheck.too_slow])
def test_a_file_that_a_program_wrote_in_quotes_reads_back_equal(
    made: dict[str, Any], quote: str, any_letters: bool, flow: bool | None
) -> None:
    text = yaml.safe_dump(
        made, default_style=quote, allow_unicode=any_letters, default_flow_style=flow or False
    )
    root, faults = read(text)
    assert [fault.said("f") for fault in faults] == []
    assert root is not None
    assert plain(root) == yaml.safe_load(text) == made


def test_every_moment_asked_for_is_one_or_an_error() -> None:
    from handoff.state.load import MomentError

    for at in (
        "later",
        "25:00",
        "2026-03-29 01:30",
        "2026-03-14",
        "١٤:٣٠",
    ):
        with pytest.raises(MomentError, match="--at: "):
            load_text("clock: Europe/Dublin\n", "f", at, {}, lambda state, now: [])
