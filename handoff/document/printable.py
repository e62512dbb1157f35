"""Text as it can be printed: what has no visible form is named in its place, nothing is dropped."""

from __future__ import annotations

import re
import unicodedata

CONTROL = "[control character]"
DIRECTION = "[direction control]"
INVISIBLE = "[invisible character]"
UNREADABLE = "[unreadable character]"
UNPRINTABLE = "[unprintable character]"

LEFT_TO_RIGHT_MARK = "\u200e"
JOINERS = "\u200c\u200d"
"""Joiners stay: emoji and several scripts are spelled with them."""

_LINE_ENDS = re.compile("\r\n|[\r\u2028\u2029]")
_PLAIN = re.compile("[\n\t\x20-\x7e\xa1-\xac\xae-\u02ff]*")
_DIRECTION = re.compile("[\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069]")


def visible(text: str) -> str:
    """Return ``text`` with every character that a page cannot show replaced by its name in brackets.

    Line ends become one kind. Text that runs from right to left ends with a mark, so that it
    cannot pull a number that follows it to its other side; marks that were typed are named.
    """
    text = _LINE_ENDS.sub("\n", text)
    if _PLAIN.fullmatch(text):
        return text
    shown = "".join(_shown(character) for character in text)
    runs_left = any(unicodedata.bidirectional(character) in ("R", "AL") for character in shown)
    return shown + LEFT_TO_RIGHT_MARK if runs_left else shown


def _shown(character: str) -> str:
    category = unicodedata.category(character)
    if category[0] not in "CZ" or character in JOINERS or character in "\n\t ":
        return character
    if _DIRECTION.fullmatch(character):
        return DIRECTION
    if category == "Cc":
        return CONTROL
    if category == "Cf":
        return INVISIBLE
    if category == "Co":
        return UNPRINTABLE
    if category == "Cs" or (category == "Cn" and _is_no_character(character)):
        return UNREADABLE
    return character


def _is_no_character(character: str) -> bool:
    point = ord(character)
    return point & 0xFFFE == 0xFFFE or 0xFDD0 <= point <= 0xFDEF
