"""Working: a node as the source of a LaTeX formula, without the dollar signs around it."""

from __future__ import annotations

import re
from dataclasses import dataclass

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
from authoring.working.tex_escape import MATH_GREEK, escape_tex

_RELATIONS = {"=": "=", "≈": r"\approx", "<": "<", ">": ">", "→": r"\rightarrow", ":": r"\colon"}
_SIGNS = {"+": "+", "−": "-", "-": "-", "": ""}


@dataclass(frozen=True, slots=True)
class _Style:
    decimal: str
    wide: bool


def to_latex(node: Node, *, decimal: str = ".", wide: bool = False) -> str:
    """Math-mode source for amsmath; `wide` lets words hold characters that only LuaTeX prints.

    Raises ContentError for text that cannot be printed.
    """
    return _print(node, _Style(decimal, wide))


def chain_latex_aligned(chain: Chain, *, decimal: str = ".", wide: bool = False) -> str:
    r"""Rows for `aligned`: `first &= second \\ &= third`, split at every relation."""
    style = _Style(decimal, wide)
    rows = [f"&{_RELATIONS[relation]} {_print(item, style)}" for relation, item in chain.rest]
    return f"{_print(chain.first, style)} " + " \\\\\n".join(rows) if rows else _print(chain.first, style)


def _print(node: Node, style: _Style) -> str:
    match node:
        case Num(text):
            return _number(text, style)
        case Sym():
            return _symbol(node, "", style)
        case Words(text):
            return rf"\text{{{escape_tex(text, style.wide)}}}"
        case Formula() | Occupied() | Core():
            return _species(node, style)
        case Row(items):
            return _side_by_side(items, style)
        case Listed(items):
            # Braces keep an item on one line; the line may end after a semicolon.
            return r";\allowbreak\ ".join(f"{{{_print(item, style)}}}" for item in items)
        case Sum():
            return _sum(shape.terms_of(node), style)
        case Product(juxtaposed=juxtaposed):
            return (r"\," if juxtaposed else r" \times ").join(_print(one, style) for one in shape.factors_of(node))
        case Fraction(top, bottom):
            return rf"\frac{{{_print(top, style)}}}{{{_print(bottom, style)}}}"
        case Power():
            return _power(node, style)
        case Root(inside):
            return rf"\sqrt{{{_print(inside, style)}}}"
        case Negative():
            return "-" + _print(shape.inside_of(node), style)
        case Bracket(inside):
            return _bracketed(inside, style)
        case Function(name, argument):
            return _print(name, style) + _bracketed(argument, style)
        case Measured(unit=unit):
            value = _print(shape.value_of(node), style)
            return rf"{value}\,{_unit(unit, style)}" if unit else value
        case Chain(first, rest):
            return _print(first, style) + "".join(f" {_RELATIONS[rel]} {_print(item, style)}" for rel, item in rest)


def _side_by_side(items: tuple[Node, ...], style: _Style) -> str:
    """Thin spaces between formulas, word spaces beside words."""
    pieces: list[str] = []
    for at, item in enumerate(items):
        if at:
            pieces.append(r"\ " if isinstance(item, Words) or isinstance(items[at - 1], Words) else r"\,")
        pieces.append(_print(item, style))
    return "".join(pieces)


def _number(text: str, style: _Style) -> str:
    sign, digits = shape.number_parts(text, style.decimal)
    if not re.fullmatch(r"[0-9.,\s]+", digits):
        return _SIGNS[sign] + _upright(digits, style)
    return _SIGNS[sign] + re.sub(r"\s", r"\\,", digits.replace(",", "{,}"))


def _sum(terms: tuple[tuple[str, Node], ...], style: _Style) -> str:
    parts: list[str] = []
    for index, (sign, term) in enumerate(terms):
        text = _print(term, style)
        parts.append(f" {_SIGNS[sign]} {text}" if index else _SIGNS[sign] + text)
    return "".join(parts)


def _power(node: Power, style: _Style) -> str:
    exponent = _print(node.exponent, style)
    base = shape.base_of(node)
    if isinstance(base, Sym):
        return _symbol(base, exponent, style)
    text = _print(base, style)
    return rf"{text}^{{{exponent}}}"


def _bracketed(inside: Node, style: _Style) -> str:
    text = _print(inside, style)
    return rf"\left({text}\right)" if shape.is_tall(inside) else f"({text})"


def _symbol(node: Sym, exponent: str, style: _Style) -> str:
    sub = f"_{{{_script(node.sub, style)}}}" if node.sub else ""
    sup = _script(node.sup, style) + exponent
    return _base(node, style) + sub + (f"^{{{sup}}}" if sup else "")


def _base(node: Sym, style: _Style) -> str:
    if node.upright:
        return _upright(node.base, style)
    if all(_is_letter(c) for c in node.base) and node.base:
        parts = re.findall(r"[A-Za-z]+|.", node.base)
        return " ".join(MATH_GREEK.get(p) or (p if len(p) == 1 else rf"\mathit{{{p}}}") for p in parts)
    return _upright(node.base, style)


def _is_letter(c: str) -> bool:
    return c in MATH_GREEK or (c.isascii() and c.isalpha())


def _script(text: str, style: _Style) -> str:
    if text == "′":
        return r"\prime "
    if text in ("", "*") or (text.isascii() and (text.isdigit() or (len(text) == 1 and text.isalpha()))):
        return text
    return MATH_GREEK.get(text) or _upright(text, style)


def _species(node: Formula | Occupied | Core, style: _Style) -> str:
    match node:
        case Core(symbol):
            return _upright(f"[{symbol}]", style)
        case Occupied(labels, count, grouped):
            label = "{,}".join(_upright(one, style) for one in labels)
            if grouped or len(labels) > 1:
                label = f"({label})"
            return label if count is None else rf"{label}^{{{count}}}"
        case Formula(symbol, charge, mass):
            left = f"{{}}^{{{_charge(mass, style)}}}" if mass else ""
            right = f"^{{{_charge(charge, style)}}}" if charge else ""
            return left + _levels(shape.formula_pieces(symbol), style) + right


def _charge(text: str, style: _Style) -> str:
    plain = text.replace(shape.MINUS, "-")
    return plain if re.fullmatch(r"[0-9+\-]+", plain) else _upright(text, style)


def _unit(unit: str, style: _Style) -> str:
    return _levels(shape.unit_pieces(unit), style)


def _levels(pieces: tuple[shape.Piece, ...], style: _Style) -> str:
    marks = {"plain": "", "sup": "^", "sub": "_"}
    return "".join(
        _upright(p.text, style) if p.level == "plain" else f"{marks[p.level]}{{{_charge(p.text, style)}}}"
        for p in pieces
    )


def _upright(text: str, style: _Style) -> str:
    """Roman letters: as math where they are plain, as text where an accent or a sign needs it."""
    if text in MATH_GREEK:
        return MATH_GREEK[text]
    if re.fullmatch(r"[A-Za-z0-9/()\[\]]+", text):
        return rf"\mathrm{{{text}}}"
    return rf"\text{{{escape_tex(text, style.wide)}}}"
