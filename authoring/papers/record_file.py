"""Stage 4, assemble: the record as text: a line for each paper, for each of its items, and for each part.

The answers of the parts are nearly all of the text, and who marks a set solves them again: without their lines the
rest is a record too, a twentieth in size.
"""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping
from pathlib import Path
from typing import Any

from authoring.faults import UsageError
from authoring.papers.assemble import PaperSet
from authoring.papers.record import FORMAT, record

RECORD = "set.json"
# No other line begins so: text in JSON has no line breaks.
_PART = b'  {"label": '

_dump = json.JSONEncoder(ensure_ascii=False).encode


def written(paper_set: PaperSet) -> str:
    """The record as JSON text: the same set gives the same bytes."""
    return "".join(pieces(paper_set))


def pieces(paper_set: PaperSet) -> Iterator[str]:
    """The text of the record, paper by paper: that of ten thousand papers is better not had at once."""
    data = record(paper_set)
    lines = _Lines()
    for at, (name, value) in enumerate(data.items()):
        yield ("{\n" if not at else ",\n") + _dump(name) + ": "
        if name != "papers":
            yield _dump(value)
            continue
        for number, paper in enumerate(value):
            yield ("[\n" if not number else ",\n") + lines.paper(paper)
        yield "\n]"
    yield "\n}\n"


class _Lines:
    """The lines of papers; parts that papers share are made into text once."""

    def __init__(self) -> None:
        self._made: dict[int, str] = {}

    def paper(self, paper: Mapping[str, Any]) -> str:
        head = _opened({name: value for name, value in paper.items() if name != "items"})
        return f'{head}"items": [\n' + ",\n".join(map(self._item, paper["items"])) + "\n]}"

    def _item(self, item: Mapping[str, Any]) -> str:
        parts = item["parts"]
        if id(parts) not in self._made:
            self._made[id(parts)] = ",\n".join("  " + _dump(part) for part in parts)
        head = _opened({name: value for name, value in item.items() if name != "parts"})
        return f' {head}"parts": [\n{self._made[id(parts)]}\n ]}}'


def _opened(values: Mapping[str, Any]) -> str:
    """An object to which more is added."""
    return _dump(values)[:-1] + ", "


def read_record(folder: Path) -> dict[str, Any]:
    """The record in a set's folder. Raises UsageError where there is none or it is not one of ours."""
    path = _path(folder)
    return _checked(path, _text(path))


def read_drawn(folder: Path) -> dict[str, Any]:
    """The record without the parts of its items: which paper has which variants. Raises as `read_record`.

    A record that another program has laid out anew is read as it stands.
    """
    path = _path(folder)
    try:
        with path.open("rb") as file:
            kept = b"".join([line for line in file if not line.startswith(_PART)])
        return _checked(path, kept)
    except (OSError, UsageError):
        return read_record(folder)


def _path(folder: Path) -> Path:
    return folder / RECORD if folder.is_dir() else folder


def _text(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except OSError as error:
        raise UsageError(f"no set to read: {path}: {error.strerror or error}") from error


def _checked(path: Path, text: bytes) -> dict[str, Any]:
    try:
        data = json.loads(text.decode("utf-8"))
    except (ValueError, RecursionError) as error:
        raise UsageError(f"{path} is damaged: it is not JSON ({error})") from error
    if not isinstance(data, dict) or data.get("format") != FORMAT or not isinstance(data.get("papers"), list):
        raise UsageError(f"{path} is not a record of a set ({FORMAT})")
    return data


def used_variants(data: Mapping[str, Any]) -> frozenset[tuple[str, tuple[tuple[str, str], ...]]]:
    """The (item, variables) that a recorded set used."""
    return frozenset(
        (item["item"], tuple(sorted(item["variables"].items()))) for paper in data["papers"] for item in paper["items"]
    )
