"""Sheets and keys as HTML: well-formed, self-contained, the same words as print, nothing given away."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ET
from pathlib import Path

import pytest
from press_help import small_set

from authoring.papers.assemble import PaperSet
from authoring.press.html_documents import write_key_html, write_sheets_html
from authoring.press.latex_documents import key_job
from authoring.specs.roster import Candidate

EVIL = Candidate("<i>7", "<script>alert('x')</script> & \"Co\"", "", "")


@pytest.fixture(scope="module")
def pages(tmp_path_factory: pytest.TempPathFactory) -> tuple[PaperSet, str, str]:
    """A set with a name that looks like markup: the sources of sheets and key."""
    folder = tmp_path_factory.mktemp("html")
    made = small_set(folder, (EVIL, None), "attach: [constants, periodic table]\n")
    write_sheets_html(made, folder / "sheets.html", lambda: None)
    write_key_html(made, folder / "key.html", lambda: None)
    return made, (folder / "sheets.html").read_text(), (folder / "key.html").read_text()


def tree_of(page: str) -> ET.Element:
    """The page as XML, which is stricter than HTML."""
    return ET.fromstring(page.removeprefix("<!DOCTYPE html>"))


@pytest.mark.parametrize("at", [1, 2])
def test_pages_are_well_formed_and_self_contained(at: int, pages: tuple[PaperSet, str, str]) -> None:
    """No element is left open; nothing is loaded from anywhere; ids are unique."""
    root = tree_of(pages[at])
    assert root.get("lang") == "en"
    ids = [element.get("id") for element in root.iter() if element.get("id")]
    assert len(ids) == len(set(ids)) == 2
    assert not [element for element in root.iter() if element.tag in ("script", "link", "img", "iframe", "object")]
    assert not re.findall(r"https?://|@import|url\(", pages[at])
    assert "<!--" not in pages[at]


def test_names_are_text(pages: tuple[PaperSet, str, str]) -> None:
    """A name that looks like markup is printed as it is written."""
    _, sheets, key = pages
    assert EVIL.name in "".join(tree_of(sheets).itertext())
    assert "<i>7" in "".join(tree_of(key).itertext())
    assert EVIL.name not in "".join(tree_of(key).itertext())


def test_pictures_have_a_title_and_a_description(pages: tuple[PaperSet, str, str]) -> None:
    """Who cannot see the chart reads its values."""
    made, sheets, _ = pages
    pictures = list(tree_of(sheets).iter("svg"))
    assert len(pictures) == 2
    figure = made.papers[0].questions[1].figure
    assert figure
    for picture in pictures:
        assert picture.get("role") == "img"
        assert "effective nuclear charge" in (picture.findtext("title") or "")
        assert picture.findtext("desc") == figure.description


def test_sheets_have_every_part_and_no_answer(pages: tuple[PaperSet, str, str]) -> None:
    """The same words as print; the answers are on the key only."""
    made, sheets, key = pages
    text, marked = " ".join(tree_of(sheets).itertext()), " ".join(tree_of(key).itertext())
    for paper in made.papers:
        assert paper.code in text
        for part in paper.questions[0].parts:
            shown = part.solved.answer.shown
            assert shown.removeprefix("−") not in text.split()
            assert shown.removeprefix("−") in marked.split()
    assert text.count("[1]") == 8
    for word in ("a fixed seed", "self counted", "screen more"):
        assert word not in text
    assert "self counted" in marked
    assert "screen more" in marked


def test_print_and_screen_are_prepared(pages: tuple[PaperSet, str, str]) -> None:
    """Page size and breaks for print, light and dark for screens."""
    _, sheets, _ = pages
    for words in ("@page", "size: A4", "break-before: page", "prefers-color-scheme: dark", "color-scheme: light dark"):
        assert words in sheets


def test_repeated_questions_are_rendered_once(tmp_path: Path) -> None:
    """What many papers share is one text in the source, so a large class stays quick."""
    made = small_set(tmp_path, (None,) * 18)
    distinct = {id(question) for paper in made.papers for question in paper.questions}
    assert len(distinct) < 36
    assert key_job(made, lambda: None).source.count("\\keytitle{1\\quad") == 18
