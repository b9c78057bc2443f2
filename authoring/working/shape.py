"""Working: what every printer must know about a node before it prints it: brackets, signs, scripts.

The printers of one structure may differ in marks, never in meaning: where a bracket is needed is decided here once.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

from authoring.working.nodes import (
    Bracket,
    Chain,
    Core,
    Formula,
    Fraction,
    Function,
    Measured,
    Negative,
    Node,
    Num,
    Occupied,
    Power,
    Product,
    Root,
    Row,
    Sum,
    Sym,
    Words,
)

MINUS = "−"
MARKS = frozenset({"", "*", "′"})  # superscripts that belong to a symbol and let an exponent follow

_SUPERSCRIPTS = str.maketrans("0123456789+-−", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁻")
_SUBSCRIPTS = str.maketrans("0123456789", "₀₁₂₃₄₅₆₇₈₉")
_FROM_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+−")
_FROM_SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉", "0123456789")
_PIECE = re.compile(
    r"(?P<sup>[⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻]+)|(?:_(?P<word>[A-Za-z0-9]+))|(?P<sub>[₀₁₂₃₄₅₆₇₈₉]+)|(?P<plain>[^⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻₀₁₂₃₄₅₆₇₈₉_]+|_)"
)

Level = Literal["plain", "sup", "sub"]


@dataclass(frozen=True, slots=True)
class Piece:
    """A run of characters on one level of a unit or species: on the line, raised or lowered."""

    text: str
    level: Level = "plain"


def superscript(text: str) -> str | None:
    """`text` in superscript characters, or None where Unicode has none for it."""
    return text.translate(_SUPERSCRIPTS) if re.fullmatch(r"[0-9+\-−]+", text) else None


def subscript(text: str) -> str | None:
    """`text` in subscript characters, or None where it is not digits only."""
    return text.translate(_SUBSCRIPTS) if re.fullmatch(r"[0-9]+", text) else None


def unit_pieces(unit: str) -> tuple[Piece, ...]:
    """The levels of a unit as it is written: `cm⁻¹`, `a₀`, `μ_B`."""
    return tuple(_piece(match) for match in _PIECE.finditer(unit))


def _piece(match: re.Match[str]) -> Piece:
    if match["sup"]:
        return Piece(match["sup"].translate(_FROM_SUPERSCRIPTS), "sup")
    if match["sub"]:
        return Piece(match["sub"].translate(_FROM_SUBSCRIPTS), "sub")
    if match["word"]:
        return Piece(match["word"], "sub")
    return Piece(match["plain"])


def formula_pieces(symbol: str) -> tuple[Piece, ...]:
    """The levels of a species: digits after a letter or a closing bracket are lowered (`H2O`), others stay (`4s`)."""
    parts = re.split(r"(?<=[A-Za-z)\]])([0-9]+)", symbol)
    return tuple(Piece(part, "sub" if index % 2 else "plain") for index, part in enumerate(parts) if part)


def number_parts(text: str, decimal: str) -> tuple[str, str]:
    """The sign (`−`, `+` or nothing) and the digits of a printed number, with the decimal sign asked for."""
    sign = text[:1].replace("-", MINUS) if text[:1] in ("-", MINUS, "+") else ""
    return sign, text[len(sign) :].replace(".", decimal)


def leads_negative(node: Node) -> bool:
    """Whether the first thing printed is a minus sign."""
    match node:
        case Num(text):
            return text.startswith(("-", MINUS))
        case Negative():
            return True
        case Sum(terms):
            return bool(terms) and (terms[0][0] == MINUS or leads_negative(terms[0][1]))
        case Product(factors):
            return bool(factors) and leads_negative(factors[0])
        case Fraction(top, _):
            return leads_negative(top)
        case Measured(value, _):
            return leads_negative(value)
        case Chain(first):
            return leads_negative(first)
        case _:
            return False


def is_tall(node: Node) -> bool:
    """Whether the node is higher than a line of text, so that brackets around it must grow."""
    match node:
        case Fraction() | Root():
            return True
        case Sum(terms):
            return any(is_tall(term) for _, term in terms)
        case Product(items) | Row(items):
            return any(is_tall(item) for item in items)
        case Power(inside, _) | Negative(inside) | Bracket(inside) | Measured(inside, _) | Function(_, inside):
            return is_tall(inside)
        case Chain(first, rest):
            return is_tall(first) or any(is_tall(node) for _, node in rest)
        case _:
            return False


def terms_of(node: Sum) -> tuple[tuple[str, Node], ...]:
    """The terms with the sign to print (none before a first plus), bracketed where a reader would go wrong."""
    out: list[tuple[str, Node]] = []
    for index, (sign, term) in enumerate(node.terms):
        shown = "" if index == 0 and sign == "+" else sign
        clash = bool(shown) and leads_negative(term)
        out.append((shown, _bracket(term, clash or isinstance(term, Chain) or (sign == MINUS and _is_sum(term)))))
    return tuple(out)


def factors_of(node: Product, built_up: bool = True) -> tuple[Node, ...]:
    """The factors, bracketed where needed; `built_up` says that the medium sets fractions on two levels."""
    return tuple(
        _bracket(
            factor,
            isinstance(factor, Sum | Chain)
            or (index > 0 and leads_negative(factor))
            or (node.juxtaposed and isinstance(factor, Product | Measured) and len(node.factors) > 1)
            or (not built_up and node.juxtaposed and isinstance(factor, Fraction)),
        )
        for index, factor in enumerate(node.factors)
    )


def base_of(node: Power) -> Node:
    """The base of a power, bracketed unless it is one symbol, a number without a sign, or bracketed already."""
    base = node.base
    match base:
        case Bracket() | Words() | Core():
            needed = False
        case Num():
            needed = leads_negative(base)
        case Sym(sup=sup):
            needed = sup not in MARKS
        case Formula(charge=charge):
            needed = bool(charge)
        case _:
            needed = True
    return _bracket(base, needed)


def inside_of(node: Negative) -> Node:
    """What stands after the sign, bracketed where it is a sum or has a sign of its own."""
    return _bracket(node.inside, isinstance(node.inside, Sum | Chain) or leads_negative(node.inside))


def value_of(node: Measured) -> Node:
    """The value that a unit follows, bracketed where the unit would seem to belong to its last term only."""
    return _bracket(node.value, isinstance(node.value, Sum | Chain | Measured))


def solidus_parts(node: Fraction) -> tuple[Node, Node]:
    """Top and bottom for `a/b` on one line."""
    return _bracket(node.top, not _holds_together(node.top, True)), _bracket(
        node.bottom, not _holds_together(node.bottom, False)
    )


def radicand_of(node: Root) -> Node:
    """What a root sign without a bar covers, for a line of text."""
    return _bracket(node.inside, not _holds_together(node.inside, False) or isinstance(node.inside, Power))


def _holds_together(node: Node, first: bool) -> bool:
    match node:
        case Num() | Negative(Num() | Sym()):
            return first or not leads_negative(node)
        case Product(juxtaposed=True):
            return first
        case Sym() | Words() | Formula() | Occupied() | Core() | Bracket() | Function() | Power():
            return True
        case _:
            return False


def _is_sum(node: Node) -> bool:
    return isinstance(node, Sum) and len(node.terms) > 1


def _bracket(node: Node, needed: bool) -> Node:
    return Bracket(node) if needed else node
