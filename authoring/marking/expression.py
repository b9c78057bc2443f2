"""Stage 8, mark: the value of an expression as written, and its terms where it is a sum of products.

The nodes are those that the key is printed from (authoring/working/nodes.py). Values are Decimals of 34
digits; whatever could grow without bound is refused with a remark, and has no value.
"""

from __future__ import annotations

import decimal
from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal

from authoring.working.nodes import Bracket, Fraction, Measured, Negative, Node, Num, Power, Product, Root, Sum
from authoring.working.numbers import EXACT

# No quantity of an atom comes near these bounds, in any unit that is in use.
MOST_DIGITS = 30
_LARGEST = 60
_HIGHEST_POWER = 12
_HIGHEST_POWER_OF_TEN = 40

_HALF = Decimal("0.5")
_TEN = Decimal(10)
_ONE = Decimal(1)

# A copy without traps that stop the program: what goes wrong is found by looking at the result.
_CONTEXT = EXACT.copy()
_CONTEXT.clear_traps()


@dataclass(frozen=True, slots=True)
class Term:
    """One term of a sum of products: `11 × 0.85` is (11, 0.85); `10` is (10, 1); `0.35` is (1, 0.35)."""

    count: Decimal
    coefficient: Decimal

    @property
    def product(self) -> Decimal:
        """What the term adds."""
        return _CONTEXT.multiply(self.count, self.coefficient)


class Trouble(ValueError):
    """Why an expression has no value."""


def value_of(node: Node) -> Decimal | None:
    """The value of an expression; None where a symbol stands in it. Raises Trouble where it cannot be had."""
    kind = type(node)
    if kind is Num:
        return Decimal(node.text)  # type: ignore[union-attr]
    match node:
        case Sum(terms):
            return _sum(terms)
        case Product(factors):
            total = _ONE
            for factor in factors:
                value = value_of(factor)
                if value is None:
                    return None
                total = _CONTEXT.multiply(total, value)
            return _sane(total)
        case Negative(inside):
            value = value_of(inside)
            return None if value is None else _CONTEXT.minus(value)
        case Bracket(inside) | Measured(inside, _):
            return value_of(inside)
        case Fraction(top, bottom):
            return _quotient(value_of(top), value_of(bottom))
        case Power(base, exponent):
            return _power(value_of(base), value_of(exponent))
        case Root(inside):
            return _power(value_of(inside), _HALF)
    return None


def _sum(terms: tuple[tuple[str, Node], ...]) -> Decimal | None:
    total = Decimal(0)
    for sign, term in terms:
        value = value_of(term)
        if value is None:
            return None
        total = _CONTEXT.add(total, value) if sign == "+" else _CONTEXT.subtract(total, value)
    return total


def _quotient(top: Decimal | None, bottom: Decimal | None) -> Decimal | None:
    if bottom is not None and not bottom:
        raise Trouble("division by zero")
    if top is None or bottom is None:
        return None
    return _sane(_CONTEXT.divide(top, bottom))


def _power(base: Decimal | None, exponent: Decimal | None) -> Decimal | None:
    if base is None or exponent is None:
        return None
    bound = _HIGHEST_POWER_OF_TEN if base.copy_abs() == _TEN else _HIGHEST_POWER
    if exponent.copy_abs() > bound:
        raise Trouble("a power that is too large")
    if not base and exponent <= 0:
        raise Trouble("division by zero")
    if base < 0 and exponent != exponent.to_integral_value():
        raise Trouble("the root of a negative number")
    return _sane(_CONTEXT.power(base, exponent))


def _sane(value: Decimal) -> Decimal:
    if not value.is_finite() or (value and abs(value.adjusted()) > _LARGEST):
        raise Trouble("a number that is too large or too small")
    return value


def terms_of(node: Node) -> tuple[Term, ...]:
    """The terms of a sum of products, in the order written; empty where a term has no value."""
    found: list[Term] = []
    try:
        for sign, part in _signed(node):
            term = _term(part)
            if term is None:
                return ()
            found.append(term if sign == "+" else Term(_CONTEXT.minus(term.count), term.coefficient))
    except (Trouble, decimal.DecimalException):
        return ()
    return tuple(found)


def _signed(node: Node) -> Iterator[tuple[str, Node]]:
    match node:
        case Sum(terms):
            yield from terms
        case Negative(inside):
            yield "−", inside
        case _:
            yield "+", node


def _term(node: Node) -> Term | None:
    while isinstance(node, Bracket):
        node = node.inside
    if isinstance(node, Product) and len(node.factors) == 2:
        first, second = (value_of(factor) for factor in node.factors)
        if first is None or second is None:
            return None
        return _ordered(first, second)
    value = value_of(node)
    if value is None:
        return None
    return Term(value, _ONE) if _whole(value) else Term(_ONE, value)


def _ordered(first: Decimal, second: Decimal) -> Term:
    """Count and coefficient, whichever way round they stand: a count is a whole number, a coefficient at most 1."""
    if _whole(first) and (not _whole(second) or second <= 1 or first > 1):
        return Term(first, second)
    if _whole(second):
        return Term(second, first)
    return Term(first, second)


def _whole(value: Decimal) -> bool:
    return value == value.to_integral_value()


def unit_of(node: Node) -> str:
    """The unit at the right end of an expression, or nothing."""
    while True:
        match node:
            case Measured(_, unit):
                return unit
            case Negative(inside) | Bracket(inside):
                node = inside
            case Sum(terms):
                node = terms[-1][1]
            case Product(factors):
                node = factors[-1]
            case _:
                return ""


def bare_number(node: Node) -> str:
    """The figures of an expression that is one number (perhaps signed, bracketed, with a unit), or nothing."""
    match node:
        case Num(text):
            return text
        case Negative(inside):
            text = bare_number(inside)
            return f"-{text}" if text and not text.startswith("-") else text.removeprefix("-")
        case Bracket(inside) | Measured(inside, _):
            return bare_number(inside)
        case Product((Num(text), Power(Num("10"), Num(exponent)))):
            return f"{text}e{exponent}"
        case Product((Num(text), Power(Num("10"), Negative(Num(exponent))))):
            return f"{text}e-{exponent}"
    return ""


def decimals_of(text: str) -> int | None:
    """How many decimals a bare number shows; None where there is none, or a power of ten."""
    if not text or "e" in text:
        return None
    return len(text.partition(".")[2])
