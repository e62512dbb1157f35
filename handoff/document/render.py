"""Fill a Word template: a sandboxed environment, every text escaped, no missing name passed over."""

from __future__ import annotations

from collections.abc import Mapping
from io import BytesIO
from pathlib import Path
from typing import Any
from xml.sax.saxutils import escape

from jinja2 import StrictUndefined, Template, TemplateError, pass_context
from jinja2.sandbox import SandboxedEnvironment
from markupsafe import Markup

from handoff.document.context import Data
from handoff.document.errors import DocumentError
from handoff.document.prepared import PreparedTemplate, code_of
from handoff.document.sections import Mark

FILTERS = ("capitalize", "count", "default", "first", "join", "last", "length", "lower", "trim", "upper")
"""Filters that a template may use; none of them can bring markup in or cut text out of sight."""


class Filled:
    """A filled template that is not yet a file, and every text that it printed, in order."""

    def __init__(self, template: PreparedTemplate, printed: list[str]) -> None:
        self.template = template
        self.printed = printed


def fill(template: bytes, name: str, data: Mapping[str, Data]) -> Filled:
    """Return ``template`` filled with ``data``.

    Args:
        template: A .docx file with Jinja tags.
        name: What to call the template in a message.
        data: Plain data; a key is found before any method of its mapping.

    Raises:
        DocumentError: The template names a field that is not there, or a tag in it is not closed.
    """
    printed: list[str] = []
    document = PreparedTemplate(BytesIO(template))
    try:
        document.render(dict(data), environment(printed), autoescape=True)
    except TemplateError as error:
        raise DocumentError(
            f"the template {name} cannot be filled: {error.message}; correct that field in it"
        ) from error
    return Filled(document, printed)


def template_bytes(name: str) -> bytes:
    """Return the built-in template of that name."""
    return (Path(__file__).parent / "templates" / name).read_bytes()


def environment(printed: list[str]) -> SandboxedEnvironment:
    """Return the sandbox in which templates are filled; it writes every text that is printed into ``printed``."""

    class KeysFirst(SandboxedEnvironment):
        """``{{ a.items }}`` means the key ``items``, never the method; known sources are compiled already."""

        def from_string(
            self,
            source: Any,
            globals: Any = None,
            template_class: type[Template] | None = None,
        ) -> Template:
            code = code_of(source)
            if code is None:
                return super().from_string(source, globals, template_class)
            return (template_class or self.template_class).from_code(self, code, self.make_globals(globals))

        def getattr(self, obj: Any, attribute: str) -> Any:
            if isinstance(obj, Mapping):
                return obj[attribute] if attribute in obj else self.undefined(obj=obj, name=attribute)
            return super().getattr(obj, attribute)

    @pass_context  # keeps Jinja from printing constants early, which would put them out of order
    def print_text(_: object, value: object) -> object:
        if isinstance(value, Markup) or not isinstance(value, (str, int)):
            return value
        if not isinstance(value, Mark):
            printed.append(str(value))
        return Markup(_escaped(str(value)))  # noqa: S704 (every character of markup was escaped)

    made = KeysFirst(undefined=StrictUndefined, finalize=print_text, autoescape=True)
    made.filters = {name: made.filters[name] for name in FILTERS}
    return made


def _escaped(text: str) -> str:
    """Return ``text`` as XML in which nothing is left that the filling could take for a tag of its own."""
    text = escape(text, {'"': "&quot;", "{": "&#123;", "}": "&#125;"})
    text = text.replace("\n", '</w:t><w:br/><w:t xml:space="preserve">')
    return text.replace("\t", '</w:t><w:tab/><w:t xml:space="preserve">')
