"""Stage 1, read: the expressions of templates and conditions, from Jinja's syntax tree to functions of ours."""

from __future__ import annotations

import operator
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from decimal import Decimal
from math import isfinite
from typing import Any

from jinja2 import nodes

from authoring.faults import ContentError
from authoring.specs.template_filters import FILTERS, NotPrintable
from authoring.specs.texts import find_control

Evaluate = Callable[[Mapping[str, object]], object]
_MOST_DEPTH = 30
_WHAT: Mapping[type[nodes.Node], str] = {
    nodes.Call: "calls",
    nodes.Concat: "the sign ~",
    nodes.Mul: "multiplication",
    nodes.Div: "division",
    nodes.FloorDiv: "division",
    nodes.Mod: "the sign %",
    nodes.Pow: "powers",
    nodes.Test: "tests with `is`",
    nodes.Dict: "mappings in braces",
    nodes.Getitem: "square brackets",
    nodes.For: "{% for %}",
    nodes.Assign: "{% set %}",
    nodes.AssignBlock: "{% set %}",
    nodes.Include: "{% include %}",
    nodes.Import: "{% import %}",
    nodes.FromImport: "{% import %}",
    nodes.Extends: "{% extends %}",
    nodes.Macro: "{% macro %}",
    nodes.Block: "{% block %}",
    nodes.FilterBlock: "{% filter %}",
}


class TemplateFault(ContentError):
    """A mistake in a template or condition, at its 1-based line and column."""

    def __init__(self, message: str, line: int, column: int = 1, word: str = "", allowed: Iterable[str] = ()) -> None:
        super().__init__(message, word, allowed)
        self.line = line
        self.column = column


def refused(node: nodes.Node) -> TemplateFault:
    """The fault for a syntax node that is not on the list."""
    what = _WHAT.get(type(node), type(node).__name__)
    return TemplateFault(f"{what} cannot be used in item text", node.lineno or 1)


def as_bool(value: object, line: int) -> bool:
    """`value` where it is True or False."""
    if isinstance(value, bool):
        return value
    raise TemplateFault(f"a condition must be yes or no; this is {_kind(value)} (compare it, as in `x > 0`)", line)


@dataclass(frozen=True, slots=True)
class Use:
    """A free name in a text, or what is asked of it: `metal` with the chain (`outermost`, `label`); where it stands."""

    root: str
    chain: tuple[str, ...]
    line: int
    column: int = 1


class ExpressionCompiler:
    """Compiles expressions and collects the free names, and what is asked of them, in `uses`."""

    def __init__(self) -> None:
        self.uses: list[Use] = []
        self._compilers: Mapping[type[nodes.Node], Callable[..., Evaluate]] = {
            nodes.Name: self._name,
            nodes.Const: self._const,
            nodes.Getattr: self._attribute,
            nodes.Getitem: self._item,
            nodes.Compare: self._compare,
            nodes.And: self._and,
            nodes.Or: self._or,
            nodes.Not: self._not,
            nodes.Neg: self._negative,
            nodes.Add: self._arithmetic,
            nodes.Sub: self._arithmetic,
            nodes.Tuple: self._sequence,
            nodes.List: self._sequence,
            nodes.Filter: self._filter,
            nodes.CondExpr: self._choice,
        }

    def compile(self, node: nodes.Node, depth: int = 0) -> Evaluate:
        """A function from the bindings to the value. Raises TemplateFault for what is not on the list."""
        if depth > _MOST_DEPTH:
            raise TemplateFault("this expression is too deeply nested", node.lineno or 1)
        compiler = self._compilers.get(type(node))
        if compiler is None:
            raise refused(node)
        evaluate: Evaluate = compiler(node, depth + 1)
        return evaluate

    def _name(self, node: nodes.Name, depth: int) -> Evaluate:
        name, line = node.name, node.lineno
        self.uses.append(Use(name, (), line))

        def evaluate(bindings: Mapping[str, object]) -> object:
            try:
                return bindings[name]
            except KeyError:
                raise TemplateFault(f"nothing is called {name!r} here", line, 1, name, bindings) from None

        return evaluate

    def _const(self, node: nodes.Const, depth: int) -> Evaluate:
        value: object = node.value
        if isinstance(value, float):
            if not isfinite(value):
                raise TemplateFault("this number is too large", node.lineno)
            value = Decimal(repr(value))
        if isinstance(value, str) and (name := find_control(value)):
            raise TemplateFault(f"the text contains the invisible character {name}", node.lineno)
        return lambda bindings: value

    def _attribute(self, node: nodes.Getattr, depth: int) -> Evaluate:
        inner, name, line = self.compile(node.node, depth), node.attr, node.lineno
        if name.startswith("_"):
            raise TemplateFault(f"names with a leading underscore ({name}) are private", line)
        root, chain = _chain(node)
        if root:
            self.uses.append(Use(root, chain, line))
        return lambda bindings: _attribute_of(inner(bindings), name, line)

    def _item(self, node: nodes.Getitem, depth: int) -> Evaluate:
        key = node.arg
        if isinstance(key, nodes.Const) and isinstance(key.value, str):
            return self._attribute(nodes.Getattr(node.node, key.value, "load", lineno=node.lineno), depth)
        if not isinstance(key, nodes.Const) or type(key.value) is not int or key.value < 0:
            raise TemplateFault("only a whole number may stand in square brackets", node.lineno)
        inner, index, line = self.compile(node.node, depth), key.value, node.lineno

        def evaluate(bindings: Mapping[str, object]) -> object:
            value = inner(bindings)
            if not isinstance(value, list | tuple):
                raise TemplateFault(f"{_kind(value)} has no entries to count", line)
            if index >= len(value):
                raise TemplateFault(f"there is no entry {index} (they are counted from 0 to {len(value) - 1})", line)
            entry: object = value[index]
            return entry

        return evaluate

    def _compare(self, node: nodes.Compare, depth: int) -> Evaluate:
        first, line = self.compile(node.expr, depth), node.lineno
        rest = tuple((op.op, self.compile(op.expr, depth)) for op in node.ops)

        def evaluate(bindings: Mapping[str, object]) -> object:
            left = first(bindings)
            for op, compiled in rest:
                right = compiled(bindings)
                if not _holds(op, left, right, line):
                    return False
                left = right
            return True

        return evaluate

    def _and(self, node: nodes.And, depth: int) -> Evaluate:
        left, right, line = self.compile(node.left, depth), self.compile(node.right, depth), node.lineno
        return lambda bindings: as_bool(left(bindings), line) and as_bool(right(bindings), line)

    def _or(self, node: nodes.Or, depth: int) -> Evaluate:
        left, right, line = self.compile(node.left, depth), self.compile(node.right, depth), node.lineno
        return lambda bindings: as_bool(left(bindings), line) or as_bool(right(bindings), line)

    def _not(self, node: nodes.Not, depth: int) -> Evaluate:
        inner, line = self.compile(node.node, depth), node.lineno
        return lambda bindings: not as_bool(inner(bindings), line)

    def _negative(self, node: nodes.Neg, depth: int) -> Evaluate:
        inner, line = self.compile(node.node, depth), node.lineno
        return lambda bindings: -_number(inner(bindings), line)

    def _arithmetic(self, node: nodes.Add | nodes.Sub, depth: int) -> Evaluate:
        left, right, line = self.compile(node.left, depth), self.compile(node.right, depth), node.lineno
        combine = operator.add if isinstance(node, nodes.Add) else operator.sub
        return lambda bindings: combine(_number(left(bindings), line), _number(right(bindings), line))

    def _sequence(self, node: nodes.Tuple | nodes.List, depth: int) -> Evaluate:
        items = tuple(self.compile(item, depth) for item in node.items)
        return lambda bindings: tuple([item(bindings) for item in items])

    def _choice(self, node: nodes.CondExpr, depth: int) -> Evaluate:
        test, line = self.compile(node.test, depth), node.lineno
        if node.expr2 is None:
            raise TemplateFault("`… if …` needs an `else …`", line)
        yes, no = self.compile(node.expr1, depth), self.compile(node.expr2, depth)
        return lambda bindings: yes(bindings) if as_bool(test(bindings), line) else no(bindings)

    def _filter(self, node: nodes.Filter, depth: int) -> Evaluate:
        line, name = node.lineno, node.name
        found = FILTERS.get(name)
        if found is None:
            raise TemplateFault(f"there is no filter {name!r}", line, 1, name, FILTERS)
        function, fewest, most = found
        if node.node is None or node.kwargs or node.dyn_args or node.dyn_kwargs:
            raise TemplateFault(f"the filter {name!r} cannot be used in this way", line)
        if not fewest <= len(node.args) <= most:
            takes = f"{fewest}" if fewest == most else f"{fewest} to {most}"
            raise TemplateFault(f"the filter {name!r} takes {takes} words, not {len(node.args)}", line)
        inner = self.compile(node.node, depth)
        args = tuple(self.compile(arg, depth) for arg in node.args)

        def evaluate(bindings: Mapping[str, object]) -> object:
            try:
                return function(inner(bindings), *[arg(bindings) for arg in args])
            except NotPrintable as error:
                raise TemplateFault(f"the filter {name!r}: {error.message}", line) from error

        return evaluate


def _chain(node: nodes.Getattr) -> tuple[str, tuple[str, ...]]:
    """`metal.outermost.label` as its name and its chain; no name where it begins with something else."""
    chain: list[str] = []
    inner: nodes.Node = node
    while isinstance(inner, nodes.Getattr):
        chain.insert(0, inner.attr)
        inner = inner.node
    return (inner.name, tuple(chain)) if isinstance(inner, nodes.Name) else ("", ())


def _attribute_of(value: object, name: str, line: int) -> object:
    allowed: tuple[str, ...] = getattr(type(value), "TEMPLATE_NAMES", ())
    if name not in allowed:
        raise TemplateFault(f"{_kind(value)} has nothing called {name!r}", line, 1, name, allowed)
    try:
        return getattr(value, name)
    except TemplateFault:
        raise
    except ContentError as error:
        raise TemplateFault(error.full_message, line) from error


def _kind(value: object) -> str:
    if isinstance(value, str):
        return "text"
    if isinstance(value, bool):
        return "yes or no"
    if isinstance(value, int | Decimal):
        return "a number"
    if isinstance(value, list | tuple):
        return "a list"
    if value is None:
        return "nothing"
    name = getattr(type(value), "TEMPLATE_KIND", type(value).__name__.strip("_").lower())
    return f"{'an' if name[:1] in 'aeiou' else 'a'} {name}"


def _is_number(value: object) -> bool:
    return isinstance(value, int | Decimal) and not isinstance(value, bool)


def _number(value: object, line: int) -> Decimal | int:
    if isinstance(value, int | Decimal) and not isinstance(value, bool):
        return value
    raise TemplateFault(f"only numbers are added and subtracted; this is {_kind(value)}", line)


def _is_object(value: object) -> bool:
    """One of our own things (a species, a subshell), which may be compared with the text that names it."""
    return hasattr(type(value), "TEMPLATE_NAMES")


def _same(left: object, right: object, line: int) -> bool:
    if isinstance(left, str) and _is_object(right):
        return left == str(right)
    if isinstance(right, str) and _is_object(left):
        return str(left) == right
    if left is not None and right is not None and type(left) is not type(right):
        numbers = _is_number(left) and _is_number(right)
        if not numbers and not (_is_object(left) and _is_object(right)):
            raise TemplateFault(f"{_kind(left)} is compared with {_kind(right)}", line)
    return left == right


_ORDER: Mapping[str, Callable[[Any, Any], bool]] = {
    "lt": operator.lt,
    "lteq": operator.le,
    "gt": operator.gt,
    "gteq": operator.ge,
}


def _holds(op: str, left: object, right: object, line: int) -> bool:
    if op in _ORDER:
        if not (_is_number(left) and _is_number(right)):
            raise TemplateFault(
                f"only numbers are larger or smaller; {_kind(left)} is compared with {_kind(right)}", line
            )
        return _ORDER[op](left, right)
    if op in ("eq", "ne"):
        return _same(left, right, line) == (op == "eq")
    if isinstance(left, str) and isinstance(right, str):
        return (left in right) == (op == "in")
    if not isinstance(right, list | tuple | frozenset):
        raise TemplateFault(f"`in` needs a list, not {_kind(right)}", line)
    return any(_same(left, entry, line) for entry in right) == (op == "in")
