"""Press: the TeX engines as outside programs: where they may read, how long they may run, and what their errors say.

A source carries `% @src file.yaml:LINE` comments; an error names the nearest one above it.
"""

from __future__ import annotations

import contextlib
import os
import re
import shutil
import signal
import subprocess
import sys
import tempfile
import threading
import time
from collections.abc import Sequence
from concurrent.futures import Future, ThreadPoolExecutor
from dataclasses import dataclass, field
from pathlib import Path
from typing import Literal, Self

from authoring.faults import OutsideError

Engine = Literal["pdflatex", "lualatex"]

_FONT_PACKAGES = "fonts-noto-core fonts-wqy-microhei"
PACKAGES: dict[Engine, str] = {
    "pdflatex": "texlive-latex-recommended lmodern",
    "lualatex": f"texlive-latex-recommended lmodern texlive-luatex {_FONT_PACKAGES}",
}
ORIGIN = "% @src "
_STEM = "paper"  # the same for every job, so that the PDF does not depend on names or places
_RERUNS = 3
_AGAIN = re.compile(rb"Rerun to get|Label\(s\) may have changed|Rerun LaTeX")
_ERROR = re.compile(rf"^(?:\./)?{_STEM}\.tex:(\d+): (.*)$", re.MULTILINE)
_CONTEXT = re.compile(r"^l\.\d+ ?(.*)$", re.MULTILINE)
_LOST = re.compile(r"Missing character: There is no (.) \(U\+([0-9A-F]+)\)", re.DOTALL)
_NO_FILE = re.compile(r"File [`']([^'/]+\.(?:sty|cls|def|fd|tfm))' not found")
_EPOCH = "946684800"  # 2000-01-01: any fixed moment will do


class NoGlyph(OutsideError):
    """No installed font has a character."""

    def __init__(self, message: str, character: str) -> None:
        super().__init__(message)
        self.character = character


@dataclass(frozen=True, slots=True)
class Job:
    """One document to set: its source, the stem of its PDF and the engine."""

    source: str
    name: str
    engine: Engine


@dataclass(slots=True)
class _Running:
    """The processes of one call, so that all can be ended when one fails or the user interrupts."""

    processes: set[subprocess.Popen[bytes]] = field(default_factory=set)
    stopped: bool = False
    lock: threading.Lock = field(default_factory=threading.Lock)

    def start(self, command: Sequence[str], cwd: Path) -> subprocess.Popen[bytes]:
        with self.lock:
            if self.stopped:
                raise OutsideError(f"{command[0]} was stopped before it began")
            process = subprocess.Popen(
                command,
                cwd=cwd,
                env=_environment(),
                stdin=subprocess.DEVNULL,
                stdout=subprocess.PIPE,
                stderr=subprocess.STDOUT,
                start_new_session=True,
            )
            self.processes.add(process)
            return process

    def end(self, process: subprocess.Popen[bytes]) -> None:
        with self.lock:
            if process in self.processes:
                self.processes.discard(process)
                _kill(process)

    def stop(self) -> None:
        with self.lock:
            self.stopped = True
            for process in self.processes:
                _kill(process)


def find_engine(wanted: str) -> str | None:
    """The full path of a TeX engine, or None where it is not installed."""
    return shutil.which(wanted)


def compile_tex(source: str, name: str, into: Path, engine: Engine, time_limit: float = 120.0) -> Path:
    """Set a document and put `name.pdf` into a folder; `time_limit` in seconds covers all runs together.

    Raises OutsideError (one line, naming the item) where the engine is missing, fails or takes too long.
    """
    return _compile(Job(source, name, engine), into, time_limit, _Running())


def compile_many(jobs: Sequence[Job], into: Path, time_limit: float = 120.0) -> tuple[Path, ...]:
    """Set several documents side by side, as many at once as there are processors; the first error ends them all."""
    with Compiling(into, time_limit) as compiling:
        for job in jobs:
            compiling.start(job)
        return compiling.finished()


class Compiling:
    """Documents set side by side while others are still being written; leaving by an error ends them all."""

    def __init__(self, into: Path, time_limit: float = 120.0) -> None:
        self._into = into
        self._time_limit = time_limit
        self._running = _Running()
        self._pool = ThreadPoolExecutor(max(1, os.cpu_count() or 1))
        self._waiting: list[Future[Path]] = []

    def __enter__(self) -> Self:
        return self

    def __exit__(self, kind: object, error: BaseException | None, trace: object) -> None:
        if error is not None:
            self._running.stop()
        self._pool.shutdown()

    def start(self, job: Job) -> None:
        """Begin a document as soon as a processor is free."""
        self._waiting.append(self._pool.submit(_compile, job, self._into, self._time_limit, self._running))

    def finished(self) -> tuple[Path, ...]:
        """Wait for all documents, in the order they were begun. Raises OutsideError of the first that failed."""
        return tuple(result.result() for result in self._waiting)


def _compile(job: Job, into: Path, time_limit: float, running: _Running) -> Path:
    program = find_engine(job.engine)
    if program is None:
        raise OutsideError(
            f"{job.engine} is not installed; on Debian: apt install --no-install-recommends {PACKAGES[job.engine]}"
        )
    deadline = time.monotonic() + time_limit
    with tempfile.TemporaryDirectory(prefix="press-") as scratch:
        folder = Path(scratch)
        (folder / f"{_STEM}.tex").write_text(job.source, encoding="utf-8")
        command = [
            program,
            "-interaction=nonstopmode",
            "-halt-on-error",
            "-file-line-error",
            "-no-shell-escape",
            f"{_STEM}.tex",
        ]
        for _ in range(1 + _RERUNS):
            output = _run(command, folder, job, deadline, time_limit, running)
            if not _AGAIN.search(output):
                break
        made = folder / f"{_STEM}.pdf"
        if not made.exists():
            raise OutsideError(f"{job.engine} made no pages for {job.name}")
        return _put(made, into / f"{job.name}.pdf")


def _run(
    command: Sequence[str], folder: Path, job: Job, deadline: float, time_limit: float, running: _Running
) -> bytes:
    process = running.start(command, folder)
    try:
        output, _ = process.communicate(timeout=max(0.01, deadline - time.monotonic()))
    except subprocess.TimeoutExpired:
        raise OutsideError(
            f"{job.engine} took longer than {time_limit:g} s over {job.name} and was ended{_last_origin(job.source)}"
        ) from None
    finally:
        running.end(process)
        if process.stdout:
            process.stdout.close()
        process.wait()
    if process.returncode:
        raise _failed(output.decode("utf-8", errors="replace"), job)
    return output


def _failed(log: str, job: Job) -> OutsideError:
    message, lost = explain(log, job.source, job.engine), _LOST.search(log)
    return NoGlyph(message, lost[1]) if lost else OutsideError(message)


def _last_origin(source: str) -> str:
    """The item, where the whole source is about one."""
    origins = {line[len(ORIGIN) :].strip() for line in source.splitlines() if line.startswith(ORIGIN)}
    return f" ({origins.pop()})" if len(origins) == 1 else ""


def _put(made: Path, target: Path) -> Path:
    """Move over whole: written beside the target first, then renamed."""
    target.parent.mkdir(parents=True, exist_ok=True)
    beside = target.with_name(f".{target.name}.part")
    shutil.copyfile(made, beside)
    beside.replace(target)
    return target


def _kill(process: subprocess.Popen[bytes]) -> None:
    """End a process and all it started; one that has ended already is left alone."""
    if process.poll() is not None:
        return
    with contextlib.suppress(ProcessLookupError):
        if sys.platform == "win32":
            process.kill()
        else:
            os.killpg(process.pid, signal.SIGKILL)


def _environment() -> dict[str, str]:
    """TeX may read and write below its folder only, and knows one date; a user's own settings stay otherwise."""
    folders = {
        "darwin": ("/System/Library/Fonts", "/Library/Fonts", "~/Library/Fonts"),
    }.get(sys.platform, ("/usr/share/fonts", "/usr/local/share/fonts", "~/.local/share/fonts"))
    fonts = os.pathsep.join(f"{Path(folder).expanduser()}//" for folder in folders)
    return {
        "OSFONTDIR": fonts,
        **os.environ,
        "openin_any": "p",
        "openout_any": "p",
        "shell_escape": "f",
        "max_print_line": "10000",
        "error_line": "254",
        "half_error_line": "238",
        "SOURCE_DATE_EPOCH": _EPOCH,
        "FORCE_SOURCE_DATE": "1",
    }


def explain(log: str, source: str, engine: Engine) -> str:
    """One line from a TeX log: where in the items it happened, and what TeX found."""
    error = _ERROR.search(log)
    where = _origin(source, int(error[1])) if error else _unbalanced(source)
    if lost := _LOST.search(log):
        # TeX notices at the end of the paragraph, which may be far below.
        where = _origin(source, source[: max(source.find(lost[1]), 0)].count("\n") + 1) or where
        what = f"no installed font has the character {lost[1]!r} (U+{lost[2]}); on Debian: apt install {_FONT_PACKAGES}"
    elif missing := _NO_FILE.search(log):
        what = f"TeX has no {missing[1]}; on Debian: apt install --no-install-recommends {PACKAGES[engine]}"
    elif error:
        what = f"{engine} stopped: {_message(log, error)}"
    else:
        plain = re.search(r"^! (.*)$", log, re.MULTILINE)
        what = f"{engine} stopped: {plain[1] if plain else 'no reason given'}"
    return f"{where}: {what}" if where else what


def _message(log: str, error: re.Match[str]) -> str:
    text = error[2].strip().rstrip(".")
    if text == "Emergency stop" and (before := re.search(r"^! (.*)$", log[: error.start()], re.MULTILINE)):
        return before[1].strip().rstrip(".")
    context = _CONTEXT.search(log, error.end())
    if not context or "Undefined control sequence" not in text:
        return text
    commands = re.findall(r"\\[A-Za-z@]+", context[1])
    return f"{text} {commands[-1]}" if commands else text


def _origin(source: str, line: int) -> str:
    """The place of the nearest `@src` comment at or above a line of the source."""
    for text in reversed(source.splitlines()[:line]):
        if text.startswith(ORIGIN):
            return text[len(ORIGIN) :].strip()
    return ""


def _unbalanced(source: str) -> str:
    """The first block whose braces do not match: a runaway argument has no line of its own in the log."""
    for block in re.split(rf"^(?={re.escape(ORIGIN)})", source, flags=re.MULTILINE)[1:]:
        bare = re.sub(r"\\.|(?<!\\)%.*", "", block)
        if bare.count("{") != bare.count("}"):
            return block.partition("\n")[0][len(ORIGIN) :].strip()
    return ""
