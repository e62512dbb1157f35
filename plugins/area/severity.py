"""Minor, moderate, major: a class only where the policy names a scheme, with what it rests on."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Part, System, Working, joined

from .assessment import Assessment
from .criteria import Facts, Verdict, judge

NONE = "none"


def items(case: Case, facts: Facts, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return the class of the chosen scheme; nothing where the policy chose none."""
    name = case.chosen("severity_scheme").name
    if name == NONE:
        return ()
    scheme = case.parameters.table(f"severity.{name}")
    title = str(scheme["title"])
    if "applies" in scheme and judge(scheme["applies"], facts).met is not True:
        return (
            _item(
                case,
                name,
                title,
                f"not computed: the scheme is for {title.rpartition(', ')[2]}",
                None,
                assessment,
            ),
        )
    for row in scheme["classes"]:
        verdict = judge(row["when"], facts)
        if verdict.met:
            shown = f"{row['class']}: {'; '.join(verdict.by)}"
            return (_item(case, name, title, shown, verdict, assessment),)
        if verdict.met is None:
            missing = joined(list(verdict.missing))
            shown = f"not computed: whether it is {row['class']} cannot be judged ({missing})"
            return (_item(case, name, title, shown, None, assessment),)
    shown = "no class: the figures fall between the classes that the scheme prints"
    return (_item(case, name, title, shown, Verdict(False), assessment),)


def _item(
    case: Case, name: str, title: str, shown: str, verdict: Verdict | None, assessment: Assessment | None
) -> Item:
    value = shown.partition(":")[0] if verdict is not None else None
    return Item(
        key="area.severity_class",
        label=f"Class of the burn, {title}",
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=value,
        shown=shown,
        as_of=assessment.at if assessment else None,
        flag=Flag.NOT_RECORDED if verdict is None else Flag.NONE,
        working=Working(formula="first class met, from the gravest down", sum=shown, rule=title),
        sources=(case.parameters.source_of(f"severity.{name}"),),
        cautions=("a class of the burn, not of the patient; it lowers no flag",),
        line=assessment.line if assessment else 0,
    )
