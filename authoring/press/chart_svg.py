"""Press: a chart as inline SVG, in the colour of the text, with its description for readers who cannot see it."""

from __future__ import annotations

from authoring.press.chart import Drawing, Label, Marker, Stroke
from authoring.working.mathml import escape_xml

_R = 0.75
_ANCHORS = {"l": "start", "c": "middle", "r": "end"}


def chart_svg(drawing: Drawing, description: str) -> str:
    """The `<svg>` element; one unit is one mm."""
    height = drawing.height
    parts = [
        f'<svg class="chart" role="img" viewBox="0 0 {drawing.width:.1f} {height:.1f}" '
        f'width="{drawing.width:.1f}mm" height="{height:.1f}mm">',
        f"<title>{escape_xml(_title(drawing))}</title><desc>{escape_xml(description)}</desc>",
        *(_stroke(stroke, height) for stroke in drawing.strokes),
        *(_marker(marker, height) for marker in drawing.markers),
        *(_label(label, height) for label in drawing.labels),
        "</svg>",
    ]
    return "".join(parts)


def _title(drawing: Drawing) -> str:
    """The words of the axes, which every drawing has as its last labels."""
    return next((label.text for label in drawing.labels if label.align == "l" and label.at[0] == 0), "")


def _stroke(stroke: Stroke, height: float) -> str:
    points = " ".join(f"{x:.2f},{height - y:.2f}" for x, y in stroke.points)
    dash = f' stroke-dasharray="{" ".join(f"{length:g}" for length in stroke.dash)}"' if stroke.dash else ""
    return f'<polyline points="{points}" stroke-width="{stroke.width:g}"{dash}/>'


def _marker(marker: Marker, height: float) -> str:
    x, y = marker.at[0], height - marker.at[1]
    if marker.shape == "square":
        return f'<rect class="solid" x="{x - _R:.2f}" y="{y - _R:.2f}" width="{2 * _R}" height="{2 * _R}"/>'
    if marker.shape == "diamond":
        d = 1.3 * _R
        corners = f"{x:.2f},{y - d:.2f} {x + d:.2f},{y:.2f} {x:.2f},{y + d:.2f} {x - d:.2f},{y:.2f}"
        return f'<polygon class="solid" points="{corners}"/>'
    kind = "solid" if marker.shape == "disc" else "hollow"
    return f'<circle class="{kind}" cx="{x:.2f}" cy="{y:.2f}" r="{_R}"/>'


def _label(label: Label, height: float) -> str:
    x, y = label.at[0], height - label.at[1]
    return f'<text x="{x:.2f}" y="{y:.2f}" text-anchor="{_ANCHORS[label.align]}">{escape_xml(label.text)}</text>'
