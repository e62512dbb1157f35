"""Level of consciousness, the coma scale by parts, and the pupils beside it."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Map, Reading, Source, System, Working, fact, number_text, words

from . import formula, patient

PARTS = ("eye", "verbal", "motor")
RANK = 17
DEEP = ("responds to pain", "unresponsive")
LESS = ("new confusion", "responds to voice")
HEAD_INJURY = "Made for head injury, for information only: opioids and swollen lids change pupils and parts."
SEDATED = "Sedatives, opioids and carbon monoxide lower it too."


def items(case: Case) -> tuple[Item, ...]:
    """Return what is charted of consciousness; nothing where nothing is."""
    return (*_level(case), *_coma(case), *_pupils(case))


def _level(case: Case) -> tuple[Item, ...]:
    readings = case.state.series("consciousness")
    if not readings:
        return ()
    last = readings[-1]
    said = words(last.node)
    acts = said in (*DEEP, *LESS) and not case.comfort
    before = [one for one in readings[:-1] if words(one.node) != said]
    shown = said
    if before:
        shown += f"; {words(before[-1].node)} at {case.clock.time(before[-1].at, case.now)}"
    about, sources = _median(case, last, said)
    return (
        fact(
            "early_warning.consciousness",
            "Level of consciousness (ACVPU)",
            shown + about,
            system=System.DISABILITY,
            value=said,
            as_of=last.at,
            flag=Flag.ACTION if acts else Flag.NONE,
            sources=(case.parameters.source_of("news2.consciousness"), *sources),
            cautions=(SEDATED,) if acts else (),
            rank=RANK if acts and said in DEEP and not _summed(case, last) else None,
            detail=not acts,
            line=last.node.line,
        ),
    )


def _summed(case: Case, level: Reading) -> bool:
    """Whether the coma scale of the same minute says it, and stands on page one for both."""
    same = [coma_of(one.node)[0] for one in case.state.series("gcs")[-1:] if one.at == level.at]
    low = case.parameters.number("coma.low")
    return any(total is not None and total <= low for total in same)


def _median(case: Case, reading: Reading, said: str) -> tuple[str, tuple[Source, ...]]:
    age = patient.age_at(case, reading.at)
    if age is None or not patient.is_child(case, reading.at):
        return "", ()
    older = age.years >= case.parameters.number("coma.medians_age")
    name = "coma.medians_from_5" if older else "coma.medians_under_5"
    points = case.parameters.table(name).get(said)
    if points is None or said == "alert":
        return "", ()
    about = (
        f" (in children of this age about {number_text(points)} of the coma scale, a median, no conversion)"
    )
    return about, (case.parameters.source_of(name),)


def coma_of(node: object) -> tuple[int | None, str]:
    """Return the total of a charted coma scale and its parts in words; the total None with a part not testable."""
    if not isinstance(node, Map):
        return None, ""
    parts = [words(node.get(name)) for name in PARTS]
    said = ", ".join(f"{name} {part or 'not recorded'}" for name, part in zip(PARTS, parts, strict=True))
    if all(part.isdigit() for part in parts):
        return formula.coma_total(*(int(part) for part in parts)), said
    return None, said


def _coma(case: Case) -> tuple[Item, ...]:
    readings = case.state.series("gcs")
    if not readings:
        return ()
    last = readings[-1]
    total, said = coma_of(last.node)
    earlier = [(one, found[0]) for one in readings[:-1] if (found := coma_of(one.node))[0] is not None]
    low = case.parameters.number("coma.low")
    comfort = case.comfort
    shown = f"{said}; {f'total {total}' if total is not None else 'no sum'}"
    flag, rank = Flag.NONE, None
    sources = [case.parameters.source_of("coma.parts")]
    cautions = [SEDATED]
    if total is None:
        sources.append(case.parameters.source_of("coma.not_testable"))
        cautions.append("A part that cannot be tested, as with lids swollen shut or a tube, is not scored 1.")
    elif earlier and total < (earlier[-1][1] or 0):
        flag = Flag.ACTION
    if total is not None and total <= low:
        flag, rank = Flag.ACTION, RANK
        sources.append(case.parameters.source_of("coma.low"))
    if earlier:
        shown += f"; before: total {earlier[-1][1]} at {case.clock.time(earlier[-1][0].at, case.now)}"
    return (
        fact(
            "early_warning.coma_scale",
            "Coma scale",
            shown,
            system=System.DISABILITY,
            value=total,
            unit="points",
            as_of=last.at,
            flag=Flag.NONE if comfort else flag,
            working=Working(
                formula="eye + verbal + motor, only where each part could be tested",
                sum=said,
                inputs=(case.input("coma scale", last.node, said),),
            ),
            sources=sources,
            cautions=cautions,
            rank=None if comfort else rank,
            detail=flag is Flag.NONE or comfort,
            line=last.node.line,
        ),
    )


def _pupils(case: Case) -> tuple[Item, ...]:
    charted = case.state.series("pupils_unreactive")
    if not charted:
        return ()
    last = charted[-1]
    same = [one for one in case.state.series("gcs") if one.at == last.at]
    total, said = coma_of(same[-1].node) if same else (None, "")
    label, source = "Coma scale with pupils (GCS-P)", case.parameters.source_of("coma.pupils")
    count = words(last.node)
    if total is None or not count.isdigit():
        why = "pupils not visible" if not count.isdigit() else "no coma scale total charted with the pupils"
        return (
            fact(
                "early_warning.coma_pupils",
                label,
                f"not computed: {why}",
                system=System.DISABILITY,
                unit="points",
                as_of=last.at,
                sources=(source,),
                cautions=(HEAD_INJURY,),
                detail=True,
                line=last.node.line,
            ),
        )
    value = formula.coma_pupils(total, int(count))
    return (
        fact(
            "early_warning.coma_pupils",
            label,
            str(value),
            system=System.DISABILITY,
            value=value,
            unit="points",
            as_of=last.at,
            working=Working(
                formula="coma scale total - pupils that do not react",
                sum=f"{total} - {count} = {value}",
                inputs=(
                    case.input("coma scale", same[-1].node, said),
                    case.input("pupils unreactive", last.node),
                ),
            ),
            sources=(source,),
            cautions=(HEAD_INJURY,),
            detail=True,
            line=last.node.line,
        ),
    )
