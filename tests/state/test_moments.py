"""Which times a file may hold: after birth, after the burn, up to now; one slip makes one message."""

from __future__ import annotations

from datetime import UTC, datetime

import pytest

from handoff.state.faults import StateFaults
from handoff.work import open_text
from tests.small_patient import setup_of

SMALL = """\
handoff: 1
clock: {clock}
patient: {{name: Tomas Ferrandel, born: {born}}}
injury: {{at: {burn}}}
observations:
  2026-03-14:
    14:15: {{pulse: 118 /min}}
    15:15: {{pulse: 118 /min}}
"""
GIVEN = {"clock": "Europe/Dublin", "born": "1985-02-11", "burn": "2026-03-14 13:20"}


def places(at: str = "2026-03-14 19:30", **changed: str) -> list[str]:
    text = SMALL.format(**{**GIVEN, **changed})
    try:
        open_text(text, "f", setup_of(("overview",)), at)
    except StateFaults as refused:
        return [f"{fault.line}: {fault.what}" for fault in refused.faults]
    return []


def test_times_between_burn_and_now_pass() -> None:
    assert places() == []
    assert places(at="2026-03-14 15:15", burn="2026-03-14 14:15") == []


def test_a_minute_too_early_or_too_late_is_refused() -> None:
    (early,) = places(burn="2026-03-14 14:16")
    assert early.startswith("7: Sat 14 Mar 2026 14:15 is before the burn")
    (late,) = places(at="2026-03-14 15:14")
    assert late.startswith("8: Sat 14 Mar 2026 15:15 is later than Sat 14 Mar 2026 15:14")


@pytest.mark.parametrize("burn", ["2027-03-14 13:20", "2026-03-15 13:20"])
def test_a_burn_that_lies_ahead_is_one_fault_and_not_one_for_each_row(burn: str) -> None:
    (fault,) = places(burn=burn)
    assert fault.startswith("4: ")
    assert "is later than" in fault


def test_a_birth_that_lies_ahead_is_one_fault() -> None:
    assert places(born="2058-02-11") == ["3: 2058-02-11 is later than today"]


def test_a_child_weighed_on_the_day_of_birth_is_no_fault_in_any_zone() -> None:
    for zone in ("Pacific/Kiritimati", "Pacific/Pago_Pago", "Europe/Dublin"):
        assert places(clock=zone, born="2026-03-14", burn="2026-03-14 00:05") == []


def test_a_birth_after_the_burn_is_refused() -> None:
    (fault,) = places(at="2026-03-20 19:30", born="2026-03-16")[:1]
    assert fault == "4: Sat 14 Mar 2026 13:20 is before the birth date"


def test_with_a_zone_that_is_not_known_only_the_zone_is_said() -> None:
    assert places(clock="Dublin") == ["2: unknown time zone 'Dublin'"]


def test_an_uncertain_burn_limits_by_its_earliest_moment() -> None:
    burn = "{earliest: 2026-03-14 14:00, latest: 2026-03-14 15:00}"
    assert places(burn=burn) == []
    burn = "{earliest: 2026-03-14 14:30, latest: 2026-03-14 15:00}"
    (fault,) = places(burn=burn)
    assert fault.startswith("7: Sat 14 Mar 2026 14:15 is before the burn")


def test_now_is_the_present_minute_when_nothing_is_asked() -> None:
    text = SMALL.format(**GIVEN).split("observations")[0].replace("2026-03-14 13:20", "2025-03-14 13:20")
    loaded = open_text(text, "f", setup_of(("overview",)))
    assert abs((loaded.now - datetime.now(UTC)).total_seconds()) < 120
    assert loaded.now.second == 0


def test_a_time_alone_is_today_at_the_place_of_the_file() -> None:
    text = SMALL.format(**GIVEN).split("observations")[0].replace("2026-03-14 13:20", "2025-03-14 13:20")
    loaded = open_text(text, "f", setup_of(("overview",)), "00:00")
    local = loaded.state.clock.local(loaded.now)
    assert (local.hour, local.minute) == (0, 0)
    assert local.date() == loaded.state.clock.local(datetime.now(UTC)).date()
