"""Stage 8, mark: one member of an equation chain becomes nodes, by the grammar beside this file."""

from __future__ import annotations

import functools
import re
from importlib import resources
from typing import Any

from authoring.marking.expression import MOST_DIGITS
from authoring.working.nodes import (
    Bracket,
    Fraction,
    Function,
    Measured,
    Negative,
    Node,
    Num,
    Power,
    Product,
    Root,
    Sum,
    Sym,
    Words,
)

MOST_BRACKETS = 40
# Nesting without brackets; each costs a level of recursion later.
_MOST_NESTED = {"^": 12, "/": 40, "√": 20, "sqrt": 20}
_SIGNS = re.compile(r"(?:[+-]\s*){4}")
_LONG_NUMBER = re.compile(f"[0-9]{{{MOST_DIGITS + 1}}}|[0-9]*\\.[0-9]{{{MOST_DIGITS + 1}}}")

# Units as they are kept. Keys have no spaces, marks of multiplication or raising.
_UNITS = {
    "kJ/mol": "kJ/mol", "kJpermol": "kJ/mol", "kJmol-1": "kJ/mol",
    "MJ/mol": "MJ/mol", "MJpermol": "MJ/mol", "MJmol-1": "MJ/mol",
    "J/mol": "J/mol", "Jpermol": "J/mol", "Jmol-1": "J/mol",
    "μB": "μB", "uB": "μB", "BM": "μB", "B.M.": "μB", "B.M": "μB", "BM.": "μB",
    "cm-1": "cm-1",
    "Hartree": "hartree", "Hartrees": "hartree",
}  # fmt: skip
_UNIT_MARKS = str.maketrans("", "", " ^{}()*_")


class Unreadable(ValueError):
    """Text that is no expression; the message says why, for the marker."""


def unit_name(text: str) -> str:
    """The kept name of a unit as written: `kJ mol^-1` is `kJ/mol`."""
    plain = text.translate(_UNIT_MARKS)
    return _UNITS.get(plain, plain)


def check_bounds(text: str) -> None:
    """Raise Unreadable for text nested so deeply, or with numbers so long, that no person wrote it."""
    depth = deepest = 0
    for character in text:
        if character in "([{":
            depth += 1
            deepest = max(deepest, depth)
        elif character in ")]}":
            depth -= 1
    if deepest > MOST_BRACKETS:
        raise Unreadable(f"brackets are nested deeper than {MOST_BRACKETS}")
    if any(text.count(mark) > most for mark, most in _MOST_NESTED.items()) or _SIGNS.search(text):
        raise Unreadable("too many powers, fractions or signs one upon the other")
    if _LONG_NUMBER.search(text):
        raise Unreadable(f"a number has more than {MOST_DIGITS} digits")


def parse_expression(text: str) -> Node:
    """The nodes of one expression. Raises Unreadable."""
    import lark

    check_bounds(text)
    try:
        found: Node = _parser().parse(text)
    except lark.exceptions.LarkError as error:
        raise Unreadable("this is no expression") from error
    return found


@functools.cache
def _parser() -> Any:
    # Built once, at the first line that needs it: lark takes some 30 ms to import, and the plain forms do without.
    import lark

    grammar = resources.files("authoring.marking").joinpath("grammar.lark").read_text(encoding="utf-8")
    return lark.Lark(grammar, parser="lalr", transformer=_builder(lark), maybe_placeholders=False)


def number_node(text: str) -> Node:
    """A number as written; `2.18e-18` becomes `2.18 × 10^-18`, `.35` gains its zero."""
    mantissa, _, exponent = text.lower().partition("e")
    if mantissa.startswith("."):
        mantissa = "0" + mantissa
    number = Num(mantissa.removesuffix("."))
    if not exponent:
        return number
    digits = exponent.lstrip("+-")
    raised: Node = Negative(Num(digits)) if exponent.startswith("-") else Num(digits)
    return Product((number, Power(Num("10"), raised)))


def _plus(left: Node, right: Node, sign: Any = "+") -> Node:
    before = left.terms if isinstance(left, Sum) else (("+", left),)
    return Sum((*before, (sign, right)))


def _times(left: Node, right: Node) -> Node:
    before = left.factors if isinstance(left, Product) and not left.juxtaposed else (left,)
    return Product((*before, right))


def _power(base: Node, exponent: Node) -> Node:
    while isinstance(exponent, Bracket):
        exponent = exponent.inside
    return Power(base, exponent)


def symbol_node(text: str) -> Sym:
    """A symbol with its subscript: `Z_eff` and `Zeff` are one; `nstar` is n*."""
    if text in ("Zeff", "Z_eff"):
        return Sym("Z", "eff")
    if text == "nstar":
        return Sym("n", sup="*")
    base, _, sub = text.partition("_")
    if not sub and len(base) == 2 and base[1].isdigit():
        return Sym(base[0], base[1])
    return Sym(base, sub)


def _function(text: str) -> Node:
    name, _, argument = text.partition("(")
    return Function(symbol_node(name), Words(argument.removesuffix(")")))


def _builder(lark: Any) -> Any:
    class Builder(lark.Transformer):  # type: ignore[misc]
        """Grammar rules become nodes."""

    rules: dict[str, Any] = {
        "number": lambda token: number_node(str(token)),
        "symbol": lambda token: token if not isinstance(token, str) else symbol_node(str(token)),
        "function": lambda token: _function(str(token)),
        "plus": _plus,
        "minus": lambda left, right: _plus(left, right, "−"),
        "times": _times,
        "over": Fraction,
        "beside": lambda left, right: _times(left, right),
        "negative": Negative,
        "positive": lambda inside: inside,
        "measured": lambda inside, unit: Measured(inside, unit_name(str(unit))),
        "power": _power,
        "bracket": Bracket,
        "root": lambda _, inside: Root(inside),
        "root_of_number": lambda _, token: Root(Num(str(token))),
    }
    for name, build in rules.items():
        setattr(Builder, name, lark.v_args(inline=True)(_method(build)))
    return Builder()


def _method(build: Any) -> Any:
    def method(self: Any, *children: Any) -> Any:
        return build(*children)

    return method
