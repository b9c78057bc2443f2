"""Stage 1, read: YAML text becomes a plain tree of dict, list and str in which every node knows its place.

The YAML taken here is the part that a careful person writes: mappings, lists, and text that stays text (`No`,
`3.250`, `012` arrive as written). What can hide or multiply content is refused: keys given twice, anchors and
aliases, tags, merge keys, several documents, folded text. The parser's events are read one by one, so neither an
alias nor a depth can use up the machine.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, TypeAlias

import yaml

from authoring.faults import Fault, FaultsFound, Source
from authoring.specs.texts import MOST_BYTES, control_faults, find_control, read_text, unify_breaks
from authoring.specs.yaml_words import syntax_place_and_words

MOST_DEPTH = 50

Data: TypeAlias = "str | list[Data] | dict[str, Data]"
Steps: TypeAlias = "Sequence[str | int]"

# (line, column, last line, style, children): 0-based as the parser counts. `children` is a list of spots, or a
# mapping of key -> (key's line, key's column, spot), or None for text. Plain tuples, because a pile of scripts
# has a hundred thousand of them.
_Spot: TypeAlias = "tuple[int, int, int, str, Any]"

_Loader: type[Any] = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
_DROPPED = "\0dropped"


@dataclass(frozen=True, slots=True)
class Tree:
    """What a YAML file says, and where each piece of it stands.

    A path is a sequence of keys and list indices, `("parts", 0, "marks")`; a path that leads nowhere gives the
    place of its nearest existing parent.
    """

    data: Data
    path: str
    _root: _Spot = field(repr=False, compare=False)
    _lines: tuple[str, ...] = field(repr=False, compare=False)

    @property
    def text(self) -> str:
        """The file's text, as read."""
        return "\n".join(self._lines)

    def at(self, path: Steps = ()) -> Source:
        """The place of the value at `path`."""
        spot, _ = self._find(path)
        return self._source(spot[0], spot[1])

    def key_at(self, path: Steps) -> Source:
        """The place of the key (or of the list entry) at `path`."""
        _, key = self._find(path)
        return self._source(*key)

    def has(self, path: Steps) -> bool:
        """Whether `path` leads to a value."""
        node: object = self.data
        for step in path:
            if isinstance(node, dict) and step in node:
                node = node[str(step)]
            elif isinstance(node, list) and isinstance(step, int) and 0 <= step < len(node):
                node = node[step]
            else:
                return False
        return True

    def block_line(self, path: Steps, k: int, column: int = 1) -> Source:
        """The place of column `column` (1-based) in line `k` (0-based) of the text at `path`.

        Exact for `|` blocks and one-line text; for text that runs over several lines without `|`, the line break
        is kept only at blank lines, so the place is that of the piece between them.
        """
        (line, start, last, style, children), _ = self._find(path)
        if children is not None:
            return self._source(line, start)
        if style == "|":
            row = min(line + 1 + max(k, 0), len(self._lines) - 1)
            return self._source(row, _indent(self._lines, line, last) + column - 1)
        quote = 1 if style in ("'", '"') else 0
        row = self._after_blanks(line, last, k)
        shown = self._lines[row]
        first = start + quote if row == line else len(shown) - len(shown.lstrip())
        return self._source(row, min(first + column - 1, max(len(shown) - 1, first)))

    def _after_blanks(self, line: int, last: int, k: int) -> int:
        """The first row of the text with `k` blank rows before it."""
        seen = 0
        for row in range(line, min(last, len(self._lines) - 1) + 1):
            if seen >= k:
                return row
            seen += not self._lines[row].strip()
        return min(line, len(self._lines) - 1)

    def _find(self, path: Steps) -> tuple[_Spot, tuple[int, int]]:
        spot = self._root
        key = (spot[0], spot[1])
        for step in path:
            children = spot[4]
            if isinstance(children, dict) and step in children:
                *place, spot = children[step]
                key = (place[0], place[1])
            elif isinstance(children, list) and isinstance(step, int) and 0 <= step < len(children):
                spot = children[step]
                key = (spot[0], spot[1])
            else:
                break
        return spot, key

    def _source(self, line: int, column: int) -> Source:
        return _source(self.path, self._lines, line, column)


def read_tree(path: Path, most_bytes: int = MOST_BYTES) -> Tree:
    """The tree of a YAML file. Raises UsageError (unreadable, too large) or FaultsFound."""
    return parse_tree(read_text(path, most_bytes), str(path))


def parse_tree(text: str, path: str) -> Tree:
    """The tree of a YAML text; `path` is what its places say. Raises FaultsFound with everything wrong with it."""
    text = unify_breaks(text.removeprefix("\ufeff"))
    faults = control_faults(text, path)
    if faults:
        raise FaultsFound(faults)
    lines = tuple(text.split("\n"))
    builder = _Builder(path, lines)
    try:
        builder.run(_Loader(text))
    except yaml.MarkedYAMLError as error:
        line, column, words = syntax_place_and_words(error, lines)
        builder.complain("yaml-depth" if "too deeply" in words else "yaml-syntax", words, line, column)
    except RecursionError:
        builder.too_deep(0, 0)
    if builder.faults:
        raise FaultsFound(builder.faults)
    return Tree(builder.data, path, builder.root, lines)


def _source(path: str, lines: Sequence[str], line: int, column: int) -> Source:
    # The parser puts what is missing at the end of the text behind the last line.
    row = min(line, len(lines) - 1)
    return Source(path, row + 1, column + 1 if row == line else len(lines[row]) + 1, lines[row])


def _indent(lines: Sequence[str], header: int, last: int) -> int:
    """The columns that a `|` block is indented by: those of its first row with text."""
    for row in range(header + 1, min(last + 1, len(lines))):
        if lines[row].strip():
            return len(lines[row]) - len(lines[row].lstrip(" "))
    return 0


@dataclass(slots=True)
class _Frame:
    """A mapping or list that is being read; `key` waits for its value.

    `as_key`: it stands where a key should, so it is read to its end and goes nowhere.
    """

    data: Any
    spots: Any
    place: tuple[int, int]
    is_map: bool
    as_key: bool = False
    key: str | None = None
    key_place: tuple[int, int] = (0, 0)

    def add(self, value: Any, spot: _Spot) -> None:
        if not self.is_map:
            self.data.append(value)
            self.spots.append(spot)
        elif self.key is not _DROPPED:
            self.data[self.key] = value
            self.spots[self.key] = (*self.key_place, spot)
        self.key = None


class _Stop(Exception):
    """Nothing after this place can be read with profit."""


class _Builder:
    """Turns parser events into data and spots, and gathers faults."""

    def __init__(self, path: str, lines: Sequence[str]) -> None:
        self.path = path
        self.lines = lines
        self.faults: list[Fault] = []
        self.data: Any = ""
        self.root: _Spot = (0, 0, 0, "", None)
        self.frames: list[_Frame] = []
        self.documents = 0

    def complain(self, code: str, message: str, line: int, column: int) -> None:
        self.faults.append(Fault(code, message, _source(self.path, self.lines, line, column)))

    def too_deep(self, line: int, column: int) -> None:
        self.complain("yaml-depth", f"lists and mappings are nested deeper than {MOST_DEPTH} levels here", line, column)

    def run(self, loader: Any) -> None:
        get_event = loader.get_event
        handlers = self._handlers()
        try:
            while (event := get_event()) is not None:
                if type(event) is yaml.ScalarEvent:
                    self._scalar(event)
                elif handler := handlers.get(type(event)):
                    handler(event)
        except _Stop:
            pass
        finally:
            loader.dispose()

    def _handlers(self) -> Mapping[type, Any]:
        return {
            yaml.MappingStartEvent: self._start,
            yaml.SequenceStartEvent: self._start,
            yaml.MappingEndEvent: self._end,
            yaml.SequenceEndEvent: self._end,
            yaml.AliasEvent: self._alias,
            yaml.DocumentStartEvent: self._document,
        }

    def _scalar(self, event: Any) -> None:
        mark = event.start_mark
        value = event.value
        style = event.style or ""
        if style == ">" or style == '"' or event.anchor is not None or event.tag is not None:
            self._oddities(event, style)
        frame = self.frames[-1] if self.frames else None
        if frame is not None and frame.is_map and frame.key is None:
            self._key(frame, value, style, mark.line, mark.column)
        else:
            self._place(value, (mark.line, mark.column, event.end_mark.line, style, None))

    def _place(self, value: Any, spot: _Spot) -> None:
        if self.frames:
            self.frames[-1].add(value, spot)
        else:
            self.data, self.root = value, spot

    def _key(self, frame: _Frame, value: str, style: str, line: int, column: int) -> None:
        if value in frame.data:
            first = frame.spots[value][0] + 1
            self.complain("yaml-duplicate-key", f"the key {value!r} was already given on line {first}", line, column)
            frame.key = _DROPPED
        elif value == "<<":
            self.complain("yaml-merge-key", "merge keys (<<) are not used here; write the keys out", line, column)
            frame.key = _DROPPED
        elif style == "|" or "\n" in value:
            self.complain("yaml-key", "a key is text on one line", line, column)
            frame.key = _DROPPED
        else:
            frame.key = value
            frame.key_place = (line, column)

    def _oddities(self, event: Any, style: str) -> None:
        line, column = event.start_mark.line, event.start_mark.column
        if style == ">":
            message = "folded text (>) loses its line breaks, so faults in it have no place; write | instead"
            self.complain("yaml-folded", message, line, column)
        if style == '"' and (name := find_control(event.value)):
            self.complain("control-character", f"the text contains the invisible character {name}", line, column)
        self._properties(event)

    def _properties(self, event: Any) -> None:
        line, column = event.start_mark.line, event.start_mark.column
        if event.anchor is not None:
            message = f"anchors (&{event.anchor}) are not used here; write the content out where it is needed"
            self.complain("yaml-alias", message, line, column)
        if event.tag is not None:
            name = event.tag.replace("tag:yaml.org,2002:", "!!")
            self.complain(
                "yaml-tag", f"tags ({name}) are not used here; text that begins with ! needs quotes", line, column
            )

    def _start(self, event: Any) -> None:
        line, column = event.start_mark.line, event.start_mark.column
        is_map = type(event) is yaml.MappingStartEvent
        if len(self.frames) == MOST_DEPTH:
            self.too_deep(line, column)
            raise _Stop
        self._properties(event)
        parent = self.frames[-1] if self.frames else None
        as_key = False
        if parent is not None and parent.is_map and parent.key is None:
            self._refuse_key(line, column)
            parent.key = _DROPPED
            as_key = True
        data: Any = {} if is_map else []
        spots: Any = {} if is_map else []
        self.frames.append(_Frame(data, spots, (line, column), is_map, as_key))

    def _refuse_key(self, line: int, column: int) -> None:
        if self.lines[line][max(column - 1, 0) : column + 1] == "{{":
            self.complain("yaml-key", "text that begins with {{ must stand in quotes", line, column - 1)
        else:
            self.complain("yaml-key", "a key must be text, not a list or mapping", line, column)

    def _end(self, event: Any) -> None:
        frame = self.frames.pop()
        if not frame.as_key:
            self._place(frame.data, (*frame.place, event.end_mark.line, "", frame.spots))

    def _alias(self, event: Any) -> None:
        mark = event.start_mark
        message = f"aliases (*{event.anchor}) are not used here; text that begins with * needs quotes"
        self.complain("yaml-alias", message, mark.line, mark.column)
        frame = self.frames[-1] if self.frames else None
        if frame is not None and frame.is_map and frame.key is None:
            frame.key = _DROPPED
        else:
            self._place("", (mark.line, mark.column, mark.line, "", None))

    def _document(self, event: Any) -> None:
        self.documents += 1
        if self.documents > 1:
            mark = event.start_mark
            self.complain(
                "yaml-documents", "a file holds one document; a second one begins here", mark.line, mark.column
            )
            raise _Stop
