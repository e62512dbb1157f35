"""Every small change that can be made to a source file, in an order that never varies."""

from __future__ import annotations

import ast
from collections.abc import Iterator
from dataclasses import dataclass

from . import changes

Body = list[ast.stmt]


@dataclass(frozen=True)
class Mutant:
    """One changed place: the field of a node of the tree, and what stands there instead."""

    function: str
    line: int
    end_line: int
    before: str
    after: str
    holder: ast.AST
    field: str
    index: int | None
    new: ast.AST

    def put(self) -> ast.AST:
        """Change the tree, and return what stood there."""
        return _exchange(self.holder, self.field, self.index, self.new)


@dataclass(frozen=True)
class Source:
    """The tree of a file and its mutants; a mutant that is put changes this very tree."""

    path: str
    tree: ast.Module
    mutants: tuple[Mutant, ...]


def read(text: str, path: str) -> Source:
    """Return the source ``text`` of the file ``path`` with every mutant of it."""
    tree = ast.parse(text, path)
    return Source(path, tree, tuple(_in_body(tree.body, tree, "", "body")))


def _in_body(body: Body, holder: ast.AST, function: str, field: str) -> Iterator[Mutant]:
    for index, statement in enumerate(body):
        if not changes.is_left_alone(statement):
            yield from _in_statement(statement, holder, field, index, function)


def _in_statement(
    statement: ast.stmt, holder: ast.AST, field: str, index: int, function: str
) -> Iterator[Mutant]:
    if isinstance(statement, (ast.FunctionDef, ast.ClassDef)):
        inner = f"{function}.{statement.name}" if function else statement.name
        if isinstance(statement, ast.FunctionDef):
            yield from _expressions(statement.args, statement, inner, defaults_only=True)
        yield from _in_body(statement.body, statement, inner, "body")
        return
    for new in changes.instead_of_statement(statement):
        yield _mutant(statement, holder, field, index, new, function)
    if isinstance(statement, ast.Raise):
        return
    yield from _expressions(statement, statement, function)
    for part in ("body", "orelse", "finalbody"):
        inside = getattr(statement, part, None)
        if isinstance(inside, list):
            yield from _in_body(inside, statement, function, part)
    for handler in getattr(statement, "handlers", []):
        yield from _in_body(handler.body, handler, function, "body")
    for case in getattr(statement, "cases", []):
        yield from _in_body(case.body, case, function, "body")


def _expressions(
    node: ast.AST, statement: ast.stmt, function: str, defaults_only: bool = False
) -> Iterator[Mutant]:
    for field, value in ast.iter_fields(node):
        if field in changes.NOT_CHANGED or (
            defaults_only and node is not statement and field not in ("defaults", "kw_defaults")
        ):
            continue
        for index, part in enumerate(value) if isinstance(value, list) else [(None, value)]:
            if not isinstance(part, ast.AST) or isinstance(
                part, (ast.stmt, ast.excepthandler, ast.match_case)
            ):
                continue
            if changes.is_only_text(part) or (
                isinstance(part, ast.Constant) and changes.names_its_argument(node)
            ):
                continue
            for new in changes.instead_of(part):
                yield _mutant(statement, node, field, index, new, function)
            yield from _expressions(part, statement, function)


def _mutant(
    statement: ast.stmt, holder: ast.AST, field: str, index: int | None, new: ast.AST, function: str
) -> Mutant:
    before = _said(statement)
    old = _exchange(holder, field, index, new)
    after = _said(new) if old is statement else _said(statement)
    _exchange(holder, field, index, old)
    first, last = _lines(statement)
    return Mutant(function, first, last, before, after, holder, field, index, new)


def _exchange(holder: ast.AST, field: str, index: int | None, new: ast.AST) -> ast.AST:
    value = getattr(holder, field)
    old: ast.AST
    if index is None:
        old = value
        setattr(holder, field, new)
    else:
        old = value[index]
        value[index] = new
    return old


def _said(statement: ast.AST) -> str:
    """Return a statement on one line; of one that holds others, its head alone."""
    if isinstance(statement, ast.FunctionDef):
        return f"def {statement.name}({ast.unparse(statement.args)})"
    text = ast.unparse(statement)
    return text.split(":\n", 1)[0] if hasattr(statement, "body") else " ".join(text.split())


def _lines(statement: ast.stmt) -> tuple[int, int]:
    body = getattr(statement, "body", None)
    if isinstance(body, list) and body and not isinstance(statement, (ast.FunctionDef, ast.ClassDef)):
        return statement.lineno, max(statement.lineno, body[0].lineno - 1)
    return statement.lineno, statement.end_lineno or statement.lineno
