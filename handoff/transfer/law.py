"""What the law of the policy's country asks to be written at a transfer."""

from __future__ import annotations

from collections.abc import Mapping

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.identity import person
from handoff.document.sections import Mark
from handoff.parameters import Parameters
from handoff.plugin import child, words
from handoff.transfer.block import Ticked, at, moment


class Law(Struct, frozen=True):
    """The fields of one country: what is charted of each; an empty value is left to be written."""

    title: str
    lines: tuple[Ticked, ...]
    source: str


def law(assessment: Assessment, parameters: Mapping[str, Parameters]) -> tuple[Law, ...]:
    """Return the fields that the country of the policy asks for; none where no country or law is known."""
    country, known = assessment.policy.country, parameters.get("transfer")
    if not country or known is None or f"law.{country}" not in known:
        return ()
    table = dict(known.table(f"law.{country}"))
    title = str(table.pop("title"))
    sources = [known.source_of(f"law.{country}").shown()]
    lines = [(str(label), str(name)) for name, label in table.items()]
    if f"law.{country}.memory" in known:
        more = known.table(f"law.{country}.memory")
        lines += [(f"{label} (from memory)", str(name)) for name, label in more.items()]
        sources.append(known.source_of(f"law.{country}.memory").shown())
    rows = tuple(Ticked(label, _charted(assessment, name), Mark(f"law:{name}")) for label, name in lines)
    return (Law(title, rows, " ".join(dict.fromkeys(sources))),)


def unknown_country(assessment: Assessment, parameters: Mapping[str, Parameters]) -> str:
    """Return a line where the policy names a country whose law is not held; empty otherwise."""
    country, known = assessment.policy.country, parameters.get("transfer")
    if not country or (known is not None and f"law.{country}" in known):
        return ""
    return f"no fields are held for the law of {country}; add what local policy asks for by hand"


def _charted(assessment: Assessment, name: str) -> str:
    node = at(assessment, "certification")
    if name == "ground":
        return words(child(node, "basis"))
    if name in ("benefits", "risks", "countersigned by", "on call absent"):
        keys = {"countersigned by": "countersigned_by", "on call absent": "on_call_absent"}
        return words(child(node, keys.get(name, name)))
    if name == "certified by" and words(child(node, "certified_by", "name")):
        return f"{person(child(node, 'certified_by'))}, {moment(assessment, child(node, 'at'))}"
    if name == "accepting" and words(at(assessment, "receiver", "accepted_by", "name")):
        accepted = moment(assessment, at(assessment, "receiver", "accepted"))
        return f"{person(at(assessment, 'receiver', 'accepted_by'))}, {accepted}"
    if name == "consent":
        return words(at(assessment, "consent", "given_by"))
    return ""
