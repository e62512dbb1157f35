"""Why the airway is watched: smoke, burns of face and neck, signs; and what is not recorded."""

from __future__ import annotations

from typing import Protocol

from msgspec import Struct

from handoff.plugin import Case, child, joined, plural, words

from . import charted

FIRE = ("flame", "flash", "explosion")
SMOKY = ("flame", "explosion")
"""Fires that fill a closed space with smoke; an electrical or gas flash alone need not."""

CLOSED = ("enclosed space", "vehicle")
FACE = ("head", "head and neck", "whole body")
NECK = ("neck", "head and neck", "whole body")
DEEP = ("deep partial", "full thickness", "deeper than full thickness")
SHALLOW = ("superficial partial", "mid partial")
FULL = ("full thickness", "deeper than full thickness")
CAUSE, SETTING, SMOKE = "cause of the burn", "enclosed space or open air", "smoke breathed or not"
CAUSE_GAPS = (CAUSE, SETTING, f"{SETTING} and {SMOKE}")
REGIONS, LOOKED_FOR = "burned regions", "airway signs"


class Burn(Protocol):
    """A burned region, as the area plugin hands it over."""

    @property
    def region(self) -> str:
        """Region of the body."""

    @property
    def face(self) -> str:
        """Face of the body; empty for both."""

    @property
    def depth(self) -> str:
        """Depth class."""

    @property
    def counted(self) -> bool | None:
        """Whether it counts; None when its depth was not assessed."""

    @property
    def circumferential(self) -> bool | str | None:
        """Whether it goes all the way round; None when not recorded."""

    @property
    def line(self) -> int:
        """Line of the file."""


class Exposure(Struct, frozen=True):
    """What is recorded of smoke, face and neck; ``reasons`` ask for the watch, ``missing`` is not recorded."""

    smoke: tuple[str, ...]
    face: tuple[Burn, ...]
    neck: tuple[Burn, ...]
    reasons: tuple[str, ...]
    missing: tuple[str, ...]
    comfort: bool

    @property
    def watched(self) -> bool:
        """Whether the airway watch is asked for."""
        return bool(self.reasons) and not self.comfort

    @property
    def lethal_gap(self) -> bool:
        """Whether nothing asks for the watch only because it is not recorded what burned, or where."""
        return not self.reasons and not self.comfort and any(name in CAUSE_GAPS for name in self.missing)

    @property
    def cannot_be_judged(self) -> bool:
        """Whether too little is recorded to say that nothing asks for the watch."""
        blank = REGIONS in self.missing and LOOKED_FOR in self.missing
        return self.lethal_gap or (blank and not self.reasons and not self.comfort)

    @property
    def smoke_open(self) -> bool:
        """Whether smoke may have been breathed: nothing recorded says it was, and nothing that it was not."""
        said = " ".join(self.missing)
        return not self.smoke and any(name in said for name in (CAUSE, SETTING, SMOKE))

    @property
    def unknown(self) -> tuple[str, ...]:
        """What would have to be recorded to judge whether the watch is asked for, in one word each."""
        said = " ".join(self.missing)
        names = (
            ("cause", CAUSE in said),
            ("smoke", CAUSE in said or SMOKE in said),
            ("setting", CAUSE in said or SETTING in said),
            ("face", REGIONS in said),
            ("neck", REGIONS in said),
            ("signs", LOOKED_FOR in said),
        )
        return tuple(name for name, is_missing in names if is_missing)

    @property
    def smoke_recorded(self) -> bool:
        """Whether smoke exposure is recorded."""
        return bool(self.smoke)


def exposure(case: Case) -> Exposure:
    """Return why the airway is watched and what is not recorded about it."""
    smoke = _smoke(case)
    burns = _burns(case)
    face = tuple(burn for burn in burns if burn.region in FACE and burn.face != "back")
    neck = tuple(burn for burn in burns if burn.region in NECK)
    found = [sign.name for sign in charted.signs(case) if sign.present]
    reasons = list(smoke)
    if face or _special_face(case):
        reasons.append("burn of the face")
    # A shallow splash on the neck does not narrow the airway; a deep or encircling burn may.
    if neck and (_encircled(case) or any(burn.depth not in SHALLOW for burn in neck)):
        reasons.append("burn of the neck, deep, encircling or of unknown depth")
    if found:
        reasons.append(f"{plural(len(found), 'airway sign')} present when last looked for")
    limit = case.parameters.number(f"raised.{case.chosen('raised').name}")
    # A blood gas prints the level of every patient: only a raised one asks for the watch.
    if any(level.pct > limit for level in charted.levels(case)):
        reasons.append("raised carboxyhaemoglobin")
    if charted.tube(case).in_place or charted.tube(case).extubated:
        reasons.append("tube in the airway, now or earlier")
    if child(case.block, "watch", "start") is not None:
        reasons.append("a watch was started")
    return Exposure(smoke, face, neck, tuple(reasons), _missing(case), case.comfort)


def _smoke(case: Case) -> tuple[str, ...]:
    found = []
    for cause in charted.causes(case):
        kind, setting = words(cause.get("kind")), words(cause.get("setting"))
        if words(cause.get("smoke")) == "yes":
            found.append("smoke breathed")
        if kind in SMOKY and (setting in CLOSED or words(cause.get("trapped")) == "yes"):
            where = f"in {'a vehicle' if setting == 'vehicle' else 'an enclosed space'}"
            found.append(f"{kind} {where if setting in CLOSED else 'and trapped'}")
    return tuple(dict.fromkeys(found))


def _burns(case: Case) -> tuple[Burn, ...]:
    burns = case.findings["area"].values.get("burns") if "area" in case.findings else None
    found: tuple[Burn, ...] = burns if isinstance(burns, tuple) else ()
    return tuple(burn for burn in found if burn.counted is not False)


def burns_recorded(case: Case) -> bool:
    """Return whether any burned region is recorded, epidermal ones included."""
    return "area" in case.findings and bool(case.findings["area"].values.get("burns"))


def counted_pct(case: Case) -> float | None:
    """Return the counted burn in %TBSA, or None."""
    pct = case.findings["area"].values.get("counted_pct") if "area" in case.findings else None
    return float(pct) if isinstance(pct, (int, float)) else None


def _special_face(case: Case) -> bool:
    sites = case.findings["area"].values.get("special_sites") if "area" in case.findings else None
    return isinstance(sites, tuple) and "face" in [str(site) for site in sites]


def _encircled(case: Case) -> bool:
    """Whether the burn goes round the neck, or nearly so."""
    regions = case.findings["area"].values.get("circumferential_regions") if "area" in case.findings else None
    return isinstance(regions, tuple) and any(region in NECK for region in regions)


def _missing(case: Case) -> tuple[str, ...]:
    missing = []
    causes = charted.causes(case)
    if not causes:
        missing.append(CAUSE)
    for cause in causes:
        if words(cause.get("kind")) not in FIRE or words(cause.get("smoke")) in ("yes", "no"):
            continue
        gaps = [
            said
            for key, said in (("setting", SETTING), ("smoke", SMOKE))
            if words(cause.get(key)) in ("", "not known")
        ]
        if gaps:
            missing.append(joined(gaps))
    if not burns_recorded(case):
        missing.append(REGIONS)
    if not charted.check_times(case):
        missing.append(LOOKED_FOR)
    return tuple(dict.fromkeys(missing))
