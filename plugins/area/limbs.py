"""Checks beyond a circumferential burn as charted: what was found, how old it is, what it asks for."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, Map, amount, entries, number_text, words

from .assessment import Assessment, Burn
from .regions import LIMBS, TORSO, full_name, limb_of, touches
from .sites import circumferential

FIELDS = {
    "pulse": "pulse",
    "doppler": "Doppler",
    "refill": "refill",
    "colour": "colour",
    "warmth": "warmth",
    "sensation": "feeling",
    "movement": "movement",
    "pain_on_stretch": "pain on stretch",
    "tightness": "tissue",
    "spo2": "SpO2 beyond",
    "pressure": "pressure",
    "bleeding": "bleeding",
    "resp": "breaths",
}


class Place(Struct, frozen=True):
    """A limb, or a part of the trunk or neck, that is burned all round, or that somebody charted a check of."""

    name: str
    limb: str
    burns: tuple[Burn, ...]
    all_round: bool = True

    @property
    def key(self) -> str:
        """The place as part of a key: ``right_arm``."""
        return self.name.replace(" ", "_")

    @property
    def breathes(self) -> bool:
        """Whether a tight burn here hinders breathing rather than the blood supply of a limb."""
        return self.name in TORSO

    @property
    def deep(self) -> bool:
        """Whether any of it is deep, or of a depth that was not assessed."""
        return any(burn.deep or burn.counted is None for burn in self.burns)

    @property
    def regions(self) -> str:
        """The burned regions with their depths."""
        said = dict.fromkeys(f"{burn.region} {burn.depth}" for burn in self.burns)
        return ", ".join(said) or "no burn charted there"


class LimbCheck(Struct, frozen=True):
    """One charted check of one place."""

    at: datetime
    by: str
    region: str
    site: str
    entry: Map
    row: Map

    def said(self) -> str:
        """Return the findings as charted, in a fixed order."""
        found = [
            f"{label} {words(self.entry.get(key))}"
            for key, label in FIELDS.items()
            if words(self.entry.get(key))
        ]
        return ", ".join(found) or "nothing charted"


def places(assessment: Assessment | None) -> tuple[Place, ...]:
    """Return every limb and other place that is burned all round, or nearly so, in the order of the file."""
    if assessment is None:
        return ()
    found: dict[str, list[Burn]] = {}
    for burn in circumferential(assessment):
        if burn.region in (*LIMBS, *TORSO):
            found.setdefault(limb_of(burn.region) or burn.region, []).append(burn)
    return tuple(Place(name, limb_of(name), tuple(burns)) for name, burns in found.items())


def watched(case: Case, assessment: Assessment | None) -> tuple[Place, ...]:
    """Return the places burned all round, then every other region with a charted check, oldest check first."""
    round_it = places(assessment)
    burns = [burn for burn in assessment.burns if burn.counted is not False] if assessment else []
    regions = dict.fromkeys(
        full_name(words(entry.get("region")), words(entry.get("side")))
        for row in case.state.rows
        for entry in entries(row.entry.get("limbs"))
    )
    others = [name for name in regions if not any(touches(name, place.name) for place in round_it)]
    return (
        *round_it,
        *(
            Place(name, limb_of(name), tuple(burn for burn in burns if touches(burn.region, name)), False)
            for name in others
        ),
    )


def checks_at(case: Case, place: Place) -> tuple[LimbCheck, ...]:
    """Return every check that counts for ``place``, oldest first: all of a burned limb, or of that one region."""
    if place.all_round:
        return checks_of(case, place.name, breaths=place.breathes)
    return tuple(check for check in checks_of(case, place.name) if check.region == place.name)


def checks_of(case: Case, name: str, breaths: bool = False) -> tuple[LimbCheck, ...]:
    """Return every charted check of the place ``name`` or of a part of it, oldest first.

    With ``breaths`` a charted respiratory rate is a check too: that is how a tight chest is watched.
    """
    found = []
    for row in case.state.rows:
        if breaths and "resp" in row.entry:
            rate = Map.at([(row.entry.key("resp"), row.entry["resp"])], row.line)
            found.append(LimbCheck(row.at, words(row.entry.get("by")), name, "", rate, row.entry))
        for entry in entries(row.entry.get("limbs")):
            region = full_name(words(entry.get("region")), words(entry.get("side")))
            if touches(region, name):
                by = words(entry.get("by")) or words(row.entry.get("by"))
                found.append(LimbCheck(row.at, by, region, words(entry.get("site")), entry, row.entry))
    return tuple(found)


def warnings_of(case: Case, check: LimbCheck, before: LimbCheck | None) -> tuple[str, ...]:
    """Return the findings of a check that warn, by the tables in use; an empty tuple is no statement."""
    table: Mapping[str, list[str]] = case.parameters.table("perfusion.warning")
    found = [
        f"{FIELDS[key]} {words(check.entry.get(key))}"
        for key, bad in table.items()
        if words(check.entry.get(key)) in bad
    ]
    found += _refill(case, check, before)
    found += _saturation(case, check)
    found += _pressure(case, check)
    return tuple(found)


def _refill(case: Case, check: LimbCheck, before: LimbCheck | None) -> list[str]:
    now = amount(check.entry.get("refill"), "s", "duration")
    then = amount(before.entry.get("refill"), "s", "duration") if before else None
    found = []
    if now is not None and then is not None and now > then and before is not None:
        at = case.clock.time(before.at, case.now)
        found.append(f"refill longer ({number_text(now, 1)} s, {number_text(then, 1)} s at {at})")
    limit = f"refill_limit.{case.chosen('refill_limit').name}"
    if now is not None and limit in case.parameters and now > case.parameters.number(limit):
        found.append(f"refill {number_text(now, 1)} s, over {number_text(case.parameters.number(limit))} s")
    return found


def _saturation(case: Case, check: LimbCheck) -> list[str]:
    """Low beyond the burn only counts where the saturation elsewhere is charted in the same row and is not low."""
    limit = case.parameters.number("perfusion.spo2_below")
    here, elsewhere = amount(check.entry.get("spo2"), "%"), amount(check.row.get("spo2"), "%")
    if here is None or here >= limit:
        return []
    if elsewhere is not None and elsewhere < limit:
        return []
    than = f", {number_text(elsewhere)} % elsewhere" if elsewhere is not None else ", elsewhere not charted"
    return [f"SpO2 beyond the burn {number_text(here)} %{than}"]


def _pressure(case: Case, check: LimbCheck) -> list[str]:
    pressure = amount(check.entry.get("pressure"), "mmHg")
    if pressure is None:
        return []
    name = case.chosen("compartment_pressure").name
    table = case.parameters.table(f"compartment_pressure.{name}")
    for key, said in (("do_above", "release"), ("consider_above", "consider release")):
        if key in table and pressure > table[key]:
            limit = number_text(table[key])
            told = f"table {name} says {said} above {limit} mmHg; confirm with the burn surgeon"
            return [f"pressure {number_text(pressure)} mmHg: {told}"]
    return []


def interval(case: Case) -> timedelta:
    """Return how often a limb burned all round is checked."""
    return timedelta(minutes=case.parameters.number("perfusion.every"))


def watch_ends(case: Case) -> datetime | None:
    """Return when the watch after the burn ends; None where the time of the burn is not recorded."""
    burn = case.state.burn_time
    return burn.latest + timedelta(hours=case.parameters.number("perfusion.watch_for")) if burn else None
