"""Faults and errors: below every room; what is wrong, where it stands, and how the program ends.

Mistakes in what people write are *values* (`Fault`), gathered and shown together. An exception means that
the work cannot go on: `ContentError` is raised low down, where no file is known, and becomes a fault at the
place of the text that caused it; `UsageError` and `OutsideError` end the command with their exit code.
"""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Literal

Severity = Literal["fault", "weakness"]


@dataclass(frozen=True, slots=True)
class Source:
    """A place in a text file: 1-based line and column; `text` is the source line as it stands there."""

    path: str
    line: int
    column: int
    text: str = field(default="", compare=False, repr=False)

    def __str__(self) -> str:
        return f"{self.path}:{self.line}:{self.column}"


class ShieldwrightError(Exception):
    """The base of every error that is the user's or the machine's, not ours; carries the exit code."""

    exit_code = 2

    def __init__(self, message: str) -> None:
        super().__init__(message)
        self.message = message


class ContentError(ShieldwrightError, ValueError):
    """A word or value that cannot be used, without a place yet.

    `word` is the offending text; `allowed` the words that would have done (the nearest one is offered).
    """

    exit_code = 1

    def __init__(self, message: str, word: str = "", allowed: Iterable[str] = ()) -> None:
        super().__init__(message)
        self.word = word
        self.allowed = tuple(allowed)

    @property
    def full_message(self) -> str:
        """The message with the nearest allowed word, or with the list where it is short."""
        return self.message + suggestion(self.word, self.allowed)


class UsageError(ShieldwrightError):
    """Wrong usage or unreadable input: exit code 2."""

    exit_code = 2


class OutsideError(ShieldwrightError):
    """An outside program is missing, failed or took too long: exit code 3."""

    exit_code = 3


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that is wrong or weak, at its place.

    `code` is a stable kebab-case name; a `fault` stops the work, a `weakness` is only reported.
    """

    code: str
    message: str
    source: Source | None = None
    severity: Severity = "fault"

    @classmethod
    def from_error(cls, code: str, error: ContentError, source: Source | None) -> Fault:
        """The fault that a low-level error becomes once its place is known."""
        return cls(code, error.full_message, source)


class FaultsFound(ShieldwrightError):
    """Raised by a reader after gathering: everything that is wrong with what it read."""

    exit_code = 1

    def __init__(self, faults: Sequence[Fault]) -> None:
        self.faults = tuple(faults)
        super().__init__(f"{len(self.faults)} fault(s)")


def suggestion(word: str, allowed: Sequence[str]) -> str:
    """The tail of a message: `; did you mean 'x'?`, or the allowed words where they are few."""
    if not allowed:
        return ""
    lowered = {name.lower(): name for name in allowed}
    near = difflib.get_close_matches(word.lower(), lowered, n=1, cutoff=0.6) if word else []
    if near:
        return f"; did you mean {lowered[near[0]]!r}?"
    if len(allowed) <= 12:
        return "; one of: " + ", ".join(allowed)
    return ""


def render_fault(fault: Fault) -> str:
    """`path:line:column: message [code]`, then the source line with a caret; at most 3 lines, no colour."""
    tag = "" if fault.severity == "fault" else "weakness: "
    if fault.source is None:
        return f"{tag}{fault.message} [{fault.code}]"
    head = f"{fault.source}: {tag}{fault.message} [{fault.code}]"
    if not fault.source.text.strip():
        return head
    shown, caret = _window(fault.source.text, fault.source.column)
    return f"{head}\n    {shown}\n    {' ' * caret}^"


def render_faults(faults: Iterable[Fault]) -> str:
    """All faults in file order, one after the other, and a closing count where there are several."""
    ordered = sorted(faults, key=_place)
    text = "\n".join(render_fault(fault) for fault in ordered)
    weak = sum(fault.severity == "weakness" for fault in ordered)
    counts = [(len(ordered) - weak, "fault", "faults"), (weak, "weakness", "weaknesses")]
    closing = ", ".join(f"{count} {one if count == 1 else several}" for count, one, several in counts if count)
    return text if len(ordered) < 2 else f"{text}\n{closing}"


def _place(fault: Fault) -> tuple[str, int, int]:
    if fault.source is None:
        return ("", 0, 0)
    return (str(Path(fault.source.path)), fault.source.line, fault.source.column)


def _window(text: str, column: int, width: int = 76) -> tuple[str, int]:
    """The part of a source line around a column that fits a terminal, with control characters made visible."""
    clean = "".join(c if c.isprintable() else "\N{REPLACEMENT CHARACTER}" for c in text.rstrip("\n").replace("\t", " "))
    at = max(0, min(column - 1, len(clean)))
    start = max(0, at - width // 2) if len(clean) > width else 0
    piece = clean[start : start + width]
    return piece, at - start
