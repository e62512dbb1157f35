"""Several assessments side by side: what differs, and how much of it is the method."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Input, Item, Part, System, Working, number_text

from . import formula
from .assessment import PLACES, Assessment, Burn, said_once
from .regions import PARTS, lies_within
from .tables import LUND_BROWDER, NINES, NoTableError, RegionTable, table_for
from .totals import TOTALS, pct_text, total_of

COUNTED = TOTALS[0]
OTHER = {LUND_BROWDER: NINES, NINES: LUND_BROWDER}
RULE = "the burned share of each region is kept; an extent charted as a share of the body stays as it is"


def items(case: Case, charted: tuple[Assessment, ...]) -> tuple[Item, ...]:
    """Return the latest assessment by the other method, the earlier assessments, and the differences."""
    if not charted:
        return ()
    latest, earlier = charted[-1], charted[:-1]
    found = [_earlier(case, one, index) for index, one in enumerate(earlier, start=1)]
    return tuple(
        item
        for item in (_other_method(case, latest), _differences(case, earlier, latest), *found)
        if item is not None
    )


def by_method(case: Case, assessment: Assessment, method: str) -> tuple[float, RegionTable, str] | None:
    """Return the counted area as ``method`` would size it, its table and the sum; None where it cannot be."""
    own = assessment.table
    if own is None or assessment.age is None or total_of(assessment, COUNTED) is None:
        return None
    try:
        other = table_for(case, method, assessment.age)
    except NoTableError:
        return None
    parts, said = [], []
    for burn in assessment.burns:
        if not burn.counted or burn.tbsa_pct is None:
            continue
        resized = _resized(burn, own, other)
        if resized is None:
            return None
        pct, text = resized
        parts.append(pct)
        said.append(f"{burn.where} {text}")
    value = formula.at_most_whole_body_pct(formula.total_pct(parts))
    return value, other, f"{'; '.join(said)}; total {number_text(value, PLACES)} %"


def _resized(burn: Burn, own: RegionTable, other: RegionTable) -> tuple[float, str] | None:
    pct = burn.tbsa_pct or 0.0
    if "region" not in burn.extent:
        return pct, f"{number_text(pct, PLACES)} as charted"
    face = burn.face or own.only_face(burn.region)
    for region in _wider(burn.region):
        mine, theirs = _held(own, region, face), _held(other, region, face)
        if mine and theirs:
            value = formula.by_other_table_pct(pct, mine, theirs)
            sum_text = (
                f"{number_text(pct, PLACES)} x {number_text(theirs, PLACES)} / {number_text(mine, PLACES)}"
            )
            return value, f"{sum_text} = {number_text(value, PLACES)}"
    return None


def _wider(region: str) -> list[str]:
    """The region and those it lies in, smallest first; both tables size a limb, the trunk and the whole body."""
    wider = [whole for whole in PARTS if whole != region and lies_within(region, whole, True)]
    return [region, *wider, "whole body"]


def _held(table: RegionTable, region: str, face: str) -> float | None:
    """The region as both tables understand it: a trunk holds the buttocks, whichever table names them apart."""
    size = table.size_pct(region, face)
    if size is None or region != "trunk" or table.trunk_holds_buttocks:
        return size
    apart = [table.size_pct(f"{side} buttock", face) or 0.0 for side in ("left", "right")]
    return formula.total_pct((size, *apart))


def _other_method(case: Case, latest: Assessment) -> Item | None:
    method = OTHER.get(latest.method)
    own = total_of(latest, COUNTED)
    computed = by_method(case, latest, method) if method else None
    if computed is None or own is None:
        return None
    value, table, sum_text = computed
    points = formula.difference_points(own, value)
    return Item(
        key="area.by_other_method",
        label="The same burn by the other method",
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=value,
        unit="%",
        shown=f"{pct_text(value)} by {table.name}: {_more(points)} than by {latest.method}",
        as_of=latest.at,
        working=Working(
            formula="share of each region kept, size by the other table", sum=sum_text, rule=RULE
        ),
        sources=table.sources,
        cautions=("shown to explain differences between sheets; the figure in use is the assessed one",),
        detail=True,
        line=latest.line,
    )


def _more(points: float) -> str:
    if abs(points) * PLACES * 100 < 1:
        return "no more"
    return f"{number_text(abs(points), 1)} points {'more' if points > 0 else 'less'}"


def _who(case: Case, one: Assessment) -> str:
    who = f"by {one.by}" if one.by else "assessor not recorded"
    place = one.place if said_once((who, one.place))[1:] else ""
    parts = (case.clock.day_and_time(one.at), place, who, one.method or "method not recorded")
    return ", ".join(part for part in parts if part)


def _as_charted(one: Assessment) -> str:
    """The extent that was charted without a depth, apart from what counts; empty where it has no figure."""
    unknown, known = (
        [burn.tbsa_pct for burn in one.burns if burn.counted is counts] for counts in (None, True)
    )
    sizes = [[size for size in part if size is not None] for part in (unknown, known)]
    if not unknown or sum(map(len, sizes)) < len(unknown) + len(known):
        return ""
    apart = f"{pct_text(formula.total_pct(sizes[0]))} as charted, depth not assessed"
    return f"{apart}, and {pct_text(formula.total_pct(sizes[1]))} that counts" if known else apart


def _earlier(case: Case, one: Assessment, index: int) -> Item:
    value = total_of(one, COUNTED)
    return Item(
        key=f"area.assessment.{index}",
        label=f"Earlier assessment, {_who(case, one)}",
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=value,
        unit="%" if value is not None else "",
        shown=pct_text(value)
        if value is not None
        else _as_charted(one) or f"not computed: {'; '.join(one.missing) or 'depth not assessed'}",
        as_of=one.at,
        flag=Flag.NONE if value is not None else Flag.NOT_RECORDED,
        working=Working(
            formula="size of the region x burned share, added region by region",
            sum="; ".join(f"{burn.where} {burn.sum} {burn.depth}" for burn in one.burns),
            inputs=tuple(Input(burn.where, burn.extent, burn.line) for burn in one.burns),
            rule=one.table.name if one.table else one.method,
        ),
        sources=one.table.sources if one.table else (case.parameters.source_of("depth.counted"),),
        detail=True,
        line=one.line,
    )


def _differences(case: Case, earlier: tuple[Assessment, ...], latest: Assessment) -> Item | None:
    now = total_of(latest, COUNTED)
    told = [(one, total_of(one, COUNTED), _as_charted(one)) for one in earlier]
    told = [(one, before, text) for one, before, text in told if before is not None or text]
    if now is None or not told:
        return None
    said, sums, value = [], [], None
    for one, before, text in told:
        if before is None:
            said.append(f"{text} ({_who(case, one)}); not counted, difference not computed")
            continue
        value = points = formula.difference_points(before, now)
        said.append(
            f"{pct_text(before)} ({_who(case, one)}); now {_more(points)}{_of_method(case, one, latest, before)}"
        )
        sums.append(
            f"{number_text(now, PLACES)} - {number_text(before, PLACES)} = {number_text(points, PLACES)}"
        )
    return Item(
        key="area.differences",
        label="Against earlier assessments",
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=value,
        unit="points" if value is not None else "",
        shown=f"{pct_text(now)} in use ({_who(case, latest)}). Before: {'. '.join(said)}",
        as_of=latest.at,
        flag=Flag.NONE if value is not None else Flag.NOT_RECORDED,
        working=Working(
            formula="latest less earlier, in points of % of body surface",
            sum="; ".join(sums) or "no earlier figure with its depths",
            rule=RULE,
        ),
        sources=(case.parameters.source_of("compare.why"),),
        cautions=(
            "an early figure is often too high; fluid already given was reckoned from the figure of its time",
        ),
        line=latest.line,
    )


def _of_method(case: Case, one: Assessment, latest: Assessment, before: float) -> str:
    """How much of a difference the change of method alone makes, where the methods differ."""
    if one.method == latest.method or latest.method not in OTHER:
        return ""
    computed = by_method(case, one, latest.method)
    if computed is None:
        return "; methods differ"
    alone = _more(formula.difference_points(before, computed[0]))
    return f"; {alone} is the method alone ({pct_text(computed[0])} by {latest.method})"
