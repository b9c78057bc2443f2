"""*select* and *correct*: what slips make of an answer, as options and as a flawed working."""

from __future__ import annotations

import itertools
from collections import Counter
from decimal import Decimal

import pytest
from tasks_help import codes, solved, wrongs

from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.slips.catalogue import make_slip, shipped
from authoring.tasks.solved import Options, ShownWorking, Solved
from authoring.working.text import to_text

SELECT = "- select: effective nuclear charge\n  of: metal\n  electron: outer\n"
CORRECT = "- correct: effective nuclear charge\n  of: metal\n  electron: outer\n"


def options(part: Solved) -> Options:
    (shown,) = part.exhibits
    assert isinstance(shown, Options)
    return shown


def working(part: Solved) -> list[str]:
    (shown,) = part.exhibits
    assert isinstance(shown, ShownWorking)
    return [to_text(line.chain) for line in shown.lines]


def test_every_wrong_option_is_the_answer_of_a_slip() -> None:
    part = solved(SELECT + "  slips: [self counted, 1.00 for all inner, stopped at S]\n")
    # By hand: 3.30; 23 − 20.05, 23 − 21.35, and S.
    found = {option.shown: option.slips for option in options(part).options}
    assert found == {
        "3.30": (),
        "2.95": ("self counted",),
        "1.65": ("1.00 for all inner",),
        "19.70": ("stopped at S",),
    }
    letters = {option.shown: option.letter for option in options(part).options}
    assert wrongs(part) == {
        "self counted": letters["2.95"],
        "1.00 for all inner": letters["1.65"],
        "stopped at S": letters["19.70"],
    }
    assert part.answer.value == letters["3.30"]
    assert codes(part) == ["B1"] and part.points[0].aspect == "choice"


def test_the_right_option_moves_evenly_from_paper_to_paper() -> None:
    letters = [solved(SELECT, turn=turn).answer.shown for turn in range(40)]
    assert Counter(letters) == dict.fromkeys("ABCD", 10)
    assert all(one != other for one, other in itertools.pairwise(letters))


def test_the_right_option_stands_elsewhere_in_another_part() -> None:
    parts = [SELECT.replace("outer\n", f"{electron}\n") for electron in ("4s", "3d", "3p", "2p", "2s", "1s")]
    assert len({solved(text + "  options: 3\n").answer.shown for text in parts}) > 1


def test_options_differ_and_none_stands_out_of_the_order() -> None:
    for symbol in ("Mg", "Si", "Cl", "V", "Co", "Br"):
        for turn in range(5):
            part = solved(
                SELECT.replace("outer", "outermost") + "  options: 5\n",
                turn=turn,
                bindings={"metal": Species.parse(symbol)},
            )
            shown = options(part).options
            assert [option.letter for option in shown] == list("ABCDE")
            assert len({option.shown for option in shown}) == 5
            numbers = [Decimal(option.shown.replace("−", "-")) for option in shown]
            # Ascending, begun anywhere: the right one does not stand out of the row.
            start = numbers.index(min(numbers))
            assert numbers[start:] + numbers[:start] == sorted(numbers)
            assert sum(not option.slips for option in shown) == 1


def test_configurations_are_options_too() -> None:
    part = solved("- select: configuration\n  of: Fe2+\n  options: 3\n")
    found = {option.shown: option.slips for option in options(part).options}
    # NIST: Fe2+ is [Ar] 3d6; taking 3d first gives 3d4 4s2.
    assert found["1s2 2s2 2p6 3s2 3p6 3d6"] == ()
    assert found["1s2 2s2 2p6 3s2 3p6 3d4 4s2"] == ("d lost before s",)


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (SELECT + "  slips: [self counted]\n", "these slips give 1"),
        (SELECT + "  slips: [0.35 in 1s, self counted, stopped at S]\n", "these slips give 2"),
        (SELECT + "  slips: [self cuonted]\n", "no slip 'self cuonted'"),
        ("- select: first electron lost\n  of: Na\n", "slips give 0"),
    ],
)
def test_too_few_distractors_are_refused(text: str, words: str) -> None:
    with pytest.raises(ContentError, match=words):
        solved(text)


@pytest.mark.parametrize("number", ["1", "7", "many"])
def test_a_number_of_options_that_makes_no_choice_is_refused(number: str) -> None:
    with pytest.raises(ValueError, match="options"):
        solved(SELECT + f"  options: {number}\n")


def test_a_courses_own_slip_makes_an_option() -> None:
    mine = make_slip("halves", {"did": "0.50 for all.", "tell": "0.35.", "changes": {"same_group": "0.50"}})
    part = solved(SELECT + "  options: 2\n  slips: halves\n", slips=shipped().with_more([mine]))
    # 23 − (0.50 + 9.35 + 10), by hand
    assert {option.shown for option in options(part).options} == {"3.30", "3.15"}


def test_the_flawed_working_goes_wrong_where_the_slip_does() -> None:
    part = solved(CORRECT + "  slip: self counted\n")
    lines = working(part)
    assert lines[2] == "4s: same group 2 × 0.35; one shell in 11 × 0.85; deeper 10 × 1.00"
    assert lines[-1] == "Z_eff = Z − S = 23 − 20.05 = 2.95"
    assert part.answer.kind == "correction"
    assert part.answer.value == (3, Decimal("3.30"))
    assert part.answer.shown == "line 3; 3.30"
    assert to_text(part.steps[0].line.chain) == "first wrong line: 3"
    assert [step.line.shown for step in part.steps[-2:]] == ["19.70", "3.30"]
    assert codes(part) == ["B1", "M1", "A1"]
    assert [point.line for point in part.points] == [0, 1, len(part.steps) - 1]
    assert wrongs(part) == {"self counted": "2.95"}
    assert "counted among the electrons that screen it" in part.notes[-1]


@pytest.mark.parametrize(
    ("slip", "line"),
    [("s left out for p", 2), ("s counted inside p", 2), ("1.00 for all inner", 3), ("stopped at S", 5)],
)
def test_the_first_wrong_line_is_the_slips(slip: str, line: int) -> None:
    part = solved("- correct: effective nuclear charge\n  of: Cl\n  electron: 3p\n  slip: " + slip + "\n")
    assert part.answer.value[0] == line  # type: ignore[index]
    right = [to_text(step.line.chain) for step in part.steps[1:]]
    assert working(part)[line - 1] != right[0]


def test_a_wrong_configuration_is_line_one() -> None:
    part = solved("- correct: effective nuclear charge\n  of: Cr\n  electron: 4s\n  slip: filled by rote\n")
    # 4s1 is the measured one (NIST); by rote 4s2 3d4: 24 − (0.35 + 12 × 0.85 + 10) = 3.45, by hand
    assert part.answer.value == (1, Decimal("2.95"))
    assert working(part)[-1].endswith("= 3.45")


@pytest.mark.parametrize("slip", ["0.35 in 1s", "charge ignored", "next s inside d", "n for n*"])
def test_a_blind_slip_is_refused(slip: str) -> None:
    with pytest.raises(ContentError, match="nothing to correct"):
        solved(CORRECT + f"  slip: {slip}\n")


def test_an_unknown_slip_is_refused_with_the_nearest() -> None:
    with pytest.raises(ContentError) as caught:
        solved(CORRECT + "  slip: self count\n")
    assert "'self counted'" in caught.value.full_message


def test_left_open_the_variant_settles_the_slip() -> None:
    chosen = {}
    for symbol in ("Ti", "V", "Mn", "Fe", "Co", "Ni", "Zn"):
        drawn = {"metal": Species.parse(symbol)}
        part = solved(CORRECT.replace("outer", "4s"), bindings=drawn)
        assert part == solved(CORRECT.replace("outer", "4s"), bindings=drawn, turn=5)
        chosen[symbol] = part.wrong[0].slips
        assert part.wrong[0].shown != part.answer.shown.split("; ")[1]
    assert len(set(chosen.values())) > 1


def test_a_slip_that_empties_the_named_subshell_is_refused() -> None:
    """With 3d filled before 4s, titanium is [Ar] 3d4 (by hand): nobody with that slip has a 4s electron."""
    drawn = {"metal": Species.parse("Ti")}
    text = CORRECT.replace("outer", "4s") + "  slip: d filled before next s\n"
    with pytest.raises(ContentError, match=r"Ti is \[Ar\] 3d4 and has no 4s electron") as caught:
        solved(text, bindings=drawn, new=True)
    assert caught.value.word == "d filled before next s"
    # The 3d electrons are there; and an electron that is not named is the outermost, whatever that is.
    for electron in ("3d", "outermost"):
        part = solved(text.replace("4s\n", f"{electron}\n"), bindings=drawn, new=True)
        assert part.wrong[0].slips == ("d filled before next s",)


def test_what_an_older_record_holds_is_made_again() -> None:
    """Sets made before the refusal are marked by the working that they printed."""
    text = CORRECT.replace("outer", "4s") + "  slip: d filled before next s\n"
    part = solved(text, bindings={"metal": Species.parse("Ti")})
    assert part.wrong[0].slips == ("d filled before next s",)
    assert part.answer.value == (1, Decimal("3.15"))  # 22 − (0.35 + 10 × 0.85 + 10), by hand


def test_left_open_too_the_slip_must_leave_the_electron() -> None:
    """V3+ has two 3d electrons; lost in the wrong order they are 4s2 (by hand)."""
    text = "- correct: screening constant\n  of: V3+\n  electron: 3d\n"
    assert solved(text).wrong[0].slips == ("d lost before s",)
    with pytest.raises(ContentError, match=r"V3\+ is \[Ar\] 4s2 and has no 3d electron"):
        solved(text, new=True)


def test_marks_beyond_the_three_are_refused() -> None:
    assert codes(solved(CORRECT + "  slip: self counted\n  marks: 1\n")) == ["B1"]
    with pytest.raises(ContentError, match="marks: 4"):
        solved(CORRECT + "  slip: self counted\n  marks: 4\n")
