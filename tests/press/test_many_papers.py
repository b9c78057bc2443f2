"""The answers at a glance of very many papers: TeX keeps one page of them at a time, and still knows their number."""

from __future__ import annotations

import re
from dataclasses import replace
from itertools import cycle, islice
from pathlib import Path

import pytest
from press_help import small_set
from pypdf import PageObject, PdfReader

from authoring.papers.assemble import PaperSet
from authoring.press.latex_documents import key_job
from authoring.press.tex import compile_tex

PLACE = re.compile(r"Page (\d+) of (\d+)")
END = "\\end{document}\n"


def glance(made: PaperSet, rows: int) -> tuple[str, str]:
    """The key of so many papers (the same ones again and again), as far as its first paper: preamble, and the rest."""
    many = replace(made, papers=tuple(islice(cycle(made.papers), rows)))
    source = key_job(many, lambda: None).source
    begin = source.index("\\begin{document}") + len("\\begin{document}")
    return source[:begin], source[begin : source.index(f"\\paper{{{many.papers[0].code}}}")]


def shortened(body: str, rows: int, fewer: int) -> str:
    """The answers of the first papers only."""
    kept: list[str] = []
    entries = 0
    for line in body.replace(f"}}{{{rows}}}%", f"}}{{{fewer}}}%").split("\n"):
        entries = entries + 1 if line.startswith("\\glanceentry") else 0
        if entries <= fewer:
            kept.append(line)
    return "\n".join(kept)


def codes_on(text: str, made: PaperSet) -> list[str]:
    """The codes of papers in a page's text, in their order."""
    return re.findall("|".join(paper.code for paper in made.papers), text)


def heights(page: PageObject, made: PaperSet) -> tuple[float, float]:
    """How high above the page's lower edge its last row and its foot stand, in points."""
    rows: list[float] = []
    feet: list[float] = []

    def look(text: str, cm: list[float], tm: list[float], *_: object) -> None:
        if codes_on(text, made):
            rows.append(tm[5])
        if "Answers at a glance" in text:
            feet.append(tm[5])

    page.extract_text(visitor_text=look)
    return min(rows), min(feet)


def test_answers_of_a_great_many_papers(tmp_path: Path) -> None:
    """TeX has room for five million words; fifteen thousand rows at once take more."""
    made = small_set(tmp_path, (None,) * 50)
    head, body = glance(made, 15_000)
    pdf = compile_tex(head + body + END, "key", tmp_path, "pdflatex")
    reader = PdfReader(pdf)
    texts = {at: reader.pages[at].extract_text() for at in (0, 1, 149, len(reader.pages) - 1)}
    assert len(reader.pages) > 200
    for at, text in texts.items():
        assert PLACE.findall(text) == [(str(at + 1), str(len(reader.pages)))]
        assert re.search(r"Paper\s+1a\s+1b\s+1c\s+2a", text)
    codes = [paper.code for paper in made.papers]
    first, second = codes_on(texts[0], made), codes_on(texts[1], made)
    assert first + second == list(islice(cycle(codes), len(first) + len(second)))
    assert codes_on(texts[max(texts)], made)[-1] == codes[-1]


@pytest.mark.parametrize("size", [11, 20])
def test_pages_are_counted_before_they_are_made(size: int, tmp_path: Path) -> None:
    """Whatever the number of rows, also where a page is just full: each row once, and `page x of y` is true."""
    made = small_set(tmp_path, (None,) * 50, f"layout: {{type: {size}}}\n")
    numbers = range(1, 70 if size < 20 else 40)
    head, body = glance(made, 100)
    source = head + "".join(shortened(body, 100, rows) for rows in numbers) + END
    pages = PdfReader(compile_tex(source, "key", tmp_path, "pdflatex")).pages
    found: list[int] = []
    rows, expected = 0, 1
    for page in pages:
        text = page.extract_text()
        ((at, last),) = PLACE.findall(text)
        assert int(at) == expected
        rows += len(codes_on(text, made))
        if at == last:
            found.append(rows)
            rows, expected = 0, 1
        else:
            expected += 1
    blocks = len(found) // len(numbers)
    assert found == [number for number in numbers for _ in range(blocks)]


@pytest.mark.parametrize("size", [11, 20])
def test_full_pages_end_above_their_foot(size: int, tmp_path: Path) -> None:
    """The last row of a full page stands clear of the foot, and no room for another row is left."""
    made = small_set(tmp_path, (None,) * 50, f"layout: {{type: {size}}}\n")
    head, body = glance(made, 150)
    pages = PdfReader(compile_tex(head + body + END, "key", tmp_path, "pdflatex")).pages
    row = 1.5 * 0.9 * size
    for page in pages[:2]:
        last, foot = heights(page, made)
        assert 30 < last - foot < 31 + 1.35 * row  # the foot stands 30 pt below the text
