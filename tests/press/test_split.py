"""One PDF for the class becomes one file for each candidate."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from pypdf import PdfReader, PdfWriter
from pypdf.generic import NameObject

from authoring.faults import OutsideError
from authoring.press.preamble import preamble
from authoring.press.split import split_pdf
from authoring.press.tex import Engine, compile_tex


def whole(tmp_path: Path, engine: Engine = "pdflatex", pages: int = 6) -> Path:
    """A PDF whose pages say which they are, in several fonts."""
    body = "\\newpage\n".join(f"this is page {n} with \\textbf{{bold}} and $Z$\n" for n in range(1, pages + 1))
    return compile_tex(
        f"{preamble(engine, 'a4', 11)}\\begin{{document}}{body}\\end{{document}}", "all", tmp_path, engine
    )


@pytest.mark.parametrize("engine", ["pdflatex", "lualatex"])
def test_each_file_has_its_pages_and_no_others(engine: Engine, tmp_path: Path) -> None:
    """The text, the size and the fonts of the pages are kept; nothing of other candidates' pages is in the file."""
    made = split_pdf(whole(tmp_path, engine), {"K7": (1, 2), "M3": (3, 5), "Q9": (6, 6)}, tmp_path / "out")
    assert [path.name for path in made] == ["K7.pdf", "M3.pdf", "Q9.pdf"]
    reader: Any = PdfReader(made[1], strict=True)
    texts = [page.extract_text() for page in reader.pages]
    assert [f"page {n}" in text for n, text in zip((3, 4, 5), texts, strict=True)] == [True] * 3
    assert reader.pages[0].mediabox.width == pytest.approx(595.28, 0.01)
    assert len(reader.pages) == reader.root_object["/Pages"]["/Count"] == 3
    objects = [reader.get_object(number) for number in range(1, reader.trailer["/Size"])]
    assert sum(isinstance(one, dict) and one.get("/Type") == "/Page" for one in objects) == 3


def test_the_pages_look_the_same(tmp_path: Path) -> None:
    """Content streams are the same bytes, and fonts are embedded."""
    source = whole(tmp_path)
    (made,) = split_pdf(source, {"x": (2, 2)}, tmp_path)
    old: Any
    new: Any
    old, new = PdfReader(source).pages[1], PdfReader(made).pages[0]
    assert old.get_contents().get_data() == new.get_contents().get_data()
    fonts = [font.get_object() for font in new["/Resources"]["/Font"].values()]
    assert len(fonts) == 3
    assert all("/FontFile" in font["/FontDescriptor"] for font in fonts)


def test_no_dates_and_the_same_bytes_twice(tmp_path: Path) -> None:
    """Files of two runs are equal; there is no metadata to tell when they were made."""
    source = whole(tmp_path)
    (first,) = split_pdf(source, {"x": (1, 3)}, tmp_path / "a")
    (second,) = split_pdf(source, {"y": (1, 3)}, tmp_path / "b")
    assert first.read_bytes() == second.read_bytes()
    assert PdfReader(first).metadata is None
    assert b"Date" not in first.read_bytes()


def test_shared_objects_are_not_multiplied(tmp_path: Path) -> None:
    """A file of five pages is hardly larger than a file of one: its fonts are in it once."""
    one, five = split_pdf(whole(tmp_path), {"one": (1, 1), "five": (1, 5)}, tmp_path)
    assert five.stat().st_size < 1.1 * one.stat().st_size


def test_links_to_pages_left_behind_lead_nowhere(tmp_path: Path) -> None:
    """A reference to another candidate's page does not bring that page along."""
    writer = PdfWriter(whole(tmp_path))
    first, last = writer.pages[0], writer.pages[5]
    assert last.indirect_reference is not None
    first[NameObject("/Elsewhere")] = last.indirect_reference
    writer.write(tmp_path / "linked.pdf")
    (made,) = split_pdf(tmp_path / "linked.pdf", {"x": (1, 1)}, tmp_path)
    assert b"/Elsewhere null" in made.read_bytes()
    assert len(PdfReader(made).pages) == 1


@pytest.mark.parametrize("pages", [(0, 1), (2, 1), (6, 7)])
def test_pages_that_are_not_there(pages: tuple[int, int], tmp_path: Path) -> None:
    """A range outside the document is an error that says so."""
    with pytest.raises(OutsideError, match="has 6 pages"):
        split_pdf(whole(tmp_path), {"x": pages}, tmp_path)


def test_not_a_pdf(tmp_path: Path) -> None:
    """Any other file is refused in one line."""
    (tmp_path / "no.pdf").write_text("no")
    with pytest.raises(OutsideError, match=r"no\.pdf cannot be split"):
        split_pdf(tmp_path / "no.pdf", {"x": (1, 1)}, tmp_path)
