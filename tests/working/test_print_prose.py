"""Prose prints alike in text, LaTeX and HTML."""

from __future__ import annotations

import xml.etree.ElementTree as ET

from authoring.working.nodes import (
    Emphasis,
    Formula,
    ListBlock,
    Math,
    Num,
    Paragraph,
    Plain,
    Prose,
    Sym,
    TableBlock,
    says,
)
from authoring.working.prose_html import prose_html
from authoring.working.prose_latex import prose_latex
from authoring.working.prose_text import prose_text

TABLE = TableBlock(
    header=((Plain("ion"),), (Plain("charge & co"),)),
    rows=(((Math(Formula("V", "2+")),), (Math(Num("3.30")),)), ((Plain("[x]"),), (Plain("−1"),))),
    caption=(Plain("Two ions"),),
    origin=(Plain("invented"),),
)
PROSE: Prose = (
    Paragraph(
        (Plain("The tank holds "), Math(Formula("V", "2+")), Plain(", "), Emphasis((Plain("50% <full>"),), strong=True))
    ),
    ListBlock(((Paragraph((Plain("one"),)),), (Paragraph((Plain("two"),)), TABLE)), ordered=True),
    TABLE,
)


def test_text() -> None:
    """Tables are aligned, numbers flush right, nested blocks are indented under their entry."""
    assert prose_text((*PROSE[:1], ListBlock(((Paragraph((Plain("one"),)),),)), TABLE)) == (
        "The tank holds V²⁺, 50% <full>\n"
        "\n"
        "- one\n"
        "\n"
        "Two ions\n"
        "ion  charge & co\n"
        "---  -----------\n"
        "V²⁺         3.30\n"
        "[x]           −1\n"
        "invented"
    )


def test_text_wraps_to_a_width() -> None:
    """No line is longer than asked for, and no word is lost."""
    words = "the electrons of the shell below screen better than those beside it " * 3
    wrapped = prose_text(says(words), width=30)
    assert max(map(len, wrapped.splitlines())) <= 30
    assert wrapped.split() == words.split()


def test_html_is_wellformed_and_marks_heads() -> None:
    """Headings of columns and rows carry their scope; text is escaped."""
    html = prose_html(PROSE)
    root = ET.fromstring(f"<div>{html}</div>")
    assert [e.get("scope") for e in root[2].iter("th")] == ["col", "col", "row", "row"]
    assert root[2].findtext("caption") == "Two ions"
    assert root.findtext("p/strong") == "50% <full>"
    assert len(root.findall("ol/li")) == 2


def test_latex() -> None:
    """Rules as booktabs has them, cells that begin with a bracket kept from the row before."""
    latex = prose_latex(PROSE)
    assert r"\textbf{50\% \textless{}full\textgreater{}}" in latex
    assert r"\begin{tabular}{@{}lr@{}}" in latex
    assert r"{}ion & charge \& co \\" in latex
    assert r"{}{[}x{]} & $-$" not in latex and r"{}{[}x{]} & \ensuremath{-}1 \\" in latex
    assert latex.count(r"\toprule") == latex.count(r"\bottomrule") == 2
    assert r"\begin{enumerate}" in latex


def test_wide_tables_wrap() -> None:
    """A table that would run over the margin gets columns with line breaks."""
    long = (Plain("a sentence that goes on for quite some while in its cell "),)
    assert r"p{" in prose_latex((TableBlock((long, long), ((long, long),)),))


def test_decimal_comma_reaches_formulas() -> None:
    """The decimal sign is the plan's, in every medium."""
    prose = (Paragraph((Math(Num("0.35")), Plain(" of 0.35"))),)
    assert prose_text(prose, decimal=",") == "0,35 of 0.35"
    assert "0,35" in prose_html(prose, decimal=",")
    assert prose_latex(prose, decimal=",") == "$0{,}35$ of 0.35"


def test_display_formula_in_a_cell_stays_in_its_line() -> None:
    """A display formula cannot stand inside a table cell or emphasis."""
    cell = (Math(Sym("Z"), display=True),)
    assert r"\[" not in prose_latex((TableBlock((cell,), ((cell,),)), Paragraph((Emphasis(cell),))))
    assert r"\[Z\]" in prose_latex((Paragraph(cell),))
