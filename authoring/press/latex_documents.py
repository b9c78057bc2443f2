"""Press: the LaTeX of the sheets and of the key of a set; every distinct question is rendered once."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from authoring.papers.assemble import PaperSet
from authoring.press.data_page import data_view
from authoring.press.environment import Tex, rendered, tex_environment
from authoring.press.fonts import fonts_for
from authoring.press.fragments import Fragments, glance_values
from authoring.press.keys import KeyMaker
from authoring.press.language import Words
from authoring.press.medium import NeedsWide, TexMedium
from authoring.press.periodic import periodic_definition
from authoring.press.preamble import Paper as PaperSize
from authoring.press.preamble import preamble
from authoring.press.sheets import SheetMaker
from authoring.press.tex import Engine, Job
from authoring.specs.shipped import shipped_folder
from authoring.working.tex_escape import needs_wide

Tick = Callable[[], None]
_TEXT_MM = {"A4": 166.0, "Letter": 172.0}
_MM_PER_PT = 25.4 / 72.27
_SMALL = 0.9  # the type of the answers at a glance, in parts of running type
_END = "\\end{document}\n"


def sheets_job(paper_set: PaperSet, tick: Tick) -> Job:
    """The question papers as a document; LuaTeX's only where a text needs more than pdfTeX's fonts."""
    names = (paper.candidate.name for paper in paper_set.papers if paper.candidate)
    return _job(paper_set, "sheets", _sheets, tick, any(map(needs_wide, names)))


def key_job(paper_set: PaperSet, tick: Tick) -> Job:
    """The key as a document."""
    return _job(paper_set, "key", _key, tick)


_Make = Callable[[PaperSet, TexMedium, Words, Engine, Tick], Iterator[str]]


def _job(paper_set: PaperSet, name: str, make: _Make, tick: Tick, wide: bool = False) -> Job:
    layout = paper_set.plan.layout
    engine: Engine = "lualatex" if wide else "pdflatex"
    medium = TexMedium("," if layout.decimal == "comma" else ".", wide)
    words = Words(paper_set.plan.language, medium.text)
    try:
        opening = _opening(words, layout.two_sided and make is _sheets)
        body = "".join([*opening, *make(paper_set, medium, words, engine, tick), _END])
    except NeedsWide:
        return _job(paper_set, name, make, tick, wide=True)
    paper: PaperSize = "a4" if layout.paper == "A4" else "letter"
    return Job(preamble(engine, paper, layout.type_size, fonts_for(body if wide else "")) + body, name, engine)


def _opening(words: Words, two_sided: bool) -> Iterator[str]:
    macros = (shipped_folder("templates") / "latex" / "macros.tex").read_text(encoding="utf-8")
    yield rendered(
        tex_environment(),
        "document.tex",
        macros=Tex(macros),
        words=words,
        two_sided=two_sided,
        number_page=Tex(r"{\number\pagenow}"),
        number_pages=Tex(r"{\number\pagetotal}"),
    )


def _sheets(paper_set: PaperSet, medium: TexMedium, words: Words, engine: Engine, tick: Tick) -> Iterator[str]:
    maker = SheetMaker(paper_set, medium, words)
    fragments = Fragments(tex_environment(), "question.tex", maker.question, words)
    data = data_view(paper_set.plan, medium, words)
    shared = {"words": words, "front": maker.front(), "data": data, "empty": Tex()}
    if data and data.periodic:
        yield periodic_definition(engine, decimal=medium.decimal)
    yield rendered(tex_environment(), "front.tex", **shared)
    for paper in paper_set.papers:
        view = maker.paper(paper)
        yield rendered(
            tex_environment(), "sheet.tex", paper=view, foot=view.candidate, questions=fragments.of(paper), **shared
        )
        tick()


def _key(paper_set: PaperSet, medium: TexMedium, words: Words, engine: Engine, tick: Tick) -> Iterator[str]:
    heads = SheetMaker(paper_set, medium, words)
    maker = KeyMaker(paper_set, medium, words)
    fragments = Fragments(tex_environment(), "key_question.tex", maker.question, words)
    shared = {"words": words, "front": heads.front(), "empty": Tex()}
    yield rendered(tex_environment(), "glance.tex", **glance_values(paper_set, maker, _room(paper_set)), **shared)
    for paper in paper_set.papers:
        view = heads.paper(paper, named=False)
        yield rendered(
            tex_environment(), "key_paper.tex", paper=view, foot=view.candidate, questions=fragments.of(paper), **shared
        )
        tick()


def _room(paper_set: PaperSet) -> float:
    """The width of the text in em of the type that the answers at a glance are set in."""
    layout = paper_set.plan.layout
    return _TEXT_MM[layout.paper] / (layout.type_size * _MM_PER_PT * _SMALL)
