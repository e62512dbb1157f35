"""Classes of depth: synonyms, which are counted, which are deep."""

from __future__ import annotations

from handoff.plugin import Parameters

NOT_ASSESSED = "not assessed"
AMBIGUOUS = "superficial"
"""A word that means epidermal to some and superficial dermal to others; it is refused."""


def class_of(written: str, parameters: Parameters) -> str:
    """Return the class of depth that ``written`` names; ``not assessed`` where nothing is written.

    Source: ``depth.names`` in parameters.yaml.
    """
    names = parameters.table("depth.names")
    return str(names.get(written, NOT_ASSESSED))


def is_counted(depth: str, parameters: Parameters) -> bool | None:
    """Return whether a class counts towards the burned area; None where the depth was not assessed.

    Source: ``depth.counted`` in parameters.yaml.
    """
    return None if depth == NOT_ASSESSED else depth in parameters["depth.counted"].value


def is_deep(depth: str, parameters: Parameters) -> bool:
    """Return whether a class is deep dermal or deeper, or may be.

    Source: ``depth.deep`` in parameters.yaml.
    """
    return depth in parameters["depth.deep"].value


def is_full(depth: str, parameters: Parameters) -> bool:
    """Return whether a class is full thickness or deeper.

    Source: ``depth.full`` in parameters.yaml.
    """
    return depth in parameters["depth.full"].value
