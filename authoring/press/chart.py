"""Press: the geometry of a chart, the same for LaTeX and for HTML; lengths in mm, y upwards, the origin below left."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from authoring.tasks.solved import Chart, Series
from authoring.working.numbers import shown, to_places

Point = tuple[float, float]
Shape = Literal["disc", "ring", "square", "diamond"]
SHAPES: tuple[Shape, ...] = ("disc", "ring", "square", "diamond")
DASHES: tuple[tuple[float, ...], ...] = ((), (2.0, 1.0), (0.6, 0.8), (3.0, 0.8, 0.6, 0.8))

_LEFT, _BOTTOM, _TOP, _RIGHT = 13.0, 9.5, 6.5, 3.0
_WIDTH, _HEIGHT = 120.0, 62.0
_LEVEL_LEFT, _LEVEL_WIDTH, _LEVEL_GAP, _LABEL_ROOM = 18.0, 26.0, 6.0, 4.2
_TICKS = 5
_LETTER = 1.9  # mm, of the label type
_PITCH = 3.6


@dataclass(frozen=True, slots=True)
class Stroke:
    """A line through points; `dash` lengths in mm, empty for a full line."""

    points: tuple[Point, ...]
    width: float
    dash: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True)
class Marker:
    """A mark on a point."""

    at: Point
    shape: Shape


@dataclass(frozen=True, slots=True)
class Label:
    """Words standing at a point: `l` begin there, `c` are centred, `r` end there."""

    at: Point
    text: str
    align: Literal["l", "c", "r"] = "c"


@dataclass(frozen=True, slots=True)
class Drawing:
    """A chart, drawn."""

    width: float
    height: float
    strokes: tuple[Stroke, ...]
    markers: tuple[Marker, ...]
    labels: tuple[Label, ...]


def drawing(chart: Chart, decimal: str = ".") -> Drawing:
    """A chart's strokes, marks and words; black only, so series differ by their marks and dashes."""
    return _levels(chart, decimal) if chart.style == "levels" else _points(chart, decimal)


def ticks(low: float, high: float, count: int = _TICKS) -> tuple[tuple[float, ...], int]:
    """Round values that enclose a range, about `count` steps apart, and the decimal places that they need."""
    span = high - low or abs(high) or 1.0
    rough = span / count
    size = 10.0 ** math.floor(math.log10(rough))
    step = next(factor * size for factor in (1, 2, 2.5, 5, 10) if factor * size >= rough * 0.999)
    first, last = math.floor(low / step + 1e-9), math.ceil(high / step - 1e-9)
    if first == last:
        last += 1
    places = max(0, -math.floor(math.log10(step) + 1e-9))
    if abs(step * 10**places - round(step * 10**places)) > 1e-6:
        places += 1
    return tuple(at * step for at in range(first, last + 1)), places


def _number(value: float, places: int, decimal: str) -> str:
    return shown(to_places(Decimal(repr(value)), places)).replace(".", decimal)


def _axis(values: Iterable[float], left: float, width: float, decimal: str) -> tuple[_Scale, list[Stroke], list[Label]]:
    """The vertical axis with its ticks and numbers."""
    found = list(values)
    marks, places = ticks(min(found), max(found))
    scale = _Scale(marks[0], marks[-1])
    strokes = [Stroke(((left, _BOTTOM), (left, _HEIGHT - _TOP)), 0.25)]
    labels = []
    for mark in marks:
        y = scale.y(mark)
        strokes.append(Stroke(((left - 1.2, y), (left, y)), 0.25))
        strokes.append(Stroke(((left, y), (left + width, y)), 0.08))
        labels.append(Label((left - 2, y - 1.1), _number(mark, places, decimal), "r"))
    return scale, strokes, labels


@dataclass(frozen=True, slots=True)
class _Scale:
    low: float
    high: float

    def y(self, value: float) -> float:
        """The height of a value."""
        share = (value - self.low) / (self.high - self.low)
        return _BOTTOM + share * (_HEIGHT - _BOTTOM - _TOP)


def _points(chart: Chart, decimal: str) -> Drawing:
    names = list(dict.fromkeys(label for series in chart.series for label, _ in series.points))
    width = min(_WIDTH - _LEFT - _RIGHT, max(40.0, 12.0 * len(names)))
    scale, strokes, labels = _axis((v for series in chart.series for _, v in series.points), _LEFT, width, decimal)
    strokes.append(Stroke(((_LEFT, _BOTTOM), (_LEFT + width, _BOTTOM)), 0.25))
    step = width / len(names)
    where = {name: _LEFT + (at + 0.5) * step for at, name in enumerate(names)}
    every = max(1, math.ceil(max(len(name) for name in names) * _LETTER / step))
    for at, name in enumerate(names):
        strokes.append(Stroke(((where[name], _BOTTOM), (where[name], _BOTTOM - 1)), 0.25))
        if at % every == 0:
            labels.append(Label((where[name], _BOTTOM - 4.2), name))
    labels.append(Label((0, _HEIGHT - 3.2), chart.y_words, "l"))
    labels.append(Label((_LEFT + width / 2, 0.8), chart.x_words))
    markers: list[Marker] = []
    for index, series in enumerate(chart.series):
        path = tuple((where[name], scale.y(value)) for name, value in series.points)
        strokes.append(Stroke(path, 0.3, DASHES[index % len(DASHES)]))
        markers += [Marker(at, SHAPES[index % len(SHAPES)]) for at in path]
    labels += _legend(chart.series, markers, _LEFT + width)
    right = _LEFT + width + (_legend_width(chart.series) if len(chart.series) > 1 else _RIGHT)
    return Drawing(right, _HEIGHT, tuple(strokes), tuple(markers), tuple(labels))


def _legend_width(series: Sequence[Series]) -> float:
    return 6 + max(len(each.name) for each in series) * _LETTER


def _legend(series: Sequence[Series], markers: list[Marker], right: float) -> list[Label]:
    """The names of several series, each behind its mark, right of the plot."""
    if len(series) < 2:
        return []
    labels = []
    for index, each in enumerate(series):
        y = _HEIGHT - _TOP - 3 - 5 * index
        markers.append(Marker((right + 3, y + 1), SHAPES[index % len(SHAPES)]))
        labels.append(Label((right + 5, y), each.name, "l"))
    return labels


def _levels(chart: Chart, decimal: str) -> Drawing:
    """A ladder for each series: a level for each point, its label at the right end."""
    longest = max(len(label) for series in chart.series for label, _ in series.points)
    column = _LEVEL_WIDTH + 2 * _LEVEL_GAP + longest * _LETTER
    width = column * len(chart.series)
    scale, strokes, labels = _axis(
        (value for series in chart.series for _, value in series.points),
        _LEVEL_LEFT,
        _LEVEL_GAP + _LEVEL_WIDTH,  # lines behind labels would strike them through
        decimal,
    )
    labels.append(Label((0, _HEIGHT - 3.2), chart.y_words, "l"))
    for index, series in enumerate(chart.series):
        left = _LEVEL_LEFT + _LEVEL_GAP + index * column
        end = left + _LEVEL_WIDTH
        heights = [scale.y(value) for _, value in series.points]
        for (label, _), y, room in zip(series.points, heights, spread(heights, _PITCH), strict=True):
            strokes.append(Stroke(((left, y), (end, y)), 0.5))
            if abs(room - y) > 0.1:
                strokes.append(Stroke(((end, y), (end + 2, room)), 0.1))
            labels.append(Label((end + 2.5, room - 1.1), label, "l"))
        if len(chart.series) > 1:
            labels.append(Label((left + _LEVEL_WIDTH / 2, _BOTTOM - 4.2), series.name))
    labels.append(Label((_LEVEL_LEFT + width / 2, 0.8), chart.x_words))
    return Drawing(_LEVEL_LEFT + width, _HEIGHT, tuple(strokes), (), tuple(labels))


def spread(heights: Sequence[float], pitch: float) -> list[float]:
    """Heights moved apart as little as makes neighbours differ by `pitch`, in the order given.

    Labels that would overlap form a group, which is set evenly around its middle; groups that meet are joined.
    """
    order = sorted(range(len(heights)), key=lambda at: heights[at])
    groups: list[list[int]] = []
    for at in order:
        groups.append([at])
        while len(groups) > 1 and _low(groups[-1], heights, pitch) < _high(groups[-2], heights, pitch) + pitch:
            last = groups.pop()
            groups[-1] += last
    moved = [0.0] * len(heights)
    for group in groups:
        for place, at in enumerate(group):
            moved[at] = _low(group, heights, pitch) + place * pitch
    return moved


def _low(group: Sequence[int], heights: Sequence[float], pitch: float) -> float:
    return sum(heights[at] for at in group) / len(group) - (len(group) - 1) * pitch / 2


def _high(group: Sequence[int], heights: Sequence[float], pitch: float) -> float:
    return _low(group, heights, pitch) + (len(group) - 1) * pitch
