"""One structure, three printers: the same meaning in text, LaTeX and MathML."""

from __future__ import annotations

import xml.etree.ElementTree as ET

import pytest

from authoring.working.latex import chain_latex_aligned, to_latex
from authoring.working.mathml import math_element, to_mathml
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
    Sym,
    Words,
    difference,
    sum_of,
)
from authoring.working.text import to_text

Z_EFF = Sym("Z", "eff")
TALLY = Chain(
    Sym("S"),
    (
        ("=", sum_of([Product((Num("1"), Num("0.35"))), Product((Num("11"), Num("0.85")))])),
        ("=", Num("9.70")),
    ),
)
ENERGY = Product((Num("−13.6057"), Power(Fraction(Num("4.20"), Num("3.7")), Num("2"))))

CASES: list[tuple[Node, str, str]] = [
    (TALLY, "S = 1 × 0.35 + 11 × 0.85 = 9.70", r"S = 1 \times 0.35 + 11 \times 0.85 = 9.70"),
    (Z_EFF, "Z_eff", r"Z_{\mathrm{eff}}"),
    (Sym("n", sup="*"), "n*", "n^{*}"),
    (Sym("a", "0"), "a₀", "a_{0}"),
    (Sym("S", "4s"), "S_4s", r"S_{\mathrm{4s}}"),
    (Sym("IE", upright=True), "IE", r"\mathrm{IE}"),
    (Sym("ΔE"), "ΔE", r"\Delta E"),
    (ENERGY, "−13.6057 × (4.20/3.7)²", r"-13.6057 \times \left(\frac{4.20}{3.7}\right)^{2}"),
    (Power(Sym("n", sup="*"), Num("2")), "n*²", "n^{*2}"),
    (Power(Z_EFF, Num("2")), "Z_eff²", r"Z_{\mathrm{eff}}^{2}"),
    (Power(Num("10"), Num("−3")), "10⁻³", "10^{-3}"),
    (Power(Num("-2"), Num("2")), "(−2)²", "(-2)^{2}"),
    (Power(Sym("x"), Num("0.5")), "x^0.5", "x^{0.5}"),
    (Power(Power(Sym("x"), Num("2")), Num("3")), "(x²)³", "(x^{2})^{3}"),
    (Product((Num("3"), Num("-4.81"))), "3 × (−4.81)", r"3 \times (-4.81)"),
    (difference(Num("1"), Num("−2")), "1 − (−2)", "1 - (-2)"),
    (difference(Num("1"), sum_of([Num("2"), Num("3")])), "1 − (2 + 3)", "1 - (2 + 3)"),
    (sum_of([Num("1"), Negative(Sym("x"))]), "1 + (−x)", "1 + (-x)"),
    (difference(Num("1"), ENERGY), "1 − (−13.6057 × (4.20/3.7)²)",
     r"1 - \left(-13.6057 \times \left(\frac{4.20}{3.7}\right)^{2}\right)"),
    (Product((sum_of([Num("1"), Num("2")]), Num("3"))), "(1 + 2) × 3", r"(1 + 2) \times 3"),
    (Negative(sum_of([Num("1"), Num("2")])), "−(1 + 2)", "-(1 + 2)"),
    (Fraction(difference(Sym("Z"), Sym("S")), Power(Sym("r"), Num("2"))), "(Z − S)/r²", r"\frac{Z - S}{r^{2}}"),
    (Fraction(Num("1"), Product((Num("2"), Num("3")))), "1/(2 × 3)", r"\frac{1}{2 \times 3}"),
    (Fraction(Num("1"), Fraction(Num("2"), Num("3"))), "1/(2/3)", r"\frac{1}{\frac{2}{3}}"),
    (Root(Product((Num("3"), Num("5")))), "√(3 × 5)", r"\sqrt{3 \times 5}"),
    (Root(Num("15")), "√15", r"\sqrt{15}"),
    (Row((Core("Ar"), Occupied(("3d",), 3), Occupied(("4s",), 2))), "[Ar] 3d³ 4s²",
     r"\mathrm{[Ar]}\,\mathrm{3d}^{3}\,\mathrm{4s}^{2}"),
    (Occupied(("2s", "2p"), 8, True), "(2s,2p)⁸", r"(\mathrm{2s}{,}\mathrm{2p})^{8}"),
    (Occupied(("4f",), 14), "4f¹⁴", r"\mathrm{4f}^{14}"),
    (Occupied(("3d",)), "3d", r"\mathrm{3d}"),
    (Formula("V", "2+"), "V²⁺", r"\mathrm{V}^{2+}"),
    (Formula("Cl", "−"), "Cl⁻", r"\mathrm{Cl}^{-}"),
    (Formula("Na", mass="23"), "²³Na", r"{}^{23}\mathrm{Na}"),
    (Formula("H2O"), "H₂O", r"\mathrm{H}_{2}\mathrm{O}"),
    (Formula("4s"), "4s", r"\mathrm{4s}"),
    (Function(Sym("E"), Formula("Fe", "2+")), "E(Fe²⁺)", r"E(\mathrm{Fe}^{2+})"),
    (Measured(Num("-4.81"), "eV"), "−4.81 eV", r"-4.81\,\mathrm{eV}"),
    (Measured(Num("740"), "kJ/mol"), "740 kJ/mol", r"740\,\mathrm{kJ/mol}"),
    (Measured(Num("1.7"), "μ_B"), "1.7 μ_B", r"1.7\,\mu_{\mathrm{B}}"),
    (Measured(Num("8"), "cm⁻¹"), "8 cm⁻¹", r"8\,\mathrm{cm}^{-1}"),
    (Measured(Num("1.5"), "Å"), "1.5 Å", r"1.5\,\text{Å}"),
    (Measured(Num("1.5"), ""), "1.5", "1.5"),
    (Words("50% of <it>"), "50% of <it>", r"\text{50\% of \textless{}it\textgreater{}}"),
    (Product((Sym("Z"), Sym("x")), juxtaposed=True), "Z x", r"Z\,x"),
    (Bracket(Num("1")), "(1)", "(1)"),
    (Chain(Sym("E"), (("≈", Num("2")), ("→", Num("3")), ("<", Num("4")))), "E ≈ 2 → 3 < 4",
     r"E \approx 2 \rightarrow 3 < 4"),
]  # fmt: skip


@pytest.mark.parametrize(("node", "text", "latex"), CASES, ids=[case[1] for case in CASES])
def test_text_and_latex_say_the_same(node: Node, text: str, latex: str) -> None:
    """Each node has one reading in text and one in LaTeX."""
    assert to_text(node) == text
    assert to_latex(node) == latex


@pytest.mark.parametrize("node", [case[0] for case in CASES], ids=[case[1] for case in CASES])
def test_mathml_is_one_wellformed_element_with_known_names(node: Node) -> None:
    """MathML parses as XML, holds one child, uses only Core elements, and each has as many children as it needs."""
    root = ET.fromstring(math_element(node))
    assert len(root) == 1
    needs = {"msup": 2, "msub": 2, "msubsup": 3, "mfrac": 2}
    known = {*needs, "mrow", "mn", "mi", "mo", "mtext", "msqrt", "mmultiscripts", "mprescripts"}
    for element in root.iter():
        name = element.tag.partition("}")[2]
        assert name in known | {"math"}
        assert len(element) == needs.get(name, len(element))
        if name in {"mn", "mi", "mo", "mtext"}:
            assert element.text and "-" not in element.text


@pytest.mark.parametrize(("node", "text"), [(case[0], case[1]) for case in CASES if "/" not in case[1]])
def test_mathml_reads_like_the_text(node: Node, text: str) -> None:
    """Read without its layout, MathML has the characters of the text, in order, but for invisible operators."""
    flat = "".join(ET.fromstring(math_element(node)).itertext())
    raised = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻₀₂", "0123456789+−02", " _^\u2061\u2062\u00a0√")
    bare = str.maketrans("", "", " _^\u2061\u2062\u00a0()")
    plain, math = text.translate(raised).translate(bare), flat.translate(raised).translate(bare)
    if text.startswith("²³"):  # a mass number is a prescript: it stands after its base in the markup
        assert sorted(plain) == sorted(math)
    else:
        assert plain == math


def test_one_letter_upright_names_say_so() -> None:
    """MathML sets one letter in italics unless told otherwise, longer names never."""
    assert to_mathml(Formula("V")) == '<mi mathvariant="normal">V</mi>'
    assert to_mathml(Sym("V")) == "<mi>V</mi>"
    assert 'mathvariant="normal">s<' in to_mathml(Occupied(("4s",), 2))
    assert to_mathml(Formula("Fe")) == "<mi>Fe</mi>"


def test_markup_in_words_is_text() -> None:
    """No text can open an element or a command."""
    evil = Words(r"<b>&\input{x}$")
    assert to_mathml(evil) == r"<mtext>&lt;b&gt;&amp;\input{x}$</mtext>"
    assert "\\input" not in to_latex(evil)


def test_control_characters_never_reach_the_markup() -> None:
    """XML has no way to write U+0001; it is shown as the replacement character."""
    assert ET.fromstring(math_element(Words("a\x01\ud800b")))[0].text == "a\ufffd\ufffdb"


def test_decimal_comma() -> None:
    """All three printers take the decimal sign; LaTeX keeps the comma from parting the number."""
    node = Product((Num("1"), Num("-0.35")))
    assert to_text(node, decimal=",") == "1 × (−0,35)"
    assert to_latex(node, decimal=",") == r"1 \times (-0{,}35)"
    assert "<mn>0,35</mn>" in to_mathml(node, decimal=",")


def test_aligned_rows_split_at_relations() -> None:
    """A chain becomes a row for each relation, aligned at it."""
    assert chain_latex_aligned(TALLY) == ("S &= 1 \\times 0.35 + 11 \\times 0.85 \\\\\n&= 9.70")
    assert chain_latex_aligned(Chain(Sym("S"))) == "S"


def test_display_math_says_so() -> None:
    """Display math is a block with full-size fractions."""
    assert 'display="block"' in math_element(ENERGY, display=True)
    assert "display" not in math_element(ENERGY)
