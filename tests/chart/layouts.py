"""Legal state files in every layout: block and braces, indents, comments, quotes, gaps, line ends."""

from __future__ import annotations

from typing import Any

from hypothesis import strategies as st

from handoff.chart.insertion import scalar

COMMENTS = ("", "  # a comment", "  # {not: an entry}, 'nor' this", "  # ends with a colon:")


class Writer:
    """Writes plain data as a state file, every choice of layout drawn by the test."""

    def __init__(self, draw: Any, newline: str) -> None:
        self.draw = draw
        self.newline = newline

    def one_of(self, *choices: Any) -> Any:
        return self.draw(st.sampled_from(choices))

    def text(self, data: dict[str, Any]) -> str:
        lines = [*self._between(0), *self._block(data, 0)]
        if self.one_of(False, False, True):
            lines.insert(0, "---")
        end = self.one_of("", self.newline, f"{self.newline}{self.newline}", f"{self.newline}# the end")
        return self.newline.join(lines) + end

    def _between(self, indent: int) -> list[str]:
        """Lines that hold nothing: blank, or a comment at any depth."""
        kinds = ("", "", "", " " * indent + "# between", "# at the margin", "      # deeper")
        return [line for line in [self.one_of(*kinds)] if line] + ([""] if self.one_of(0, 0, 0, 1) else [])

    def _block(self, data: dict[str, Any], indent: int) -> list[str]:
        lines: list[str] = []
        for key, value in data.items():
            lines += self._between(indent)
            head = f"{' ' * indent}{self._key(key)}:"
            if isinstance(value, str):
                lines += self._text(head, value, indent)
            elif not value or self.one_of(True, False):
                lines += self._flow(f"{head} ", value)
            elif isinstance(value, list):
                lines.append(head + self.one_of(*COMMENTS))
                lines += self._items(value, indent + self.one_of(0, 2, 4))
            else:
                lines.append(head + self.one_of(*COMMENTS))
                lines += self._block(value, indent + self.one_of(1, 2, 4))
        return lines

    def _text(self, head: str, value: str, indent: int) -> list[str]:
        if " " in value and self.one_of(0, 0, 1):
            mark = self.one_of("|-", ">-")
            return [f"{head} {mark}", " " * (indent + 8) + value]  # deeper than any comment
        gap = self.one_of(" ", "  ", "    ")
        return [f"{head}{gap}{self._scalar(value)}{self.one_of(*COMMENTS)}"]

    def _items(self, values: list[Any], indent: int) -> list[str]:
        lines: list[str] = []
        for value in values:
            lines += self._between(indent)
            if isinstance(value, dict) and value and self.one_of(True, False):
                dash = f"{' ' * indent}-{self.one_of(' ', '   ')}"
                lines += self._entry(dash, value)
            else:
                lines += self._flow(f"{' ' * indent}- ", value)
        return lines

    def _entry(self, dash: str, value: dict[str, Any]) -> list[str]:
        keys = list(value.items())
        lines = []
        for index, (key, part) in enumerate(keys):
            begin = dash if index == 0 else " " * len(dash)
            if isinstance(part, str):
                lines.append(f"{begin}{self._key(key)}: {self._scalar(part)}{self.one_of(*COMMENTS)}")
            else:
                lines += self._flow(f"{begin}{self._key(key)}: ", part)
        return lines

    def _flow(self, head: str, value: Any) -> list[str]:
        """A value in braces, on one line or on several, with commas at the end and comments between."""
        written = self._braces(value)
        if isinstance(value, str) or not value or not self.one_of(0, 0, 1):
            return [f"{head}{written}{self.one_of(*COMMENTS)}"]
        depth = len(head) - len(head.lstrip()) + 4
        parts = self._parts(value)
        opening, closing = ("{", "}") if isinstance(value, dict) else ("[", "]")
        body = [f"{' ' * depth}{part},{self.one_of(*COMMENTS)}" for part in parts[:-1]]
        last = f"{' ' * depth}{parts[-1]}{self.one_of('', ',', ' ,')}"
        return [f"{head}{opening}{self.one_of(*COMMENTS)}", *body, last, f"{' ' * depth}{closing}"]

    def _parts(self, value: Any) -> list[str]:
        if isinstance(value, dict):
            return [f"{self._key(key)}: {self._braces(part)}" for key, part in value.items()]
        return [self._braces(part) for part in value]

    def _braces(self, value: Any) -> str:
        if isinstance(value, str):
            return self._scalar(value)
        inner = self.one_of(", ", ",  ", " , ").join(self._parts(value)) + self.one_of(
            "", "", "," if value else ""
        )
        gap = self.one_of("", " ")
        return f"{{{gap}{inner}{gap}}}" if isinstance(value, dict) else f"[{gap}{inner}{gap}]"

    def _key(self, key: str) -> str:
        return self.one_of(key, key, f'"{key}"', f"'{key}'")

    def _scalar(self, value: str) -> str:
        plain = scalar(value)
        kinds = [plain]
        if "\\" not in value and '"' not in value:
            kinds.append(f'"{value}"')
        if "'" not in value:
            kinds.append(f"'{value}'")
        return str(self.one_of(plain, *kinds))


TEXTS = st.sampled_from(
    [
        *("4 mg", "118 /min", "104/62 mmHg", "98 %", "2026-03-14 14:30"),
        *("a, b", "it's: so", "x # y", "{x}", "lactated Ringer's", "é"),
    ]
)
NAMES = st.sampled_from(["by", "note", "drug", "dose", "pulse", "resp", "site"])
ENTRIES = st.dictionaries(NAMES, TEXTS, min_size=1, max_size=4)
TIMES = st.sampled_from(["14:15", "15:00", "16:30", "18:05"])
DAYS = st.sampled_from(["2026-03-13", "2026-03-14", "2026-03-16"])


@st.composite
def files(draw: Any) -> tuple[str, dict[str, Any]]:
    """A state file's text and what it says: rows, lists and blocks, each there or not."""
    data: dict[str, Any] = {"handoff": "1", "clock": "Europe/Dublin"}
    if draw(st.booleans()):
        data["pain"] = {"goal": "3"}
        if draw(st.booleans()):
            data["pain"]["doses"] = draw(st.lists(ENTRIES, max_size=3))
        if draw(st.booleans()):
            data["pain"]["z"] = draw(ENTRIES)
    if draw(st.booleans()):
        row = st.one_of(ENTRIES, st.lists(ENTRIES, min_size=1, max_size=2))
        times = st.dictionaries(TIMES, row, min_size=1, max_size=3).map(lambda one: dict(sorted(one.items())))
        days = draw(st.dictionaries(DAYS, times, min_size=1, max_size=2))
        data["observations"] = dict(sorted(days.items()))
    if draw(st.booleans()):
        data["results"] = draw(st.lists(ENTRIES, min_size=1, max_size=2))
    newline = draw(st.sampled_from(["\n", "\n", "\r\n", "\r"]))
    return Writer(draw, newline).text(data), data
