"""How long the oxygen lasts, and how much the journey asks for with the reserve."""

from __future__ import annotations

from handoff.plugin import (
    Case,
    Flag,
    FormulaInputError,
    Input,
    Item,
    Map,
    Source,
    System,
    Working,
    amount,
    child,
    entries,
    fact,
    gap,
    hours_text,
    joined,
    number_text,
    with_unit,
    words,
)

from . import formula
from .journey import lasts_min

RANK = 21
PLACES = 1
ENDURANCE = ("transfer.oxygen_endurance", "Oxygen lasts")
NEEDED = ("transfer.oxygen_needed", "Oxygen to carry")
CARRIED = ("transfer.oxygen_carried", "Oxygen carried")
ASSUMPTION = "the flow stays as it is and the whole content can be used; a rise in flow shortens it"


def items(case: Case) -> tuple[Item, ...]:
    """Return oxygen carried, oxygen to carry, and how long it lasts."""
    flow, flow_said = _flow(case)
    carried, carried_said, missing, sources = _carried(case)
    return (
        _carried_item(carried, carried_said, missing, sources),
        _needed(case, flow, flow_said),
        _endurance(case, (flow, flow_said), (carried, carried_said, missing), sources),
    )


def _flow(case: Case) -> tuple[float | None, str]:
    """The oxygen drawn in L/min, and how it is said."""
    node = child(case.block, "oxygen", "flow")
    flow = amount(node, "L/min", "gas_flow")
    if flow is not None:
        return flow, words(node)
    ventilator = child(case.block, "oxygen", "ventilator")
    volume = amount(child(ventilator, "minute_volume"), "L/min", "gas_flow")
    oxygen = amount(child(ventilator, "oxygen"), "%", "percent")
    driving = child(ventilator, "driving_gas")
    drives = amount(driving, "L/min", "gas_flow") if driving is not None else None
    if volume is None or oxygen is None or drives is None:
        return None, "driving gas of the ventilator not recorded" if volume is not None else ""
    taken = formula.demand_l_min(volume, oxygen / 100, drives)
    said = f"{with_unit(volume, 'L/min', PLACES)} × {number_text(oxygen)} %"
    said += f" + {with_unit(drives, 'L/min', PLACES)} driving gas"
    return taken, f"{with_unit(taken, 'L/min', PLACES)} ({said})"


def _carried(case: Case) -> tuple[float | None, str, str, tuple[Source, ...]]:
    """The oxygen in all cylinders in L, how it adds up, what is missing, and the sources."""
    total, said, sources = 0.0, [], []
    cylinders = entries(child(case.block, "oxygen", "cylinders"))
    if not cylinders:
        return None, "", "cylinders not recorded", ()
    for index, entry in enumerate(cylinders, start=1):
        found, how, missing, used = _content(case, entry)
        if found is None:
            return None, "", f"cylinder {index}: {missing}", ()
        count = int(words(entry.get("count")) or 1)
        total += found * count
        said.append(f"{number_text(count)} × {how}")
        sources += used
    return total, " + ".join(said), "", tuple(dict.fromkeys(sources))


def _content(case: Case, entry: Map) -> tuple[float | None, str, str, list[Source]]:
    size = words(entry.get("size"))
    read = amount(entry.get("content"), "L", "volume")
    if read is not None:
        return read, f"{size or 'cylinder'} with {with_unit(read, 'L')}", "", []
    known = f"cylinder.{size}" in case.parameters
    holds, full = (
        amount(entry.get("holds"), "L", "volume"),
        amount(entry.get("full_at"), "kPa", "gas_pressure"),
    )
    used = []
    if known and holds is None:
        holds = case.parameters.number(f"cylinder.{size}")
        used.append(case.parameters.source_of(f"cylinder.{size}"))
    if known and full is None:
        full = case.parameters.number(f"cylinder.{size}.pressure")
    gauge = amount(entry.get("gauge"), "kPa", "gas_pressure")
    if holds is None:
        return None, "", "what it holds is not recorded", []
    if gauge is None:
        return None, "", "pressure on the gauge not recorded", []
    if full is None:
        return None, "", "pressure of the full cylinder not recorded", []
    try:
        content = formula.content_l(holds, gauge, full)
    except FormulaInputError:
        return None, "", "the gauge shows more than a full cylinder", []
    used.append(case.parameters.source_of("cylinder.content"))
    share = f"{with_unit(holds, 'L')} × {number_text(gauge)}/{with_unit(full, 'kPa')}"
    return content, f"{size or 'cylinder'} {share} = {with_unit(content, 'L')}", "", used


def _carried_item(litres: float | None, said: str, missing: str, sources: tuple[Source, ...]) -> Item:
    key, label = CARRIED
    if litres is None:
        return gap(key, label, missing, system=System.BREATHING, unit="L")
    return fact(
        key,
        label,
        f"{with_unit(litres, 'L')} in all",
        value=litres,
        unit="L",
        system=System.BREATHING,
        working=Working(
            formula="content of each cylinder, added", sum=f"{said}; together {with_unit(litres, 'L')}"
        ),
        sources=sources,
    )


def _needed(case: Case, flow: float | None, flow_said: str) -> Item:
    key, label = NEEDED
    journey, reserve = lasts_min(case), case.parameters.number("reserve")
    missing = _missing(flow, flow_said, journey)
    source = case.parameters.source_of("reserve")
    if flow is None or journey is None:
        return gap(key, label, missing, system=System.BREATHING, unit="L", sources=(source,))
    litres = formula.needed_l(flow, journey, reserve)
    times = number_text(reserve, PLACES)
    return fact(
        key,
        label,
        f"{with_unit(litres, 'L')}, for {times} times the journey",
        value=litres,
        unit="L",
        system=System.BREATHING,
        working=Working(
            formula="flow × journey × reserve",
            sum=f"{flow_said} × {with_unit(journey, 'min')} × {times} = {with_unit(litres, 'L')}",
            rule=f"reserve of {times} times the journey",
        ),
        sources=(source,),
    )


def _endurance(
    case: Case,
    drawn: tuple[float | None, str],
    carried: tuple[float | None, str, str],
    sources: tuple[Source, ...],
) -> Item:
    key, label = ENDURANCE
    (flow, flow_said), (litres, litres_said, missing) = drawn, carried
    reserve_source = case.parameters.source_of("reserve")
    lacking = [text for text in (missing, _missing(flow, flow_said, 0)) if text]
    if flow is None or litres is None or flow == 0:
        return gap(
            key,
            label,
            joined(lacking) or "no flow",
            system=System.BREATHING,
            unit="min",
            sources=(reserve_source,),
        )
    minutes = formula.lasts_min(litres, flow)
    journey, reserve = lasts_min(case), case.parameters.number("reserve")
    flag, against = _judged(minutes, journey, reserve)
    return fact(
        key,
        label,
        f"{hours_text(minutes / formula.MINUTES_AN_HOUR)} at {flow_said}; {against}",
        value=minutes,
        unit="min",
        system=System.BREATHING,
        flag=flag,
        working=Working(
            formula="oxygen carried over flow",
            sum=f"({litres_said}) {with_unit(litres, 'L')} / {flow_said} = {with_unit(minutes, 'min')}",
            inputs=(
                case.input("flow", child(case.block, "oxygen", "flow"), flow_said),
                Input("oxygen carried", with_unit(litres, "L")),
                case.input("journey", child(case.block, "journey", "lasts")),
            ),
            rule=f"needs action below the journey, review below {number_text(reserve, PLACES)} times the journey",
        ),
        sources=(*sources, reserve_source),
        cautions=(ASSUMPTION,),
        rank=RANK if flag in (Flag.ACTION, Flag.REVIEW) else None,
    )


def _judged(minutes: float, journey: float | None, reserve: float) -> tuple[Flag, str]:
    if journey is None:
        return Flag.REVIEW, "length of the journey not recorded"
    said = f"the journey lasts {hours_text(journey / formula.MINUTES_AN_HOUR)}"
    if minutes < journey:
        return Flag.ACTION, f"{said}: it runs out on the way"
    if minutes < journey * reserve:
        return Flag.REVIEW, f"{said}: less than {number_text(reserve, PLACES)} times the journey"
    return Flag.NONE, f"{said}; reserve of {number_text(reserve, PLACES)} times the journey is carried"


def _missing(flow: float | None, flow_said: str, journey: float | None) -> str:
    lacking = []
    if flow is None:
        lacking.append(flow_said or "flow not recorded")
    if journey is None:
        lacking.append("length of the journey not recorded")
    return joined(lacking)
