"""Printed sheets and keys, read back from the PDF."""

from __future__ import annotations

import re
import unicodedata
from pathlib import Path

import pytest
from press_help import small_set
from pypdf import PdfReader

from authoring.papers.assemble import PaperSet
from authoring.press.publish import Published, page_ranges, publish
from authoring.specs.roster import Candidate

PEOPLE = (
    Candidate("s-101", "Zoë Brandt-Müller", "extra time", "A1"),
    Candidate("s_102", "O'Neil & Sons {50%} #1 ~^\\", "", "A2"),
)


def pages_of(pdf: Path) -> list[str]:
    """The text of every page, white space evened out."""
    return [re.sub(r"\s+", " ", page.extract_text()) for page in PdfReader(pdf).pages]


def printed(made: PaperSet, folder: Path, split: bool = False) -> Published:
    """Publish into a new folder."""
    folder.mkdir()
    return publish(made, folder, split=split)


@pytest.fixture(scope="module")
def plain(tmp_path_factory: pytest.TempPathFactory) -> tuple[PaperSet, Path, Published]:
    """A set for two people with data attached, split."""
    folder = tmp_path_factory.mktemp("plain")
    made = small_set(folder, PEOPLE, "attach: [constants, periodic table]\nconventions: {1s pair: '0.35'}\n")
    return made, folder / "out", printed(made, folder / "out", split=True)


def test_every_file_is_written(plain: tuple[PaperSet, Path, Published]) -> None:
    """Sheets and key, each as LaTeX, PDF and HTML, and one file for each candidate; nothing else."""
    made, out, published = plain
    names = {f"{stem}.{kind}" for stem in ("sheets", "key") for kind in ("tex", "pdf", "html")}
    names |= {f"candidates/{paper.code}.pdf" for paper in made.papers}
    assert set(published.files) == names
    assert {path.relative_to(out).as_posix() for path in out.rglob("*") if path.is_file()} == names
    assert published.missing == ""
    assert dict(published.engines) == {"sheets": "pdflatex", "key": "pdflatex"}


def test_code_candidate_and_place_stand_on_every_page(plain: tuple[PaperSet, Path, Published]) -> None:
    """A page that falls out of a stack can be put back."""
    made, out, _ = plain
    pages = pages_of(out / "sheets.pdf")
    for paper, (first, last) in zip(made.papers, page_ranges(out / "sheets.pdf").values(), strict=True):
        for at, page in enumerate(range(first, last + 1), start=1):
            foot = f"{paper.code} {paper.candidate.id if paper.candidate else ''} Page {at} of {last - first + 1}"
            assert foot in pages[page - 1]


def test_the_words_of_the_plan_and_items_are_there(plain: tuple[PaperSet, Path, Published]) -> None:
    """What TeX would take for commands is printed as it is written."""
    _, out, _ = plain
    text = " ".join(pages_of(out / "sheets.pdf")).replace("’", "'").replace("\\ ", "\\")
    for words in (
        "Screening & charge, 100%", "CH 104", "14 March", "Time allowed: 45 minutes", "Answer all questions.",
        "Total: 9 marks", "The evening tank, 50% & $ _full_", "Zoë Brandt-Müller", "O'Neil & Sons {50%} #1 ~^",
        "Marrowgate", "Caution.", "works log (invented)", "Charges along the third period", "(A)", "(D)", "or (ii)",
        "Answer one of the following.", "End of questions", "13.6057", "Periodic table",
        "The other electron of 1s: 0.35",
    ):  # fmt: skip
        assert words in text, words


def test_sheets_give_nothing_away(plain: tuple[PaperSet, Path, Published]) -> None:
    """No answer, seed, need or slip on the sheets, in their data or in their names; not even in the sources."""
    made, out, _ = plain
    text = " ".join(pages_of(out / "sheets.pdf"))
    sources = (out / "sheets.tex").read_text() + (out / "sheets.html").read_text()
    for paper in made.papers:
        tank = paper.questions[0]
        for part in tank.parts:
            assert part.solved.answer.shown.replace("−", "-") not in text.replace("−", "-")
            assert f"{part.solved.answer.shown}" not in sources
    for word in ("a fixed seed", "self counted", "extra time", "screen more", "metal =", "earns A1"):
        assert word not in text
        assert word not in sources
    assert not (PdfReader(out / "sheets.pdf").metadata or {}).get("/Title")


def test_the_key_has_answers_points_and_slips(plain: tuple[PaperSet, Path, Published]) -> None:
    """All answers at a glance first; then, for each paper, the working with its points."""
    made, out, _ = plain
    pages = pages_of(out / "key.pdf")
    for paper in made.papers:
        name = re.escape(paper.candidate.id if paper.candidate else "")
        row = re.search(rf"{paper.code} {name} (.*?)(?:s_102|$)", pages[0])
        assert row
        for part in paper.questions[0].parts:
            assert part.solved.answer.shown in row[1].replace("-", "−")
    ranges = page_ranges(out / "key.pdf")
    assert list(ranges) == [paper.code for paper in made.papers]
    first, last = ranges[made.papers[0].code]
    text = " ".join(pages[first - 1 : last])
    for words in ("1(a) calculate screening constant", "M1 ft", "A1", "self counted", "Notes to markers:", "Accept",
                  "The value is exact.", "(A)", "right", "the inner electrons screen more", "no mark"):  # fmt: skip
        assert words in text, words
    assert all(made.papers[0].code in page for page in pages[first - 1 : last])
    assert "a person to confirm" in pages[0]


def test_split_files_hold_one_paper_each(plain: tuple[PaperSet, Path, Published]) -> None:
    """The pages of a candidate's file are those of the paper, and nobody else's."""
    made, out, _ = plain
    ranges = page_ranges(out / "sheets.pdf")
    for paper, other in (made.papers, made.papers[::-1]):
        texts = pages_of(out / "candidates" / f"{paper.code}.pdf")
        assert len(texts) == ranges[paper.code][1] - ranges[paper.code][0] + 1
        assert all(paper.code in text and other.code not in text for text in texts)


@pytest.mark.parametrize(
    ("layout", "points"),
    [
        ("{paper: Letter, type: 20}", (612, 792)),
        ("{paper: A4, type: 10, space: none}", (595.276, 841.89)),
        ("{paper: A4, type: 14, space: wide}", (595.276, 841.89)),
    ],
)
def test_papers_and_type_sizes(layout: str, points: tuple[float, float], tmp_path: Path) -> None:
    """The page has the size that was asked for, and every text is on it at any type size."""
    made = small_set(tmp_path, (None,), f"layout: {layout}\n")
    printed(made, tmp_path / "out")
    for name in ("sheets.pdf", "key.pdf"):
        box = PdfReader(tmp_path / "out" / name).pages[0].mediabox
        assert (float(box.width), float(box.height)) == pytest.approx(points, abs=0.5)
    text = " ".join(pages_of(tmp_path / "out" / "sheets.pdf"))
    assert "End of paper" in text
    assert len(re.findall(r"\[\d\]", text)) == 6


def test_answer_space_follows_the_layout(tmp_path: Path) -> None:
    """Wide space takes more pages than none."""
    counts = []
    for space in ("none", "wide"):
        folder = tmp_path / space
        folder.mkdir()
        printed(small_set(folder, (None,), f"layout: {{space: {space}}}\n"), folder / "out")
        counts.append(len(PdfReader(folder / "out" / "sheets.pdf").pages))
    assert counts[0] < counts[1]


def test_two_sided_papers_start_on_right_hand_pages(tmp_path: Path) -> None:
    """Odd pages lie on the right; a blank page says that it is blank and keeps its foot."""
    made = small_set(tmp_path, (None,) * 3, "layout: {two-sided: yes, space: none}\n")
    printed(made, tmp_path / "out")
    pages = pages_of(tmp_path / "out" / "sheets.pdf")
    ranges = page_ranges(tmp_path / "out" / "sheets.pdf")
    assert all(first % 2 == 1 for first, _ in ranges.values())
    assert len(pages) % 2 == 0
    blank = [text for text in pages if "This page is blank." in text]
    assert all(any(paper.code in text for paper in made.papers) for text in blank)


def test_names_in_any_script(tmp_path: Path) -> None:
    """Where a name needs more than pdfTeX's fonts, the sheets are LuaTeX's; the key, which has no names, is not."""
    names = ("Наталья Иванова", "李小龙", "Ελένη Παπά", "Nguyễn Thị Ánh")
    made = small_set(tmp_path, [Candidate(f"c{at}", name) for at, name in enumerate(names)], "layout: {space: none}\n")
    published = printed(made, tmp_path / "out")
    assert dict(published.engines) == {"sheets": "lualatex", "key": "pdflatex"}
    text = unicodedata.normalize("NFC", " ".join(pages_of(tmp_path / "out" / "sheets.pdf")))
    for name in names:
        assert name in text


def test_german_words_and_decimal_commas(tmp_path: Path) -> None:
    """Numbers have commas everywhere, printed words are of the language."""
    made = small_set(tmp_path, (None,), "language: de\nlayout: {decimal: comma}\nattach: [constants]\n")
    printed(made, tmp_path / "out")
    sheet = " ".join(pages_of(tmp_path / "out" / "sheets.pdf"))
    key = " ".join(pages_of(tmp_path / "out" / "key.pdf"))
    for words in ("Aufgabe", "Punkte", "Seite 1 von", "Vorsicht.", "12,50", "13,6057", "3,7"):
        assert words in sheet, words
    for words in ("Antworten auf einen Blick", "Hinweise zur Korrektur", "19,70 without", "Anzunehmen"):
        assert words in key, words
    for name in ("sheets.html", "key.html"):
        page = re.sub(r"(?s)<style>.*?</style>|<[^>]*>", " ", (tmp_path / "out" / name).read_text())
        assert not re.findall(r"\d\.\d", page)
    assert not re.findall(r"\d\.\d", sheet + key)


def test_conventions_stand_on_the_first_page_where_there_is_no_data_page(tmp_path: Path) -> None:
    """What the course does otherwise is said before the questions."""
    made = small_set(tmp_path, (None,), "conventions: {1s pair: '0.35', outside: '0.00'}\n")
    printed(made, tmp_path / "out")
    page = pages_of(tmp_path / "out" / "sheets.pdf")[0]
    said = "Conventions of this paper The other electron of 1s: 0.35 Each electron of a group further out: 0.00"
    assert page.index("Instructions") < page.index(said) < page.index("Marrowgate")
    assert "The other electron of 1s: 0.35" in (tmp_path / "out" / "sheets.html").read_text()


def test_a_long_list_of_answers_repeats_its_head(tmp_path: Path) -> None:
    """Forty papers: the answers at a glance go over pages, each with the heads of its columns."""
    made = small_set(tmp_path, (None,) * 54, "layout: {space: none}\n")
    printed(made, tmp_path / "out")
    pages = pages_of(tmp_path / "out" / "key.pdf")
    glance = [text for text in pages if "Answers at a glance" in text]
    assert len(glance) == 2
    assert all("Paper 1a 1b 1c 2a" in text for text in glance)
    assert all(any(paper.code in text for text in glance) for paper in made.papers)


def test_without_tex_all_but_the_pdfs_is_written(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """What is missing is said, with the packages to install."""
    made = small_set(tmp_path, (None,))
    monkeypatch.setenv("PATH", str(tmp_path))
    published = printed(made, tmp_path / "out", split=True)
    assert set(published.files) == {"sheets.tex", "key.tex", "sheets.html", "key.html"}
    assert "pdflatex is not installed" in published.missing
    assert "apt install" in published.missing


def test_the_same_set_gives_the_same_bytes(tmp_path: Path) -> None:
    """Nothing of time, place or chance gets into a file."""
    made = small_set(tmp_path, (None,))
    first, second = printed(made, tmp_path / "a"), printed(made, tmp_path / "b")
    assert first.files == second.files
    for name in first.files:
        assert (tmp_path / "a" / name).read_bytes() == (tmp_path / "b" / name).read_bytes(), name
