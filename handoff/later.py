"""A function that is imported when it is first called, so that a command loads only the plugins' parts it uses."""

from __future__ import annotations

from collections.abc import Callable
from importlib import import_module
from typing import Any


def later(module: str, name: str) -> Callable[..., Any]:
    """Return a stand-in for the function ``name`` of ``module`` that imports the module when called.

    An import that fails then counts as a failure of that one call.
    """

    def call(*given: Any, **named: Any) -> Any:
        return getattr(import_module(module), name)(*given, **named)

    return call
