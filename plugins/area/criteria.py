"""Criteria as data: a fact, a comparator and a limit; met, not met, or not to be judged."""

from __future__ import annotations

import math
import operator
from collections.abc import Callable, Mapping, Sequence
from typing import Any

from msgspec import Struct, field

ASK = "ask"
ROUNDING = 1e-9
COMPARATORS: dict[str, Callable[[float, float], bool]] = {
    ">=": operator.ge,
    "<=": operator.le,
    ">": operator.gt,
    "<": operator.lt,
}


class Fact(Struct, frozen=True):
    """What is known for a criterion: a number, yes or no, or a set of names; ``missing`` says what is not.

    ``unsure`` holds the names that may apply although nobody wrote so (the face, where a burn
    of the head names no side), each with what would have to be recorded.
    """

    value: float | bool | None = None
    names: Mapping[str, str] = field(default_factory=dict)
    unsure: Mapping[str, str] = field(default_factory=dict)
    shown: str = ""
    missing: str = ""


Facts = Mapping[str, Fact]


class Verdict(Struct, frozen=True):
    """Whether a criterion is met (None: cannot be judged), by what, and what is missing for it."""

    met: bool | None
    by: tuple[str, ...] = ()
    missing: tuple[str, ...] = ()
    ask: str = ""


def judge(when: Any, facts: Facts) -> Verdict:
    """Return whether ``when`` is so: one group of facts that must all be so, or a list of such groups."""
    groups = when if isinstance(when, list) else [when]
    verdicts = [_all(group, facts) for group in groups]
    met = [verdict for verdict in verdicts if verdict.met]
    if met:
        return met[0]
    open_ones = [verdict for verdict in verdicts if verdict.met is None]
    if not open_ones:
        return Verdict(False)
    missing = dict.fromkeys(part for verdict in open_ones for part in verdict.missing)
    return Verdict(
        None, missing=tuple(missing), ask=next((verdict.ask for verdict in open_ones if verdict.ask), "")
    )


def _all(group: Mapping[str, Any], facts: Facts) -> Verdict:
    verdicts = [
        Verdict(None, ask=str(wanted)) if name == ASK else _one(facts[name], wanted)
        for name, wanted in group.items()
    ]
    if any(verdict.met is False for verdict in verdicts):
        return Verdict(False)
    by = tuple(part for verdict in verdicts for part in verdict.by)
    if all(verdict.met for verdict in verdicts):
        return Verdict(True, by)
    missing = tuple(part for verdict in verdicts for part in verdict.missing)
    return Verdict(None, by, missing, next((verdict.ask for verdict in verdicts if verdict.ask), ""))


def _one(fact: Fact, wanted: Any) -> Verdict:
    if wanted in ("yes", "no"):
        if fact.value is None:
            return Verdict(None, missing=(fact.missing,))
        return Verdict(fact.value is (wanted == "yes"), (fact.shown,))
    if isinstance(wanted, str):
        return _compared(fact, (wanted,))
    if all(str(part).split(" ")[0] in COMPARATORS for part in wanted):
        return _compared(fact, wanted)
    return _named(fact, wanted)


def _compared(fact: Fact, limits: Sequence[str]) -> Verdict:
    if isinstance(fact.value, bool):
        return Verdict(False)
    if fact.value is None:
        return Verdict(None, missing=(fact.missing,))
    return Verdict(all(meets(fact.value, limit) for limit in limits), (fact.shown,))


def _named(fact: Fact, wanted: Sequence[str]) -> Verdict:
    found = [fact.names[name] for name in wanted if name in fact.names]
    if found:
        return Verdict(True, tuple(dict.fromkeys(found)))
    unsure = [fact.unsure[name] for name in wanted if name in fact.unsure]
    if fact.missing or unsure:
        return Verdict(None, missing=tuple(dict.fromkeys(unsure or [fact.missing])))
    return Verdict(False)


def meets(value: float, limit: str) -> bool:
    """Return whether ``value`` meets ``limit``, a comparator and a number as the list prints it: ``>= 10``."""
    sign, _, number = limit.partition(" ")
    edge = float(number)
    # Shares of regions are binary fractions: 9.999999999999998 is the 10 that was charted.
    on_edge = math.isclose(value, edge, abs_tol=ROUNDING)
    return COMPARATORS[sign](edge if on_edge else value, edge)
