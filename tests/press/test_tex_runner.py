"""The engines as outside programs: limits, errors that name the item, the same bytes twice."""

from __future__ import annotations

import os
import signal
import subprocess
import threading
import time
from pathlib import Path
from typing import Any

import pytest
from pypdf import PdfReader

from authoring.faults import ContentError, OutsideError
from authoring.press.preamble import preamble
from authoring.press.tex import Engine, Job, compile_many, compile_tex, explain, find_engine

ENGINES: tuple[Engine, ...] = ("pdflatex", "lualatex")


def page(engine: Engine, body: str, size: int = 11) -> str:
    """A document with one body."""
    return f"{preamble(engine, 'a4', size)}\\begin{{document}}\n{body}\n\\end{{document}}\n"


@pytest.mark.parametrize("engine", ENGINES)
def test_two_runs_in_two_places_give_the_same_bytes(engine: Engine, tmp_path: Path) -> None:
    """No date, no path and no chance gets into a PDF."""
    source = page(engine, r"Text and $\frac{4.20}{3.7}$")
    first = compile_tex(source, "one", tmp_path / "a", engine)
    second = compile_tex(source, "two", tmp_path / "b" / "c", engine)
    assert first.read_bytes() == second.read_bytes()
    assert [path.name for path in (tmp_path / "a").iterdir()] == ["one.pdf"]


@pytest.mark.parametrize("engine", ENGINES)
def test_a_loop_is_ended(engine: Engine, tmp_path: Path) -> None:
    """TeX never ends some inputs by itself."""
    began = time.monotonic()
    with pytest.raises(OutsideError, match=r"took longer than 2 s over loop and was ended \(i\.yaml:3\)"):
        compile_tex(page(engine, "% @src i.yaml:3\n\\def\\a{\\a}\\a"), "loop", tmp_path, engine, 2.0)
    assert time.monotonic() - began < 10
    assert not (tmp_path / "loop.pdf").exists()


@pytest.mark.parametrize("engine", ENGINES)
@pytest.mark.parametrize(
    ("wrong", "said"),
    [
        (r"\nosuch", r"Undefined control sequence \nosuch"),
        ("x_2", "Missing $ inserted"),
        (r"\textbf{a", r"File ended while scanning use of \textbf"),
        (r"\input{/etc/hostname}", "/etc/hostname"),
        (r"\usepackage{x}", "Can be used only in preamble"),
    ],
)
def test_errors_name_the_item(engine: Engine, wrong: str, said: str, tmp_path: Path) -> None:
    """One line: the nearest origin above, and what TeX said; files elsewhere cannot be read."""
    body = f"% @src first.yaml:2\nFine.\n\n% @src second.yaml:7\n\n{wrong}\n\n% @src third.yaml:9\nFine.\n"
    with pytest.raises(OutsideError) as caught:
        compile_tex(page(engine, body), "paper", tmp_path, engine)
    assert caught.value.message.startswith("second.yaml:7: ")
    assert said in caught.value.message
    assert "\n" not in caught.value.message
    assert list(tmp_path.iterdir()) == []


def test_a_character_without_a_font_is_named(tmp_path: Path) -> None:
    """LuaTeX would leave a blank and say nothing."""
    body = "% @src a.yaml:1\nFine.\n\n% @src b.yaml:2\nA \N{GRINNING FACE}\n% @src c.yaml:3\nmore\n"
    with pytest.raises(OutsideError, match=r"^b\.yaml:2: no installed font has the character .* \(U\+1F600\)"):
        compile_tex(page("lualatex", body), "paper", tmp_path, "lualatex")


@pytest.mark.parametrize("engine", ENGINES)
def test_missing_engine_names_its_packages(engine: Engine, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Without TeX the error says what to install."""
    source = page(engine, "x")
    monkeypatch.setenv("PATH", str(tmp_path))
    assert find_engine(engine) is None
    with pytest.raises(OutsideError, match=r"apt install .*texlive-latex-recommended"):
        compile_tex(source, "paper", tmp_path, engine)


@pytest.mark.parametrize("together", [False, True])
def test_an_interrupt_leaves_no_process_behind(together: bool, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Ctrl-C ends TeX too, also where it runs beside another document."""
    started: list[subprocess.Popen[bytes]] = []

    class Watched(subprocess.Popen[bytes]):
        def __init__(self, *args: Any, **options: Any) -> None:
            super().__init__(*args, **options)
            started.append(self)

    monkeypatch.setattr("authoring.press.tex.subprocess.Popen", Watched)
    job = Job(page("pdflatex", r"\def\a{\a}\a"), "loop", "pdflatex")
    timer = threading.Timer(0.7, os.kill, (os.getpid(), signal.SIGINT))
    timer.start()
    with pytest.raises(KeyboardInterrupt):
        if together:
            compile_many([job, job], tmp_path, 30.0)
        else:
            compile_tex(job.source, job.name, tmp_path, job.engine, 30.0)
    assert len(started) == (2 if together and (os.cpu_count() or 1) > 1 else 1)
    assert all(process.wait(5) == -signal.SIGKILL for process in started)


def test_missing_package_names_what_to_install() -> None:
    """A TeX installation without a package we load is an installation matter, not the item's."""
    log = "./paper.tex:2: LaTeX Error: File `booktabs.sty' not found.\n"
    assert explain(log, "a\nb\n", "pdflatex").startswith("TeX has no booktabs.sty; on Debian: apt install")


def test_references_are_settled(tmp_path: Path) -> None:
    """A page number that is known only after a run gets printed in the same call."""
    made = compile_tex(page("pdflatex", r"of \pageref{end}\newpage two\label{end}"), "paper", tmp_path, "pdflatex")
    assert "of 2" in PdfReader(made).pages[0].extract_text()


def test_many_documents(tmp_path: Path) -> None:
    """Several documents are set side by side and come back in order."""
    jobs = [Job(page("pdflatex", f"number {i}"), f"doc{i}", "pdflatex") for i in range(4)]
    made = compile_many(jobs, tmp_path)
    assert [path.name for path in made] == ["doc0.pdf", "doc1.pdf", "doc2.pdf", "doc3.pdf"]
    assert "number 3" in PdfReader(made[3]).pages[0].extract_text()


def test_one_error_ends_the_others(tmp_path: Path) -> None:
    """Nobody waits for a document that will be thrown away."""
    began = time.monotonic()
    jobs = [
        Job(page("pdflatex", "% @src i.yaml:1\n\\nosuch"), "wrong", "pdflatex"),
        Job(page("pdflatex", r"\def\a{\a}\a"), "loop", "pdflatex"),
    ]
    with pytest.raises(OutsideError, match=r"^i\.yaml:1: "):
        compile_many(jobs, tmp_path, 60.0)
    assert time.monotonic() - began < 20


@pytest.mark.parametrize("engine", ENGINES)
def test_type_sizes(engine: Engine, tmp_path: Path) -> None:
    """The running text has the size asked for, also sizes the document classes do not know."""
    sizes: set[float] = set()
    for size in (10, 14, 20):
        made = compile_tex(page(engine, "words", size), f"size{size}", tmp_path, engine)
        PdfReader(made).pages[0].extract_text(visitor_text=lambda *args: sizes.add(round(args[4])) if args[0] else None)
    assert {10, 14, 20} <= sizes


@pytest.mark.parametrize("size", [9, 21])
def test_other_type_sizes_are_refused(size: int) -> None:
    """Too small to read, or too large for a page."""
    with pytest.raises(ContentError, match="type size"):
        preamble("pdflatex", "a4", size)


def test_letter_and_a4(tmp_path: Path) -> None:
    """The page is as large as the paper."""
    source = f"{preamble('pdflatex', 'letter', 11)}\\begin{{document}}x\\end{{document}}"
    assert PdfReader(compile_tex(source, "l", tmp_path, "pdflatex")).pages[0].mediabox.width == pytest.approx(612, 0.01)
    made = compile_tex(page("pdflatex", "x"), "a", tmp_path, "pdflatex")
    assert PdfReader(made).pages[0].mediabox.width == pytest.approx(595.28, 0.01)
