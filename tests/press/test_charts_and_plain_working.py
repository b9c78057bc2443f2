"""The geometry of charts, decimal marks in running text, and working as plain text."""

from __future__ import annotations

import itertools
import xml.etree.ElementTree as ET

import pytest

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.press.chart import drawing, spread, ticks
from authoring.press.chart_latex import chart_latex
from authoring.press.chart_svg import chart_svg
from authoring.press.decimals import with_decimal
from authoring.press.plain import working_text
from authoring.shielding.practice import published
from authoring.shielding.quantity import Target
from authoring.shielding.solve import work
from authoring.tasks.points import pointed
from authoring.tasks.solved import Chart, Series

LEVELS = Chart("levels", "electron", "E / eV", (Series("V", (("3s", -70.1), ("3p", -70.0), ("4s", -10.8))),), "Levels.")
TWO = Chart(
    "points",
    "species",
    "Z",
    (Series("a", (("Na", 1.0), ("Mg", 2.5))), Series("b", (("Na", 2.0), ("Mg", 0.5)))),
    "<Two>",
)


@pytest.mark.parametrize(
    ("low", "high", "marks", "places"),
    [
        (2.2, 6.75, (2, 3, 4, 5, 6, 7), 0),
        (-70.1, -10.8, (-80, -60, -40, -20, 0), 0),
        (0.0, 1.0, (0, 0.2, 0.4, 0.6, 0.8, 1.0), 1),
        (5.0, 5.0, (5, 6), 0),
        (0.0, 11.0, (0.0, 2.5, 5.0, 7.5, 10.0, 12.5), 1),
    ],
)
def test_ticks_are_round_and_enclose(low: float, high: float, marks: tuple[float, ...], places: int) -> None:
    """Steps of 1, 2, 2.5 or 5 times a power of ten, with the places that they need."""
    found, needed = ticks(low, high)
    assert found == pytest.approx(marks)
    assert needed == places


def test_labels_of_close_levels_are_moved_apart() -> None:
    """Each keeps its order, neighbours differ by the pitch, lone ones stay."""
    moved = spread([10.0, 10.1, 10.2, 40.0], 3.0)
    assert moved[3] == 40.0
    assert all(b - a >= 3.0 - 1e-9 for a, b in itertools.pairwise(moved))
    assert sum(moved[:3]) / 3 == pytest.approx(10.1)


@pytest.mark.parametrize("chart", [LEVELS, TWO])
def test_everything_is_inside_the_frame(chart: Chart) -> None:
    """No stroke or mark outside the drawing; series differ by mark and dash, not by colour."""
    made = drawing(chart)
    for x, y in [point for stroke in made.strokes for point in stroke.points] + [mark.at for mark in made.markers]:
        assert 0 <= x <= made.width
        assert 0 <= y <= made.height
    if chart is TWO:
        assert len({mark.shape for mark in made.markers}) == 2
        assert len({stroke.dash for stroke in made.strokes}) == 2


def test_both_media_have_the_same_words() -> None:
    """Labels, axis words and numbers, with the decimal mark asked for."""
    picture, svg = chart_latex(drawing(TWO, ",")), chart_svg(drawing(TWO, ","), TWO.description)
    root = ET.fromstring(svg)
    words = [text.text or "" for text in root.iter("text")]
    assert {"Na", "Mg", "a", "b", "species", "Z", "0,5", "2,5"} <= set(words)
    assert all(f"\\chartwords{{{word}}}" in picture for word in words)
    assert root.findtext("desc") == "<Two>"


def test_numbers_in_text_get_the_decimal_mark() -> None:
    """A number has one point; dates and section numbers have more and stay."""
    assert with_decimal("0.85 each, 19.70.", ",") == "0,85 each, 19,70."
    assert with_decimal("on 14.3.2026, see 2.1.3", ",") == "on 14.3.2026, see 2.1.3"
    assert with_decimal("0.85", ".") == "0.85"


def test_working_is_aligned_and_carries_its_points() -> None:
    """Left sides in a column, points at the right, the value last.

    Value: J. C. Slater, Phys. Rev. 36, 57 (1930): the rules; S(V, 4s) = 0.35 + 11 × 0.85 + 10 = 19.70.
    """
    steps = work(Target("effective nuclear charge", Species.parse("V"), Subshell.parse("4s")), published())
    lines = working_text(steps, pointed(steps, None)).split("\n")
    assert [line[:74].rstrip() for line in lines] == [
        "V:    1s² 2s² 2p⁶ 3s² 3p⁶ 3d³ 4s²",
        "V:    (1s)² (2s,2p)⁸ (3s,3p)⁸ (3d)³ (4s,4p)²",
        "4s:   same group 1 × 0.35; one shell in 11 × 0.85; deeper 10 × 1.00",
        "S     = 1 × 0.35 + 11 × 0.85 + 10 × 1.00 = 0.35 + 9.35 + 10.00 = 19.70",
        "Z_eff = Z − S = 23 − 19.70 = 3.30",
    ]
    assert [line[75:] for line in lines] == ["B1", "M1 ft", "M2 ft", "A1 ft", "A2 ft"]


@pytest.mark.parametrize("width", [80, 60, 40])
def test_long_working_is_wrapped_at_relations(width: int) -> None:
    """No line is wider than the terminal; what goes on begins with a relation where a whole piece fits."""
    steps = work(Target("ionization energy", Species.parse("Xe")), published())
    lines = working_text(steps, pointed(steps, None), width=width).split("\n")
    assert all(len(line) <= width for line in lines)
    assert len(lines) > len(steps)
    assert _words(working_text(steps, width=width)) == _words(working_text(steps, width=10_000))


def _words(text: str) -> list[str]:
    return text.split()
