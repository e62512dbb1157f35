"""What may stand in the place of a piece of code. Text that people read is left alone."""

from __future__ import annotations

import ast
import copy
from collections.abc import Iterator

NOT_CHANGED = frozenset(
    {"annotation", "returns", "decorator_list", "type_comment", "ctx", "names", "conversion"}
)
COMPARED: dict[type[ast.cmpop], tuple[type[ast.cmpop], ...]] = {
    ast.Lt: (ast.LtE, ast.GtE),
    ast.LtE: (ast.Lt, ast.Gt),
    ast.Gt: (ast.GtE, ast.LtE),
    ast.GtE: (ast.Gt, ast.Lt),
    ast.Eq: (ast.NotEq,),
    ast.NotEq: (ast.Eq,),
    ast.Is: (ast.IsNot,),
    ast.IsNot: (ast.Is,),
    ast.In: (ast.NotIn,),
    ast.NotIn: (ast.In,),
}
WORKED: dict[type[ast.operator], type[ast.operator]] = {
    ast.Add: ast.Sub,
    ast.Sub: ast.Add,
    ast.Mult: ast.Div,
    ast.Div: ast.Mult,
    ast.FloorDiv: ast.Mult,
    ast.Mod: ast.Mult,
    ast.Pow: ast.Mult,
    ast.BitOr: ast.BitAnd,
    ast.BitAnd: ast.BitOr,
}
CALLED = {
    "min": "max",
    "max": "min",
    "any": "all",
    "all": "any",
    "floor": "ceil",
    "ceil": "floor",
    "startswith": "endswith",
    "endswith": "startswith",
    "lstrip": "rstrip",
    "rstrip": "lstrip",
    "lower": "upper",
    "upper": "lower",
    "removeprefix": "removesuffix",
    "removesuffix": "removeprefix",
}
REFUSING = frozenset({"need", "need_positive", "_finite", "_positive", "_within", "_share_pct", "_checked"})
SENTENCE = 3
"""From so many words on a text is read by people, not compared."""
ROUNDING = {"ROUND_HALF_UP": "ROUND_HALF_DOWN", "ROUND_HALF_EVEN": "ROUND_HALF_UP"}


def is_only_text(node: ast.AST) -> bool:
    """Return whether an expression is made for a message alone."""
    return isinstance(node, ast.JoinedStr)


def names_its_argument(call: ast.AST) -> bool:
    """Return whether a call refuses an argument and is told its name for the message."""
    return isinstance(call, ast.Call) and isinstance(call.func, ast.Name) and call.func.id in REFUSING


def is_left_alone(statement: ast.stmt) -> bool:
    """Return whether a statement has nothing that could be changed: imports, texts, types."""
    if isinstance(statement, (ast.Import, ast.ImportFrom, ast.Pass, ast.Assert)):
        return True
    if isinstance(statement, ast.Expr):
        return isinstance(statement.value, ast.Constant)
    if isinstance(statement, ast.If):
        return isinstance(statement.test, ast.Name) and statement.test.id == "TYPE_CHECKING"
    if isinstance(statement, ast.AnnAssign):
        return statement.value is None or _said(statement.annotation) == "TypeAlias"
    if isinstance(statement, ast.Assign):
        return any(
            isinstance(target, ast.Name) and _is_type_or_list(target.id) for target in statement.targets
        )
    return False


def _is_type_or_list(name: str) -> bool:
    """Return whether a name is one of a type (``Day``) or of the module's list of names."""
    return name == "__all__" or (name[:1].isupper() and not name.isupper())


def _said(node: ast.AST) -> str:
    return ast.unparse(node)


def instead_of_statement(statement: ast.stmt) -> Iterator[ast.stmt]:
    """Yield what may stand in the place of a whole statement."""
    if isinstance(statement, (ast.Raise, ast.Expr)):
        yield _at(ast.Pass(), statement)
    elif isinstance(statement, ast.Break):
        yield _at(ast.Continue(), statement)
    elif isinstance(statement, ast.Continue):
        yield _at(ast.Break(), statement)
    elif isinstance(statement, ast.Return) and statement.value is not None and not _is_none(statement.value):
        yield _at(ast.Return(ast.Constant(None)), statement)
    elif isinstance(statement, ast.AugAssign) and type(statement.op) in WORKED:
        yield _at(ast.AugAssign(statement.target, WORKED[type(statement.op)](), statement.value), statement)
        yield _at(ast.Assign([statement.target], statement.value), statement)


def instead_of(node: ast.AST) -> Iterator[ast.AST]:
    """Yield what may stand in the place of an expression."""
    if isinstance(node, ast.Constant):
        yield from _constants(node)
    elif isinstance(node, ast.Compare):
        for index, operator in enumerate(node.ops):
            for other in COMPARED[type(operator)]:
                new = copy.copy(node)
                new.ops = [*node.ops[:index], other(), *node.ops[index + 1 :]]
                yield new
    elif isinstance(node, ast.BinOp) and type(node.op) in WORKED:
        yield _at(ast.BinOp(node.left, WORKED[type(node.op)](), node.right), node)
    elif isinstance(node, ast.BoolOp):
        other_op = ast.Or() if isinstance(node.op, ast.And) else ast.And()
        yield _at(ast.BoolOp(other_op, node.values), node)
    elif isinstance(node, ast.UnaryOp) and isinstance(node.op, (ast.Not, ast.USub)):
        yield node.operand
    elif isinstance(node, ast.IfExp):
        yield _at(ast.IfExp(node.test, node.orelse, node.body), node)
    elif isinstance(node, ast.Name) and isinstance(node.ctx, ast.Load):
        swapped = {**CALLED, **ROUNDING}.get(node.id)
        if swapped:
            yield _at(ast.Name(swapped, ast.Load()), node)
    elif isinstance(node, ast.Attribute) and node.attr in CALLED:
        yield _at(ast.Attribute(node.value, CALLED[node.attr], ast.Load()), node)
    elif isinstance(node, ast.Call):
        yield from _calls(node)


def _calls(call: ast.Call) -> Iterator[ast.AST]:
    """Yield a call that is left out where it would hand on its argument."""
    name = call.func.id if isinstance(call.func, ast.Name) else ""
    if name in ("abs", "sorted", "round", "float", "int", "tuple", "reversed") and call.args:
        yield call.args[0]
    if name in ("min", "max") and len(call.args) > 1:
        yield call.args[0]
        yield call.args[-1]


def _constants(node: ast.Constant) -> Iterator[ast.AST]:
    value = node.value
    if isinstance(value, bool):
        yield _at(ast.Constant(not value), node)
    elif isinstance(value, (int, float)):
        yield _at(ast.Constant(value + 1), node)
        if value not in (0, 1):
            yield _at(ast.Constant(value - 1), node)
    elif isinstance(value, str) and len(value.split()) < SENTENCE:
        yield _at(ast.Constant(f"XX{value}"), node)


def _is_none(node: ast.AST) -> bool:
    return isinstance(node, ast.Constant) and node.value is None


def _at(new: ast.AST, old: ast.AST) -> ast.AST:
    return ast.fix_missing_locations(ast.copy_location(new, old))
