"""The periodic table of the data page."""

from __future__ import annotations

import xml.etree.ElementTree as ET
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest
from pypdf import PdfReader

from authoring.press.periodic import cells, periodic_definition, periodic_html, periodic_latex, weight_text
from authoring.press.preamble import preamble
from authoring.press.tex import Engine, compile_tex


def test_every_element_has_a_place_of_its_own() -> None:
    """118 elements, no two in one place, and none outside the table."""
    assert [cell.z for cell in cells()] == list(range(1, 119))
    assert len({(cell.row, cell.column) for cell in cells()}) == 118
    assert all(1 <= cell.column <= 18 and cell.row in {1, 2, 3, 4, 5, 6, 7, 9, 10} for cell in cells())


@pytest.mark.parametrize(
    ("symbol", "row", "column"),
    [
        ("H", 1, 1),
        ("He", 1, 18),
        ("Sc", 4, 3),
        ("Zn", 4, 12),
        ("Ga", 4, 13),
        ("Rn", 6, 18),
        ("Ce", 9, 4),
        ("Lr", 10, 17),
    ],
)
def test_places(symbol: str, row: int, column: int) -> None:
    """Groups and periods as IUPAC numbers them (1 to 18); the f block below (common practice, no source)."""
    assert next((c.row, c.column) for c in cells() if c.symbol == symbol) == (row, column)


@pytest.mark.parametrize(
    ("z", "weight", "shown"),
    [(1, "1.008", "1.008"), (2, "4.002602", "4.003"), (3, "6.94", "6.94"), (26, "55.845", "55.85"),
     (43, "97.9", "[98]"), (92, "238.02891", "238.0"), (88, "226.0", "[226]"), (52, "127.6", "127.6")],
)  # fmt: skip
def test_weights_have_four_figures_or_brackets(z: int, weight: str, shown: str) -> None:
    """Four figures at most, rounded half-up, none invented; mass numbers in brackets (common practice, no source)."""
    assert weight_text(z, Decimal(weight)) == shown


@pytest.mark.parametrize("engine", ["pdflatex", "lualatex"])
@pytest.mark.parametrize("paper", ["a4", "letter"])
def test_latex_fits_the_page_and_shows_all(engine: Engine, paper: str, tmp_path: Path) -> None:
    """Every symbol is on the page, nothing runs over, and a table shown thrice is stored once."""
    head = preamble(engine, "a4" if paper == "a4" else "letter", 11)
    use = "\\noindent\\periodictable\\newpage\n" * 3
    source = (
        f"{head}\\overfullrule=5pt\\hbadness=1\\begin{{document}}\n{periodic_definition(engine)}{use}\\end{{document}}"
    )
    made = compile_tex(source, "table", tmp_path, engine)
    reader: Any = PdfReader(made)
    assert len(reader.pages) == 3
    forms = [page["/Resources"]["/XObject"] for page in reader.pages]
    (form,) = {reference.idnum for page in forms for reference in dict.values(page)}
    left, bottom, right, top = (float(value) for value in reader.get_object(form)["/BBox"])
    text_width = (210 - 44 if paper == "a4" else 215.9 - 44) * 72 / 25.4
    assert right - left < text_width + 0.5
    assert top - bottom < text_width


def test_latex_shows_every_element(tmp_path: Path) -> None:
    """The picture itself, set in the page, can be read back: symbols, numbers and weights."""
    source = f"{preamble('pdflatex', 'a4', 20)}\\begin{{document}}\\noindent {periodic_latex()}\\end{{document}}"
    text = PdfReader(compile_tex(source, "table", tmp_path, "pdflatex")).pages[0].extract_text()
    assert [cell.symbol for cell in cells() if cell.symbol not in text or cell.weight not in text] == []


def test_html_is_wellformed_and_rectangular() -> None:
    """Each row has a head and fills the 18 groups."""
    root = ET.fromstring(periodic_html())
    rows = root.findall("tbody/tr")
    assert len(rows) == 9
    for row in rows:
        assert row[0].get("scope") == "row"
        assert sum(int(cell.get("colspan", "1")) for cell in row[1:]) == 18
    assert [bold.text for bold in root.iter("b")][:2] == ["H", "He"]
    assert len(list(root.iter("b"))) == 118


def test_decimal_comma() -> None:
    """The table follows the plan's decimal sign."""
    assert "1,008" in periodic_html(decimal=",")
    assert "1,008" in periodic_latex(decimal=",")
