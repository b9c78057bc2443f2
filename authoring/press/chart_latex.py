"""Press: a chart as a LaTeX picture: paths in the language of the PDF itself, words by TeX; needs no package.

The macros `\\chartsize`, `\\chartpath` and `\\chartwords` stand in `templates/latex/macros.tex`.
"""

from __future__ import annotations

import math

from authoring.press.chart import Drawing, Marker, Stroke
from authoring.working.tex_escape import escape_tex

_POINTS = 72 / 25.4  # PDF units in a mm
_R = 0.75  # mm, half the size of a mark
_ROUND = 0.5523  # control points of a quarter circle (from memory)


def chart_latex(drawing: Drawing, wide: bool = False) -> str:
    """The picture; `wide` lets words hold what only LuaTeX prints."""
    paths = " ".join([*map(_stroke, drawing.strokes), *map(_marker, drawing.markers)])
    lines = [
        rf"\begingroup\chartsize{{{math.ceil(drawing.width * 10)}}}%",
        rf"\begin{{picture}}({drawing.width:.1f},{drawing.height:.1f})(0,0)%",
        rf"\put(0,0){{\chartpath{{{paths}}}}}%",
    ]
    for label in drawing.labels:
        align = "" if label.align == "c" else label.align
        words = escape_tex(label.text, wide)
        x, y = label.at
        lines.append(rf"\put({x:.2f},{y:.2f}){{\makebox(0,0)[{align}b]{{\chartwords{{{words}}}}}}}%")
    lines.append(r"\end{picture}\endgroup")
    return "\n".join(lines)


def _at(x: float, y: float) -> str:
    return f"{x * _POINTS:.2f} {y * _POINTS:.2f}"


def _stroke(stroke: Stroke) -> str:
    dash = " ".join(f"{length * _POINTS:.2f}" for length in stroke.dash)
    first, *rest = (_at(*point) for point in stroke.points)
    lines = " ".join(f"{point} l" for point in rest)
    return f"{stroke.width * _POINTS:.2f} w [{dash}] 0 d {first} m {lines} S"


def _marker(marker: Marker) -> str:
    x, y = marker.at
    if marker.shape == "square":
        return f"{_at(x - _R, y - _R)} {_at(2 * _R, 2 * _R)} re f"
    if marker.shape == "diamond":
        corners = [(x + 1.3 * _R, y), (x, y - 1.3 * _R), (x - 1.3 * _R, y)]
        return f"{_at(x, y + 1.3 * _R)} m " + " ".join(f"{_at(*corner)} l" for corner in corners) + " h f"
    paint = "f" if marker.shape == "disc" else "1 g 0.7 w [] 0 d B 0 g"
    return f"{_circle(x, y)} h {paint}"


def _circle(x: float, y: float) -> str:
    k = _R * _ROUND
    arcs = (
        ((x + _R, y + k), (x + k, y + _R), (x, y + _R)),
        ((x - k, y + _R), (x - _R, y + k), (x - _R, y)),
        ((x - _R, y - k), (x - k, y - _R), (x, y - _R)),
        ((x + k, y - _R), (x + _R, y - k), (x + _R, y)),
    )
    curves = " ".join(" ".join(_at(*point) for point in arc) + " c" for arc in arcs)
    return f"{_at(x + _R, y)} m {curves}"
