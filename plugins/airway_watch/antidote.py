"""What an antidote for cyanide does to what is seen and measured afterwards."""

from __future__ import annotations

from handoff.plugin import Case, Item, System, fact, number_text, words

from . import charted

DRUG = "hydroxocobalamin"
MISREAD = (
    "Colour tests and blood co-oximetry, carboxyhaemoglobin among them, may misread: tell the laboratory."
)


def items(case: Case) -> tuple[Item, ...]:
    """Return the red urine and skin after hydroxocobalamin while they may last; nothing otherwise."""
    given = [row for row in charted.block_rows(case, "antidotes") if words(row.entry.get("drug")) == DRUG]
    red = case.parameters.table("antidote.red")
    if not given or case.hours_between(given[-1].at, case.now) > float(red["urine to"]) * 24:
        return ()
    last = given[-1]
    return (
        fact(
            "airway_watch.antidote",
            "After hydroxocobalamin",
            f"given {case.clock.day_and_time(last.at)}; urine turns red, strongly for "
            f"{number_text(red['urine strongly'])} days and up to {number_text(red['urine to'])}, skin up to "
            f"{number_text(red['skin to'])} days: red urine alone is then no sign of muscle pigment or bleeding",
            system=System.BREATHING,
            as_of=last.at,
            sources=(
                case.parameters.source_of("antidote.red"),
                case.parameters.source_of("antidote.misread"),
            ),
            cautions=(
                MISREAD,
                "Blood pressure may rise for about "
                f"{number_text(case.parameters.number('antidote.pressure'))} h.",
            ),
            line=last.entry.line,
        ),
    )
