"""Stage 8, mark: files of transcribed scripts (YAML, or CSV of final answers), every line with its place.

What can be read is read: a broken entry is a fault at its place, and the entries around it stand.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path

from authoring.faults import Fault, FaultsFound, Source, suggestion
from authoring.specs.texts import read_text, unify_breaks
from authoring.specs.yaml_tree import Tree, parse_tree

# A pile of 10,000 scripts of six parts is 2 MB.
MOST_BYTES = 50_000_000
_MOST_LINES = 200
_HEAD = ("paper", "candidate", "marker")
_LABEL = re.compile(r"\(?\s*([1-9][0-9]?)?[\s.]*\(?([a-z]{0,2})\)?\.?", re.IGNORECASE)
_ENTRY = re.compile(r"( *)-(?: |$)")
# A line of an entry in its simplest form, so that `b: [Ar] 3d3` or `b: - 4.81` can be taken as it stands.
_PLAIN_LINE = re.compile(r"(?P<lead> *(?:- +)?)(?P<key>[A-Za-z0-9().]{1,12}) *:(?: +(?P<text>.*?))? *")
_PLAIN_ITEM = re.compile(r" +- +(?P<text>.*?) *")
# Faults that a sign of handwriting may be the reason of (`[Ar] 3d3`, `- 4.81`, `*`, `> 3`).
_ONLY_SIGNS = frozenset(("yaml-syntax", "yaml-alias", "yaml-tag", "yaml-folded"))
_QUOTED_LIST = re.compile(r"\[\s*[\"']")
_COMMENT = re.compile(r"\s#.*$|^#.*$")


@dataclass(frozen=True, slots=True)
class WrittenText:
    """One transcribed line and where it stands. The place is worked out when it is asked for."""

    text: str
    place: Callable[[], Source]

    @property
    def source(self) -> Source:
        """The line's place in its file."""
        return self.place()


@dataclass(frozen=True, slots=True)
class Script:
    """What one candidate wrote: part label → lines, in the order of the file; labels are canonical (`2b`, `a`).

    `label_places` gives the place of each part's label, for faults about it.
    """

    paper: str
    answers: Mapping[str, tuple[WrittenText, ...]]
    source: Source
    candidate: str = ""
    marker: str = ""
    label_places: Mapping[str, Callable[[], Source]] = field(default_factory=dict, compare=False, repr=False)


@dataclass(frozen=True, slots=True)
class ScriptFile:
    """The scripts of a file that could be read, and what is wrong with the rest."""

    scripts: tuple[Script, ...]
    faults: tuple[Fault, ...] = ()


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
    return parse_scripts(text, str(path))


def parse_scripts(text: str, path: str) -> ScriptFile:
    """The scripts in a YAML text; `path` is what their places say."""
    try:
        tree = parse_tree(text, path)
    except FaultsFound as found:
        return _in_pieces(unify_breaks(text), path, found)
    if not isinstance(tree.data, list):
        if not tree.data:
            return ScriptFile((), (Fault("scripts-none", "there are no scripts in this file", tree.at()),))
        message = "a file of scripts is a list: each script begins with `- paper: …`"
        return ScriptFile((), (Fault("scripts-list", message, tree.at()),))
    gathered = _Gathered(tree, 0)
    for index in range(len(tree.data)):
        gathered.entry(index)
    return ScriptFile(tuple(gathered.scripts), tuple(gathered.faults))


def _in_pieces(text: str, path: str, found: FaultsFound) -> ScriptFile:
    """The entries one by one, each by the YAML parser, or as plain lines, or given up with its faults."""
    lines = text.split("\n")
    starts = _entry_starts(lines)
    if not starts:
        return ScriptFile((), found.faults)
    scripts: list[Script] = []
    faults: list[Fault] = []
    before = [line for line in lines[: starts[0]] if line.strip() and not line.lstrip().startswith("#")]
    if before and before != ["---"]:
        faults.append(Fault("scripts-list", "this stands before the first script", Source(path, 1, 1, lines[0])))
    for start, end in zip(starts, [*starts[1:], len(lines)], strict=True):
        read = _piece(lines[start:end], path, start)
        scripts += read.scripts
        faults += read.faults
    return ScriptFile(tuple(scripts), tuple(faults))


def _entry_starts(lines: Sequence[str]) -> list[int]:
    indent: int | None = None
    starts = []
    for row, line in enumerate(lines):
        if found := _ENTRY.match(line):
            indent = len(found[1]) if indent is None else indent
            if len(found[1]) == indent:
                starts.append(row)
    return starts


def _piece(lines: Sequence[str], path: str, offset: int) -> ScriptFile:
    try:
        tree = parse_tree("\n".join(lines), path)
    except FaultsFound as found:
        plain = None
        if all(fault.code in _ONLY_SIGNS for fault in found.faults):
            plain = _plain_entry(lines, path, offset)
        return plain or ScriptFile((), tuple(_moved(fault, offset) for fault in found.faults))
    if not isinstance(tree.data, list):
        return ScriptFile((), (Fault("scripts-list", "this is no script", _shifted(tree.at(), offset)),))
    gathered = _Gathered(tree, offset)
    for index in range(len(tree.data)):
        gathered.entry(index)
    return ScriptFile(tuple(gathered.scripts), tuple(gathered.faults))


def _moved(fault: Fault, offset: int) -> Fault:
    return replace(fault, source=_shifted(fault.source, offset)) if fault.source else fault


def _shifted(source: Source, offset: int) -> Source:
    return replace(source, line=source.line + offset) if offset else source


class _Gathered:
    """Scripts and faults of one tree whose first line is line `offset` of its file."""

    def __init__(self, tree: Tree, offset: int) -> None:
        self.tree = tree
        self.offset = offset
        self.scripts: list[Script] = []
        self.faults: list[Fault] = []

    def complain(self, code: str, message: str, source: Source) -> None:
        self.faults.append(Fault(code, message, _shifted(source, self.offset)))

    def place(self, *steps: str | int, of_key: bool = False) -> Callable[[], Source]:
        tree, offset = self.tree, self.offset
        if of_key:
            return lambda: _shifted(tree.key_at(steps), offset)
        return lambda: _shifted(tree.at(steps), offset)

    def entry(self, index: int) -> None:
        entry = self.tree.data[index]  # type: ignore[index]
        if not isinstance(entry, dict):
            self.complain(
                "script-entry", "a script begins with `- paper: …`, then a line a part", self.tree.at((index,))
            )
            return
        head = {name: self.head(index, entry, name) for name in _HEAD}
        answers: dict[str, tuple[WrittenText, ...]] = {}
        places: dict[str, Callable[[], Source]] = {}
        for key, value in entry.items():
            if key in _HEAD:
                continue
            label = canonical_label(key)
            if label is None:
                message = f"{key[:40]!r} is no part label (like `a`, `2b`)" + suggestion(key, _HEAD)
                self.complain("script-label", message, self.tree.key_at((index, key)))
            elif label in answers:
                self.complain(
                    "script-label", f"part {label} stands twice in this script", self.tree.key_at((index, key))
                )
            else:
                answers[label] = self.lines(index, key, value)
                places[label] = self.place(index, key, of_key=True)
        if not head["paper"]:
            self.complain("script-paper", "this script does not say its paper (`paper: …`)", self.tree.at((index,)))
            return
        source = _shifted(self.tree.at((index,)), self.offset)
        self.scripts.append(Script(head["paper"], answers, source, head["candidate"], head["marker"], places))

    def head(self, index: int, entry: Mapping[str, object], name: str) -> str:
        value = entry.get(name, "")
        if isinstance(value, str) and "\n" not in value and len(value) <= 200:
            return value.strip()
        self.complain("script-entry", f"`{name}` is text on one line", self.tree.at((index, name)))
        return ""

    def lines(self, index: int, key: str, value: object) -> tuple[WrittenText, ...]:
        """The lines of one part: a text, a text block, or a list of texts."""
        place = self.place(index, key)
        if isinstance(value, str):
            if "\n" in value:
                return self.block(index, key, value)
            return (WrittenText(value, place),)
        source = self.tree.at((index, key))
        written = source.text[source.column - 1 :]
        if written[:1] in ("[", "{") and not _QUOTED_LIST.match(written):
            # `[Ar]` and `{2s,2p}` are YAML brackets only by accident; the candidate's line is what stands there.
            return (WrittenText(_COMMENT.sub("", written).strip(), place),)
        if isinstance(value, list) and all(isinstance(line, str) for line in value) and len(value) <= _MOST_LINES:
            return tuple(WrittenText(line, self.place(index, key, at)) for at, line in enumerate(value))
        message = f"part {key}: a line, or a list of at most {_MOST_LINES} lines"
        self.complain("script-lines", message, source)
        return ()

    def block(self, index: int, key: str, value: str) -> tuple[WrittenText, ...]:
        tree, offset = self.tree, self.offset

        def place(at: int) -> Callable[[], Source]:
            return lambda: _shifted(tree.block_line((index, key), at), offset)

        rows = value.rstrip("\n").split("\n")[:_MOST_LINES]
        return tuple(WrittenText(line, place(at)) for at, line in enumerate(rows))


def _plain_entry(lines: Sequence[str], path: str, offset: int) -> ScriptFile | None:
    """An entry that is no YAML but plain `key: text` lines, its texts as they stand; None where it is neither."""
    head: dict[str, str] = {}
    answers: dict[str, tuple[WrittenText, ...]] = {}
    places: dict[str, Callable[[], Source]] = {}
    label, listing, column = "", False, 0
    for row, line in enumerate(lines):
        bare = _COMMENT.sub("", line)
        if not bare.strip():
            continue
        source = Source(path, offset + row + 1, len(line) - len(line.lstrip()) + 1, line)
        if listing and (found := _PLAIN_ITEM.fullmatch(bare)):
            answers[label] = (*answers[label], _plain_text(found, source))
            continue
        found = _PLAIN_LINE.fullmatch(bare)
        if found is None or ("-" in found["lead"]) != (row == 0) or _half_quoted(found["text"] or ""):
            return None
        column = found.start("key") if row == 0 else column
        if found.start("key") != column:
            return None
        if found["key"] in _HEAD and found["key"] not in head:
            head[found["key"]] = _unquoted(found["text"] or "")
            continue
        name = canonical_label(found["key"])
        if name is None or name in answers:
            return None
        label, listing = name, not found["text"]
        answers[label] = (_plain_text(found, source),) if found["text"] else ()
        places[label] = lambda source=source: source  # type: ignore[misc]
    if not head.get("paper"):
        return None
    entry = Source(path, offset + 1, 1, lines[0])
    script = Script(head["paper"], answers, entry, head.get("candidate", ""), head.get("marker", ""), places)
    return ScriptFile((script,))


def _plain_text(found: re.Match[str], source: Source) -> WrittenText:
    place = replace(source, column=found.start("text") + 1)
    return WrittenText(_unquoted(found["text"]), lambda: place)


def _half_quoted(text: str) -> bool:
    return text[:1] in ("'", '"') and (len(text) < 2 or text[-1] != text[0])


def _unquoted(text: str) -> str:
    if len(text) >= 2 and text[0] == text[-1] and text[0] in "'\"":
        return text[1:-1]
    return text


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
