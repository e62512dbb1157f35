"""The units that the state file knows, by kind of quantity.

Each factor turns the unit into the first unit of its dimension, and is a definition:
international pound and inch (1959), conventional millimetre of mercury, molar masses of
glucose (180.156 g/mol), lactate (90.08 g/mol) and creatinine (113.12 g/mol).
"""

from __future__ import annotations

from typing import NamedTuple


class Unit(NamedTuple):
    """How a unit becomes the first unit of its dimension: ``value * factor + offset``."""

    factor: float = 1.0
    offset: float = 0.0
    dimension: str = ""


_PLAIN = Unit()

KINDS: dict[str, dict[str, Unit]] = {
    "mass": {"kg": _PLAIN, "lb": Unit(0.45359237), "g": Unit(0.001)},
    "length": {"cm": _PLAIN, "in": Unit(2.54), "m": Unit(100), "mm": Unit(0.1), "ft": Unit(30.48)},
    "bore": {"mm": _PLAIN, "G": Unit(dimension="gauge"), "Fr": Unit(dimension="french")},
    "volume": {"mL": _PLAIN, "L": Unit(1000)},
    "flow": {"mL/h": _PLAIN, "L/h": Unit(1000)},
    "flow_per_kg": {"mL/kg/h": _PLAIN},
    "gas_flow": {"L/min": _PLAIN, "mL/min": Unit(0.001)},
    "drops": {"drops/min": _PLAIN},
    "drop_factor": {"drops/mL": _PLAIN},
    "fluid_coefficient": {"mL/kg/%": _PLAIN},
    "temperature": {"C": _PLAIN, "F": Unit(5 / 9, -160 / 9)},
    "pressure": {
        "mmHg": _PLAIN,
        "kPa": Unit(1 / 0.133322387415),
        "cmH2O": Unit(98.0665 / 133.322387415),
    },
    "pressure_pair": {"mmHg": _PLAIN},
    "per_minute": {"/min": _PLAIN},
    "percent": {"%": _PLAIN},
    "fraction": {"": _PLAIN, "%": Unit(0.01)},
    "duration": {
        "min": _PLAIN,
        "h": Unit(60),
        "d": Unit(1440),
        "s": Unit(1 / 60),
        "week": Unit(10080),
        "weeks": Unit(10080),
        "month": Unit(dimension="month"),
        "months": Unit(dimension="month"),
        "year": Unit(12, dimension="month"),
        "years": Unit(12, dimension="month"),
    },
    "age": {
        "months": _PLAIN,
        "years": Unit(12),
        "month": _PLAIN,
        "year": Unit(12),
        "weeks": Unit(7 * 12 / 365.2425),
        "week": Unit(7 * 12 / 365.2425),
        "d": Unit(12 / 365.2425),
    },
    "voltage": {"V": _PLAIN, "kV": Unit(1000)},
    "dose": {
        "mg": _PLAIN,
        "mcg": Unit(0.001),
        "g": Unit(1000),
        "units": Unit(dimension="units"),
        "mmol": Unit(dimension="mmol"),
        "mL": Unit(dimension="mL"),
    },
    "dose_rate": {
        "mg/h": _PLAIN,
        "mcg/h": Unit(0.001),
        "mcg/min": Unit(0.06),
        "mcg/kg/min": Unit(0.06, dimension="per kg"),
        "mcg/kg/h": Unit(0.001, dimension="per kg"),
        "mg/kg/h": Unit(dimension="per kg"),
        "units/h": Unit(dimension="units"),
        "mL/h": Unit(dimension="mL"),
    },
    "drug_concentration": {
        "mg/mL": _PLAIN,
        "mcg/mL": Unit(0.001),
        "units/mL": Unit(dimension="units"),
    },
    "electrolyte": {"mmol/L": _PLAIN, "mEq/L": _PLAIN},
    "glucose": {"mmol/L": _PLAIN, "mg/dL": Unit(10 / 180.156)},
    "lactate": {"mmol/L": _PLAIN, "mg/dL": Unit(10 / 90.08)},
    "creatinine": {"umol/L": _PLAIN, "mg/dL": Unit(10000 / 113.12)},
    "haemoglobin": {"g/L": _PLAIN, "g/dL": Unit(10)},
    "enzyme": {"U/L": _PLAIN},
    "count_per_litre": {"x10^9/L": _PLAIN},
    "protein_mass": {"g/L": _PLAIN, "g/dL": Unit(10)},
    "c_reactive": {"mg/L": _PLAIN},
    "cyanide": {"umol/L": _PLAIN, "mg/L": Unit(1000 / 26.017)},
    "procalcitonin": {"mcg/L": _PLAIN, "ng/mL": _PLAIN},
    "gas_pressure": {"kPa": _PLAIN, "bar": Unit(100), "psi": Unit(6.894757293168)},
}

ALIASES = {
    "ml": "mL",
    "l": "L",
    "ml/h": "mL/h",
    "mL/hr": "mL/h",
    "ml/hr": "mL/h",
    "l/min": "L/min",
    "ml/kg/h": "mL/kg/h",
    "°C": "C",
    "°F": "F",
    "lbs": "lb",
    "mm Hg": "mmHg",
    "days": "d",
    "day": "d",
    "hours": "h",
    "hour": "h",
    "minutes": "min",
    "minute": "min",
    "bpm": "/min",
    "per min": "/min",
}
"""Spellings that can mean one thing only; they are read and shown as the unit named."""

UNSAFE = {
    "cc": "mL",
    "ug": "mcg",
    "µg": "mcg",
    "μg": "mcg",
    "U": "units",
    "u": "units",
    "IU": "units",
    "mgs": "mg",
    "gm": "g",
    "gms": "g",
    "cc/h": "mL/h",
    "cc/hr": "mL/h",
    "ug/h": "mcg/h",
    "µg/h": "mcg/h",
    "ug/kg/min": "mcg/kg/min",
    "µg/kg/min": "mcg/kg/min",
}
"""Abbreviations that published safety lists advise against, and the safe form."""

WHOLE = frozenset({"mL", "mL/h", "mL/min", "drops/min", "/min", "mmHg", "cm", "mm", "V", "U/L"})
"""Units in which nobody measures to a thousandth: ``1.200 mL`` is 1200 mL where a point parts thousands."""

WRITTEN_SHORT = WHOLE - {"cm", "mm"} | {"mg", "mcg", "g", "%", "min", "h", "kV", "umol/L"}
"""Units of figures that are written without a zero after the point: ``2.0 mg`` is soon read as 20 mg."""

DOSES = frozenset({"mg", "mcg", "units"})
"""Units in which a third decimal that is zero (``1.250 mg``) is as likely a point between thousands."""
