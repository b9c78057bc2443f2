"""Stage 8, mark: the plain forms that most lines have (`3.30`, `S = 0.35 + 11*0.85 + 10 = 19.70`), read by hand.

The structure is the one that the grammar gives; a test compares the two. Anything else is left to the grammar.
"""

from __future__ import annotations

import re
from decimal import Decimal

from authoring.marking.chains import finished
from authoring.marking.expression import Term, bare_number, terms_of, unit_of, value_of
from authoring.marking.forms import Member, Written
from authoring.working.nodes import Measured, Negative, Node, Num, Product, Sum, Sym

_NUMBER = r"[0-9]{1,15}(?:\.[0-9]{1,15})?"
_LINE = re.compile(
    r"(?:(S|σ|E|Zeff|Z_eff|Z_\{eff\}|Z\*)\s*=)?\s*(?:Z\s*[-−]\s*([Sσ])\s*=)?\s*"
    rf"([-−]?{_NUMBER}(?:\s*[-+*×x=−]\s*{_NUMBER})*)(?:\s*(eV|kJ/mol|pm))?\s*"
)
_TOKEN = re.compile(rf"{_NUMBER}|[-+*×x=−]")
_ONE = Decimal(1)
_SYMBOLS = {
    **{name: Sym(name) for name in ("S", "σ", "E")},
    **{name: Sym("Z", "eff") for name in ("Zeff", "Z_eff", "Z_{eff}", "Z*")},
}


def read_quick(line: str, text: str = "") -> Written | None:
    """The chain of a plain arithmetic line, or None where it is anything else; `text`: as the candidate wrote it."""
    found = _LINE.fullmatch(line)
    if found is None:
        return None
    label, screening, body, unit = found.groups()
    members = [Member(_SYMBOLS[label])] if label else []
    relation = "=" if label else ""
    if screening:
        difference = Sum((("+", Sym("Z")), ("−", Sym(screening))))
        members.append(Member(difference, relation=relation))
        relation = "="
    terms: list[tuple[str, Node]] = []
    factors: list[Node] = []
    sign = "+"
    negative = False
    for token in _TOKEN.findall(body):
        if token == "=":
            terms.append((sign, _product(factors)))
            members.append(_member(terms, relation))
            terms, factors, sign, relation = [], [], "+", "="
        elif token == "+" or ((token == "-" or token == "−") and factors):
            terms.append((sign, _product(factors)))
            factors, sign = [], "+" if token == "+" else "−"
        elif token == "-" or token == "−":
            negative = True
        elif token not in "*×x":
            factors.append(Negative(Num(token)) if negative else Num(token))
            negative = False
    if unit:
        factors[-1] = _measured(factors[-1], unit)
    terms.append((sign, _product(factors)))
    members.append(_member(terms, relation))
    return finished(text or line, tuple(members))


def _product(factors: list[Node]) -> Node:
    return factors[0] if len(factors) == 1 else Product(tuple(factors))


def _measured(node: Node, unit: str) -> Node:
    return Negative(Measured(node.inside, unit)) if isinstance(node, Negative) else Measured(node, unit)


def _member(terms: list[tuple[str, Node]], relation: str) -> Member:
    if len(terms) > 1:
        node: Node = Sum(tuple(terms))  # type: ignore[arg-type]
    else:
        node = terms[0][1]
        if type(node) is Num:
            value = Decimal(node.text)
            own = Term(_ONE, value) if "." in node.text and value % 1 else Term(value, _ONE)
            return Member(node, value, (own,), node.text, "", relation)
    return Member(node, value_of(node), terms_of(node), bare_number(node), unit_of(node), relation)
