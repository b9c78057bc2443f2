"""Stage 8, mark: transcribed scripts: what one candidate wrote, part by part, and what scripts call their parts."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from functools import lru_cache
from pathlib import Path
from typing import Protocol

from authoring.faults import Fault, FaultsFound, Source
from authoring.specs.texts import read_text

# A pile of 10,000 scripts of six parts is 2 MB.
MOST_BYTES = 50_000_000
# What an entry says besides its parts.
HEAD = ("paper", "candidate", "marker")
_LABEL = re.compile(r"\(?\s*([1-9][0-9]?)?[\s.]*\(?([a-z]{0,2})\)?\.?", re.IGNORECASE)


class Places(Protocol):
    """Where a script stands in its file; worked out when it is asked for."""

    def entry(self) -> Source:
        """The script."""

    def label(self, label: str) -> Source:
        """The label of a part."""

    def line(self, label: str, at: int) -> Source:
        """A line of a part."""


@dataclass(frozen=True, slots=True)
class Script:
    """What one candidate wrote: part label → lines, in the order of the file; labels are canonical (`2b`, `a`)."""

    paper: str
    answers: Mapping[str, tuple[str, ...]]
    places: Places = field(compare=False, repr=False)
    candidate: str = ""
    marker: str = ""


@dataclass(frozen=True, slots=True)
class ScriptFile:
    """The scripts of a file that could be read, and what is wrong with the rest."""

    scripts: tuple[Script, ...]
    faults: tuple[Fault, ...] = ()


@lru_cache(maxsize=1024)
def canonical_label(text: str) -> str | None:
    """`2b` for `2b`, `2(b)`, `2 B`; `b` for `(b)`; `2` for an item of one part; None for anything else."""
    found = _LABEL.fullmatch(text.strip())
    if found is None or not (found[1] or found[2]):
        return None
    return (found[1] or "") + found[2].lower()


def resolve_label(label: str, known: Sequence[str]) -> str | None:
    """The paper's own label for what a script calls `label`; None where there is none, or more than one."""
    if label in known:
        return label
    if label.isalpha():
        fits = [each for each in known if each.lstrip("0123456789") == label]
    else:
        fits = [each for each in known if "1" + each == label]
        fits = fits or [each for each in known if label.isdigit() and each == label + "a"]
    return fits[0] if len(fits) == 1 else None


def read_scripts(path: Path) -> ScriptFile:
    """The scripts in a file. Raises UsageError where it cannot be opened; everything else is a fault in the result."""
    try:
        text = read_text(path, MOST_BYTES)
    except FaultsFound as found:
        return ScriptFile((), found.faults)
    if path.suffix.lower() in (".csv", ".tsv"):
        from authoring.marking.script_table import parse_table

        return parse_table(text, str(path))
    from authoring.marking.script_yaml import parse_scripts

    return parse_scripts(text, str(path))


def write_blank_form(papers: Iterable[tuple[str, Sequence[str]]], candidates: Mapping[str, str] | None = None) -> str:
    """A blank YAML form for a set: for each paper (code, part labels) an entry to fill in.

    `candidates` gives the candidate id of a paper, where there is one; names never stand in it.
    """
    ids = candidates or {}
    pieces = [
        "# One entry a paper. After each part write what the candidate wrote: a line, or several, one under the\n"
        "# other after `- `. `ok` means: exactly as the key. `~~3.40~~ 3.30`: crossed out, then written. Leave blank\n"
        "# what the candidate left blank. Text with `: ` or ` #` in it, or that begins with a sign like [ or -, is\n"
        "# safest in 'single quotes'.\n"
    ]
    for code, labels in papers:
        owner = f"  candidate: {_quoted(ids[code])}\n" if ids.get(code) else ""
        pieces.append(f"- paper: {_quoted(code)}\n{owner}" + "".join(f"  {label}:\n" for label in labels))
    return "\n".join(pieces)


def _quoted(text: str) -> str:
    """Text that YAML reads back as it is."""
    return text if re.fullmatch(r"[A-Za-z0-9][A-Za-z0-9_.-]*", text) else "'" + text.replace("'", "''") + "'"
