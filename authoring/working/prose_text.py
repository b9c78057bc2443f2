"""Working: prose as plain text for a terminal, wrapped to a width where one is given."""

from __future__ import annotations

import textwrap
import unicodedata
from collections.abc import Iterable

from authoring.working.nodes import Block, Emphasis, Inline, ListBlock, Math, Paragraph, Plain, Prose, TableBlock
from authoring.working.text import to_text


def prose_text(prose: Prose, width: int | None = None, *, decimal: str = ".") -> str:
    """Blocks with an empty line between them; `width` in columns, or None for one line a paragraph."""
    return "\n\n".join("\n".join(_block(block, width, decimal)) for block in prose)


def inline_text(children: Iterable[Inline], *, decimal: str = ".") -> str:
    """Running text on one line; emphasis leaves no mark."""
    parts: list[str] = []
    for child in children:
        match child:
            case Plain(text):
                parts.append(text)
            case Emphasis(inner):
                parts.append(inline_text(inner, decimal=decimal))
            case Math(node):
                parts.append(to_text(node, decimal=decimal))
    return "".join(parts)


def display_width(text: str) -> int:
    """How many terminal columns a text takes: wide East Asian characters take two, combining marks none."""
    return sum(0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1 for c in text)


def _block(block: Block, width: int | None, decimal: str) -> list[str]:
    match block:
        case Paragraph(children):
            return _wrap(" ".join(inline_text(children, decimal=decimal).split()), width)
        case ListBlock(entries, ordered):
            return [
                line
                for number, entry in enumerate(entries, 1)
                for line in _entry(entry, f"{number}. " if ordered else "- ", width, decimal)
            ]
        case TableBlock():
            return _table(block, width, decimal)


def _wrap(text: str, width: int | None) -> list[str]:
    if width is None:
        return [text]
    return textwrap.wrap(text, max(width, 10), break_long_words=False, break_on_hyphens=False) or [""]


def _entry(blocks: tuple[Block, ...], mark: str, width: int | None, decimal: str) -> list[str]:
    inner = None if width is None else width - len(mark)
    lines = [line for block in blocks for line in _block(block, inner, decimal)]
    return [(mark if index == 0 else " " * len(mark)) + line for index, line in enumerate(lines)]


def _table(table: TableBlock, width: int | None, decimal: str) -> list[str]:
    rows = [[inline_text(cell, decimal=decimal) for cell in row] for row in (table.header, *table.rows)]
    columns = max(map(len, rows))
    filled = [row + [""] * (columns - len(row)) for row in rows]
    widths = [max(display_width(row[column]) for row in filled) for column in range(columns)]
    numeric = [all(is_numeric(row[column]) for row in filled[1:]) for column in range(columns)]
    lines = [_line(row, widths, numeric) for row in filled]
    if any(filled[0]):
        lines.insert(1, "  ".join("-" * wide for wide in widths))
    else:
        del lines[0]
    before = _wrap(inline_text(table.caption, decimal=decimal), width) if table.caption else []
    after = _wrap(inline_text(table.origin, decimal=decimal), width) if table.origin else []
    return [*before, *lines, *after]


def is_numeric(text: str) -> bool:
    """Whether a table cell holds a number, so that its column is set flush right."""
    return not text or (text.lstrip("+-−≈<>")[:1].isdigit() and text.strip("+-−≈<>0123456789.,% ") == "")


def _line(row: list[str], widths: list[int], numeric: list[bool]) -> str:
    cells: list[str] = []
    for text, wide, right in zip(row, widths, numeric, strict=True):
        room = " " * (wide - display_width(text))
        cells.append(room + text if right else text + room)
    return "  ".join(cells).rstrip()
