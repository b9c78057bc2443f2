"""The small Markdown of item text, inline chemistry and formulas become nodes; mistakes have places."""

import time

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from authoring.faults import ContentError
from authoring.specs.chemistry import read_chemistry
from authoring.specs.formulas import MathFault, read_math
from authoring.specs.prose import read_prose
from authoring.working.nodes import (
    Bracket,
    Chain,
    Core,
    Emphasis,
    Formula,
    Fraction,
    Function,
    ListBlock,
    Math,
    Measured,
    Negative,
    Num,
    Occupied,
    Paragraph,
    Plain,
    Power,
    Product,
    Root,
    Row,
    Sum,
    Sym,
    Words,
)

Z, S, N = Sym("Z"), Sym("S"), Sym("n")
ZEFF = Sym("Z", sub="eff")


@pytest.mark.parametrize(
    ("text", "node"),
    [
        ("Fe3+", Formula("Fe", "3+")),
        ("V²⁺", Formula("V", "2+")),
        ("O2-", Formula("O", "2−")),
        ("Fe24+", Formula("Fe", "24+")),
        ("35Cl", Formula("Cl", mass="35")),
        ("35Cl-", Formula("Cl", "−", "35")),
        ("No", Formula("No")),
        ("3d6", Occupied(("3d",), 6)),
        ("3d⁶", Occupied(("3d",), 6)),
        ("4s", Occupied(("4s",))),
        ("(2s,2p)", Occupied(("2s", "2p"), None, True)),
        ("(2s, 2p)8", Occupied(("2s", "2p"), 8, True)),
        ("(n-1)d10 ns2", Row((Occupied(("(n−1)d",), 10), Occupied(("ns",), 2)))),
        ("[Ar] 3d6 4s2", Row((Core("Ar"), Occupied(("3d",), 6), Occupied(("4s",), 2)))),
        ("1s²2s²", Row((Occupied(("1s",), 2), Occupied(("2s",), 2)))),
        ("Zn2+ 3d", Row((Formula("Zn", "2+"), Occupied(("3d",))))),
        ("CuSO4", Formula("CuSO4")),
        ("Ca(OH)2", Formula("Ca(OH)2")),
        ("NH4+", Formula("NH4", "+")),
        ("SO42-", Formula("SO4", "2−")),
        ("SO4^2-", Formula("SO4", "2−")),
        ("O22-", Formula("O2", "2−")),
        ("Hg22+", Formula("Hg2", "2+")),
        ("[Fe(CN)6]4-", Formula("[Fe(CN)6]", "4−")),
        ("Na+(g)", Row((Formula("Na", "+"), Words("(g)")))),
        ("Na -> Na+ + e-", Chain(Formula("Na"), (("→", Sum((("+", Formula("Na", "+")), ("+", Formula("e", "−"))))),))),
    ],
)
def test_chemistry(text, node):
    assert read_chemistry(text) == node


@pytest.mark.parametrize(
    ("text", "words"),
    [("FE3+", "'Fe'"), ("Xx", "not an element"), ("foo()", "not chemistry"), ("2d", "subshell"), ("", "missing")],
)
def test_what_is_not_chemistry(text, words):
    with pytest.raises(ContentError) as found:
        read_chemistry(text)
    assert words in found.value.full_message


@pytest.mark.parametrize(
    ("text", "node"),
    [
        ("Z_eff = Z - S", Chain(ZEFF, (("=", Sum((("+", Z), ("−", S)))),))),
        (r"Z_{\mathrm{eff}} \approx 3.20", Chain(ZEFF, (("≈", Num("3.20")),))),
        ("n*", Sym("n", sup="*")),
        ("n^{*}", Sym("n", sup="*")),
        ("n*^2", Power(Sym("n", sup="*"), Num("2"))),
        ("n^{*2}", Power(Sym("n", sup="*"), Num("2"))),
        ("2*3", Product((Num("2"), Num("3")))),
        (r"11 \times 0.85", Product((Num("11"), Num("0.85")))),
        (r"\frac{Z}{n}", Fraction(Z, N)),
        ("R(Z/n)^2", Product((Sym("R"), Power(Bracket(Fraction(Z, N)), Num("2"))), True)),
        (r"E(\mathrm{V})", Function(Sym("E"), Words("V"))),
        (r"\sqrt{n}", Root(N)),
        ("-4.81 eV", Negative(Measured(Num("4.81"), "eV"))),
        (r"10^{-19}\,\mathrm{J}", Measured(Power(Num("10"), Negative(Num("19"))), "J")),
        ("109737 cm^{-1}", Measured(Num("109737"), "cm⁻¹")),
        (r"\mu_B", Sym("μ", sub="B")),
        ("σ", Sym("σ")),
        ("E\\_h", Sym("E", sub="h")),
        ("a → b", Chain(Sym("a"), (("→", Sym("b")),))),
    ],
)
def test_formulas(text, node):
    assert read_math(text) == node


@pytest.mark.parametrize(
    ("text", "offset", "words"),
    [
        (r"Z + \foo{x}", 4, r"\foo is not known"),
        (r"\fracc{1}{2}", 0, "did you mean"),
        ("2 Zeff", 2, "Z_{eff}"),
        ("(Z - S", 5, "')' is missing"),
        ("a_", 1, "too early"),
        ("Z_1_2", 3, "subscript"),
        ("(" * 1000, 12, "nested"),
        ("x" * 3000, 0, "at most"),
        ("", 0, "missing"),
        (r"\input{/etc/hosts}", 0, "not known"),
    ],
)
def test_a_faulty_formula_has_an_offset(text, offset, words):
    with pytest.raises(MathFault) as found:
        read_math(text)
    assert found.value.offset == offset and words in found.value.full_message


def test_paragraphs_emphasis_and_lists():
    prose, faults = read_prose('The *old* **`Fe3+`** lamp\'s\n"glow" -- $Z$\n\n- one\n\n  more\n- two\n  1. deep\n')
    assert not faults
    lamp, items = prose
    assert lamp == Paragraph(
        (
            Plain("The "),
            Emphasis((Plain("old"),)),
            Plain(" "),
            Emphasis((Math(Formula("Fe", "3+")),), strong=True),
            Plain(' lamp\'s "glow" -- '),
            Math(Z),
        )
    )
    one, two = (Paragraph((Plain(word),)) for word in ("one", "two"))
    deep = ListBlock(((Paragraph((Plain("deep"),)),),), ordered=True)
    assert items == ListBlock(((one, Paragraph((Plain("more"),))), (two, deep)))


def test_other_markup_is_plain_text():
    text = r"<b>x</b> [a](b) # h &amp; ~~y~~ \textbf{z} <http://a.example> !\[c](d) a\*b\* 5\$"
    prose, faults = read_prose("# head\n---\n> quote\n\n    " + text)
    assert not faults
    assert prose[0] == Paragraph((Plain("# head --- > quote"),))
    assert prose[1] == Paragraph((Plain(text.replace(r"\[", "[").replace(r"\*", "*").replace(r"\$", "$")),))


def test_a_formula_on_its_own_line():
    assert read_prose("$$Z$$")[0] == (Paragraph((Math(Z, display=True),)),)


def test_faults_of_a_text_have_line_and_column():
    text = "Fine.\n\n- a\n- cost 5$ and `x?`\n  then $Z + \\foo$\n\n`open\n"
    _, faults = read_prose(text)
    lines = text.split("\n")
    assert [(f.line, lines[f.line - 1][f.column - 1 :][:4]) for f in faults][-1] == (7, "`ope")
    assert faults[0].line == 4
    _, faults = read_prose("a\n  b `x?` and\n    c $Z + \\foo$\n")
    assert [(f.line, f.column) for f in faults] == [(2, 6), (3, 12)]


@pytest.mark.parametrize("text", ["- " * 6 + "a", "*a **b " * 8 + "c** d*" * 8])
def test_deep_nesting_is_a_fault(text):
    assert any("nested" in fault.message for fault in read_prose(text)[1])


@pytest.mark.parametrize(
    "piece", ["*", "`", "$", "_a ", "`a", "``a`", "$a", "[", "\\", "**a* ", "- ", "x", "((", "$$ "]
)
def test_long_lines_take_no_long_time(piece):
    text = piece * (10_000 // len(piece))
    start = time.perf_counter()
    read_prose(text)
    assert time.perf_counter() - start < 2


MARKDOWNISH = st.text(st.sampled_from("ab Z3+-*_`$\\{}()[]^=./<>#&\n\t1d2s≈σ'"), max_size=60)


@given(
    st.one_of(
        st.text(max_size=80), MARKDOWNISH, MARKDOWNISH.map(lambda t: f"${t}$"), MARKDOWNISH.map(lambda t: f"`{t}`")
    )
)
@example("$$$")
@example("`")
@example("\\")
@example("\r$")
def test_any_text_gives_prose_and_faults_inside_it(text):
    _, faults = read_prose(text)
    count = text.replace("\r\n", "\n").replace("\r", "\n").count("\n") + 1
    assert all(1 <= fault.line <= count and fault.column >= 1 for fault in faults)
