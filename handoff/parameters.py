"""Cited tables: every clinical number with its unit, its kind of truth, its source and its place.

``parameters.yaml`` of a plugin holds ``sources``, ``parameters`` and ``choices`` (named rule
sets among which the local policy picks). A value without unit, kind, source and locator is
refused.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any, TypeAlias

from msgspec import Struct
from msgspec.structs import replace

Table: TypeAlias = Mapping[str, Any]

KINDS = ("definition", "guideline", "study", "common practice", "from memory", "local")
UNCITED_KINDS = ("common practice", "from memory")
REQUIRED = ("value", "unit", "kind", "source", "locator")


class ParameterError(ValueError):
    """A table of parameters is not usable; says which entry and why."""


class Source(Struct, frozen=True):
    """Where a number comes from: the publication, its place in it, and what kind of truth it is."""

    key: str
    citation: str
    locator: str
    kind: str
    doi: str = ""
    edition: str = ""
    read: str = "not read"

    def shown(self) -> str:
        """Return the citation with its place; facts from memory and without a source say so."""
        parts = [self.citation, f"Edition: {self.edition}" if self.edition else ""]
        parts += [f"doi:{self.doi}" if self.doi else "", self.locator]
        cited = " ".join(f"{part.strip().rstrip('.')}." for part in parts if part.strip())
        notes = {
            "from memory": "From memory: confirm before use.",
            "common practice": "Common practice." if self.citation else "Common practice, no source.",
        }
        return f"{cited} {notes.get(self.kind, '')}".strip()


class Parameter(Struct, frozen=True):
    """One cited value: a number, a text, a list or a table, in ``unit``."""

    id: str
    value: Any
    unit: str
    kind: str
    source: Source


class Choice(Struct, frozen=True):
    """A choice between named rule sets: which there are, the default, and why it is the default."""

    name: str
    among: tuple[str, ...]
    default: str
    why: str


class Chosen(Struct, frozen=True):
    """The rule set in use, and whether the local policy named it."""

    name: str
    by_policy: bool


class Parameters:
    """The cited values of one plugin, with what the local policy chose and changed."""

    def __init__(
        self,
        values: Mapping[str, Parameter],
        choices: Mapping[str, Choice] | None = None,
        chosen: Mapping[str, str] | None = None,
    ) -> None:
        self._values = dict(values)
        self.choices = dict(choices or {})
        self._chosen = dict(chosen or {})

    def __getitem__(self, identifier: str) -> Parameter:
        return self._values[identifier]

    def __contains__(self, identifier: str) -> bool:
        return identifier in self._values

    def ids(self, prefix: str = "") -> tuple[str, ...]:
        """Return the ids that begin with ``prefix``, in the order of the file."""
        return tuple(identifier for identifier in self._values if identifier.startswith(prefix))

    def number(self, identifier: str) -> float:
        """Return the value of ``identifier`` as a number, in the parameter's unit."""
        return float(self._values[identifier].value)

    def text(self, identifier: str) -> str:
        """Return the value of ``identifier`` as text."""
        return str(self._values[identifier].value)

    def table(self, identifier: str) -> Table:
        """Return the value of ``identifier`` as a mapping."""
        value: Table = self._values[identifier].value
        return value

    def source_of(self, identifier: str) -> Source:
        """Return where ``identifier`` comes from."""
        return self._values[identifier].source

    def chosen(self, choice: str) -> Chosen:
        """Return the rule set in use for ``choice``: the policy's, or the default."""
        if choice in self._chosen:
            return Chosen(self._chosen[choice], by_policy=True)
        return Chosen(self.choices[choice].default, by_policy=False)

    def with_policy(self, chosen: Mapping[str, str], values: Mapping[str, Mapping[str, Any]]) -> Parameters:
        """Return these parameters with the policy's choices and local values put in.

        Raises:
            ParameterError: The policy names a choice, a rule set or a value that is not there,
                or gives a value in another unit.
        """
        for name, picked in chosen.items():
            if name not in self.choices:
                raise ParameterError(f"no choice '{name}'; there are: {', '.join(self.choices) or 'none'}")
            if picked not in self.choices[name].among:
                among = ", ".join(self.choices[name].among)
                raise ParameterError(f"'{picked}' is not a rule set of '{name}'; there are: {among}")
        changed = dict(self._values)
        for identifier, local in values.items():
            changed[identifier] = _localised(changed, identifier, local)
        return Parameters(changed, self.choices, {**self._chosen, **chosen})


def _localised(known: Mapping[str, Parameter], identifier: str, local: Mapping[str, Any]) -> Parameter:
    if identifier not in known:
        raise ParameterError(f"no value '{identifier}'")
    original = known[identifier]
    if local["unit"] != original.unit:
        raise ParameterError(f"'{identifier}' is in {original.unit}, not in {local['unit']}")
    if isinstance(original.value, (Mapping, list)):
        raise ParameterError(f"'{identifier}' is a table; choose another rule set instead")
    source = Source("local", str(local["source"]), "", "local", read="not read")
    return replace(original, value=float(local["value"]), kind="local", source=source)


def read_parameters(data: Mapping[str, Any], where: str) -> Parameters:
    """Return the parameters in ``data`` (a loaded ``parameters.yaml``); ``where`` names it in errors.

    Raises:
        ParameterError: A value lacks its unit, kind, source or locator, names an unknown
            source, or a choice has no such default.
    """
    sources = data.get("sources") or {}
    values: dict[str, Parameter] = {}
    for identifier, entry in (data.get("parameters") or {}).items():
        missing = [name for name in REQUIRED if name not in entry]
        if missing:
            raise ParameterError(f"{where}: '{identifier}' lacks {', '.join(missing)}")
        values[identifier] = _parameter(identifier, entry, sources, where)
    choices = {}
    for name, entry in (data.get("choices") or {}).items():
        if entry["default"] not in entry["among"]:
            raise ParameterError(f"{where}: choice '{name}' has no rule set '{entry['default']}'")
        choices[name] = Choice(name, tuple(entry["among"]), entry["default"], entry["why"])
    return Parameters(values, choices)


def _parameter(
    identifier: str, entry: Mapping[str, Any], sources: Mapping[str, Any], where: str
) -> Parameter:
    kind, key = entry["kind"], entry["source"]
    if kind not in KINDS:
        raise ParameterError(f"{where}: '{identifier}' has an unknown kind '{kind}'")
    if key == "none":
        if kind not in UNCITED_KINDS:
            raise ParameterError(f"{where}: '{identifier}' is {kind} and needs a source")
        cited: Mapping[str, Any] = {"citation": ""}
    elif key in sources:
        cited = sources[key]
    else:
        raise ParameterError(f"{where}: '{identifier}' names an unknown source '{key}'")
    source = Source(
        key=key,
        citation=cited["citation"],
        locator=str(entry["locator"] or ""),
        kind=kind,
        doi=str(cited.get("doi") or ""),
        edition=str(cited.get("edition") or ""),
        read=str(cited.get("read") or "not read"),
    )
    return Parameter(identifier, entry["value"], entry["unit"], kind, source)
