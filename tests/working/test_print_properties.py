"""Any tree of nodes: what is printed means what the tree means, and is well-formed."""

from __future__ import annotations

import ast
import re
import xml.etree.ElementTree as ET
from fractions import Fraction as Ratio

from hypothesis import given, settings
from hypothesis import strategies as st

from authoring.working.latex import to_latex
from authoring.working.mathml import math_element
from authoring.working.nodes import (
    Bracket,
    Fraction,
    Measured,
    Negative,
    Node,
    Num,
    Power,
    Product,
    Sum,
    difference,
    sum_of,
)
from authoring.working.text import to_text

NUMBERS = st.sampled_from(["2", "3", "0.35", "−1.5", "-4", "11"]).map(Num)


def larger(inner: st.SearchStrategy[Node]) -> st.SearchStrategy[Node]:
    """Sums, products, fractions, powers and signs of smaller trees."""
    terms = st.lists(st.tuples(st.sampled_from(["+", "−"]), inner), min_size=1, max_size=3).map(tuple)
    return st.one_of(
        terms.map(Sum),  # type: ignore[arg-type]
        st.lists(inner, min_size=1, max_size=3).map(tuple).map(Product),
        st.builds(Fraction, inner, inner),
        st.builds(Power, inner, st.sampled_from(["2", "−1", "3"]).map(Num)),
        st.builds(lambda a, b, c: difference(a, sum_of([b, c])), inner, inner, inner),
        inner.map(Negative),
        inner.map(Bracket),
        inner.map(lambda node: Measured(node, "")),
    )


TREES = st.recursive(NUMBERS, larger, max_leaves=6)


def meaning(node: Node) -> Ratio:
    """The value of a tree, from its nodes."""
    match node:
        case Num(text):
            return Ratio(text.replace("−", "-"))
        case Sum(terms):
            return sum((meaning(term) * (1 if sign == "+" else -1) for sign, term in terms), Ratio(0))
        case Product(factors):
            total = Ratio(1)
            for factor in factors:
                total *= meaning(factor)
            return total
        case Fraction(top, bottom):
            return meaning(top) / meaning(bottom)
        case Power(base, exponent):
            return meaning(base) ** int(meaning(exponent))
        case Negative(inside):
            return -meaning(inside)
        case Bracket(inside) | Measured(inside, _):
            return meaning(inside)
        case _:
            raise AssertionError(node)


def reading(text: str) -> Ratio:
    """The value of a printed line, read with the usual order of operations."""
    raised = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")
    plain = re.sub("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+", lambda match: f"**({match[0].translate(raised)})", text)
    return value(ast.parse(plain.replace("−", "-").replace("×", "*"), mode="eval").body)


def value(tree: ast.expr) -> Ratio:
    """The value of a parsed line."""
    match tree:
        case ast.Constant(value=int() | float() as number):
            return Ratio(str(number))
        case ast.UnaryOp(op=ast.USub(), operand=inner):
            return -value(inner)
        case ast.BinOp(left=left, op=operator, right=right):
            a, b = value(left), value(right)
            match operator:
                case ast.Add():
                    return a + b
                case ast.Sub():
                    return a - b
                case ast.Mult():
                    return a * b
                case ast.Div():
                    return a / b
                case ast.Pow():
                    return a ** int(b)
    raise AssertionError(ast.dump(tree))


@settings(max_examples=600, deadline=None)
@given(TREES)
def test_text_read_as_arithmetic_has_the_value_of_the_tree(node: Node) -> None:
    """Brackets stand wherever leaving them out would change the value, and two signs never meet."""
    text = to_text(node)
    try:
        expected = meaning(node)
    except ZeroDivisionError:
        return
    assert reading(text) == expected
    assert not re.search(r"[+−×/] ?[+−]", text)


@given(TREES)
def test_latex_and_mathml_have_the_signs_and_numbers_of_the_text(node: Node) -> None:
    """The other printers show the same numbers, in order; LaTeX's groups match and MathML is well-formed."""
    numbers = re.findall(r"\d+(?:\.\d+)?", re.sub("[⁻¹²³]+", lambda m: " " + m[0].translate(RAISED), to_text(node)))
    latex = to_latex(node)
    assert re.findall(r"\d+(?:\.\d+)?", latex) == numbers
    assert latex.count("{") == latex.count("}")
    assert latex.count("(") == latex.count(")")
    assert not re.search(r"([+-]|\\times) ?[+-]", latex)
    root = ET.fromstring(math_element(node))
    assert [element.text for element in root.iter() if element.tag.endswith("}mn")] == numbers


RAISED = str.maketrans("¹²³⁻", "123 ")
