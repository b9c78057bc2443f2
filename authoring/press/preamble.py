"""Press: the head of every document: class, fonts, type size, page; built with PyLaTeX, the same for both engines."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Literal

from authoring.faults import ContentError
from authoring.press.fonts import LAST, Fallback
from authoring.press.tex import Engine

if TYPE_CHECKING:
    from pylatex import Document  # type: ignore[import-untyped]

Paper = Literal["a4", "letter"]
SIZES = range(10, 21)

# Sizes of the named steps relative to running text, and their line spacing (common practice in typesetting).
_STEPS = {
    "tiny": 0.5,
    "scriptsize": 0.7,
    "footnotesize": 0.8,
    "small": 0.9,
    "large": 1.2,
    "Large": 1.44,
    "LARGE": 1.728,
    "huge": 2.07,
    "Huge": 2.49,
}
_LEADING = 1.2
_MARGINS = {
    "a4": "a4paper,hmargin=22mm,top=18mm,bottom=22mm",
    "letter": "letterpaper,hmargin=22mm,top=17mm,bottom=20mm",
}
_FIXED = {
    "pdflatex": r"\pdfinfoomitdate=1 \pdftrailerid{}\pdfsuppressptexinfo=-1 ",
    # 32 + 64 + 128 + 256 + 512: no dates, no trapped flag, no banner, no file identifier
    "lualatex": r"\pdfvariable suppressoptionalinfo 992 ",
}


def preamble(engine: Engine, paper: Paper, size_pt: int, fonts: Sequence[Fallback] = LAST) -> str:
    r"""Everything before `\begin{document}`; `size_pt` is 10 to 20; `fonts` are LuaTeX's fallbacks (see `fonts_for`).

    `\namefont` sets text that may be in any script. Raises ContentError for a size or paper it does not have.
    """
    from pylatex import Command, Document, NoEscape, Package

    if size_pt not in SIZES:
        raise ContentError(f"type size {size_pt} pt is not between {SIZES[0]} and {SIZES[-1]} pt", str(size_pt))
    if paper not in _MARGINS:
        raise ContentError(f"unknown paper {paper!r}", paper, _MARGINS)
    base = 10 if size_pt < 11 else 11 if size_pt < 12 else 12
    head = Document(
        documentclass="article",
        document_options=[f"{base}pt"],
        fontenc="T1" if engine == "pdflatex" else None,
        inputenc=None,
        lmodern=True,
        textcomp=False,
        page_numbers=False,
        indent=True,
        microtype=False,
    )
    for name in ("amsmath", "array", "booktabs"):
        head.packages.append(Package(name))
    head.packages.append(Package("geometry", options=NoEscape(f"{_MARGINS[paper]},includefoot=false")))
    if engine == "lualatex":
        head.packages.append(Package("babel", options=NoEscape("english,bidi=basic")))
        head.packages.append(Package("fontspec"))
        _lua_fonts(head, fonts)
    else:
        head.preamble.append(NoEscape(r"\newcommand{\namefont}{\rmfamily}"))
    head.preamble.append(NoEscape(_FIXED[engine]))
    head.preamble.append(NoEscape(_sizes(size_pt)))
    head.preamble.append(NoEscape(_LAYOUT))
    head.preamble.append(Command("pagestyle", "empty"))
    source: str = head.dumps()
    return source.partition(r"\begin{document}")[0]


def _lua_fonts(head: Document, fonts: Sequence[Fallback]) -> None:
    """Latin Modern, and behind it those of the fallback fonts that are installed."""
    from pylatex import NoEscape

    table = ",".join(f'{{"{font.file}","{font.features}"}}' for font in fonts)
    head.preamble.append(
        NoEscape(
            r"\directlua{local list = {} "
            rf"for _, font in ipairs({{{table}}}) do "
            r'if kpse.find_file(font[1], "truetype fonts") or kpse.find_file(font[1], "opentype fonts") then '
            r'list[\string#list + 1] = "file:" .. font[1] .. ":" .. font[2] end end '
            r'luaotfload.add_fallback("names", list)}' + "\n"
            r"\setmainfont{Latin Modern Roman}[RawFeature={fallback=names}]" + "\n"
            r"\newcommand{\namefont}{\rmfamily}"
        )
    )


def _sizes(size: int) -> str:
    """All type sizes in proportion; the document classes know 10, 11 and 12 pt only."""

    def skip(ratio: float) -> str:
        return f"{size * ratio:.2f}pt plus {size * ratio / 4:.2f}pt minus {size * ratio / 4:.2f}pt"

    display = (
        rf"\abovedisplayskip {skip(0.7)}\belowdisplayskip\abovedisplayskip "
        rf"\abovedisplayshortskip {skip(0.2)}\belowdisplayshortskip {skip(0.5)}"
    )
    rows = [rf"\renewcommand\normalsize{{\fontsize{{{size}}}{{{size * _LEADING:.2f}}}\selectfont {display}}}"]
    for name, ratio in _STEPS.items():
        step = size * ratio
        rows.append(rf"\renewcommand\{name}{{\fontsize{{{step:.2f}}}{{{step * _LEADING:.2f}}}\selectfont}}")
        rows.append(rf"\DeclareMathSizes{{{step:.2f}}}{{{step:.2f}}}{{{step * 0.7:.2f}}}{{{step * 0.5:.2f}}}")
    rows.append(rf"\DeclareMathSizes{{{size}}}{{{size}}}{{{size * 0.7:.2f}}}{{{size * 0.5:.2f}}}")
    rows.append(r"\normalsize")
    return "%\n".join(rows)


# A character that the font in use does not have must stop the run: by default TeX leaves a blank and says nothing.
_LAYOUT = r"""\tracinglostchars=3
\setlength{\parindent}{0pt}
\setlength{\parskip}{0.5\baselineskip plus 2pt}
\setlength{\arraycolsep}{0.3em}
\setlength{\emergencystretch}{3em}
\frenchspacing
\raggedbottom
\clubpenalty=10000 \widowpenalty=10000 \displaywidowpenalty=10000
\allowdisplaybreaks[0]"""
