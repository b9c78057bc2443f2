"""The judge, case by case: what single scripts earn, and why. The parts are worked by the engine from their YAML."""

from __future__ import annotations

import time

from hypothesis import given, settings
from hypothesis import strategies as st
from marking_truth import bank, solved_parts
from tasks_help import in_a_row, solved

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.marking.explaining import Terms
from authoring.marking.judge import Policy, best_judged, judged
from authoring.marking.judgement import Judgement, Own
from authoring.shielding.practice import published
from authoring.slips.catalogue import shipped
from authoring.tasks.solved import Options, Solved

TERMS = Terms(published(), shipped())
S_OF_V = "- calculate: screening constant\n  of: V\n  electron: 4s\n  marks: 3\n"
Z_OF_V = "- calculate: effective nuclear charge\n  of: V\n  electron: 4s\n"
E_OF_V = "- calculate: orbital energy\n  of: V\n  electron: 4s\n"


def judge(part: Solved, *lines: str, own: Own | None = None, policy: Policy | None = None) -> Judgement:
    """One part of a script, judged."""
    return judged("1a", part, lines, Own() if own is None else own, TERMS, policy or Policy())


def lost(found: Judgement) -> list[str]:
    """The codes of the points that are not given."""
    return [point.code for point in found.points if not point.awarded]


# --- bare values ---------------------------------------------------------------------------------------


def test_a_bare_right_value_earns_full_marks_unless_the_plan_says_otherwise() -> None:
    part = solved(S_OF_V)
    assert judge(part, "19.70").awarded == 3
    found = judge(part, "19.70", policy=Policy("accuracy only"))
    assert [point.awarded for point in found.points] == [int(point.aspect == "value") for point in part.points]
    assert (
        judge(part, "S = 1 × 0.35 + 11 × 0.85 + 10 × 1.00 = 19.70", policy=Policy("accuracy only")).points[-1].awarded
    )


def test_a_bare_wrong_value_names_its_slip() -> None:
    found = judge(solved(S_OF_V), "20.05")
    assert found.slips == ("self counted",)
    assert found.certainty == "certain"
    assert found.awarded == 2


# --- units, signs, figures ------------------------------------------------------------------------------


def test_an_energy_in_another_unit_is_taken() -> None:
    part = solved(E_OF_V)
    # −10.82 eV; 1 eV is 96.4853 kJ/mol (CODATA 2018).
    assert part.answer.shown == "−10.82"
    assert judge(part, "E = −1044 kJ/mol").awarded == part.marks


def test_a_missing_unit_is_remarked_and_a_wrong_one_refused() -> None:
    part = solved(E_OF_V)
    found = judge(part, "E = −10.82")
    assert found.awarded == part.marks
    assert any("the unit is missing; it is eV" in remark for remark in found.remarks)
    found = judge(part, "E = −10.82 pm")
    assert found.awarded < part.marks
    assert any("pm is written" in point.reason for point in found.points)


def test_a_lost_sign_is_called_that() -> None:
    found = judge(solved(E_OF_V), "E = 10.82 eV")
    assert "A1" in lost(found) or "A3" in lost(found)
    assert any("sign" in point.reason for point in found.points)
    assert not found.slips


def test_a_value_rounded_early_is_accepted_and_too_few_figures_are_left_to_a_person() -> None:
    part = solved(E_OF_V)
    assert judge(part, "E = −13.6 × (0.892)^2 = −10.82 eV").awarded == part.marks
    assert judge(part, "E = −10.85 eV").awarded == part.marks
    found = judge(part, "E = −11 eV")
    assert found.needs_person
    assert any("too few figures" in point.reason for point in found.points)


# --- which line counts -----------------------------------------------------------------------------------


def test_what_is_crossed_out_does_not_count() -> None:
    found = judge(solved(S_OF_V), "~~S = 20.05~~ S = 19.70")
    assert found.awarded == 3
    assert not found.slips
    assert found.remarks == ("crossed out: S = 20.05",)


def test_the_last_word_on_a_line_counts() -> None:
    found = judge(solved(S_OF_V), "S = 20.05", "S = 19.70")
    assert found.awarded == 3
    assert not found.slips


def test_a_line_about_another_electron_is_not_taken_for_this_one() -> None:
    found = judge(solved(S_OF_V), "S(3d) = 18.70")
    assert found.awarded == 0
    assert not found.slips


def test_a_part_left_out_leaves_the_next_with_nothing_to_carry() -> None:
    own = Own()
    first, second = in_a_row(S_OF_V, "- calculate: effective nuclear charge\n")
    assert judge(first, own=own).awarded == 0
    assert judge(second, "3.30", own=own).awarded == second.marks
    own = Own()
    judge(first, "S = 20.05", own=own)
    found = judge(second, "2.95", own=own)
    assert found.awarded == second.marks
    assert "follow-through" in found.points[-1].reason
    assert not found.slips


def test_what_nothing_explains_is_left_to_a_person() -> None:
    found = judge(solved(S_OF_V), "S = 17.31")
    assert found.certainty == "unexplained"
    assert found.needs_person


# --- choices ----------------------------------------------------------------------------------------------

RANK = "- rank: effective nuclear charge\n  among: [Na, Mg, Al]\n  electron: outermost\n  marks: 4\n"


def test_what_is_about_nothing_that_was_asked_is_left_to_a_person() -> None:
    """A line that cannot be read, or a statement of something else, may be meant as the answer."""
    part = solved("- calculate: unpaired electrons\n  of: Ti3+\n")
    for line in ("= = (", "[Ar] 3d5", "I cannot say"):
        found = judge(part, line)
        assert (found.awarded, found.certainty, found.needs_person) == (0, "unexplained", True), line
        assert any(point.open for point in found.points), line
    assert judge(part, "[Ar] 3d1", "1").awarded == part.marks
    # Nothing is lost for a line that cannot be read beside an answer that can.
    found = judge(solved(S_OF_V), "= = (", "19.70")
    assert (found.awarded, found.certainty) == (3, "certain")


def test_what_is_crossed_out_says_nothing() -> None:
    """Neither a negation nor the number of a line stands in what was crossed out."""
    decide = solved("- decide: first electron lost\n  of: V\n  marks: 2\n")
    assert judge(decide, "~~not 3d~~ 4s").points[0].awarded == 1
    assert judge(decide, "not 3d 4s").points[0].awarded == 0
    correct = solved("- correct: effective nuclear charge\n  of: V\n  electron: 4s\n  slip: self counted\n  marks: 3\n")
    line = correct.answer.value[0]
    assert judge(correct, f"~~{line}~~ 3.30").points[0].awarded == 0
    assert judge(correct, f"~~{line - 1}~~ {line}; 3.30").points[0].awarded == 1


def test_an_order_follows_the_candidates_own_values() -> None:
    part = solved(RANK)
    assert part.answer.shown == "Na < Mg < Al"
    assert judge(part, "Zeff(Na) = 2.20", "Zeff(Mg) = 2.85", "Zeff(Al) = 3.50", "Al > Mg > Na").awarded == 4
    found = judge(part, "Zeff(Na) = 2.20", "Zeff(Mg) = 2.05", "Zeff(Al) = 3.50", "Mg < Na < Al")
    assert found.points[-1].awarded == 1
    assert "follow-through" in found.points[-1].reason
    assert judge(part, "Zeff(Na) = 2.20", "Zeff(Mg) = 2.85", "Zeff(Al) = 3.50", "Mg < Na < Al").points[-1].awarded == 0


def test_a_decision_has_its_reason_from_values_or_from_a_person() -> None:
    part = solved("- decide: first electron lost\n  of: V\n  marks: 2\n")
    assert judge(part, "Zeff(4s) = 3.30 < Zeff(3d) = 4.30 → 4s").awarded == 2
    found = judge(part, "4s, because it is further out")
    assert [point.awarded for point in found.points] == [1, 0]
    assert found.needs_person
    found = judge(part, "3d")
    assert found.awarded == 0
    assert "d lost before s" in found.slips
    assert found.certainty == "ambiguous"
    assert judge(part, "not 4s").needs_person


def test_a_species_is_identified_by_symbol_or_name() -> None:
    part = solved(
        "- identify: effective nuclear charge\n  of: metal\n  electron: 3d\n  marks: 2\n",
        bindings={"metal": Species.parse("V"), "outer": Subshell.parse("4s")},
    )
    assert judge(part, "V").points[0].awarded == 1
    assert judge(part, "it is vanadium").points[0].awarded == 1
    assert judge(part, "Cr").points[0].awarded == 0


def test_an_option_may_be_named_by_its_letter_or_its_value() -> None:
    part = solved("- select: screening constant\n  of: V\n  electron: 4s\n  options: 4\n")
    (options,) = [each for each in part.exhibits if isinstance(each, Options)]
    for option in options.options:
        for text in (option.letter, f"({option.letter.lower()})", f"option {option.letter}", option.shown):
            found = judge(part, text)
            assert found.awarded == int(option.letter == part.answer.value), (text, found)
            assert found.slips == option.slips


def test_after_an_option_the_candidate_goes_on_with_its_value() -> None:
    first, second = in_a_row(
        "- select: screening constant\n  of: V\n  electron: 4s\n  slips: [self counted, core only, one for each]\n",
        "- calculate: effective nuclear charge\n",
    )
    (options,) = [each for each in first.exhibits if isinstance(each, Options)]
    letter = next(each.letter for each in options.options if each.slips == ("self counted",))
    own = Own()
    assert judge(first, letter, own=own).awarded == 0
    assert judge(second, "2.95", own=own).awarded == second.marks


def test_a_correction_names_the_line_and_goes_on() -> None:
    part = solved("- correct: effective nuclear charge\n  of: V\n  electron: 4s\n  slip: self counted\n  marks: 3\n")
    line = part.answer.value[0]
    assert judge(part, f"line {line}; 3.30").awarded >= 2
    assert judge(part, f"{line}, S = 0.35 + 11 × 0.85 + 10 = 19.70", "Zeff = 3.30").awarded == 3
    assert judge(part, f"line {line - 1}; 3.30").points[0].awarded == 0


def test_a_table_takes_its_blanks_by_label_or_in_order() -> None:
    part = solved("- complete: [screening constant, effective nuclear charge]\n  of: V\n  rows: [4s, 3d]\n")
    # Slater 1930 by hand: S(4s) 19.70, S(3d) 18.70.
    assert judge(part, "19.70; 3.30; 18.70; 4.30").awarded == 4
    assert judge(part, "(iv) 4.30", "(iii) 18.70", "(i) 19.70", "(ii) 3.30").awarded == 4
    found = judge(part, "(i) 20.05; (ii) 2.95; (iii) 18.70; (iv) 4.30")
    assert lost(found) == ["A1"]
    assert found.slips == ("self counted",)


def test_a_reading_is_right_within_the_chart() -> None:
    part = solved("- read: effective nuclear charge\n  among: [Na, Mg, Al, Si]\n  electron: outermost\n  at: Al\n")
    low, high = part.answer.accepted
    for value, marks in ((low, 1), (high, 1), (low - 1, 0), (high + 1, 0)):
        assert judge(part, f"{value}").awarded == marks


def test_of_two_alternatives_the_better_one_counts() -> None:
    one, other = solved(S_OF_V), solved("- calculate: screening constant\n  of: Fe\n  electron: 4s\n  marks: 3\n")
    found = best_judged("2b", (one, other), ("22.25",), Own(), TERMS, Policy())
    assert (found.awarded, found.out_of) == (3, 3)


# --- any text ----------------------------------------------------------------------------------------------

PARTS = [part for asked in bank(1, "hostile") for part in solved_parts(asked)]
PIECES = st.sampled_from(
    ["S", "=", "19.70", "Z_eff", "(", ")", "^", "×", "0.35", "+", "→", "<", ">", ";", ",", "eV", "1s2", "[Ar]", "4s",
     "(i)", "line", "3", "~~", "ok", "-", "kJ/mol", "V", "Na", "√", "/", "e9", "⁹", "\x00", "𝟙", "0", "1e400", "not"]
)  # fmt: skip
TEXTS = st.one_of(st.text(max_size=80), st.lists(PIECES, max_size=30).map(" ".join), st.lists(PIECES).map("".join))


@settings(max_examples=400, deadline=None)
@given(st.sampled_from(PARTS), st.lists(TEXTS, min_size=1, max_size=4))
def test_no_text_makes_the_judge_fail(part: Solved, lines: list[str]) -> None:
    begun = time.perf_counter()
    found = judge(part, *lines)
    assert 0 <= found.awarded <= found.out_of == part.marks
    assert time.perf_counter() - begun < 5
