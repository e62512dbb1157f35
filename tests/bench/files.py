"""State files and saved contexts that the measurements run on. The patients are invented."""

from __future__ import annotations

import json
import re
import shutil
from datetime import datetime, timedelta
from pathlib import Path

from handoff.document.care_plan import care_plan
from handoff.document.context import context
from handoff.document.handover import handover
from handoff.document.render import template_bytes
from handoff.work import assess_loaded, make_setup, open_file

ROOT = Path(__file__).resolve().parents[2]
ADULT = ROOT / "examples" / "house-fire.yaml"
ADULT_AT = "2026-03-14 19:30"
BURNED_AT = datetime(2026, 6, 1, 6, 0)
CHARTED = "2026-06-01"


def save_contexts(folder: Path) -> None:
    """Write the two templates and the contexts of the adult's documents into ``folder``."""
    setup = make_setup()
    assessment = assess_loaded(open_file(ADULT, setup, ADULT_AT), setup)
    for name, made in (("handover", handover(assessment)), ("care-plan", care_plan(assessment))):
        (folder / f"{name}.docx").write_bytes(template_bytes(f"{name}.docx"))
        (folder / f"{name}.json").write_text(json.dumps(context(made)), encoding="utf-8")


def stay(hours: int) -> str:
    """Return the file of a patient with one row of eight values an hour, for ``hours`` since the burn."""
    lines = [
        "handoff: 1",
        "clock: UTC",
        "patient:",
        "  name: Ansgar Holloway-Reed",
        "  born: 1985-02-11",
        "  identifiers: {record_number: HSH-300001}",
        "  sex: male",
        "  weights: [{value: 82 kg, kind: before burn, known: measured, at: 2026-06-01 08:00}]",
        f"injury: {{at: {BURNED_AT:%Y-%m-%d %H:%M}, causes: [{{kind: flame}}]}}",
        "area:",
        f"  - at: {CHARTED} 08:00",
        "    by: EM",
        "    method: rule of nines",
        "    burns: [{region: right arm, of_region: 100 %, depth: deep partial}]",
        "observations:",
    ]
    for hour in range(hours):
        at = BURNED_AT + timedelta(hours=hour)
        if hour == 0 or at.hour == 0:
            lines.append(f"  {at:%Y-%m-%d}:")
        lines.append(
            f"    {at:%H:%M}: {{by: EM, pulse: {100 + hour % 30} /min, bp: {100 + hour % 20}/{60 + hour % 9} mmHg, "
            f"resp: {20 + hour % 9} /min, spo2: {92 + hour % 7} %, temp: {{value: 36.{hour % 10} C, site: tympanic}}, "
            f"room: 30 C, consciousness: alert, urine: {40 + hour % 30} mL}}"
        )
    return "\n".join(lines) + "\n"


def end_of(hours: int) -> str:
    """Return the moment of the last row, as ``--at`` takes it."""
    return f"{BURNED_AT + timedelta(hours=hours - 1):%Y-%m-%d %H:%M}"


def ward_of(folder: Path, count: int) -> Path:
    """Make a folder with ``count`` patients: the adult under other names and numbers."""
    folder.mkdir(parents=True)
    text = ADULT.read_text(encoding="utf-8")
    for number in range(count):
        own = re.sub(r"HSH-\d+", f"HSH-{400000 + number}", text)
        (folder / f"patient-{number:04}.yaml").write_text(own, encoding="utf-8")
    return folder


def copy_of_adult(folder: Path) -> Path:
    """Return a copy of the adult's file in ``folder``."""
    return Path(shutil.copy(ADULT, folder / "adult.yaml"))
