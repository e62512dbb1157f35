"""Which scale fits this patient's age and state; self-report comes first."""

from __future__ import annotations

from msgspec import Struct

from handoff.plugin import Age, Case, Flag, Item, Part, Source, System, child, entries, line_of, words, yes

from .charted import Charted
from .latest import latest_scores

KEY = "pain.scale_fit"
LABEL = "Scale that fits"
CANNOT = ("unresponsive", "sedated", "responds to pain")
BY_REASON = {
    "ventilated": ("cpot", "bps"),
    "sedated": ("cpot", "bps"),
    "cognitive impairment": ("revised flacc",),
    "dementia": ("painad",),
}
ICU_CAUTION = "scale_caution.icu"
MONTHS_A_YEAR = 12


class _State(Struct, frozen=True):
    able: bool | None
    why: str
    said: str


def item(case: Case, charted: Charted) -> Item:
    """Return the scales published for this age and state, and whether the latest score used one of them."""
    age = case.state.age_at(case.now)
    if age is None:
        return Item(
            key=KEY, label=LABEL, part=Part.ASSESSMENT, system=System.PAIN,
            shown="not computed: age not recorded", flag=Flag.NOT_RECORDED, detail=True,
        )  # fmt: skip
    state = _state(case, age)
    fitting = _fitting(case, age, state)
    names = [str(case.parameters.table(f"scale.{name}")["called"]) for name in fitting]
    said = f"{age.shown()}, {state.said}: "
    said += ", ".join(names) if names else "no scale of this list is published for this age and state"
    used = [score.scale for score in latest_scores(charted)]
    misfits = [scale.called for scale in used if scale.listed and scale.key not in fitting]
    if case.comfort and state.able is False:
        misfits = []  # where the goal is comfort a scale that watches is kept, not changed for another
    if misfits and fitting:
        said += f"; the latest score used the {', '.join(dict.fromkeys(misfits))}"
    return Item(
        key=KEY,
        label=LABEL,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=", ".join(fitting) or None,
        shown=said,
        as_of=case.now,
        flag=Flag.REVIEW if misfits and fitting and state.able is not None else Flag.NONE,
        sources=_sources(case, fitting),
        cautions=_cautions(case, state, fitting),
        detail=True,
        line=line_of(child(case.block, "self_report")),
    )


def _sources(case: Case, fitting: tuple[str, ...]) -> tuple[Source, ...]:
    names = ["self_report_first", *(f"scale.{name}" for name in fitting)]
    if "cpot" in fitting or "bps" in fitting:
        names.append(ICU_CAUTION)
    return tuple(case.parameters.source_of(name) for name in names)


def _state(case: Case, age: Age) -> _State:
    node = next(iter(entries(child(case.block, "self_report"))), None)
    able = yes(child(node, "able"))
    if node is not None and able is not None:
        why = words(node.get("why_not"))
        return _State(
            able, why, "can score own pain" if able else f"cannot score own pain{f' ({why})' if why else ''}"
        )
    gcs = case.state.series("gcs")
    if gcs and words(child(gcs[-1].node, "verbal")) == "tube":
        return _State(False, "ventilated", "tube in place")
    level = case.state.series("consciousness")
    if level:
        found = words(level[-1].node)
        if found in CANNOT:
            return _State(False, "sedated", found)
        if found == "alert" and age.years >= case.parameters.number("self_report_from"):
            return _State(True, "", "alert")
    return _State(None, "", "whether the patient can score own pain is not recorded")


def _fitting(case: Case, age: Age, state: _State) -> tuple[str, ...]:
    names = [identifier.removeprefix("scale.") for identifier in case.parameters.ids("scale.")]
    of_age = [name for name in names if _of_age(case, name, age)]
    own = [name for name in of_age if case.parameters.table(f"scale.{name}")["self_report"]]
    if state.able:
        return tuple(own)
    seen = [name for name in of_age if name not in own]
    if state.able is False:
        wanted = BY_REASON.get(state.why, ())
        narrowed = [name for name in seen if name in wanted]
        return tuple(narrowed or [name for name in seen if name in ("flacc", "cpot")])
    # Not known whether they can: self-report is tried first, and in a small child the child's scale stands beside it.
    return tuple(own + [name for name in seen if name == "flacc"])


def _of_age(case: Case, name: str, age: Age) -> bool:
    table = case.parameters.table(f"scale.{name}")
    months = age.months if age.months is not None else age.years * MONTHS_A_YEAR
    if age.years < table.get("from_years", 0) or months < table.get("from_months", 0):
        return False
    return bool("up_to_years" not in table or age.years <= table["up_to_years"])


def _cautions(case: Case, state: _State, fitting: tuple[str, ...]) -> tuple[str, ...]:
    said = ["vital signs are a cue to assess pain, not a score of it"]
    if state.able is not True and ("cpot" in fitting or "bps" in fitting):
        said.append(case.parameters.text(ICU_CAUTION))
    if "wong-baker faces" in fitting:
        said.append("Wong-Baker FACES is scored by the patient, never by an observer")
    return tuple(said)
