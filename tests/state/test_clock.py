"""Local times become the instants that an independent library gives them; a time that is not one is refused."""

from __future__ import annotations

import locale
import re
from datetime import UTC, date, datetime, timedelta
from itertools import pairwise
from zoneinfo import ZoneInfo

import pytest
from hypothesis import assume, example, given, settings
from hypothesis import strategies as st
from whenever import Instant, PlainDateTime, RepeatedTime, SkippedTime, ZonedDateTime

from handoff.state.clock import Clock, ClockError, read_date

ZONES = (
    "Europe/Dublin",  # the winter hour is the one that is shifted: summer time is the standard
    "Australia/Lord_Howe",  # half an hour of summer time
    "America/St_Johns",  # half an hour off the hour; changed at one minute past midnight once
    "Africa/Casablanca",  # an hour back for a month that wanders through the year
    "America/Sao_Paulo",  # changed at midnight
    "Asia/Kathmandu",  # three quarters of an hour
    "Pacific/Apia",  # left out a whole day in 2011
    "Antarctica/Troll",  # two hours of summer time
    "Asia/Gaza",
    "Europe/London",
    "America/New_York",
    "UTC",
)
FIRST, LAST = datetime(1950, 1, 1), datetime(2037, 12, 31)


def changes(zone: str) -> list[datetime]:
    """Return the local times, a minute apart from them, at which the clocks of ``zone`` were changed."""
    info, found = ZoneInfo(zone), []
    hours = [datetime(2005, 1, 1, tzinfo=UTC) + timedelta(days=day) for day in range(0, 366 * 25)]
    for before, after in pairwise(hours):
        if before.astimezone(info).utcoffset() != after.astimezone(info).utcoffset():
            low, high = before, after
            while high - low > timedelta(minutes=1):
                middle = low + (high - low) / 2
                same = middle.astimezone(info).utcoffset() == before.astimezone(info).utcoffset()
                low, high = (middle, high) if same else (low, middle)
            found += [low.astimezone(info).replace(tzinfo=None, second=0, microsecond=0)]
    return found


CHANGES = {zone: changes(zone) for zone in ZONES}

zones = st.sampled_from(ZONES)
minutes = st.datetimes(FIRST, LAST).map(lambda local: local.replace(second=0, microsecond=0))


@st.composite
def near_a_change(draw: st.DrawFn) -> tuple[str, datetime]:
    zone = draw(st.sampled_from([zone for zone in ZONES if CHANGES[zone]]))
    change = draw(st.sampled_from(CHANGES[zone]))
    return zone, change + timedelta(minutes=draw(st.integers(-200, 200)))


@st.composite
def anywhere(draw: st.DrawFn) -> tuple[str, datetime]:
    return draw(zones), draw(minutes)


times = st.one_of(near_a_change(), anywhere())


def by_whenever(zone: str, local: datetime, disambiguation: str = "raise") -> Instant:
    plain = PlainDateTime(local.year, local.month, local.day, local.hour, local.minute)
    return plain.assume_tz(zone, disambiguation=disambiguation).to_instant()  # type: ignore[arg-type]


def written(local: datetime) -> str:
    return f"{local:%Y-%m-%d %H:%M}"


@given(times)
@example(("Europe/Dublin", datetime(2025, 3, 30, 1, 30)))
@example(("Europe/Dublin", datetime(2025, 10, 26, 1, 30)))
@example(("Australia/Lord_Howe", datetime(2025, 10, 5, 2, 15)))
@example(("Australia/Lord_Howe", datetime(2025, 4, 6, 1, 45)))
@example(("Africa/Casablanca", datetime(2026, 2, 15, 2, 30)))
@example(("Pacific/Apia", datetime(2011, 12, 30, 12, 0)))
@settings(max_examples=400)
def test_a_time_is_the_same_instant_or_is_refused_for_the_same_reason(case: tuple[str, datetime]) -> None:
    zone, local = case
    clock = Clock(zone)
    try:
        due: Instant | str = by_whenever(zone, local)
    except SkippedTime:
        due = "did not exist"
    except RepeatedTime:
        due = "happened twice"
    try:
        got = clock.read(written(local))
    except ClockError as refused:
        assert isinstance(due, str), f"{zone} {local} is refused: {refused}"
        assert due in refused.what
    else:
        assert not isinstance(due, str), f"{zone} {local} is taken, and {due}"
        assert got.timestamp() == due.timestamp()


REFUSED = [
    ("Europe/Dublin", "2025-03-30 01:00", "did not exist", ["2025-03-30 00:00", "2025-03-30 02:00"]),
    (
        "Europe/Dublin",
        "2025-10-26 01:59",
        "happened twice",
        ["2025-10-26 01:59+01:00", "2025-10-26 01:59+00:00"],
    ),
    ("Australia/Lord_Howe", "2025-10-05 02:15", "did not exist", ["2025-10-05 01:45", "2025-10-05 02:45"]),
    (
        "Australia/Lord_Howe",
        "2025-04-06 01:45",
        "happened twice",
        ["2025-04-06 01:45+11:00", "2025-04-06 01:45+10:30"],
    ),
    ("America/St_Johns", "2025-03-09 02:30", "did not exist", ["2025-03-09 01:30", "2025-03-09 03:30"]),
    (
        "America/St_Johns",
        "2025-11-02 01:30",
        "happened twice",
        ["2025-11-02 01:30-02:30", "2025-11-02 01:30-03:30"],
    ),
    ("Africa/Casablanca", "2025-04-06 02:30", "did not exist", ["2025-04-06 01:30", "2025-04-06 03:30"]),
    (
        "Africa/Casablanca",
        "2025-02-23 02:30",
        "happened twice",
        ["2025-02-23 02:30+01:00", "2025-02-23 02:30+00:00"],
    ),
]


@pytest.mark.parametrize(
    ("zone", "text", "what", "ways"), REFUSED, ids=[f"{case[0]} {case[2]}" for case in REFUSED]
)
def test_a_skipped_or_repeated_time_is_refused_with_both_ways_to_write_it(
    zone: str, text: str, what: str, ways: list[str]
) -> None:
    clock = Clock(zone)
    with pytest.raises(ClockError) as refused:
        clock.read(text)
    assert f"{text} {what} in {zone}" in refused.value.what
    assert all(way in refused.value.cure for way in ways)
    first, second = (clock.read(way) for way in ways)
    assert first < second
    minute = timedelta(minutes=1)
    for beside in (-61 * minute, 61 * minute):
        clock.read(written(datetime.fromisoformat(text) + beside))


@given(near_a_change())
@settings(max_examples=200)
def test_both_ways_that_a_refusal_offers_are_read_and_are_the_two_instants(
    case: tuple[str, datetime],
) -> None:
    zone, local = case
    clock = Clock(zone)
    try:
        clock.read(written(local))
    except ClockError as refused:
        offered = re.findall(r"\d{4}-\d\d-\d\d \d\d:\d\d(?:[+-]\d\d:\d\d)?", refused.cure)
        got = sorted(clock.read(text).timestamp() for text in offered)
        assert len(got) == 2
        both = sorted(by_whenever(zone, local, side).timestamp() for side in ("earlier", "later"))
        assert got == both


@given(times, times)
@settings(max_examples=200)
def test_elapsed_time_is_right_across_a_clock_change(
    one: tuple[str, datetime], two: tuple[str, datetime]
) -> None:
    zone = one[0]
    clock = Clock(zone)
    try:
        begin, end = clock.read(written(one[1])), clock.read(written(two[1]))
    except ClockError:
        assume(False)
    due = by_whenever(zone, two[1]) - by_whenever(zone, one[1])
    assert (end - begin).total_seconds() == due.total("seconds")


@given(times)
@settings(max_examples=200)
def test_the_offset_of_the_place_may_be_written_and_no_other(case: tuple[str, datetime]) -> None:
    zone, local = case
    clock = Clock(zone)
    for side in ("earlier", "later"):
        moment = by_whenever(zone, local, side).to_tz(zone)
        offset = re.sub(
            r".*(Z|[+-]\d\d:\d\d(:\d\d)?)$", r"\1", moment.to_plain().format_iso() + offset_of(moment)
        )
        if offset.count(":") > 1:
            continue  # an offset with seconds, of a time before the zones were settled
        text = (
            f"{moment.year:04}-{moment.month:02}-{moment.day:02} {moment.hour:02}:{moment.minute:02}{offset}"
        )
        assert clock.read(text).timestamp() == moment.timestamp()
        other = "+13:13" if offset != "+13:13" else "-02:02"
        with pytest.raises(ClockError, match="is not that of"):
            clock.read(text.removesuffix(offset) + other)


def offset_of(moment: ZonedDateTime) -> str:
    seconds = int(moment.offset.total("seconds"))
    sign, seconds = ("-" if seconds < 0 else "+"), abs(seconds)
    rest = f":{seconds % 60:02}" if seconds % 60 else ""
    return f"{sign}{seconds // 3600:02}:{seconds // 60 % 60:02}{rest}"


@given(times)
@settings(max_examples=200)
def test_an_instant_is_printed_as_the_local_time_that_reads_back(case: tuple[str, datetime]) -> None:
    zone, local = case
    clock = Clock(zone)
    instant = datetime.fromtimestamp(by_whenever(zone, local, "later").timestamp(), UTC)
    here = by_whenever(zone, local, "later").to_tz(zone)
    assert clock.day_and_time(instant).endswith(
        f"{here.day} {clock.day(instant).split()[1]} {here.year} {here.hour:02}:{here.minute:02}"
    )
    said = clock.iso(instant)
    assert said[:16] == f"{here.year:04}-{here.month:02}-{here.day:02}T{here.hour:02}:{here.minute:02}"
    if not instant.astimezone(ZoneInfo(zone)).utcoffset().total_seconds() % 60:  # type: ignore[union-attr]
        assert clock.read(said) == instant


MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"]
DAYS = ["Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"]


@given(st.dates(date(1900, 1, 1), date(2100, 12, 31)))
def test_day_and_month_are_english_words_whatever_the_system_speaks(day: date) -> None:
    clock = Clock("UTC")
    instant = datetime(day.year, day.month, day.day, 14, 5, tzinfo=UTC)
    said = f"{day.day} {MONTHS[day.month - 1]} {day.year}"
    assert clock.day(instant) == said
    assert clock.day_and_time(instant) == f"{DAYS[day.weekday()]} {said} 14:05"
    assert read_date(f"{day:%Y-%m-%d}").shown() == said


def test_the_language_of_the_system_changes_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    moment = datetime(2026, 3, 14, 14, 5, tzinfo=UTC)
    before = Clock("Europe/Dublin").day_and_time(moment)
    old = locale.setlocale(locale.LC_ALL)
    spoken = 0
    try:
        for name in ("de_DE.UTF-8", "fr_FR.UTF-8", "ar_EG.UTF-8", "C.UTF-8", "C"):
            try:
                locale.setlocale(locale.LC_ALL, name)
            except locale.Error:
                continue
            spoken += 1
            assert Clock("Europe/Dublin").day_and_time(moment) == before == "Sat 14 Mar 2026 14:05"
    finally:
        locale.setlocale(locale.LC_ALL, old)
    assert spoken


def test_a_time_on_another_day_names_its_day() -> None:
    clock = Clock("Europe/Dublin")
    moment = clock.read("2026-03-13 23:30")
    assert clock.time(moment) == "23:30"
    assert clock.time(moment, clock.read("2026-03-13 01:00")) == "23:30"
    assert clock.time(moment, clock.read("2026-03-14 01:00")) == "23:30 on 13 Mar"
    assert clock.time(moment, clock.read("2027-03-14 01:00")) == "23:30 on 13 Mar 2026"


NOT_TIMES = [
    "", "now", "2026-03-14", "14:30", "2026-03-14 14", "2026-03-14 1430", "2026-03-14 24:00", "2026-03-14 14:60",
    "2026-03-14 4:30", "2026-3-14 14:30", "14-03-2026 14:30", "2026/03/14 14:30", "2026-02-29 14:30",
    "2026-13-01 14:30",
    "2026-00-10 14:30", "0000-01-01 14:30", "2026-03-14  14:30", " 2026-03-14 14:30", "2026-03-14 14:30 ",
    "2026-03-14 14:30\n", "2026-03-14 14:30:15", "2026-03-14 14:30 pm", "2026-03-14 14:30+1", "2026-03-14 14:30+0100",
    "2026-03-14 14:30+99:99", "2026-03-14 14:30 +25:00", "٢٠٢٦-٠٣-١٤ ١٤:٣٠", "2026-03-14 1４:30",
    "2026-03-14\u00a014:30", "2026‐03‐14 14:30",
]  # fmt: skip


@pytest.mark.parametrize("text", NOT_TIMES, ids=ascii)
def test_what_is_not_a_time_is_refused(text: str) -> None:
    with pytest.raises(ClockError) as refused:
        Clock("Europe/Dublin").read(text)
    assert refused.value.what
    assert refused.value.cure


@given(st.text(max_size=30), zones)
@example("0001-01-01 00:00", "Asia/Kathmandu")
@example("9999-12-31 23:59", "America/St_Johns")
@example("9999-12-31 23:59Z", "Asia/Kathmandu")
@example("0001-01-01 00:00+14:00", "UTC")
def test_a_text_is_a_time_or_an_error_of_the_clock(text: str, zone: str) -> None:
    try:
        moment = Clock(zone).read(text)
    except ClockError:
        return
    assert moment.utcoffset() == timedelta(0)


@given(
    st.from_regex(
        r"\d{4}-\d\d-\d\d[T ]\d\d:\d\d( ?(Z|[+-]\d\d:\d\d))?",
        fullmatch=True,
        alphabet=st.characters(codec="ascii"),
    ),
    zones,
)
def test_any_figures_in_the_shape_of_a_time_are_one_or_refused(text: str, zone: str) -> None:
    clock = Clock(zone)
    try:
        moment = clock.read(text)
    except ClockError:
        return
    assert clock.iso(moment)[:16] == text[:10] + "T" + text[11:16]
    clock.day_and_time(moment)


@given(st.text(max_size=12))
@example("../../etc/passwd")
@example("/etc/localtime")
@example("Europe")
@example("a\x00b")
@example("x" * 5000)
@example("\ud800")
def test_a_text_is_a_zone_or_an_error_of_the_clock(text: str) -> None:
    try:
        assert Clock(text).zone == text
    except ClockError as refused:
        assert "Area/City" in refused.cure


@pytest.mark.parametrize(
    ("text", "earliest", "latest", "shown"),
    [
        ("2012-06-03", date(2012, 6, 3), date(2012, 6, 3), "3 Jun 2012"),
        ("2012-06", date(2012, 6, 1), date(2012, 6, 30), "Jun 2012"),
        ("2012-02", date(2012, 2, 1), date(2012, 2, 29), "Feb 2012"),
        ("2012-12", date(2012, 12, 1), date(2012, 12, 31), "Dec 2012"),
        ("2012", date(2012, 1, 1), date(2012, 12, 31), "2012"),
        ("9999", date(9999, 1, 1), date(9999, 12, 31), "9999"),
    ],
)
def test_a_date_of_which_a_part_is_unknown(text: str, earliest: date, latest: date, shown: str) -> None:
    found = read_date(text, partial=True)
    assert (found.earliest(), found.latest(), found.shown()) == (earliest, latest, shown)
    if len(text) < len("2012-06-03"):
        with pytest.raises(ClockError):
            read_date(text)


@given(st.text(max_size=12), st.booleans())
def test_a_text_is_a_date_or_an_error_of_the_clock(text: str, partial: bool) -> None:
    try:
        found = read_date(text, partial)
    except ClockError:
        return
    assert found.earliest() <= found.latest()
