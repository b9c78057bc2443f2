"""Stage 8, mark: an entry of a file of scripts read line by line, without the YAML parser.

Two readers. `certain_entry` takes the plain forms alone, of which YAML says the same, in a tenth of its time.
`loose_entry` takes what is no YAML at all as it stands, since handwriting begins with brackets and signs.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from authoring.faults import Source
from authoring.marking.scripts import HEAD, Script, canonical_label

Answers = dict[str, tuple[str, ...]]

# Characters that a plain text in YAML does not begin with, or that are better left to its parser there.
_SIGNS = frozenset("!&*-?|>@`\"'%#{}[],: ")
_NEGATIVE = re.compile(r"-[0-9.]")
_LISTED = re.compile(r"""\[(?: *(?:"[^"\\]*"|'[^']*') *,)* *(?:"[^"\\]*"|'[^']*') *\]""")
_MEMBER = re.compile(r""""([^"\\]*)"|'([^']*)'""")
LONGEST_HEAD = 200
MOST_LINES = 200

# A line of an entry in its simplest form, so that `b: [Ar] 3d3` or `b: - 4.81` can be taken as it stands.
_PLAIN_LINE = re.compile(r"(?P<lead> *(?:- +)?)(?P<key>[A-Za-z0-9().]{1,12}) *:(?: +(?P<text>.*?))? *")
_PLAIN_ITEM = re.compile(r" +- +(?P<text>.*?) *")
COMMENT = re.compile(r"\s#.*$|^#.*$")


# --- what YAML says too ------------------------------------------------------------------------------------


def certain_entry(lines: Sequence[str], indent: int) -> tuple[dict[str, str], Answers] | None:
    """The head and the answers of an entry whose dash stands at `indent`; None where only YAML can tell."""
    margin = " " * (indent + 2)
    head: dict[str, str] = {}
    answers: Answers = {}
    listing = _Listing("")
    for row, line in enumerate(lines):
        if "\t" in line or (row and line[: indent + 2] != margin and line.strip(" ")):
            return None
        rest = line[indent + 2 :]
        if listing.label and rest[:1] in ("-", " ") and rest.strip(" "):
            if not listing.takes(rest):
                return None
            answers[listing.label] = tuple(listing.texts)
            continue
        key, colon, rest = rest.partition(":")
        if not colon and not key.strip(" "):
            continue
        texts = _texts(rest) if colon and rest[:1] in ("", " ") else None
        if texts is None:
            return None
        listing = _Listing("")
        if key in HEAD:
            if key in head or "[" in rest or len(texts[0]) > LONGEST_HEAD:
                return None
            head[key] = texts[0].strip()
            continue
        name = canonical_label(key) if key.isascii() and key.isalnum() else None
        if name is None or name in answers:
            return None
        answers[name] = texts
        if not rest.strip(" "):
            listing = _Listing(name)
    return (head, answers) if head.get("paper") else None


class _Listing:
    """The lines of a part that stand one under the other, after `- `."""

    __slots__ = ("column", "label", "texts")

    def __init__(self, label: str) -> None:
        self.label = label
        self.column = -1
        self.texts: list[str] = []

    def takes(self, line: str) -> bool:
        """Whether a line is one of them: in the same column, and text."""
        bare = line.lstrip(" ")
        column = len(line) - len(bare)
        text = _scalar(bare[2:].strip(" ")) if bare.startswith("- ") else None
        if text is None or self.column not in (-1, column) or len(self.texts) == MOST_LINES:
            return False
        self.column = column
        self.texts.append(text)
        return True


def _texts(rest: str) -> tuple[str, ...] | None:
    """What stands after a key's colon: a text, nothing, or a list of quoted texts."""
    value = rest.strip(" ")
    if value.startswith("["):
        if not _LISTED.fullmatch(value):
            return None
        found = tuple([one or other for one, other in _MEMBER.findall(value)])
        return found if len(found) <= MOST_LINES else None
    text = _scalar(value) if value else ""
    return None if text is None else (text,)


def _scalar(value: str) -> str | None:
    """A text on one line, plain or in quotes."""
    first = value[:1]
    if first == "'":
        inner = value[1:-1].replace("''", "\0")
        return inner.replace("\0", "'") if len(value) > 1 and value[-1] == "'" and "'" not in inner else None
    if first == '"':
        inner = value[1:-1]
        return inner if len(value) > 1 and value[-1] == '"' and '"' not in inner and "\\" not in inner else None
    if first in _SIGNS and not _NEGATIVE.match(value):
        return None
    if not value or ": " in value or " #" in value or value[-1] == ":":
        return None
    return value


# --- what is no YAML ---------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class LinePlaces:
    """The places of an entry that was read loosely."""

    start: Source
    labels: Mapping[str, Source]
    texts: Mapping[str, tuple[Source, ...]]

    def entry(self) -> Source:
        """The entry's first line."""
        return self.start

    def label(self, label: str) -> Source:
        """The label of a part."""
        return self.labels[label]

    def line(self, label: str, at: int) -> Source:
        """A line of a part."""
        return self.texts[label][at]


def loose_entry(lines: Sequence[str], path: str, offset: int) -> Script | None:
    """An entry that is no YAML but plain `key: text` lines, its texts as they stand; None where it is neither."""
    head: dict[str, str] = {}
    answers: Answers = {}
    labels: dict[str, Source] = {}
    texts: dict[str, tuple[Source, ...]] = {}
    label, listing, column = "", False, 0
    for row, line in enumerate(lines):
        bare = COMMENT.sub("", line)
        if not bare.strip():
            continue
        source = Source(path, offset + row + 1, len(line) - len(line.lstrip()) + 1, line)
        if listing and (found := _PLAIN_ITEM.fullmatch(bare)):
            answers[label] = (*answers[label], _unquoted(found["text"]))
            texts[label] = (*texts[label], replace(source, column=found.start("text") + 1))
            continue
        found = _PLAIN_LINE.fullmatch(bare)
        if found is None or ("-" in found["lead"]) != (row == 0) or _half_quoted(found["text"] or ""):
            return None
        column = found.start("key") if row == 0 else column
        if found.start("key") != column:
            return None
        if found["key"] in HEAD and found["key"] not in head:
            head[found["key"]] = _unquoted(found["text"] or "")
            continue
        name = canonical_label(found["key"])
        if name is None or name in answers:
            return None
        label, listing = name, not found["text"]
        answers[label] = () if listing else (_unquoted(found["text"]),)
        texts[label] = () if listing else (replace(source, column=found.start("text") + 1),)
        labels[label] = source
    if not head.get("paper"):
        return None
    places = LinePlaces(Source(path, offset + 1, 1, lines[0]), labels, texts)
    return Script(head["paper"], answers, places, head.get("candidate", ""), head.get("marker", ""))


def _half_quoted(text: str) -> bool:
    return text[:1] in ("'", '"') and (len(text) < 2 or text[-1] != text[0])


def _unquoted(text: str) -> str:
    if len(text) >= 2 and text[0] == text[-1] and text[0] in "'\"":
        return text[1:-1]
    return text
