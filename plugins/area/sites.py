"""Where the burn is: region list, circumferential burns, special sites, deep sites and joints."""

from __future__ import annotations

from collections.abc import Sequence

from handoff.plugin import Case, Flag, Item, Part, System, Working, joined, number_text

from .assessment import PLACES, Assessment, Burn, said_once
from .regions import LIMBS, TORSO, may_hold_site, special_site
from .totals import NOT_RECORDED, pct_text

RANK_CIRCUMFERENTIAL = 40
ENCIRCLED = (*LIMBS, *TORSO, "head", "whole body")
"""The regions that a burn can go round."""


def site_names(burn: Burn) -> tuple[str, ...]:
    """Return the special sites that one burn touches, its joint included, without repeats."""
    own = special_site(burn.region, burn.face)
    held = may_hold_site(burn.region, burn.face) if burn.whole else ()
    joint = f"{burn.joint} (joint)" if burn.joint else ""
    return tuple(dict.fromkeys(name for name in (own, *held, *burn.sites, joint) if name))


def sites_unsure(burn: Burn) -> tuple[str, ...]:
    """Return the special sites that a burn may touch although nobody charted whether it does."""
    known = site_names(burn)
    return tuple(name for name in may_hold_site(burn.region, burn.face) if name not in known)


def sites(assessment: Assessment, deep_only: bool = False) -> tuple[str, ...]:
    """Return the special sites of every counted (or only of every deep) burn, without repeats."""
    burns = [burn for burn in assessment.burns if (burn.deep if deep_only else burn.counted)]
    return tuple(dict.fromkeys(name for burn in burns for name in site_names(burn)))


def circumferential(assessment: Assessment) -> tuple[Burn, ...]:
    """Return the counted burns that go all the way round, or nearly so."""
    return tuple(
        burn
        for burn in assessment.burns
        if burn.counted is not False and (burn.circumferential or burn.near_circumferential)
    )


def items(case: Case, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return the items that say where the burn is."""
    if assessment is None:
        return tuple(
            _item(key, label, NOT_RECORDED, None, flag=Flag.NOT_RECORDED)
            for key, label in (
                ("area.method", "How the area was assessed"),
                ("area.circumferential", "Circumferential burns"),
                ("area.special_sites", "Special sites"),
            )
        )
    return (
        _method(case, assessment),
        _circumferential(assessment),
        _special(assessment),
        *(_region(assessment, index, burn) for index, burn in enumerate(assessment.burns, start=1)),
    )


def _item(
    key: str,
    label: str,
    shown: str,
    assessment: Assessment | None,
    *,
    flag: Flag = Flag.NONE,
    system: System = System.BURN,
    cautions: tuple[str, ...] = (),
) -> Item:
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=system,
        shown=shown,
        as_of=assessment.at if assessment else None,
        flag=flag,
        repeats=True,
        cautions=cautions,
        line=assessment.line if assessment else 0,
    )


def _method(case: Case, assessment: Assessment) -> Item:
    name = assessment.table.name if assessment.table else assessment.method or "method not recorded"
    who = " ".join(part for part in (assessment.by, assessment.role) if part) or "assessor not recorded"
    shown = (
        f"{name}; {', '.join(said_once((who, assessment.place)))}, {case.clock.day_and_time(assessment.at)}"
    )
    return _item("area.method", "How the area was assessed", shown, assessment)


def may_go_round(burn: Burn, burns: Sequence[Burn]) -> bool:
    """Return whether nobody charted if a burn goes all round although it might: it spares no face."""
    if burn.encircling_recorded or burn.region not in (*LIMBS, *TORSO):
        return False
    other = [one for one in burns if one.region == burn.region and one.face not in ("", burn.face)]
    return not burn.face or bool(other)


def _circumferential(assessment: Assessment) -> Item:
    said = [
        f"{burn.region} ({burn.depth}{', nearly all round' if burn.near_circumferential else ''})"
        for burn in circumferential(assessment)
    ]
    deep = [burn for burn in assessment.burns if burn.deep or burn.counted is None]
    unknown = any(may_go_round(burn, deep) for burn in deep)
    parts = [joined(said) or "none charted", *_blank_round(assessment)]
    shown = "; ".join(parts)
    flag = Flag.NOT_RECORDED if unknown else Flag.NONE
    label = "Circumferential burns"
    return _item("area.circumferential", label, shown, assessment, flag=flag, system=System.LIMBS)


def _blank_round(assessment: Assessment) -> list[str]:
    """What was charted as not assessed, and what was left blank: a blank is never read as looked for."""
    open_ones = [
        burn
        for burn in assessment.burns
        if burn.counted is not False and not burn.encircling_recorded and burn.region in ENCIRCLED
    ]
    found = []
    for said in ("not assessed", ""):
        where = dict.fromkeys(burn.where for burn in open_ones if burn.encircling == said)
        if where:
            found.append(f"{said or 'not recorded'} for {joined([one.replace(', ', ' ') for one in where])}")
    return found


def _special(assessment: Assessment) -> Item:
    said: dict[str, list[str]] = {}
    for burn in assessment.burns:
        for name in site_names(burn) if burn.counted is not False else ():
            here = burn.region if name == special_site(burn.region, burn.face) != "face" else name
            said.setdefault(here, []).append(burn.depth)
    may = dict.fromkeys(
        f"not recorded whether {burn.where} holds {joined(list(unsure), 'or')}"
        for burn in assessment.burns
        if burn.counted is not False and (unsure := sites_unsure(burn))
    )
    inferred = [name for name in said if all(_is_inferred(name, burn) for burn in assessment.burns)]
    sites_said = [
        f"{name} ({joined(list(dict.fromkeys(depths)))}"
        f"{'; taken from the larger region charted whole: ask' if name in inferred else ''})"
        for name, depths in said.items()
    ]
    shown = "; ".join([*sites_said, *may]) or "none charted"
    return _item("area.special_sites", "Special sites", shown, assessment)


def _is_inferred(name: str, burn: Burn) -> bool:
    """Whether a burn does not name the site itself; it holds it only because its region was charted whole."""
    own = name in burn.sites or name in (burn.region, special_site(burn.region, burn.face))
    return not own and not (burn.joint and name == f"{burn.joint} (joint)")


def _region(assessment: Assessment, index: int, burn: Burn) -> Item:
    extent = "extent not computed" if burn.tbsa_pct is None else pct_text(burn.tbsa_pct)
    counted = {True: "", False: ", not counted", None: ", depth not assessed"}[burn.counted]
    round_it = ", circumferential" if burn.circumferential else ""
    working = None
    if burn.tbsa_pct is not None:
        working = Working(
            formula="size of the region x burned share",
            sum=f"{burn.sum} = {number_text(burn.tbsa_pct, PLACES)} %",
            rule=assessment.table.name if assessment.table else assessment.method,
        )
    return Item(
        key=f"area.region.{index}",
        label=burn.where,
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=burn.tbsa_pct,
        unit="%" if burn.tbsa_pct is not None else "",
        shown=f"{extent}, {burn.depth}{counted}{round_it}",
        as_of=assessment.at,
        flag=Flag.NOT_RECORDED if burn.tbsa_pct is None else Flag.NONE,
        working=working,
        sources=assessment.table.sources if assessment.table and working else (),
        repeats=not (assessment.table and working),
        detail=True,
        line=burn.line,
    )
