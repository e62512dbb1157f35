"""An area block becomes an assessment in a line or two."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import lru_cache
from typing import Any

import yaml
from handoff.bundled.area import plugin

from handoff.assess import Assessment
from handoff.plugin import Findings
from handoff.policy import read_policy
from handoff.registry import Setup, prepare
from handoff.state.faults import StateFaults
from handoff.work import assess_loaded, open_text

BURN = "2026-03-14 13:20"
SEEN = "2026-03-14 14:20"
NOW = "2026-03-14 19:30"

Burn = Mapping[str, Any]


@lru_cache(maxsize=64)
def setup_of(policy: str = 'policy: "1"') -> Setup:
    return prepare(read_policy(policy, "test policy"), [plugin])


def setup_with(**choices: str) -> Setup:
    named = {f"area.{name}": value for name, value in choices.items()}
    return setup_of(yaml.safe_dump({"policy": "1", "choices": named}, sort_keys=True))


def state_text(
    burns: Sequence[Burn] = (),
    *,
    method: str = "lund-browder",
    born: str = "1985-02-11",
    **more: Any,
) -> str:
    patient = {
        "name": "Tomas Ferrandel",
        "sex": "male",
        **({"born": born} if born else {}),
        **more.pop("patient", {}),
    }
    injury = {"at": BURN, "causes": [{"kind": "flame"}], **more.pop("injury", {})}
    entry = {"at": SEEN, "by": "E. Marsh", **({"method": method} if method else {}), "burns": list(burns)}
    block = more.pop("area", [entry] if burns else None)
    state = {"handoff": "1", "clock": "Europe/Dublin", "patient": patient, "injury": injury}
    if block is not None:
        state["area"] = block
    return yaml.safe_dump({**state, **more}, sort_keys=False, allow_unicode=True, width=10**6)


def assessed(text: str, at: str = NOW, setup: Setup | None = None) -> Assessment:
    setup = setup or setup_of()
    made = assess_loaded(open_text(text, "case.yaml", setup, at), setup)
    assert not made.failures, made.failures
    return made


def found(text: str, at: str = NOW, setup: Setup | None = None) -> Findings:
    return assessed(text, at, setup).findings["area"]


def faults(text: str, at: str = NOW, setup: Setup | None = None) -> list[str]:
    try:
        loaded = open_text(text, "case.yaml", setup or setup_of(), at)
    except StateFaults as refused:
        return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in refused.faults]
    return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in loaded.unusual]
