"""Stage 8, mark: equation chains: split at their relations, each member read, valued and labelled."""

from __future__ import annotations

import functools
import re
from decimal import Decimal

from authoring.marking.expression import Trouble, bare_number, decimals_of, terms_of, unit_of, value_of
from authoring.marking.forms import DecimalMark, Member, Written
from authoring.marking.parse import Unreadable, parse_expression
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
    Sum,
    Sym,
    Words,
)
from authoring.working.text import to_text

_RELATION = re.compile(r"\s*(:=|=+|≈|→)\s*")
# `Z*` and `n*` are symbols where no factor follows; otherwise the star is a cross.
_STARRED = re.compile(
    r"(?<![A-Za-z])([Zn])\s?\^?\*(?=\s*(?:[=≈→)\]}/+,;:<>^-]|\*\*|$)|\((?:[1-8][spdf]|[A-Z][a-z]?[0-9+^{}-]*)\))"
)
_CROSS = re.compile(r"(?<=[0-9)\]}\s.%])[xX](?![A-Za-z])(?=\s*[-+(\[{0-9.A-Za-z√])")
_POINT = re.compile(r"[0-9]\.[0-9]")
_COMMA = re.compile(r"(?<=[0-9]),(?=[0-9])")
_LEADING_COMMA = re.compile(r"(?<![0-9A-Za-z)\]]),(?=[0-9])")
_THOUSANDS = re.compile(r"(?<![0-9.,])[1-9][0-9]{0,2}(?:,[0-9]{3})+(?![0-9,])(?=\.[0-9])?")
_THOUSAND_LIKE = re.compile(r"(?<![0-9.,])[1-9][0-9]{0,2},[0-9]{3}(?![0-9.,])")
_COLON = re.compile(r"^([A-Za-zσχμ][A-Za-z_*]{0,5}'?(?:\([^()]{1,8}\))?)\s*:\s*(?=\S)")

_LABELS = {
    "S": "S", "σ": "S", "s": "S", "sigma": "S",
    "Zeff": "Zeff", "Z'": "Zeff",
    "I": "IE", "IE": "IE", "IP": "IE",
    "χ": "χ", "chi": "χ", "EN": "χ", "X": "χ", "x": "χ",
    "μ": "μ", "mu": "μ",
}  # fmt: skip
_INDEXED = {"E": "E", "I": "IE", "r": "r", "S": "S", "σ": "S", "μ": "μ", "χ": "χ"}
_MOST_MEMBERS = 60


def with_points(text: str, decimal: DecimalMark) -> tuple[str, str]:
    """The text with decimal points, and a remark where its marks could be read in two ways."""
    if "," not in text:
        if decimal == "comma" and _POINT.search(text):
            return text, "a decimal point where commas are used"
        return text, ""
    point = bool(_POINT.search(text))
    if point and decimal != "comma":
        text = _THOUSANDS.sub(lambda found: found[0].replace(",", ""), text)
    comma = bool(_COMMA.search(text))
    remark = ""
    if point and comma:
        remark = "decimal points and decimal commas in one line"
    elif comma and decimal == "point":
        remark = "a decimal comma where points are used"
    elif comma and decimal == "auto" and _THOUSAND_LIKE.search(text):
        remark = "the comma is read as a decimal mark; it could separate thousands"
    return _LEADING_COMMA.sub("0.", _COMMA.sub(".", text)), remark


def with_signs(text: str) -> str:
    """Crosses written as letters become `*`, `**` becomes `^`, and `Z*`, `n*` become one symbol each."""
    if "*" in text:
        text = _STARRED.sub(lambda found: "Zeff" if found[1] == "Z" else "nstar", text)
        text = text.replace("**", "^")
    if "x" in text or "X" in text:
        text = _CROSS.sub("*", text)
    if "eff" in text or "Eff" in text:
        text = re.sub(r"Z\s?_?\s?[({]?[eE]ff\.?[)}]?", "Zeff", text)
    return text


def read_chain(text: str, decimal: DecimalMark) -> Written | None:
    """The chain in a tidied text; None where it is none: no member can be read, or its last cannot."""
    plain, remark = with_points(text, decimal)
    plain = _COLON.sub(r"\1 = ", with_signs(plain))
    pieces = _RELATION.split(plain)
    if len(pieces) > 2 * _MOST_MEMBERS:
        return None
    members: list[Member] = []
    remarks = [remark] if remark else []
    relation = ""
    failed = False
    for index, piece in enumerate(pieces):
        if index % 2:
            relation = piece if piece in "≈→" else "="
        elif piece:
            member, trouble = _member(piece, relation)
            failed = trouble is not None and isinstance(member.node, Words)
            remarks += [trouble] if trouble else []
            members.append(member)
    if not members or failed:
        return None
    return finished(text, tuple(members), "; ".join(remarks))


@functools.lru_cache(maxsize=50_000)
def _member(piece: str, relation: str) -> tuple[Member, str | None]:
    try:
        node = parse_expression(piece)
    except Unreadable as error:
        return Member(Words(piece), relation=relation), f"not read: {piece[:40]!r} ({error})"
    try:
        return member_of(node, relation), None
    except Trouble as error:
        return Member(node, unit=unit_of(node), relation=relation), str(error)


def member_of(node: Node, relation: str = "") -> Member:
    """A member with its value. Raises Trouble where the value cannot be had."""
    value = value_of(node)
    if value is None:
        return Member(node, unit=unit_of(node), relation=relation)
    return Member(node, value, terms_of(node), bare_number(node), unit_of(node), relation)


def finished(text: str, members: tuple[Member, ...], remark: str = "") -> Written | None:
    """The chain of these members; None where nothing in it has a value and nothing is equated."""
    final = _final(members)
    if final is None and not any(_is_formula(each.node) for each in members):
        troubled = remark and not any(isinstance(each.node, Words) for each in members)
        if not troubled:
            return None
    label, about = _label(members)
    if final is None:
        return Written(text, "chain", label, about, members, remark=remark)
    return Written(
        text,
        "chain",
        label,
        about,
        members,
        final.value,
        final.shown,
        decimals_of(final.shown),
        final.unit,
        remark=remark,
    )


def _final(members: tuple[Member, ...]) -> Member | None:
    """The last member with a value, unless something that ought to have one stands after it."""
    for member in reversed(members):
        if member.value is not None:
            return member
        if not symbolic(member.node):
            return None
    return None


def symbolic(node: Node) -> bool:
    """Whether a symbol stands in the expression, so that it has no value of its own."""
    match node:
        case Sym() | Function():
            return True
        case Sum(terms):
            return any(symbolic(term) for _, term in terms)
        case Product(factors):
            return any(symbolic(factor) for factor in factors)
        case Num() | Words():
            return False
    parts = (getattr(node, name, None) for name in ("inside", "top", "bottom", "base", "exponent", "value"))
    return any(symbolic(part) for part in parts if part is not None)


def _is_formula(node: Node) -> bool:
    """Whether signs of arithmetic join symbols: letters side by side may be anything."""
    if isinstance(node, Product):
        return any(_is_formula(factor) for factor in node.factors)
    return isinstance(node, Sum | Fraction | Power | Negative | Bracket) and symbolic(node)


def _label(members: tuple[Member, ...]) -> tuple[str | None, str]:
    for member in members:
        node = member.node
        if isinstance(node, Function):
            inside = node.argument.text if isinstance(node.argument, Words) else ""
            return label_of(node.name), inside.replace("^", "").replace("{", "").replace("}", "")
        if (found := label_of(node)) is not None:
            return found, ""
    for member in members:
        match member.node:
            case Sum((("+", Sym("Z", "", "")), ("−", Sym(base, "", "")))) if base in ("S", "σ", "s"):
                return "Zeff", ""
    return None, ""


def label_of(node: Node) -> str | None:
    """The quantity that a lone symbol stands for: `σ` is S, `Z_eff` is Zeff, `E_1s` is E."""
    if not isinstance(node, Sym):
        return None
    name = node.base + node.sub
    if node.base == "Z":
        return "Zeff" if node.sub == "eff" else f"Z_{node.sub}" if node.sub else "Z"
    if name in _LABELS:
        return _LABELS[name]
    if node.base in _INDEXED:
        return _INDEXED[node.base]
    return to_text(node)


def number_member(figures: str, unit: str = "", relation: str = "") -> Member:
    """A member that is one bare number."""
    node: Node = Negative(Num(figures[1:])) if figures.startswith("-") else Num(figures)
    value = Decimal(figures)
    return Member(Measured(node, unit) if unit else node, value, terms_of(node), figures, unit, relation)
