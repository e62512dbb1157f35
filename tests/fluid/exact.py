"""A second way to every figure of fluid: exact fractions, minute by minute, straight from the written state.

It shares nothing with the plugin: it reads the plain data itself, walks through the minutes
since the burn, and adds up what ran in each of them.
"""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime
from fractions import Fraction
from itertools import pairwise
from typing import Any

F = Fraction
POUND = F(45359237, 100000000)
MINUTE_OF_DAY = 24 * 60
HALVES = ((8 * 60, F(1, 2)), (24 * 60, F(1, 2)))
EVEN = ((24 * 60, F(1)),)
SIX = tuple((hours * 60, F(1, 6)) for hours in (4, 8, 12, 18, 24, 36))


def quantity(text: str) -> F:
    """The number of ``82 kg``, ``1.5 L`` or ``181 lb``, in kg and mL."""
    number, _, unit = text.partition(" ")
    return F(number) * {"lb": POUND, "L": F(1000), "g": F(1)}.get(unit, F(1))


def minute(text: str, burn: str) -> int:
    gone = datetime.fromisoformat(text) - datetime.fromisoformat(burn)
    return int(gone.total_seconds()) // 60


def sets_volume(order: Mapping[str, Any]) -> bool:
    """A coefficient or a published formula; ``local`` with a bare rate is a rate."""
    return "coefficient" in order or order.get("formula", "local") != "local"


class Exact:
    """The figures of one state at one moment."""

    def __init__(self, state: Mapping[str, Any], at: str) -> None:
        self.state = state
        self.burn = state["injury"]["at"]
        self.now = minute(at, self.burn)
        self.block = state.get("fluid", {})
        self.kg = quantity(state["patient"]["weights"][0]["value"])
        self.pct = quantity(state["area"][0]["burns"][0]["tbsa"])
        self.years = self._years()
        self.volts = state["injury"]["causes"][0].get("voltage")

    def _at(self, text: str) -> int:
        return minute(text, self.burn)

    def _years(self) -> int:
        born = datetime.fromisoformat(self.state["patient"]["born"])
        burn = datetime.fromisoformat(self.burn)
        return burn.year - born.year - ((burn.month, burn.day) < (born.month, born.day))

    # -- what went in ----------------------------------------------------------------------

    def given(self, purpose: str | None, sure: bool, first: int = 0, last: int | None = None) -> F:
        """What went in between two minutes, in mL."""
        last = self.now if last is None else last
        total = F(0)
        for entry in self.block.get("given", []):
            total += self._single(entry, purpose, sure, first, last)
        for name in sorted({e["line"] for e in self.block.get("given", []) if "line" in e}):
            total += self._line(name, purpose, sure, first, last)
        return total

    def _single(self, entry: Mapping[str, Any], purpose: str | None, sure: bool, first: int, last: int) -> F:
        if not sure or purpose not in (None, entry.get("purpose")) or "rate" in entry:
            return F(0)
        if "volume" in entry and "from" in entry:
            start, end = self._at(entry["from"]), self._at(entry["to"])
            inside = max(0, min(end, last) - max(start, first))
            return quantity(entry["volume"]) * F(inside, end - start)
        if "volume" in entry and "at" in entry:
            at = self._at(entry["at"])
            return quantity(entry["volume"]) if first < at <= last or at == first == 0 else F(0)
        if "ice" in entry:
            at = self._at(entry["at"])
            return quantity(entry["ice"]) / 2 if first < at <= last or at == first == 0 else F(0)
        if "before_arrival" in entry:
            return quantity(entry["before_arrival"]) if first == 0 else F(0)
        return F(0)

    def _line(self, name: str, purpose: str | None, sure: bool, first: int, last: int) -> F:
        """Walk through the minutes: which rate ran, and whether anybody confirmed it."""
        own = [e for e in self.block["given"] if e.get("line") == name]
        begins = sorted((self._at(e["from"]), self._rate(e), e.get("purpose")) for e in own if "from" in e)
        stops = {self._at(e["stopped"]) for e in own if "stopped" in e}
        seen = [self._at(e["running"]) for e in own if "running" in e]
        total = F(0)
        for index, (begin, rate, for_what) in enumerate(begins):
            what = for_what or next(p for _, _, p in reversed(begins[:index]) if p)
            until = min(
                [b for b, _, _ in begins if b > begin] + [s for s in stops if s > begin], default=None
            )
            marked = max([begin] + [s for s in seen if s >= begin])
            if purpose not in (None, what):
                continue
            for now in range(max(begin, first), min(self.now if until is None else until, last)):
                confirmed = until is not None or now < marked
                total += rate / 60 if confirmed is sure else 0
        return total

    @staticmethod
    def _rate(entry: Mapping[str, Any]) -> F:
        if "rate" in entry:
            return quantity(entry["rate"])
        return quantity(entry["drops"]) * 60 / quantity(entry["drop_factor"])

    def running(self, purposes: tuple[str, ...]) -> F:
        """The rate of the purposes that nobody stopped, in mL/h."""
        total = F(0)
        for name in {e["line"] for e in self.block.get("given", []) if "line" in e}:
            own = [e for e in self.block["given"] if e.get("line") == name]
            begins = sorted(
                (self._at(e["from"]), self._rate(e), e.get("purpose")) for e in own if "from" in e
            )
            if not begins:
                continue
            begin, rate, _ = begins[-1]
            what = [p for _, _, p in begins if p][-1]
            if what in purposes and not any(self._at(e["stopped"]) > begin for e in own if "stopped" in e):
                total += rate
        return total

    # -- the plan --------------------------------------------------------------------------

    def plan(self) -> tuple[F, tuple[tuple[int, F], ...]] | None:
        """Volume and periods of the last order with a coefficient or a formula; None for none."""
        named = [e for e in self.block.get("orders", []) if sets_volume(e)]
        if not named:
            return None
        last = max(named, key=lambda e: self._at(e["at"]))
        if "coefficient" in last:
            return quantity(last["coefficient"]) * self.kg * self.pct, HALVES
        name, size = last["formula"], self.kg * self.pct
        if name == "parkland":
            return 4 * size, HALVES
        if name == "modified brooke":
            return (2 if self.years >= 16 else 3) * size, HALVES
        if name == "muir-barclay":
            return 3 * size, SIX
        if name == "mass casualty":
            return (100 * self.kg, EVEN) if self.pct > 20 else None
        if name == "abls 2010":
            adult, child = self.years >= 15 and self.kg > 40, self.years <= 14 and self.kg < 40
            high = self.volts is not None and quantity(self.volts) >= 1000
            if adult:
                return (4 if high else 2) * size, HALVES
            return (3 * size, HALVES) if child and not high else None
        raise AssertionError(name)

    def rates(self) -> list[tuple[int, F]]:
        """Rates ordered since the volume, in their order of time."""
        orders = self.block.get("orders", [])
        bases = [self._at(e["at"]) for e in orders if sets_volume(e)]
        since = max(bases, default=-1)
        return sorted(
            (self._at(e["at"]), quantity(e["rate"]))
            for e in orders
            if "rate" in e and self._at(e["at"]) >= since
        )

    def _scheduled(self, now: int) -> F:
        """What the volume has for one minute, in mL."""
        found = self.plan()
        if found is None:
            return F(0)
        volume, periods = found
        start = 0
        for end, share in periods:
            if start <= now < end:
                return volume * share / (end - start)
            start = end
        return F(0)

    def rate_at(self, now: int) -> F:
        """The rate of the plan in a minute, in mL/h."""
        ordered = [rate for at, rate in self.rates() if at <= now]
        return ordered[-1] if ordered else self._scheduled(now) * 60

    def due(self, until: int) -> F:
        """What the plan has due by a minute, in mL: the minutes added up."""
        ordered = self.rates()
        edges = sorted({0, until, *(e for e, _ in HALVES + SIX), *(at for at, _ in ordered)})
        edges = [edge for edge in edges if edge <= until]
        return sum((self.rate_at(a) * F(b - a, 60) for a, b in pairwise(edges)), start=F(0))

    def volume_by(self, until: int) -> F | None:
        """What the formula alone has due by a minute, in mL."""
        if self.plan() is None:
            return None
        edges = [e for e in sorted({0, until, *(e for e, _ in HALVES + SIX)}) if e <= until]
        return sum((self._scheduled(a) * (b - a) for a, b in pairwise(edges)), start=F(0))

    # -- urine and balance -----------------------------------------------------------------

    def urine(self) -> tuple[F, F] | None:
        """Volume and minutes of the last measure; None where there is none or its interval is not known."""
        rows = sorted(
            (self._at(f"{day} {time}"), row["urine"])
            for day, times in self.state.get("observations", {}).items()
            for time, row in times.items()
            if "urine" in row
        )
        placed = [self._at(line["placed"]) for line in self.state.get("lines", [])]
        since: int | None = None
        last: tuple[F, F] | None = None
        for at, entry in rows:
            if entry == "not measured":
                continue
            start = max(
                [m for m in [*placed, *([since] if since is not None else [])] if m < at], default=None
            )
            since = at
            if isinstance(entry, str):
                volume, span = quantity(entry), None
            else:
                volume = quantity(entry.get("volume") or entry["pad"])
                span = quantity(entry["over"]) if "over" in entry else None
            minutes = span if span is not None else F(at - start) if start is not None else F(0)
            last = (volume, minutes)
        return last if last and last[1] else None

    def output(self) -> F:
        """Urine, what drained at insertion, and other measured losses, in mL."""
        total = F(0)
        for times in self.state.get("observations", {}).values():
            for row in times.values():
                entry = row.get("urine", "not measured")
                if isinstance(entry, dict):
                    total += quantity(entry.get("volume") or entry["pad"])
                elif entry != "not measured":
                    total += quantity(entry)
        for line in self.state.get("lines", []):
            total += quantity(line.get("drained_at_insertion", "0 mL"))
        return total + sum((quantity(e["volume"]) for e in self.block.get("losses", [])), start=F(0))

    def is_output_charted(self) -> bool:
        """Whether anything that left the patient was measured; 0 mL is measured, a word is not."""
        rows = [row for times in self.state.get("observations", {}).values() for row in times.values()]
        urine = any(row.get("urine", "not measured") != "not measured" for row in rows)
        drained = any("drained_at_insertion" in line for line in self.state.get("lines", []))
        return urine or drained or bool(self.block.get("losses"))

    def maintenance(self) -> F | None:
        """The hourly form for a child below 30 kg, in mL/h; None for others."""
        if self.years >= 16 or self.kg >= 30:
            return None
        first, second = min(self.kg, F(10)), min(max(self.kg - 10, F(0)), F(10))
        return 4 * first + 2 * second + max(self.kg - 20, F(0))

    # -- the figures -----------------------------------------------------------------------

    def figures(self) -> dict[str, F | None]:
        """Every figure by its key, None where the tool must not give a single one."""
        day, first = 24 * 60, 8 * 60
        purpose = "resuscitation"
        has_plan = self.plan() is not None or bool(self.rates())
        colloid = self.plan() is not None and self.plan()[1] is SIX  # type: ignore[index]
        given = self.given(purpose, True) + (self.given("colloid", True) if colloid else 0)
        open_ml = self.given(purpose, False) + (self.given("colloid", False) if colloid else 0)
        charted = bool(self.block.get("given"))
        found: dict[str, F | None] = {
            "total_24h": self.volume_by(day),
            "first_8h": self.volume_by(first),
            "given": given if charted else None,
            "not_confirmed": open_ml if charted else None,
            "maintenance_rate": self.maintenance(),
        }
        ended = self.plan() is not None and self.now >= self.plan()[1][-1][0]  # type: ignore[index]
        has_rate = has_plan and (bool(self.rates()) or not ended)
        found["rate_now"] = self.rate_at(self.now) if has_rate else None
        found["due_by_now"] = self.due(self.now) if has_plan else None
        # without a volume the plan begins with its first rate, and what was given counts from there too
        since = self.rates()[0][0] if self.plan() is None and self.rates() else 0
        counted = given if since == 0 else self.given(purpose, True, since)
        found["against_plan"] = counted - self.due(self.now) if has_plan and charted else None
        found["catch_up_rate"] = self._catch_up(given, charted)
        in_day = min(self.now, day)
        one = self.given(purpose, True, 0, in_day) + (
            self.given("colloid", True, 0, in_day) if colloid else 0
        )
        found["given_index"] = one / self.kg / self.pct if charted else None
        not_yet = self.given(purpose, False, 0, in_day) + (
            self.given("colloid", False, 0, in_day) if colloid else 0
        )
        if not charted:
            projected = None
        elif self.now >= day:
            projected = one
        else:
            running = self.running(("resuscitation", "colloid") if colloid else ("resuscitation",))
            projected = one + not_yet + running * F(day - self.now, 60)
        found["projected_24h"] = projected
        found["projected_per_kg"] = None if projected is None else projected / self.kg
        measured = self.urine()
        found["urine_last"] = measured[0] / (measured[1] / 60) if measured else None
        found["urine_rate"] = measured[0] / self.kg / (measured[1] / 60) if measured else None
        any_output = self.is_output_charted()
        found["balance"] = self.given(None, True) - self.output() if charted or any_output else None
        return found

    def _catch_up(self, given: F, charted: bool) -> F | None:
        found = self.plan()
        if found is None or self.rates() or found[1] is not HALVES or not charted or self.now >= 8 * 60:
            return None
        need = found[0] / 2 - given
        return need / F(8 * 60 - self.now, 60) if need > 0 else None
