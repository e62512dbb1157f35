"""What the area plugin says is burned, and who the patient is for this plugin."""

from __future__ import annotations

from typing import Protocol

from msgspec import Struct

from handoff.plugin import Case, Map, amount, entries, words

HEAD, NECK = ("head", "head and neck", "whole body"), ("neck", "head and neck", "whole body")
WHOLE_PCT = 100
HEALS = ("superficial partial",)
"""Depths that heal without shrinking, as the area plugin names them."""


class AreaRow(Protocol):
    """A burned region, as the area plugin hands it over."""

    @property
    def region(self) -> str:
        """The region of the body."""

    @property
    def face(self) -> str:
        """Front, back, or empty for both."""

    @property
    def depth(self) -> str:
        """The depth, as the area plugin names it."""

    @property
    def counted(self) -> bool | None:
        """Whether it counts towards the burned area; None where its depth is not assessed."""


class Burn(Struct, frozen=True):
    """One burned region with the joint that it crosses and its special sites.

    ``whole`` where all of the region is burned; ``shrinks`` where it is deep enough to shrink, or
    nobody has said how deep it is.
    """

    region: str
    face: str
    joint: str
    sites: tuple[str, ...]
    whole: bool
    shrinks: bool


class Burned(Struct, frozen=True):
    """The burned regions that are deeper than epidermal, or whose depth is not assessed."""

    burns: tuple[Burn, ...]

    @property
    def regions(self) -> tuple[str, ...]:
        """The regions, each once."""
        return tuple(dict.fromkeys(burn.region for burn in self.burns))

    @property
    def shrinking(self) -> tuple[Burn, ...]:
        """The burns that shrink if the part lies as it likes."""
        return tuple(burn for burn in self.burns if burn.shrinks)

    @property
    def face(self) -> bool:
        """Whether the face is burned, or may be."""
        return any(burn.region in HEAD and burn.face != "back" for burn in self.burns) or self.has(
            "face", "eyes"
        )

    @property
    def neck(self) -> bool:
        """Whether the front of the neck is burned."""
        return any(burn.region in NECK and burn.face != "back" for burn in self.burns)

    @property
    def ears(self) -> bool:
        """Whether an ear is burned: charted, or the whole head is."""
        whole = any(burn.region in HEAD and not burn.face and burn.whole for burn in self.burns)
        return whole or self.has("ears")

    @property
    def perineum(self) -> bool:
        """Whether the perineum or the genitalia are burned."""
        return "genitalia" in self.regions or self.has("perineum")

    def has(self, *names: str) -> bool:
        """Return whether one of the special sites is charted with a burn."""
        return any(name in burn.sites for burn in self.burns for name in names)


def burned(case: Case) -> Burned:
    """Return what is burned: the regions of the area plugin, with joint and sites as charted beside them."""
    found = case.findings["area"].values.get("burns")
    rows: tuple[AreaRow, ...] = found if isinstance(found, tuple) else ()
    charted = [
        row.entry for row in case.state.dated(case.state.root.get("area")) if entries(row.entry.get("burns"))
    ]
    beside = entries(charted[-1].get("burns")) if charted else ()
    if len(beside) != len(rows):
        beside = (Map.at(),) * len(rows)
    return Burned(
        tuple(
            Burn(
                row.region,
                row.face,
                words(entry.get("joint")),
                case.state.texts(entry.get("sites")),
                amount(entry.get("of_region"), "%") == WHOLE_PCT,
                row.depth not in HEALS,
            )
            for row, entry in zip(rows, beside, strict=True)
            if row.counted is not False
        )
    )


def counted_pct(case: Case) -> float | None:
    """Return the counted burn in %TBSA, or None."""
    pct = case.findings["area"].values.get("counted_pct")
    return float(pct) if isinstance(pct, (int, float)) else None


def is_child(case: Case) -> bool:
    """Return whether the patient is known to be a child."""
    age = case.state.age_at(case.now)
    return age is not None and age.years < case.parameters.number("child_under")
