"""Puts a mutant into the running program, where every importer of the function sees it."""

from __future__ import annotations

import ast
import importlib
import sys
from collections.abc import Iterator
from functools import cached_property
from types import CodeType, FunctionType, ModuleType
from typing import Any

from .mutants import Mutant, Source


def put(mutant: Mutant, source: Source, module: ModuleType) -> None:
    """Change ``module`` in this process; there is no way back, so the process must be one to throw away.

    The code of the very function object is exchanged, so whoever imported it runs the mutant. For what
    stands outside functions the module is run anew and its changed values are handed to every importer.

    Raises:
        LookupError: The function is not where the source says.
    """
    mutant.put()
    code = compile(ast.fix_missing_locations(source.tree), source.path, "exec")
    function = _function(module, mutant.function) if mutant.function else None
    if function is None:
        _run_anew(code, module)
        return
    defaults_changed = isinstance(mutant.holder, ast.arguments)
    if defaults_changed:
        anew = _function(_fresh(code, module), mutant.function)
        assert anew is not None
        function.__defaults__, function.__kwdefaults__ = anew.__defaults__, anew.__kwdefaults__
    else:
        function.__code__ = _code(code, mutant.function.split("."), function.__code__.co_firstlineno)
    _forget(module)


def _function(module: ModuleType, name: str) -> FunctionType | None:
    """Return the function of a qualified name; None for what stands in a class outside its methods."""
    found: Any = module
    for part in name.split("."):
        found = vars(found).get(part)
        while not isinstance(found, FunctionType | type) and found is not None:
            found = _inside(found)
        if isinstance(found, FunctionType):
            return found
    return None


def _inside(wrapped: Any) -> Any:
    if isinstance(wrapped, property):
        return wrapped.fget
    if isinstance(wrapped, cached_property):
        return wrapped.func
    return getattr(wrapped, "__wrapped__", None) or getattr(wrapped, "__func__", None)


def _code(code: CodeType, names: list[str], line: int) -> CodeType:
    """Return the code of the outermost function on the path ``names``."""
    for part in _codes(code):
        if part.co_name == names[0] and part.co_flags & 0x2 and part.co_firstlineno == line:
            return part
        if part.co_name == names[0] and len(names) > 1:
            return _code(part, names[1:], line)
    raise LookupError(names)


def _codes(code: CodeType) -> Iterator[CodeType]:
    return (part for part in code.co_consts if isinstance(part, CodeType))


def _fresh(code: CodeType, module: ModuleType) -> ModuleType:
    fresh = ModuleType(module.__name__)
    for name in ("__file__", "__package__", "__spec__", "__path__"):
        if hasattr(module, name):
            setattr(fresh, name, getattr(module, name))
    sys.modules[module.__name__] = fresh
    try:
        exec(code, vars(fresh))  # noqa: S102  (our own source, changed in one place)
    finally:
        sys.modules[module.__name__] = module
    return fresh


def _run_anew(code: CodeType, module: ModuleType) -> None:
    fresh = _fresh(code, module)
    for name, new in vars(fresh).items():
        old = vars(module).get(name)
        if name.startswith("__") or old is None:
            continue
        for other in list(sys.modules.values()):
            if (
                getattr(other, "__name__", "").startswith(("handoff", "tests"))
                and vars(other).get(name) is old
            ):
                setattr(other, name, new)


def _forget(module: ModuleType) -> None:
    """Empty what the functions of a module remember."""
    for value in vars(module).values():
        clear = getattr(value, "cache_clear", None)
        if clear is not None:
            clear()


def module_of(path: str) -> ModuleType:
    """Return the module of a file of the checkout, under the name by which it is imported."""
    dotted = path.removesuffix(".py").replace("/", ".")
    name = f"handoff.bundled.{dotted.removeprefix('plugins.')}" if dotted.startswith("plugins.") else dotted
    return importlib.import_module(name)
