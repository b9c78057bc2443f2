"""Press: working as plain text for a terminal: aligned columns, wrapped at relations, points at the right."""

from __future__ import annotations

from collections.abc import Sequence

from authoring.press.medium import parted
from authoring.shielding.solve import Step
from authoring.working.lines import Line, Point
from authoring.working.nodes import Chain
from authoring.working.prose_text import display_width
from authoring.working.text import to_text

WIDTH = 80
_GAP = 2
_LONGEST_LEFT = 16  # a longer left side stands on a line of its own
_INDENT = 4


def working_text(
    steps: Sequence[Step], points: Sequence[Point] = (), *, width: int = WIDTH, decimal: str = "."
) -> str:
    """The lines of a working with the mark points that they carry; nothing is wider than `width` where it can break.

    Left sides are aligned, long lines go on under their first relation, the points stand in a column at the right.
    """
    codes = [" ".join(_code(point) for point in points if point.line == at) for at in range(len(steps))]
    right = max((display_width(code) for code in codes), default=0)
    room = width - (right + _GAP if right else 0)
    sides = [_sides(step.line, decimal) for step in steps]
    left = max((display_width(first) for first, _ in sides if display_width(first) <= _LONGEST_LEFT), default=0)
    lines: list[str] = []
    for (first, pieces), code in zip(sides, codes, strict=True):
        rows = _rows(first, pieces, left, room)
        if code:
            rows[-1] = _padded(rows[-1], room + _GAP) + code
        lines += rows
    return "\n".join(lines)


def _code(point: Point) -> str:
    return f"{point.code} ft" if point.follow_through else point.code


def _sides(line: Line, decimal: str) -> tuple[str, list[str]]:
    """What stands before the first relation, and the pieces after it, which keep their relations in front."""
    first, rest = parted(line.chain)
    pieces: list[str] = []
    if isinstance(rest, Chain):
        pieces += [to_text(rest.first, decimal=decimal)]
        pieces += [f"{relation} {to_text(node, decimal=decimal)}" for relation, node in rest.rest]
    else:
        pieces.append(to_text(rest, decimal=decimal))
    return to_text(first, decimal=decimal).rstrip() if first else "", [piece for piece in pieces if piece]


def _rows(first: str, pieces: list[str], left: int, room: int) -> list[str]:
    """One line of working as rows of text, broken before relations, else between words."""
    if display_width(first) > left:
        rows, start, lead = [first], " " * _INDENT, " " * _INDENT
    else:
        rows, lead = [], " " * (left + 1)
        start = _padded(first, left + 1)
    row, empty = start, True
    for word in _breakable(pieces, room - len(lead)):
        if not empty and display_width(row) + 1 + display_width(word) > room:
            rows.append(row)
            row, empty = lead + word, False
        else:
            row, empty = row + ("" if empty else " ") + word, False
    return [*rows, row.rstrip()]


def _breakable(pieces: list[str], room: int) -> list[str]:
    """Whole pieces where they fit a row; longer ones as words."""
    found: list[str] = []
    for piece in pieces:
        found += [piece] if display_width(piece) <= room else piece.split(" ")
    return found


def _padded(text: str, columns: int) -> str:
    return text + " " * max(0, columns - display_width(text))
