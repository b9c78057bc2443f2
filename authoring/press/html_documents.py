"""Press: the sheets and the key of a set as HTML, each one self-contained file, written piece by piece."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path

from markupsafe import Markup

from authoring.papers.assemble import PaperSet
from authoring.press.data_page import data_view
from authoring.press.environment import html_environment, rendered
from authoring.press.fragments import Fragments, glance_values
from authoring.press.keys import KeyMaker
from authoring.press.language import Words
from authoring.press.medium import HtmlMedium
from authoring.press.periodic import periodic_html
from authoring.press.sheets import SheetMaker
from authoring.specs.shipped import shipped_folder

Tick = Callable[[], None]
_ROOM = 60.0  # em that the answers at a glance may take side by side on a printed page
_END = "</body>\n</html>\n"


def write_sheets_html(paper_set: PaperSet, path: Path, tick: Tick) -> None:
    """The question papers, one section each."""
    _write(path, _sheets(paper_set, tick))


def write_key_html(paper_set: PaperSet, path: Path, tick: Tick) -> None:
    """The key: answers at a glance, then a section for each paper."""
    _write(path, _key(paper_set, tick))


def _write(path: Path, pieces: Iterator[str]) -> None:
    with path.open("w", encoding="utf-8", newline="\n") as file:
        file.writelines(pieces)


def _means(paper_set: PaperSet) -> tuple[HtmlMedium, Words]:
    medium = HtmlMedium("," if paper_set.plan.layout.decimal == "comma" else ".")
    return medium, Words(paper_set.plan.language, medium.text)


def _opening(paper_set: PaperSet, medium: HtmlMedium, words: Words, kind: str) -> str:
    plan = paper_set.plan
    style = (shipped_folder("templates") / "html" / "style.css").read_text(encoding="utf-8")
    return rendered(
        html_environment(),
        "head.html",
        language=medium.text(plan.language),
        title=Markup(" – ").join([medium.text(plan.title), words(kind)]),
        style=Markup(style),
        type_size=plan.layout.type_size,
        paper_size=medium.text("A4" if plan.layout.paper == "A4" else "letter"),
        two_sided=plan.layout.two_sided,
    )


def _sheets(paper_set: PaperSet, tick: Tick) -> Iterator[str]:
    medium, words = _means(paper_set)
    maker = SheetMaker(paper_set, medium, words)
    fragments = Fragments(html_environment(), "question.html", maker.question, words)
    front = maker.front()
    data = data_view(paper_set.plan, medium, words)
    periodic = Markup(periodic_html(decimal=medium.decimal)) if data and data.periodic else Markup()

    def shared(part: str) -> Markup:
        values = {"part": part, "front": front, "data": data, "periodic": periodic, "words": words}
        return Markup(rendered(html_environment(), "front.html", **values))

    rules, page = shared("rules"), shared("data") if data else Markup()
    yield _opening(paper_set, medium, words, "sheets")
    for paper in paper_set.papers:
        yield rendered(
            html_environment(),
            "sheet.html",
            paper=maker.paper(paper),
            questions=fragments.of(paper),
            front=front,
            rules=rules,
            data=page,
            words=words,
        )
        tick()
    yield _END


def _key(paper_set: PaperSet, tick: Tick) -> Iterator[str]:
    medium, words = _means(paper_set)
    heads = SheetMaker(paper_set, medium, words)
    maker = KeyMaker(paper_set, medium, words)
    fragments = Fragments(html_environment(), "key_question.html", maker.question, words)
    yield _opening(paper_set, medium, words, "key")
    glance = glance_values(paper_set, maker, _ROOM)
    yield rendered(html_environment(), "glance.html", words=words, front=heads.front(), **glance)
    for paper in paper_set.papers:
        view = heads.paper(paper, named=False)
        yield rendered(
            html_environment(), "key_paper.html", paper=view, questions=fragments.of(paper), words=words
        )
        tick()
    yield _END
