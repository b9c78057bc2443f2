"""Working: a node as one line of plain text, for terminals, records and tests."""

from __future__ import annotations

from authoring.working import shape
from authoring.working.nodes import (
    Bracket,
    Chain,
    Core,
    Formula,
    Fraction,
    Function,
    Listed,
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


def to_text(node: Node, *, decimal: str = ".") -> str:
    """`S = 1 × 0.35 + 10 × 1.00 = 10.35`: one line, no markup; `decimal` is the decimal sign."""

    def say(inner: Node) -> str:
        return to_text(inner, decimal=decimal)

    match node:
        case Num(text):
            return "".join(shape.number_parts(text, decimal))
        case Sym():
            return _symbol(node)
        case Words(text):
            return text
        case Formula() | Occupied() | Core():
            return _species(node)
        case Row(items):
            return " ".join(say(item) for item in items)
        case Listed(items):
            return "; ".join(say(item) for item in items)
        case Sum():
            return _sum(shape.terms_of(node), decimal)
        case Product(juxtaposed=juxtaposed):
            return (" " if juxtaposed else " × ").join(say(factor) for factor in shape.factors_of(node, built_up=False))
        case Fraction():
            top, bottom = shape.solidus_parts(node)
            return f"{say(top)}/{say(bottom)}"
        case Power():
            return say(shape.base_of(node)) + _exponent(node.exponent, decimal)
        case Root():
            return "√" + say(shape.radicand_of(node))
        case Negative():
            return shape.MINUS + say(shape.inside_of(node))
        case Bracket(inside):
            return f"({say(inside)})"
        case Function(name, argument):
            return f"{say(name)}({say(argument)})"
        case Measured(unit=unit):
            return f"{say(shape.value_of(node))} {unit}".rstrip()
        case Chain(first, rest):
            return say(first) + "".join(f"{_spaced(relation)}{say(item)}" for relation, item in rest)


def _spaced(relation: str) -> str:
    return ": " if relation == ":" else f" {relation} "


def _sum(terms: tuple[tuple[str, Node], ...], decimal: str) -> str:
    parts: list[str] = []
    for index, (sign, term) in enumerate(terms):
        text = to_text(term, decimal=decimal)
        parts.append(f" {sign} {text}" if index else sign + text)
    return "".join(parts)


def _symbol(node: Sym) -> str:
    sub = sup = ""
    if node.sub:
        sub = shape.subscript(node.sub) or "_" + (node.sub if node.sub.isalnum() else f"({node.sub})")
    if node.sup:
        sup = node.sup if node.sup in shape.MARKS else shape.superscript(node.sup) or f"^({node.sup})"
    return node.base + sub + sup


def _species(node: Formula | Occupied | Core) -> str:
    match node:
        case Core(symbol):
            return f"[{symbol}]"
        case Occupied(labels, count, grouped):
            label = ",".join(labels)
            if grouped or len(labels) > 1:
                label = f"({label})"
            return label if count is None else label + _raised(str(count))
        case Formula(symbol, charge, mass):
            body = "".join(
                shape.subscript(piece.text) or piece.text if piece.level == "sub" else piece.text
                for piece in shape.formula_pieces(symbol)
            )
            return _raised(mass) + body + _raised(charge)


def _raised(text: str) -> str:
    return (shape.superscript(text) or f"^{text}") if text else ""


def _exponent(node: Node, decimal: str) -> str:
    text = to_text(node, decimal=decimal)
    if isinstance(node, Num | Negative) and (raised := shape.superscript(text)):
        return raised
    return f"^{text}" if isinstance(node, Num | Sym | Bracket) and not shape.leads_negative(node) else f"^({text})"
