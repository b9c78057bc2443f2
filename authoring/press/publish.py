"""Press: everything that a set prints, written into a folder: sheets and key as LaTeX, PDF and HTML."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path

from authoring.faults import OutsideError
from authoring.papers.assemble import PaperSet, Progress
from authoring.press.glyphs import place_of
from authoring.press.html_documents import write_key_html, write_sheets_html
from authoring.press.latex_documents import key_job, sheets_job
from authoring.press.split import split_pdf
from authoring.press.tex import PACKAGES, Compiling, Engine, Job, NoGlyph, find_engine

SPLIT_FOLDER = "candidates"
_TIME_LIMIT = 600.0
# A thousand papers of a few pages take TeX a minute at most; ten times that on a slow machine.
_TIME_PER_PAPER = 0.6
_ROUNDS = 4  # each paper is written four times: sheet and key, in LaTeX and in HTML


@dataclass(frozen=True, slots=True)
class Published:
    """What was written, as names below the folder; `missing` says which outside program was not there, and how to
    get it, where the PDFs are wanting."""

    files: tuple[str, ...]
    engines: tuple[tuple[str, Engine], ...]
    missing: str = ""


def publish(
    paper_set: PaperSet,
    into: Path,
    *,
    split: bool = False,
    progress: Progress | None = None,
    time_limit: float | None = None,
) -> Published:
    """Write everything printed of a set into an existing folder; `time_limit` in seconds is for each PDF (without it,
    600, or 0.6 for each paper where that is more).

    `split` also writes `candidates/CODE.pdf` for each paper. Without TeX the PDFs are left out and `missing` says so.
    Raises OutsideError where TeX fails, ContentError for a text that cannot be printed or an unknown language.
    """
    tick = _counted(progress, len(paper_set.papers) * _ROUNDS)
    limit = time_limit or max(_TIME_LIMIT, _TIME_PER_PAPER * len(paper_set.papers))
    try:
        jobs, files = _printed(paper_set, into, limit, tick)
    except NoGlyph as error:
        place = place_of(error.character, paper_set)
        raise OutsideError(f"{place}: {error.message}" if place else error.message) from error
    missing = _missing(jobs)
    if split and "sheets.pdf" in files:
        files += _split(paper_set, into)
    engines = tuple((job.name, job.engine) for job in jobs)
    return Published(tuple(sorted(files)), engines, missing)


def _printed(paper_set: PaperSet, into: Path, limit: float, tick: Callable[[], None]) -> tuple[list[Job], list[str]]:
    """Both documents in every form; TeX sets the sheets while the key is still being written."""
    jobs: list[Job] = []
    files = ["sheets.html", "key.html"]
    with Compiling(into, limit) as compiling:
        for make in (sheets_job, key_job):
            jobs.append(make(paper_set, tick))
            files.append(_write_source(jobs[-1], into))
            if find_engine(jobs[-1].engine):
                compiling.start(jobs[-1])
        write_sheets_html(paper_set, into / "sheets.html", tick)
        write_key_html(paper_set, into / "key.html", tick)
        files += [path.name for path in compiling.finished()]
    return jobs, files


def page_ranges(pdf: Path) -> dict[str, tuple[int, int]]:
    """First and last page (from 1) of each paper in a PDF of sheets or keys, from its bookmarks."""
    from pypdf import PdfReader

    reader = PdfReader(pdf)
    marks = [entry for entry in reader.outline if not isinstance(entry, list)]
    starts = [(str(entry.title), reader.get_destination_page_number(entry)) for entry in marks]
    ends = [start for _, start in starts[1:]] + [len(reader.pages)]
    return {code: ((start or 0) + 1, end or 0) for (code, start), end in zip(starts, ends, strict=True)}


def _split(paper_set: PaperSet, into: Path) -> list[str]:
    """One file for each paper, named by its code only: the names of files give nothing away."""
    pdf = into / "sheets.pdf"
    made = split_pdf(pdf, page_ranges(pdf), into / SPLIT_FOLDER)
    return [f"{SPLIT_FOLDER}/{path.name}" for path in made]


def _write_source(job: Job, into: Path) -> str:
    name = f"{job.name}.tex"
    (into / name).write_text(job.source, encoding="utf-8", newline="\n")
    return name


def _missing(jobs: Sequence[Job]) -> str:
    engines = dict.fromkeys(job.engine for job in jobs if find_engine(job.engine) is None)
    if not engines:
        return ""
    names = " and ".join(engines)
    packages = PACKAGES["lualatex" if "lualatex" in engines else "pdflatex"]
    return (
        f"the PDFs were not made, since {names} is not installed; "
        f"on Debian: apt install --no-install-recommends {packages}"
    )


def _counted(progress: Progress | None, total: int) -> Callable[[], None]:
    done = 0

    def tick() -> None:
        nonlocal done
        done += 1
        if progress is not None:
            progress(min(done, total), total)

    return tick
