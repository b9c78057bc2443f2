"""Stage 8, mark: files of transcribed scripts in YAML, every line with its place.

What can be read is read: a broken entry is a fault at its place, and the entries around it stand.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import partial
from itertools import pairwise
from typing import Any

from authoring.faults import Fault, FaultsFound, Source, suggestion
from authoring.marking.script_lines import COMMENT, LONGEST_HEAD, MOST_LINES, certain_entry, loose_entry
from authoring.marking.scripts import HEAD, Script, ScriptFile, canonical_label
from authoring.specs.texts import find_control, unify_breaks
from authoring.specs.yaml_tree import Tree, parse_tree

_ENTRY = re.compile(r"( *)-(?: |$)")
# Faults that a sign of handwriting may be the reason of (`[Ar] 3d3`, `- 4.81`, `*`, `> 3`).
_ONLY_SIGNS = frozenset(("yaml-syntax", "yaml-alias", "yaml-tag", "yaml-folded"))
_QUOTED_LIST = re.compile(r"\[\s*[\"']")


def parse_scripts(text: str, path: str) -> ScriptFile:
    """The scripts in a YAML text; `path` is what their places say."""
    text = unify_breaks(text.removeprefix("\ufeff"))
    lines = text.split("\n")
    starts = _entry_starts(lines)
    if starts and not _before(lines, starts, path) and not find_control(text):
        read = _entry_by_entry(lines, starts, path)
        if read is not None:
            return read
    try:
        tree = parse_tree(text, path)
    except FaultsFound as found:
        return _in_pieces(lines, starts, path) if starts else ScriptFile((), found.faults)
    if not isinstance(tree.data, list):
        if not tree.data:
            return ScriptFile((), (Fault("scripts-none", "there are no scripts in this file", tree.at()),))
        message = "a file of scripts is a list: each script begins with `- paper: …`"
        return ScriptFile((), (Fault("scripts-list", message, tree.at()),))
    return gathered(tree, 0)


def _entry_starts(lines: Sequence[str]) -> list[int]:
    indent: int | None = None
    starts = []
    for row, line in enumerate(lines):
        if found := _ENTRY.match(line):
            indent = len(found[1]) if indent is None else indent
            if len(found[1]) == indent:
                starts.append(row)
    return starts


def _before(lines: Sequence[str], starts: Sequence[int], path: str) -> list[Fault]:
    """What is wrong with the lines before the first entry."""
    before = [line for line in lines[: starts[0]] if line.strip() and not line.lstrip().startswith("#")]
    if not before or before == ["---"]:
        return []
    return [Fault("scripts-list", "this stands before the first script", Source(path, 1, 1, lines[0]))]


def _pieces(lines: Sequence[str], starts: Sequence[int]) -> Iterator[tuple[int, Sequence[str]]]:
    for start, end in pairwise((*starts, len(lines))):
        yield start, lines[start:end]


def _entry_by_entry(lines: Sequence[str], starts: Sequence[int], path: str) -> ScriptFile | None:
    """Every entry by itself, most without the YAML parser; None where one of them is no YAML by itself."""
    indent = len(lines[starts[0]]) - len(lines[starts[0]].lstrip(" "))
    scripts: list[Script] = []
    faults: list[Fault] = []
    for start, piece in _pieces(lines, starts):
        certain = certain_entry(piece, indent)
        if certain is not None:
            head, answers = certain
            places = TreePlaces(partial(parse_tree, "\n".join(piece), path), 0, start)
            scripts.append(Script(head["paper"], answers, places, head.get("candidate", ""), head.get("marker", "")))
            continue
        try:
            read = _parsed(piece, path, start)
        except FaultsFound:
            return None
        scripts += read.scripts
        faults += read.faults
    return ScriptFile(tuple(scripts), tuple(faults))


def _in_pieces(lines: Sequence[str], starts: Sequence[int], path: str) -> ScriptFile:
    """The entries one by one, each by the YAML parser, or as plain lines, or given up with its faults."""
    scripts: list[Script] = []
    faults = _before(lines, starts, path)
    for start, piece in _pieces(lines, starts):
        try:
            read = _parsed(piece, path, start)
        except FaultsFound as found:
            only_signs = all(fault.code in _ONLY_SIGNS for fault in found.faults)
            loose = loose_entry(piece, path, start) if only_signs else None
            read = (
                ScriptFile((loose,)) if loose else ScriptFile((), tuple(_moved(each, start) for each in found.faults))
            )
        scripts += read.scripts
        faults += read.faults
    return ScriptFile(tuple(scripts), tuple(faults))


def _parsed(lines: Sequence[str], path: str, offset: int) -> ScriptFile:
    """The scripts of some lines by the YAML parser. Raises FaultsFound, its places as if the lines were a file."""
    tree = parse_tree("\n".join(lines), path)
    if not isinstance(tree.data, list):
        return ScriptFile((), (Fault("scripts-list", "this is no script", _shifted(tree.at(), offset)),))
    return gathered(tree, offset)


def _moved(fault: Fault, offset: int) -> Fault:
    return replace(fault, source=_shifted(fault.source, offset)) if fault.source else fault


def _shifted(source: Source, offset: int) -> Source:
    return replace(source, line=source.line + offset) if offset else source


@dataclass(frozen=True, slots=True)
class TreePlaces:
    """The places of an entry of a tree whose first line is line `offset` of the file."""

    tree: Callable[[], Tree]
    index: int
    offset: int

    def entry(self) -> Source:
        """The entry."""
        return _shifted(self.tree().at((self.index,)), self.offset)

    def label(self, label: str) -> Source:
        """The label of a part."""
        tree = self.tree()
        return _shifted(tree.key_at((self.index, self._key(tree, label))), self.offset)

    def line(self, label: str, at: int) -> Source:
        """A line of a part."""
        tree = self.tree()
        path = (self.index, self._key(tree, label))
        value = _value(tree, *path)
        if isinstance(value, str) and "\n" in value:
            return _shifted(tree.block_line(path, at), self.offset)
        return _shifted(tree.at((*path, at)), self.offset)

    def _key(self, tree: Tree, label: str) -> str:
        """A label as it is written."""
        keys: dict[str, object] = _value(tree, self.index)
        return next(key for key in keys if key not in HEAD and canonical_label(key) == label)


def _value(tree: Tree, *steps: str | int) -> Any:
    found: Any = tree.data
    for step in steps:
        found = found[step]
    return found


def gathered(tree: Tree, offset: int) -> ScriptFile:
    """The scripts and faults of a tree whose data is a list, and whose first line is line `offset` of its file."""
    all_of_it = _Gathered(tree, offset)
    for index in range(len(tree.data)):
        all_of_it.entry(index)
    return ScriptFile(tuple(all_of_it.scripts), tuple(all_of_it.faults))


class _Gathered:
    """Scripts and faults of one tree."""

    def __init__(self, tree: Tree, offset: int) -> None:
        self.tree = tree
        self.offset = offset
        self.scripts: list[Script] = []
        self.faults: list[Fault] = []

    def complain(self, code: str, message: str, source: Source) -> None:
        self.faults.append(Fault(code, message, _shifted(source, self.offset)))

    def entry(self, index: int) -> None:
        entry = _value(self.tree, index)
        if not isinstance(entry, dict):
            self.complain(
                "script-entry", "a script begins with `- paper: …`, then a line a part", self.tree.at((index,))
            )
            return
        head = {name: self.head(index, entry, name) for name in HEAD}
        answers: dict[str, tuple[str, ...]] = {}
        for key, value in entry.items():
            if key in HEAD:
                continue
            label = canonical_label(key)
            if label is None:
                message = f"{key[:40]!r} is no part label (like `a`, `2b`)" + suggestion(key, HEAD)
                self.complain("script-label", message, self.tree.key_at((index, key)))
            elif label in answers:
                self.complain(
                    "script-label", f"part {label} stands twice in this script", self.tree.key_at((index, key))
                )
            else:
                answers[label] = self.lines(index, key, value)
        if not head["paper"]:
            self.complain("script-paper", "this script does not say its paper (`paper: …`)", self.tree.at((index,)))
            return
        places = TreePlaces(lambda: self.tree, index, self.offset)
        self.scripts.append(Script(head["paper"], answers, places, head["candidate"], head["marker"]))

    def head(self, index: int, entry: Mapping[str, object], name: str) -> str:
        value = entry.get(name, "")
        if isinstance(value, str) and "\n" not in value and len(value) <= LONGEST_HEAD:
            return value.strip()
        self.complain("script-entry", f"`{name}` is text on one line", self.tree.at((index, name)))
        return ""

    def lines(self, index: int, key: str, value: object) -> tuple[str, ...]:
        """The lines of one part: a text, a text block, or a list of texts."""
        if isinstance(value, str):
            return tuple(value.rstrip("\n").split("\n")[:MOST_LINES]) if "\n" in value else (value,)
        source = self.tree.at((index, key))
        written = source.text[source.column - 1 :]
        if written[:1] in ("[", "{") and not _QUOTED_LIST.match(written):
            # `[Ar]` and `{2s,2p}` are YAML brackets only by accident; the candidate's line is what stands there.
            return (COMMENT.sub("", written).strip(),)
        if isinstance(value, list) and all(isinstance(line, str) for line in value) and len(value) <= MOST_LINES:
            return tuple(value)
        message = f"part {key}: a line, or a list of at most {MOST_LINES} lines"
        self.complain("script-lines", message, source)
        return ()
