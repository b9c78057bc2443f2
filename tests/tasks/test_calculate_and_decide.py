"""*calculate* and *decide*."""

from __future__ import annotations

import pytest
from tasks_help import codes, in_a_row, solved, wrongs

from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.working.text import to_text

Z_EFF = "- calculate: effective nuclear charge\n"


def test_the_points_go_to_what_is_asked_first() -> None:
    part = solved("- calculate: orbital energy\n  of: V\n  electron: 4s\n  marks: 1\n")
    assert [(point.code, part.steps[point.line].target.quantity) for point in part.points] == [("A1", "orbital energy")]
    two = solved("- calculate: orbital energy\n  of: V\n  electron: 4s\n  marks: 3\n")
    assert [part.steps[point.line].target.quantity for point in two.points] == [
        "effective nuclear charge",
        "orbital energy",
        "orbital energy",
    ]


def test_single_slips_lead_to_their_wrong_answers() -> None:
    found = wrongs(solved(Z_EFF + "  of: V\n  electron: 4s\n"))
    # By hand: 23 − (2 × 0.35 + 11 × 0.85 + 10), 23 − (0.35 + 21), and S itself.
    assert found["self counted"] == "2.95"
    assert found["1.00 for all inner"] == "1.65"
    assert found["stopped at S"] == "19.70"
    assert "0.35 in 1s" not in found


def test_the_answer_is_rounded_as_the_part_says() -> None:
    part = solved("- calculate: orbital energy\n  of: V\n  electron: 4s\n  figures: 2\n")
    # −13.6057 × (3.30/3.7)² = −10.82…, by hand
    assert part.answer.shown == "−11"
    assert part.ask.endswith("Give your answer to 2 significant figures.")
    with pytest.raises(ContentError, match="not both"):
        solved("- calculate: orbital energy\n  of: V\n  figures: 2\n  places: 2\n")


def test_what_an_earlier_part_gave_is_not_asked_again() -> None:
    with pytest.raises(ContentError, match="earlier part already gives"):
        in_a_row(Z_EFF + "  of: V\n  electron: 4s\n", Z_EFF)
    with pytest.raises(ContentError, match="earlier part already gives"):
        in_a_row("- decide: first electron lost\n  of: V\n", "- decide: first electron lost\n")


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (Z_EFF, "needs a species"),
        (Z_EFF + "  of: Vv\n", "neither drawn nor a species"),
        (Z_EFF + "  of: outer\n", "not a species"),
        (Z_EFF + "  of: V\n  electron: 5s\n", "V has no 5s electron"),
        (Z_EFF + "  of: V\n  electron: metal\n", "not an electron"),
        (Z_EFF + "  of: V\n  unit: eV\n", "not given in 'eV'"),
        (Z_EFF + "  of: V\n  with: {stage: 2}\n", "takes no 'stage'"),
        ("- calculate: configuration\n  of: V\n  electron: 4s\n", "not a quantity of an electron"),
        (Z_EFF + "  of: V\n  scheme: [{mark: A, for: radius}]\n", "no line of this working"),
        (Z_EFF + "  of: V\n  marks: 2\n  scheme: [{mark: A, for: Z_eff}]\n", "has 1 points"),
    ],
)
def test_a_part_that_cannot_be_asked_says_why(text: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved(text)


def test_a_scheme_may_name_quantities_by_their_symbols_and_the_closing_line() -> None:
    part = solved(
        "- decide: effective nuclear charge\n  of: V\n  between: [4s, 3d]\n"
        "  scheme: [{mark: A, for: Z_eff}, {mark: B, for: comparison, what: it is 3d}]\n"
    )
    assert codes(part) == ["A1", "B1"]
    assert part.points[1].what == "it is 3d"
    assert part.points[1].aspect == "choice"


def test_the_electron_lost_first_is_decided_with_a_reason() -> None:
    part = solved("- decide: first electron lost\n  of: metal\n")
    assert part.answer.value == Subshell.parse("4s")
    assert [point.aspect for point in part.points] == ["choice", "reason"]
    assert wrongs(part)["d lost before s"] == "3d"


def test_two_electrons_are_compared() -> None:
    part = solved("- decide: effective nuclear charge\n  of: V\n  between: [4s, 3d]\n  which: smaller\n")
    assert part.answer.shown == "4s"
    # 23 − 19.70 and 23 − (2 × 0.35 + 18), by hand
    assert to_text(part.steps[-1].line.chain) == "Z_eff(4s) = 3.30 < Z_eff(3d) = 4.30 → 4s"
    assert codes(part) == ["A1", "A2", "B1", "M1"]
    # Counting 4s inside 3d takes 2 from 4.30 and leaves 2.30: then 3d is the smaller.
    assert wrongs(part)["next s inside d"] == "3d"


def test_two_species_are_compared() -> None:
    part = solved("- decide: effective nuclear charge\n  between: [K, Ca+]\n  marks: 2\n")
    assert part.answer.shown == "Ca+"
    assert codes(part) == ["B1", "M1"]


@pytest.mark.parametrize(
    ("rest", "words"),
    [
        ("", "two things"),
        ("  between: [K]\n", "takes two names, not 1"),
        ("  between: [K, Ca, Sc]\n", "takes two names, not 3"),
        ("  between: [K, K]\n", "same thing twice"),
        ("  of: V\n  between: [3s, 3p]\n", "both are"),
        ("  of: V\n  between: [3s, 6s]\n", "no 6s electron"),
        ("  of: V\n  between: [3s, Fe]\n", "neither a drawn electron nor a subshell"),
    ],
)
def test_a_comparison_that_decides_nothing_says_why(rest: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved("- decide: effective nuclear charge\n" + rest)


def test_what_has_no_size_decides_nothing() -> None:
    with pytest.raises(ContentError, match="no size"):
        solved("- decide: configuration\n  between: [K, Ca]\n")
