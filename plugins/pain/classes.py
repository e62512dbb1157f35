"""What a score is called by one named set of cut points; a scale without a set is not classed."""

from __future__ import annotations

from msgspec import Struct

from handoff.plugin import Case, Flag, FormulaInputError, Item, Part, System, Working, number_text

from . import formula
from .charted import Charted
from .latest import latest_scores, worst_of_first_scale
from .scores import Score

KEY = "pain.class"
LABEL = "Pain class"
FACES_AND_NUMBERS = ("numeric", "faces revised", "wong-baker faces")
SEVERE_RANK, SEVERE_RANK_IN_COMFORT_CARE = 62, 12
OFF = "off"


class Class(Struct, frozen=True):
    """The class of one score: its word, its bounds, the set by name, and whether it may decide a flag."""

    word: str
    bounds: str
    identifier: str
    called: str
    decides: bool


def class_of(case: Case, score: Score) -> tuple[Class | None, str]:
    """Return the class of ``score``, or None and why it has none."""
    identifier, by_policy, why = _cut_set(case, score)
    if not identifier or score.points is None:
        return None, why
    table = case.parameters.table(identifier)
    words, bounds = tuple(table["bounds"]), [float(bound) for bound in table["bounds"].values()]
    try:
        index = formula.score_class(score.points, bounds)
    except FormulaInputError:
        return None, "the score is outside its scale"
    lowest = bounds[index - 1] + 1 if index else score.scale.lowest
    said = number_text(bounds[index])
    if bounds[index] > lowest:
        said = f"{number_text(lowest)} to {said}"
    decides = by_policy or case.parameters[identifier].kind != "from memory"
    return Class(words[index], said, identifier, str(table["called"]), decides), ""


def _cut_set(case: Case, score: Score) -> tuple[str, bool, str]:
    """The parameter of the set, whether the policy chose it, and why there is none."""
    key = score.scale.key
    if not score.scale.listed:
        return "", False, f"no cut points for {score.scale.called}"
    if key in FACES_AND_NUMBERS:
        age = case.state.age_at(score.at)
        if age is None or age.years < case.parameters.number("adult_from"):
            return "", False, "the cut points for self-report were made in adults"
        return _chosen_set(case, "pain_classes", "self_report")
    if key in ("flacc", "revised flacc"):
        return _chosen_set(case, "flacc_classes", "flacc")
    if key == "bps" and case.chosen("bps_class").name == OFF:
        return "", False, "the cut point of BPS is off until the local policy chooses it"
    if f"cut.{key}" in case.parameters:
        return f"cut.{key}", key == "bps" and case.chosen("bps_class").by_policy, ""
    return "", False, f"the {score.scale.called} is its own class"


def _chosen_set(case: Case, choice: str, kind: str) -> tuple[str, bool, str]:
    chosen = case.chosen(choice)
    return f"cut.{chosen.name}.{kind}", chosen.by_policy, ""


def item(case: Case, charted: Charted) -> Item:
    """Return what the latest score is called, with the bounds and the name of the set."""
    latest = latest_scores(charted)
    if not latest:
        return Item(
            key=KEY, label=LABEL, part=Part.ASSESSMENT, system=System.PAIN,
            shown="not recorded", flag=Flag.NOT_RECORDED, detail=True,
        )  # fmt: skip
    score = worst_of_first_scale(latest)
    found, why = class_of(case, score)
    at = case.clock.time(score.at, case.now)
    if found is None:
        return Item(
            key=KEY, label=LABEL, part=Part.ASSESSMENT, system=System.PAIN,
            shown=f"not classed: {why}", as_of=score.at, detail=True,
        )  # fmt: skip
    flag = _flag(found)
    return Item(
        key=KEY,
        label=LABEL,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=found.word,
        shown=f"{found.word} by {found.called} ({found.bounds} of the {score.scale.called}), {at}",
        as_of=score.at,
        flag=flag,
        working=Working(
            formula="class whose bounds hold the score",
            sum=f"{score.written} lies in {found.bounds}",
            inputs=(case.input("score", score.node, score.shown()),),
            rule=found.called,
        ),
        sources=(case.parameters.source_of(found.identifier),),
        cautions=("a class is no order for a dose; the patient's own goal comes first",),
        rank=severe_rank(case) if flag is Flag.ACTION else None,
    )


def severe_rank(case: Case) -> int:
    """Return where severe pain stands on page one; with comfort as the goal of care it leads."""
    return SEVERE_RANK_IN_COMFORT_CARE if case.comfort else SEVERE_RANK


def _flag(found: Class) -> Flag:
    if not found.decides:
        return Flag.NONE
    return {"severe": Flag.ACTION, "significant": Flag.REVIEW}.get(found.word, Flag.NONE)
