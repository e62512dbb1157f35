"""What this receiver will ask and the file does not hold, said before anyone picks up the phone."""

from __future__ import annotations

from handoff.assess import Assessment
from handoff.transfer.facts import Answer, answer, answer_of
from handoff.transfer.profile import Profile


def answers(assessment: Assessment, profile: Profile) -> tuple[Answer, ...]:
    """Return everything that this receiver asks for, in its order, with what is known of it."""
    asked = [answer(assessment, fact) for fact in profile.ask]
    return (*asked, *(answer_of(assessment, extra.label, (extra.key,)) for extra in profile.extra))


def missing(answered: tuple[Answer, ...]) -> tuple[str, ...]:
    """Return one line for each fact that is not recorded, or not wholly."""
    found = []
    for one in answered:
        if one.missing == (one.label,):
            found.append(one.label)
        elif one.missing:
            found.append(f"{one.label}: {', '.join(one.missing)}")
    return tuple(found)
