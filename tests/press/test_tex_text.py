"""Every text either is refused, or compiles and cannot do anything: checked with the engines themselves."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from pypdf import PdfReader

from authoring.faults import ContentError
from authoring.press.fonts import fonts_for
from authoring.press.preamble import preamble
from authoring.press.tex import Engine, compile_tex
from authoring.working.latex import to_latex
from authoring.working.nodes import Words
from authoring.working.tex_escape import MATH_GREEK, T1_CLEAN, escape_tex, needs_wide

TRAPS = [
    "\\input{x}", "\n\nx", "--- -- '' ,, `` !` ?` << >>", '"q"', "$x$ #1 %c &a ~t ^^M _s {b} }", "[a]", "*a", "x\\",
    "−⁺²⁻₀μΔ≤≈≥", "a\u200bb\u202ec\u2066d\ufeff", "Μετρο", "1\u202f000\u2009K", "O'Brien…‑x", "^^5cbye", "%",
    "\\end{document}",
]  # fmt: skip
SCRIPTS = (
    "Дмитрий Иванов", "Παπαδόπουλος", "محمد علي", "דוד כהן", "王小明", "山田たろう", "김민준", "अनिता शर्मा", "রহিম",
    "அருண்", "సీత", "ಸೀತಾ", "സീത", "ਸੀਤਾ", "સીતા", "සුනිල්", "สมชาย", "ສົມ", "გიორგი", "Հայկ", "አበበ", "សុខា", "မောင်",
    "Ṣọlá", "Nguyễn Thị Hường", "ʻokina", "Əliyev", "Ștefan Țepeș",
)  # fmt: skip


def collect(strategy: st.SearchStrategy[str], count: int) -> list[str]:
    """Many examples of a strategy at once, so that one run of TeX serves them all; the seed is fixed."""
    found: list[str] = []

    @settings(
        max_examples=count, database=None, derandomize=True, deadline=None, suppress_health_check=list(HealthCheck)
    )
    @given(strategy)
    def take(text: str) -> None:
        found.append(text)

    take()
    return found


def accepted(texts: list[str], wide: bool) -> list[str]:
    """The escaped form of those texts that are not refused."""
    out: list[str] = []
    for text in texts:
        try:
            out.append(escape_tex(text, wide))
        except ContentError:
            continue
    return out


def document(head: str, pieces: list[str]) -> str:
    """Each piece in the places where text stands: a paragraph, a cell after a cell, the start of a row, an argument."""
    rows = "\n\n".join(
        f"Q{piece}Q\\par\\begin{{tabular}}{{ll}}{piece}&{piece}\\\\{piece}&\\textbf{{{piece}}}\\end{{tabular}}"
        for piece in pieces
    )
    return f"{head}\\begin{{document}}\\tiny\n{rows}\n\nThe end\\end{{document}}"


def test_any_text_is_refused_or_compiles_under_pdftex(tmp_path: Path) -> None:
    """Whatever Unicode offers, and what TeX reads specially, compiles or raises ContentError."""
    printable = "".join(sorted(T1_CLEAN | MATH_GREEK.keys())) + "−⁺⁻²₂≤≈′⇌\u00a0\u2009\u202f\n\t"
    special = "\\{}$&#%_^~<>|\"'`-,!?[]* \nabfi0"
    texts = [
        *TRAPS,
        *collect(st.text(max_size=8), 300),
        *collect(st.text(st.sampled_from(special), max_size=12), 300),
        *collect(st.text(st.sampled_from(printable + special), max_size=12), 300),
    ]
    pieces = accepted(texts, wide=False)
    assert len(pieces) > 400
    made = compile_tex(document(preamble("pdflatex", "a4", 10), pieces), "any", tmp_path, "pdflatex")
    assert PdfReader(made).pages[-1].extract_text().rstrip().endswith("The end")


def test_any_text_of_the_known_scripts_compiles_under_luatex(tmp_path: Path) -> None:
    """Names in some twenty scripts, mixed with what TeX reads specially, compile with the fallback fonts."""
    letters = "".join(sorted(set("".join(SCRIPTS)) | T1_CLEAN)) + "\\{}$&#%_^~<>|\"'`-,[]*"
    texts = [*SCRIPTS, *TRAPS, *collect(st.text(st.sampled_from(letters), max_size=8), 40)]
    pieces = accepted(texts, wide=True)
    head = preamble("lualatex", "a4", 10, fonts_for("".join(texts)))
    made = compile_tex(document(head, pieces), "wide", tmp_path, "lualatex")
    assert PdfReader(made).pages[-1].extract_text().rstrip().endswith("The end")


@pytest.mark.parametrize("text", ["a\x00", "\x1b[0m", "\x85", "\ud800", "\ufdd0", "\ue000", "\U0010ffff", "a\rb"])
def test_no_page_can_hold_it(text: str) -> None:
    """Control characters, surrogates, noncharacters and private characters are refused for both engines."""
    for wide in (False, True):
        with pytest.raises(ContentError):
            escape_tex(text, wide)


@pytest.mark.parametrize(
    ("text", "wide"),
    [
        ("Łukasz Żółć", False),
        ("Zoë 3 × 10⁻² μB ≤ 5", False),
        ("ΔE", False),
        ("Иван", True),
        ("Ελενη", True),
        ("王", True),
    ],
)
def test_what_needs_luatex(text: str, wide: bool) -> None:
    """Latin-script names and formulas' signs print with pdfTeX; other scripts, and words in Greek, do not."""
    assert needs_wide(text) is wide


def test_beyond_pdftex_is_an_error_that_names_the_character() -> None:
    """The character that needs the other engine is named."""
    with pytest.raises(ContentError, match=r"'Ж' \(U\+0416\)"):
        escape_tex("aЖ")


def test_composed_and_decomposed_text_print_alike() -> None:
    """Text is composed first: `é` as two characters is one letter."""
    assert escape_tex("e\u0301") == escape_tex("é") == "é"


@pytest.mark.parametrize("engine", ["pdflatex", "lualatex"])
def test_text_comes_back_from_the_page(engine: Engine, tmp_path: Path) -> None:
    """What is printed can be searched and copied: dashes, quotes and brackets are not joined to other signs."""
    text = 'Żółć -- --- ,, !` ?` `` ` "q" << >> [x] 26 − 19.75 = 6.25 {a} ~ ^ \\ | #1 50% µ'
    body = escape_tex(text, wide=engine == "lualatex")
    source = preamble(engine, "a4", 10) + rf"\begin{{document}}{body}\end{{document}}"
    made = compile_tex(source, "back", tmp_path, engine)
    back = PdfReader(made).pages[0].extract_text()
    assert "".join(back.split()) == "".join(text.split())


def test_a_row_may_begin_with_a_star_or_a_bracket(tmp_path: Path) -> None:
    """Both would be read as belonging to the end of the row before."""
    rows = "\\\\".join(escape_tex(text) for text in ("first", "*star", "[5mm] room", "last"))
    source = (
        preamble("pdflatex", "a4", 10)
        + rf"\begin{{document}}\begin{{tabular}}{{l}}{rows}\end{{tabular}}\end{{document}}"
    )
    text = PdfReader(compile_tex(source, "rows", tmp_path, "pdflatex")).pages[0].extract_text()
    assert "*star" in text
    assert "[5mm] room" in text


def test_words_in_formulas_are_escaped(tmp_path: Path) -> None:
    """Words inside a formula take any accepted text."""
    body = "\n\n".join(f"${to_latex(Words(trap))}$" for trap in TRAPS)
    source = preamble("pdflatex", "a4", 10) + rf"\begin{{document}}{body}\end{{document}}"
    assert compile_tex(source, "words", tmp_path, "pdflatex").stat().st_size
