"""*rank* and *identify*: orders, ties, and species that must be told from all others."""

from __future__ import annotations

import pytest
from tasks_help import codes, in_a_row, solved, wrongs

from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.working.text import to_text

RANK = "- rank: effective nuclear charge\n"
IDENTIFY = "- identify: effective nuclear charge\n"


def test_species_are_put_in_order() -> None:
    part = solved(RANK + "  among: [Si, Na, Al, Mg]\n  electron: outermost\n")
    # Slater's rules by hand: 2.20, 2.85, 3.50, 4.15
    closing = "Z_eff(Na) = 2.20 < Z_eff(Mg) = 2.85 < Z_eff(Al) = 3.50 < Z_eff(Si) = 4.15 → Na < Mg < Al < Si"
    assert to_text(part.steps[-1].line.chain) == closing
    assert part.answer.kind == "order"
    assert part.answer.shown == to_text(part.answer.node) == "Na < Mg < Al < Si"
    assert part.answer.value == tuple(Species.parse(each) for each in ("Na", "Mg", "Al", "Si"))
    assert codes(part) == ["A1", "A2", "A3", "A4", "A5"]


def test_the_largest_may_come_first() -> None:
    part = solved(RANK + "  among: Na-Al\n  order: decreasing\n  marks: 1\n")
    assert part.answer.shown == "Al > Mg > Na"
    assert part.points[0].line == len(part.steps) - 1
    assert "decreasing effective nuclear charge" in part.ask


def test_electrons_of_one_species_are_ranked_by_energy() -> None:
    part = solved("- rank: orbital energy\n  of: Fe\n  among: [4s, 3d, 3p]\n")
    assert part.answer.shown == "3p < 3d < 4s"
    assert part.ask == (
        "Rank the `4s`, `3d` and `3p` electrons of iron in order of increasing orbital energy. Show your working."
    )
    # By hand: S reported as the charge, 4s has 22.25 (n* 3.7), 3d 19.75 and 3p 11.25 (n* 3): −R × 36.2, 43.3, 14.1.
    assert wrongs(part)["stopped at S"] == "3d < 4s < 3p"


def test_the_order_under_a_slip_is_the_slips_own() -> None:
    part = solved(RANK + "  among: [Na, Mg, Al]\n")
    # s counted 0.85 for a p electron: Al 3p is 13 − (2 × 0.85 + 8 × 0.85 + 2) = 2.50 < 2.85, by hand
    assert wrongs(part) == {"s counted inside p": "Na < Al < Mg"}


def test_values_that_stand_already_are_not_worked_again() -> None:
    *_, part = in_a_row(
        "- calculate: effective nuclear charge\n  of: Na\n",
        "- calculate: effective nuclear charge\n  of: Mg\n",
        RANK + "  among: [Na, Mg, Al]\n",
    )
    assert {step.target.species.label for step in part.steps[:-1]} == {"Al"}
    assert part.marks == 2


@pytest.mark.parametrize(
    ("rest", "words"),
    [
        ("  among: [Na, Mg]\n", "3 to 6 things to rank, not 2"),
        ("  among: Na-Ca\n", "not 10"),
        ("  among: [Na, Mg, Na]\n", "same thing twice"),
        ("  of: V\n  among: [4s, 3s, 3p]\n", "both are 11.75"),
        ("  among: [Li, Na, K]\n", "both are 2.20"),
        ("  among: [Na, Mg, Qq]\n", "Qq"),
        ("  of: V\n  among: [4s, 3s, 4f]\n", "V has no 4f electron"),
        ("  among: [Na, Mg, Al]\n  electron: 3p\n", "Na has no 3p electron"),
    ],
)
def test_what_cannot_be_ranked_says_why(rest: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved(RANK + rest)


def test_values_equal_as_printed_are_a_tie() -> None:
    # 3.00, 3.15 and 3.30 are told apart to two places, and not to none.
    assert solved(RANK + "  among: [Sc, Ti, V]\n  electron: 4s\n").answer.shown == "Sc < Ti < V"
    with pytest.raises(ContentError, match="both are 3"):
        solved(RANK + "  among: [Sc, Ti, V]\n  electron: 4s\n  places: 0\n")


def test_what_is_not_of_an_electron_takes_none() -> None:
    with pytest.raises(ContentError, match="no size"):
        solved("- rank: configuration\n  among: [Na, Mg, Al]\n")
    with pytest.raises(ContentError, match="leave `of` out"):
        solved("- rank: configuration\n  of: V\n  among: [4s, 3d, 3p]\n")


def test_the_species_of_a_value_is_identified() -> None:
    part = solved(IDENTIFY + "  of: V\n  electron: 3d\n  among: Sc-Zn\n")
    assert part.ask == (
        "One of the elements from scandium to zinc has the effective nuclear charge 4.30 for a `3d` electron. "
        "Identify it, and show how you know."
    )
    assert part.answer.value == Species.parse("V")
    assert part.given == (("effective nuclear charge", "4.30"),)
    assert to_text(part.steps[-1].line.chain).endswith("Z_eff(V) = 4.30 < Z_eff(Cr) = 4.60 < Z_eff(Mn) = 5.60 → V")
    assert codes(part) == ["A1", "M1"]


def test_without_a_list_the_pool_of_the_draw_is_meant() -> None:
    part = solved(IDENTIFY + "  of: metal\n  electron: 3d\n")
    assert "the elements from scandium to zinc" in part.ask
    with pytest.raises(ContentError, match="`among` says which species are possible"):
        solved(IDENTIFY + "  of: metal\n  electron: 3d\n", pools={})


def test_rivals_are_named() -> None:
    # Li and Na: 1.30 and 2.20; Na and K: both 2.20, by hand.
    with pytest.raises(ContentError, match="does not tell K from Na"):
        solved(IDENTIFY + "  of: K\n  among: [Li, Na, K]\n")
    assert solved(IDENTIFY + "  of: Li\n  among: [Li, Na, K]\n").answer.shown == "Li"


def test_rounding_can_make_rivals() -> None:
    with pytest.raises(ContentError, match="does not tell V from"):
        solved(IDENTIFY + "  of: V\n  electron: 4s\n  among: Sc-Zn\n  figures: 1\n")


def test_a_species_without_such_an_electron_is_no_rival() -> None:
    part = solved(IDENTIFY + "  of: Al\n  electron: 3p\n  among: [Na, Mg, Al]\n")
    assert "Of the 1 possible species" in part.notes[-1]


def test_a_configuration_identifies_a_species() -> None:
    part = solved("- identify: configuration\n  of: V\n  among: Sc-Zn\n")
    assert "`1s2 2s2 2p6 3s2 3p6 3d3 4s2`" in part.ask
    with pytest.raises(ContentError, match="Ar"):
        solved("- identify: configuration\n  of: K+\n  among: [Ar, K+, Ca]\n")


@pytest.mark.parametrize(
    ("rest", "words"),
    [
        ("  among: Sc-Zn\n", "`of` says"),
        ("  of: V\n  among: [V]\n", "at least two"),
        ("  of: V\n  among: [Na, Mg]\n", "V is not among"),
        ("  of: V\n  electron: 4p\n  among: Sc-Zn\n", "V has no 4p electron"),
    ],
)
def test_what_cannot_be_identified_says_why(rest: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved(IDENTIFY + rest)


def test_a_slip_leads_to_another_species() -> None:
    part = solved(IDENTIFY + "  of: Cr\n  electron: 4s\n  among: Sc-Zn\n")
    # The electron itself counted, V has 23 − 20.05 = 2.95, which is what Cr has (24 − 21.05), by hand.
    assert part.answer.shown == "Cr"
    assert part.given == (("effective nuclear charge", "2.95"),)
    assert wrongs(part)["self counted"] == "V"


def test_the_wording_names_what_the_quantity_is_of() -> None:
    part = solved("- rank: measured ionization energy\n  among: [Na, Mg, Al]\n  with: {stage: 2}\n")
    assert "increasing measured ionization energy (stage 2)" in part.ask
    # NIST: 47.29, 15.04 and 18.83 eV
    assert part.answer.shown == "Mg < Al < Na"
    counted = solved("- decide: unpaired electrons\n  between: [Mn, V]\n")
    assert "the larger number of unpaired electrons: manganese or vanadium" in counted.ask
