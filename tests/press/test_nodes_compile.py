"""What the printers write for LaTeX is LaTeX: both engines take it, and the page says what the nodes say."""

from __future__ import annotations

from pathlib import Path

import pytest
from pypdf import PdfReader

from authoring.press.preamble import preamble
from authoring.press.tex import Engine, compile_tex
from authoring.working.latex import chain_latex_aligned, to_latex
from authoring.working.nodes import (
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
    Node,
    Num,
    Occupied,
    Paragraph,
    Plain,
    Power,
    Product,
    Prose,
    Root,
    Row,
    Sym,
    TableBlock,
    Words,
    sum_of,
)
from authoring.working.prose_latex import prose_latex

NODES: tuple[Node, ...] = (
    Row((Core("Ar"), Occupied(("3d",), 3), Occupied(("2s", "2p"), 8, True))),
    Power(Sym("n", sup="*"), Num("2")),
    Power(Sym("Z", "eff", "′"), Num("2")),
    Power(Sym("S", "4s", "max"), Num("2")),
    Power(Power(Num("10"), Num("−3")), Sym("k")),
    Power(Fraction(Num("4.20"), Root(Num("3.7"))), Num("2")),
    Function(Sym("μ"), Formula("V", "2+")),
    Function(Sym("ΔE"), Formula("Na", "+", "23")),
    Measured(Negative(Num("4.81")), "kJ mol⁻¹"),
    Measured(Num("1.73"), "μ_B"),
    Measured(Num("52.9"), "a₀"),
    Measured(Num("1.5"), "Å"),
    Measured(Num("50"), "%"),
    Words("for each & every 5% _x_ {y} $z$ \\q"),
    Sym("ΑΒ", "χ", "+"),
    Sym("IE", "4s, 3d"),
    Sym("é"),
    Num("1 312.5"),
    Formula("C2H5OH"),
)


@pytest.mark.parametrize("engine", ["pdflatex", "lualatex"])
def test_every_node_compiles(engine: Engine, tmp_path: Path) -> None:
    """Inline, in a display and as an aligned row."""
    wide = engine == "lualatex"
    chain = Chain(NODES[0], tuple(("=", node) for node in NODES))
    body = "\n\n".join(f"${to_latex(node, decimal=',', wide=wide)}$" for node in NODES)
    rows = chain_latex_aligned(chain, wide=wide)
    display = f"\\[\\begin{{aligned}}{rows}\\end{{aligned}}\\]"
    source = f"{preamble(engine, 'a4', 10)}\\begin{{document}}{body}\n{display}\\end{{document}}"
    text = "".join(PdfReader(compile_tex(source, "nodes", tmp_path, engine)).pages[0].extract_text().split())
    for expected in ("[Ar]3d3(2s,2p)8", "10−3", "foreach&every5%_x_{y}$z$\\q", "C2H5OH", "1312,5"):
        assert expected in text


def test_prose_compiles(tmp_path: Path) -> None:
    """Emphasis, lists in lists, tables in lists, displays, a table wider than the page."""
    cell = (Plain("[a cell] that goes on for quite a while, as cells do in wide tables"),)
    table = TableBlock((cell, cell), ((cell, (Math(Num("1")),)), ((), (Plain("*"),))), (Plain("Caption"),), cell)
    equation = Math(Chain(Sym("S"), (("=", sum_of([Num("1"), Product((Num("2"), Num("3")))])),)), display=True)
    paragraph = Paragraph((Plain("before "), equation, Emphasis((Plain("after"), equation))))
    prose: Prose = (paragraph, ListBlock(((paragraph, table), (ListBlock(((paragraph,),), True),))), table)
    source = f"{preamble('pdflatex', 'a4', 20)}\\begin{{document}}{prose_latex(prose)}\\end{{document}}"
    reader = PdfReader(compile_tex(source, "prose", tmp_path, "pdflatex"))
    text = " ".join(page.extract_text() for page in reader.pages)
    assert text.count("Caption") == 2
    assert text.count("[a cell]") == 8
