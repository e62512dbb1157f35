"""How a unit writes: the order of a date, the spelling of a drug or a substance, the second unit of a result.

Only what is printed changes; the file, the sums and items.json stay as they are. Sources keep their
titles, and a patient's name and numbers keep their letters.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from functools import lru_cache

from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document.context import Data
from handoff.document.sections import Mark
from handoff.plugin import Item
from handoff.policy import Policy
from handoff.state.clock import MONTHS
from handoff.state.units import KINDS, Unit
from handoff.words import with_unit

KEPT = frozenset(("sources", "name", "numbers", "unit", "version"))
"""Fields that are printed letter by letter."""

VARIANTS = (
    ("paracetamol", "acetaminophen"),
    ("adrenaline", "epinephrine"),
    ("salbutamol", "albuterol"),
    ("pethidine", "meperidine"),
    ("lignocaine", "lidocaine"),
    ("haemoglobin", "hemoglobin"),
    ("haematocrit", "hematocrit"),
    ("haemodynamic", "hemodynamic"),
    ("oedema", "edema"),
    ("oesophag", "esophag"),
    ("anaesthetist", "anesthesiologist"),
    ("anaesthe", "anesthe"),
    ("colour", "color"),
    ("litre", "liter"),
)
"""British and American; part of a longer word counts too (carboxyhaemoglobin, noradrenaline)."""

_ANALYTES = {
    "result.glucose": "glucose",
    "result.lactate": "lactate",
    "result.creatinine": "creatinine",
    "result.haemoglobin": "haemoglobin",
    "result.albumin": "protein_mass",
    "result.pao2": "pressure",
    "result.paco2": "pressure",
}
_SI = {
    "glucose": "mmol/L",
    "lactate": "mmol/L",
    "creatinine": "umol/L",
    "haemoglobin": "g/L",
    "protein_mass": "g/L",
    "pressure": "kPa",
}
_CONVENTIONAL = {
    "glucose": "mg/dL",
    "lactate": "mg/dL",
    "creatinine": "mg/dL",
    "haemoglobin": "g/dL",
    "protein_mass": "g/dL",
    "pressure": "mmHg",
}
UNITS = {"SI": _SI, "conventional": _CONVENTIONAL}
_WHOLE = ("umol/L", "g/L", "mmHg")
PLACES = {"mg/dL": 1, **dict.fromkeys(_WHOLE, 0)}
CREATININE_PLACES = 2

_DATE = re.compile(rf"\b(\d{{1,2}}) ({'|'.join(MONTHS)})(?: (\d{{4}}))?\b")
_ORDERS: Mapping[str, Callable[[str, str, str], str]] = {
    "month day year": lambda day, month, year: f"{month} {day}{', ' if year else ''}{year}",
    "year month day": lambda day, month, year: f"{year}{' ' if year else ''}{month} {day}",
}

ORDERS = ("day month year", *_ORDERS)


def in_style(data: Data, policy: Policy, name: str = "") -> Data:
    """Return what is to be printed in the unit's own way of writing."""
    if name in KEPT or isinstance(data, (bool, Mark)):
        return data
    if isinstance(data, str):
        return styled(data, policy)
    if isinstance(data, dict):
        return {key: in_style(value, policy, key) for key, value in data.items()}
    return [in_style(value, policy, name) for value in data]


def styled(text: str, policy: Policy) -> str:
    """Return one text with dates and spelling as the policy has them."""
    order = _ORDERS.get(policy.dates)
    if order is not None:
        text = _DATE.sub(lambda found: order(found[1], found[2], found[3] or ""), text)
    for pattern, words in _spelling(policy.spelling):
        text = pattern.sub(lambda found, words=words: _like(found[0], words), text)  # type: ignore[misc]
    return text


@lru_cache(maxsize=3)
def _spelling(which: str) -> tuple[tuple[re.Pattern[str], str], ...]:
    pairs: tuple[tuple[str, str], ...]
    if which == "american":
        pairs = VARIANTS
    elif which == "british":
        pairs = tuple((american, british) for british, american in VARIANTS)
    else:
        return ()
    # No letter stands before 'oe' and 'e': 'edema' is part of 'oedema', and must not grow another o.
    guard = r"(?<!o)(?<!a)" if which == "british" else ""
    return tuple((re.compile(guard + re.escape(one), re.IGNORECASE), other) for one, other in pairs)


def _like(found: str, word: str) -> str:
    if found.isupper():
        return word.upper()
    return word[:1].upper() + word[1:] if found[:1].isupper() else word


def in_units(assessment: Assessment) -> Assessment:
    """Return the assessment with each laboratory result in the unit's system of units beside what was charted."""
    wanted = UNITS.get(assessment.policy.units)
    if wanted is None:
        return assessment
    return replace(assessment, items=tuple(_with_second_unit(item, wanted) for item in assessment.items))


def _with_second_unit(item: Item, wanted: Mapping[str, str]) -> Item:
    kind = _ANALYTES.get(item.key, "")
    if not kind:
        return item
    unit = wanted[kind]
    after = KINDS[kind][unit]
    places = CREATININE_PLACES if (kind, unit) == ("creatinine", "mg/dL") else PLACES.get(unit, 1)
    shown = item.shown
    for have in {_SI[kind], _CONVENTIONAL[kind]} - {unit}:
        before = KINDS[kind][have]

        def both(found: re.Match[str], before: Unit = before) -> str:
            value = float(found[1].replace(",", "")) * before.factor / after.factor
            return f"{found[0]} ({with_unit(value, unit, places)})"

        shown = re.sub(rf"(-?\d[\d,]*(?:\.\d+)?) {re.escape(have)}(?![\w/])", both, shown)
    return replace(item, shown=shown)
