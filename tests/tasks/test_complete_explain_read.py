"""*complete*, *explain* and *read*: tables with blanks, rubrics, charts."""

from __future__ import annotations

from decimal import Decimal

import jsonschema
import pytest
import yaml
from tasks_help import codes, in_a_row, solved

from authoring.faults import ContentError
from authoring.tasks.complete import roman
from authoring.tasks.read import reading_tolerance
from authoring.tasks.solved import BlankTable, Chart, Solved
from authoring.tasks.task import tasks
from authoring.working.text import to_text

COMPLETE = "- complete: [S, Z_eff]\n  of: V\n  rows: [4s, 3d]\n"
READ = "- read: effective nuclear charge\n  among: Na-Ca\n"


def table(part: Solved) -> list[list[str]]:
    (shown,) = part.exhibits
    assert isinstance(shown, BlankTable)
    return [["?" if cell is None else to_text(cell) for cell in row] for row in shown.rows]


def chart(part: Solved) -> Chart:
    (shown,) = part.exhibits
    assert isinstance(shown, Chart)
    return shown


def test_every_cell_is_blank_by_default() -> None:
    part = solved(COMPLETE)
    assert table(part) == [["4s", "?", "?"], ["3d", "?", "?"]]
    # By hand: S 19.70 and 18.70, Z 23.
    assert part.answer.shown == "(i) 19.70; (ii) 3.30; (iii) 18.70; (iv) 4.30"
    assert [answer.value for answer in part.answer.value] == [  # type: ignore[attr-defined]
        Decimal("19.70"),
        Decimal("3.30"),
        Decimal("18.70"),
        Decimal("4.30"),
    ]
    assert codes(part) == ["A1", "A2", "A3", "A4"]
    assert part.points[1].what == "(ii) effective nuclear charge of 4s"
    assert part.ask.endswith("Complete the blanks (i) to (iv).")


@pytest.mark.parametrize(
    ("blanks", "rows"),
    [
        ("Z_eff", [["4s", "19.70", "?"], ["3d", "18.70", "?"]]),
        ("[3d]", [["4s", "19.70", "3.30"], ["3d", "?", "?"]]),
        ("[S of 4s, Z_eff of 3d]", [["4s", "?", "3.30"], ["3d", "18.70", "?"]]),
    ],
)
def test_blanks_are_named(blanks: str, rows: list[list[str]]) -> None:
    assert table(solved(COMPLETE + f"  blanks: {blanks}\n")) == rows


def test_a_number_of_blanks_is_spread_alike_each_time() -> None:
    for count in range(1, 5):
        part = solved(COMPLETE + f"  blanks: {count}\n")
        assert sum(cell == "?" for row in table(part) for cell in row) == part.marks == count
        assert part == solved(COMPLETE + f"  blanks: {count}\n")


def test_printed_cells_are_not_worked_again() -> None:
    part = solved(COMPLETE + "  blanks: [Z_eff of 4s]\n")
    assert [to_text(step.line.chain) for step in part.steps] == ["Z_eff = Z − S = 23 − 19.70 = 3.30"]


def test_a_blank_passed_on_the_way_keeps_its_line() -> None:
    part = solved("- complete: [Z_eff, S]\n  of: V\n  rows: [4s, 3d]\n")
    lines = [part.steps[point.line].line.shown for point in part.points]
    assert lines == ["3.30", "19.70", "4.30", "18.70"]
    for point in part.points:
        step = part.steps[point.line]
        assert step.target.quantity in point.what and point.what.endswith(step.target.electron.label)  # type: ignore


def test_a_table_of_species_has_units_in_its_heads() -> None:
    part = solved(
        "- complete: [configuration, orbital energy]\n  rows: [Na, Mg]\n  with: {form: noble-gas core}\n"
        "  electron: outermost\n  unit: kJ/mol\n"
    )
    (shown,) = part.exhibits
    assert isinstance(shown, BlankTable)
    assert [to_text(head) for head in shown.header] == ["species", "configuration", "E / kJ/mol"]
    assert [to_text(row[1]) for row in shown.filled] == ["[Ne] 3s¹", "[Ne] 3s²"]
    assert codes(part) == ["B1", "A1", "B2", "A2"]
    assert "an outermost electron of each species" in part.ask


def test_what_an_earlier_part_gave_may_be_filled_in() -> None:
    _, part = in_a_row("- calculate: S\n  of: V\n  electron: 4s\n", COMPLETE)
    assert part.marks == 4


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (COMPLETE + "  blanks: 0\n", "4 cells"),
        (COMPLETE + "  blanks: 5\n", "4 cells"),
        (COMPLETE + "  blanks: [radius]\n", "names no cell"),
        (COMPLETE + "  blanks: [S of 3p]\n", "names no cell"),
        (COMPLETE + "  blanks: 3\n  marks: 2\n", "marks: 2"),
        (COMPLETE + "  unit: pm\n", "no column is given in 'pm'"),
        (COMPLETE + "  with: {stage: 2}\n", "no column takes 'stage'"),
        ("- complete: [S, screening constant]\n  rows: [Na, Mg]\n", "same quantity twice"),
        ("- complete: [S]\n  rows: [Na, Na]\n", "same thing twice"),
        ("- complete: [S, configuration]\n  of: V\n  rows: [4s, 3d]\n", "no column for it"),
        ("- complete: [configuration]\n  rows: [Na, Mg]\n  electron: 3s\n", "leave `electron` out"),
        ("- complete: [S, Z_eff]\n  rows: H-Rn\n", "at most 60 cells"),
    ],
)
def test_a_table_that_cannot_be_made_says_why(text: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved(text)


def test_blanks_are_numbered_as_romans_did() -> None:
    assert [roman(n) for n in (1, 4, 9, 14, 40, 60)] == ["i", "iv", "ix", "xiv", "xl", "lx"]


EXPLAIN = "- explain: why `4s` is lost before `3d`.\n  rubric:\n    - it lies further out\n"


@pytest.mark.parametrize(
    ("text", "printed"),
    [
        ("why `4s` is lost first", "Explain why `4s` is lost first."),
        ("Why `4s` is lost first.", "Explain why `4s` is lost first."),
        ("Explain how it is lost.", "Explain how it is lost."),
        ("explain how it is lost", "Explain how it is lost."),
        ("Why is `4s` lost first?", "Why is `4s` lost first?"),
        ("why is `4s` lost first? ", "Why is `4s` lost first?"),
        ("Why is it lost? Name the shells.", "Why is it lost? Name the shells."),
        ("`4s` is lost first: why?", "`4s` is lost first: why?"),
        ("Slater's rules in one sentence", "Explain Slater's rules in one sentence."),
        ("why", "Explain why."),
    ],
)
def test_what_is_to_be_explained_reads_as_a_sentence(text: str, printed: str) -> None:
    data = yaml.safe_dump([{"explain": text, "rubric": ["it lies further out"]}])
    assert solved(data).ask == printed


def test_each_point_of_the_rubric_earns_a_mark() -> None:
    part = solved(EXPLAIN + "    - {point: its charge is smaller, mark: M}\n  not: [it is filled first]\n")
    assert part.ask == "Explain why `4s` is lost before `3d`."
    assert codes(part) == ["B1", "M1"]
    assert part.rubric == (
        ("B1", "it lies further out"),
        ("M1", "its charge is smaller"),
        ("not", "it is filled first"),
    )
    assert part.answer.value == "it lies further out; its charge is smaller"
    assert solved(EXPLAIN + "  model: A `4s` electron is further out.\n").answer.shown.startswith("A `4s`")


@pytest.mark.parametrize("more", ["  marks: 2\n", "  scheme: [{mark: B, for: S}]\n"])
def test_an_explanation_is_marked_by_its_rubric(more: str) -> None:
    with pytest.raises(ContentError, match="rubric"):
        solved(EXPLAIN + more)


@pytest.mark.parametrize(
    "text",
    [
        "- explain: why\n",
        "- explain: why\n  rubric: []\n",
        "- explain: why\n  rubric: ['']\n",
        "- explain: ''\n  rubric: [a]\n",
        "- explain: why\n  rubric: [{point: a, mark: Q}]\n",
        "- explain: why\n  rubric: [{points: a}]\n",
        "- explain: why\n  rubric: [[a]]\n",
    ],
)
def test_a_rubric_without_points_is_refused(text: str) -> None:
    with pytest.raises(ValueError):
        solved(text)


def test_the_schema_allows_a_rubric_of_texts() -> None:
    schema = tasks()["explain"].fields.model_json_schema(by_alias=True)
    example = yaml.load(tasks()["explain"].example, yaml.BaseLoader)[0]
    jsonschema.validate(example, schema)
    with pytest.raises(jsonschema.ValidationError):
        jsonschema.validate({**example, "rubric": [["a"]]}, schema)


def test_a_value_is_read_as_closely_as_the_chart_allows() -> None:
    part = solved(READ + "  find: value\n  at: P\n")
    # 15 − (4 × 0.35 + 8 × 0.85 + 2) = 4.80, by hand; the values span 4.55, and 4.55/40 is more than 0.1.
    assert part.answer.value == Decimal("4.80")
    assert part.answer.shown == "4.8"
    assert part.answer.accepted == (Decimal("4.6"), Decimal("5.0"))
    assert part.notes == ("Accept from 4.6 to 5.0.",)
    shown = chart(part)
    assert [label for label, _ in shown.series[0].points] == ["Na", "Mg", "Al", "Si", "P", "S", "Cl", "Ar", "K", "Ca"]
    assert "P 4.8" in shown.description


def test_a_tolerance_of_ones_own_counts() -> None:
    part = solved(READ + "  find: value\n  at: Mg\n  tolerance: 0.05\n")
    assert part.answer.accepted == (Decimal("2.80"), Decimal("2.90"))


def test_a_negative_reading_keeps_its_sign_and_unit() -> None:
    part = solved("- read: orbital energy\n  of: V\n  among: [4s, 3d, 3p]\n  at: 3d\n  style: levels\n")
    # −13.6057 × (4.30/3)² = −27.95, by hand
    assert part.answer.shown == "−28" and part.answer.unit == "eV"
    assert part.answer.accepted is not None and part.answer.accepted[0] < Decimal("-27.95") < part.answer.accepted[1]
    assert part.notes[0].startswith("Accept from −") and part.notes[0].endswith(" eV.")
    assert chart(part).style == "levels"


def test_extremes_and_jumps_are_found() -> None:
    # Largest at Ar, 6.75; it falls to 2.20 at K (Slater's rules by hand).
    assert solved(READ + "  find: largest\n").answer.shown == "Ar"
    fall = solved(READ + "  find: fall\n")
    assert fall.answer.shown == "Ar > K"
    assert to_text(fall.steps[0].line.chain) == "Z_eff(Ar) ≈ 6.8 > Z_eff(K) ≈ 2.2"
    assert codes(solved(READ + "  find: fall\n  marks: 2\n")) == ["B1", "M1"]


@pytest.mark.parametrize(
    ("rest", "words"),
    [
        ("  find: value\n", "`at` says where"),
        ("  find: value\n  at: Fe\n", "not on the chart"),
        ("  find: largest\n  at: Na\n", "belongs to `find: value`"),
        ("  find: smallest\n", "Na and K cannot be told apart"),
        ("  find: rise\n", "cannot be told apart"),
        ("  find: value\n  at: P\n  tolerance: 0\n", "larger than nothing"),
    ],
)
def test_what_cannot_be_read_says_why(rest: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved(READ + rest)


def test_a_chart_needs_points_that_differ() -> None:
    with pytest.raises(ContentError, match="2 to 40 points"):
        solved("- read: effective nuclear charge\n  among: [Na]\n  find: largest\n")
    with pytest.raises(ContentError, match="all values on the chart are equal"):
        solved("- read: effective nuclear charge\n  among: [Na, K]\n  find: largest\n")
    with pytest.raises(ContentError, match="no fall"):
        solved("- read: effective nuclear charge\n  among: Na-Ar\n  find: fall\n")


@pytest.mark.parametrize(
    ("span", "tolerance"),
    [("4.55", "0.2"), ("40", "1"), ("41", "2"), ("80.1", "5"), ("0.04", "0.001"), ("201", "10"), ("370", "10")],
)
def test_the_tolerance_is_a_fortieth_or_the_next_nice_number(span: str, tolerance: str) -> None:
    assert reading_tolerance([Decimal(0), Decimal(span)]) == Decimal(tolerance)
