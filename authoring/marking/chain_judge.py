"""Stage 8, mark: a part answered by working: statements are held against the lines of the key, in order."""

from __future__ import annotations

from collections.abc import Sequence
from decimal import Decimal

from authoring.faults import ContentError
from authoring.marking.explaining import GOOD, RANK, Explained, Terms, explained
from authoring.marking.explaining_statements import explained_statement, same
from authoring.marking.forms import Written
from authoring.marking.judgement import Own
from authoring.marking.line_states import LineState, Working, implied_by, note, open_lines
from authoring.marking.trace import frontier, traced
from authoring.marking.units import in_key_unit
from authoring.shielding.quantity import Target, Value, quantities, quantity
from authoring.shielding.solve import Step, evaluate
from authoring.slips.diagnose import agrees
from authoring.tasks.solved import Solved
from authoring.working.numbers import Rounding

# What a candidate's label can stand for, by quantity.
LABELS = {
    "S": {"screening constant"},
    "Zeff": {"effective nuclear charge", "valence-count charge", "SCF charge"},
    "Z_core": {"valence-count charge"},
    "Z_SCF": {"SCF charge"},
    "Z": {"atomic number from Kα"},
    "n": {"unpaired electrons"},
    "E": {"orbital energy", "total energy", "Moseley Kα energy", "ionization energy"},
    "IE": {"ionization energy", "measured ionization energy"},
    "r": {
        "radius of maximum density",
        "ionic radius by screening split",
        "measured ionic radius",
        "measured atomic radius",
    },
    "χ": {"Allred-Rochow electronegativity"},
    "μ": {"spin-only magnetic moment"},
}


# What lines beside the working state: they are no lines of the key.
CONSTANTS = {"n*", "R", "N", "l", "a0", "a_0", "R_H", "Ry"}

# A line that says anew what stands already is less likely than a new one with one slip, likelier than with two.
RESTATED = 3.5
SLIPPED = (RANK["slip"], 2)


def read_working(solved: Solved, lines: Sequence[Written], own: Own, terms: Terms) -> Working:
    """Hold every statement of a script's part against the lines of its key."""
    working = Working(solved, [LineState() for _ in solved.steps], own)
    statements = [each for written in lines for each in (*written.earlier, written)]
    for at, statement in enumerate(statements):
        if statement.remark:
            working.remarks.append(f"{statement.text[:60]}: {statement.remark}")
        _hold(working, statement, terms, at == len(statements) - 1)
    _settle(working, terms)
    return working


def _settle(working: Working, terms: Terms) -> None:
    """Slips that one line cannot tell apart may be told by the others: the one that explains all of them is meant."""
    doubtful = [state for state in working.states if state.rivals and state.slips and state.finding == "slip"]
    if not doubtful:
        return
    names = {name for state in doubtful for name in _among(state)}
    fitting = {name for name in names if " + " not in name and _fits_all(working, name, terms)}
    for state in doubtful:
        told = fitting & _among(state)
        if len(told) == 1:
            state.slips, state.rivals, state.sure = (told.pop(),), (), True
            state.words = terms.slips.named(state.slips[0]).did


def _among(state: LineState) -> set[str]:
    """The explanations of a line that are left."""
    return {" + ".join(state.slips), *state.rivals}


def _fits_all(working: Working, name: str, terms: Terms) -> bool:
    """Whether every line that is stated comes out so under a slip, from what else is stated."""
    places = {step.target: state for step, state in zip(working.solved.steps, working.states, strict=True)}
    said = {k: v for k, v in working.own.values.items() if k not in places or places[k].stated}
    slip = (terms.slips.named(name),)
    for target, state in places.items():
        if not state.stated or target not in said or state.finding not in (*GOOD, "slip"):
            continue
        known = frontier(target, terms.practice, {k: v for k, v in said.items() if k != target})
        try:
            value = traced(target, terms.practice, known, slip)[-1].value
        except ContentError:
            return False
        if not (agrees(value, said[target], target) or same(value, said[target])):
            return False
    return True


def statements_of(written: Written) -> list[Written]:
    """A line as statements of one kind each: a comparison states the values that it compares, then its choice."""
    if written.kind != "ordering":
        return [written]
    found = [
        Written(
            written.text,
            "chain",
            written.label,
            name,
            members=(member,),
            value=member.value,
            shown=member.shown,
            unit=member.unit,
        )
        for name, member in zip(written.order, written.members, strict=False)
        if member.value is not None
    ]
    if written.electron is not None:
        found.append(Written(written.text, "electron", electron=written.electron))
    return found


def _hold(working: Working, written: Written, terms: Terms, last: bool) -> None:
    """Find the line that a statement is about, and note what it is."""
    if written.kind == "chain":
        _hold_number(working, written, terms, last)
    elif written.kind in ("configuration", "groups", "tally", "electron"):
        _hold_statement(working, written, terms)


# --- configurations, groups, tallies -------------------------------------------------------------------


def _hold_statement(working: Working, written: Written, terms: Terms) -> None:
    value = {
        "configuration": written.config,
        "groups": written.groups,
        "tally": written.terms,
        "electron": written.electron,
    }[written.kind]
    names: set[str] = {written.kind} if written.kind != "electron" else {"first electron lost"}
    found: list[tuple[int, Explained]] = []
    for at in open_lines(working, names, written):
        step = working.solved.steps[at]
        found.append((at, explained_statement(step.target, value, working.own.values, terms)))
    if found:
        at, best = min(found, key=lambda pair: (pair[1].rank, working.states[pair[0]].stated, pair[0]))
        note(working, at, best, terms)


# --- numbers ---------------------------------------------------------------------------------------


def _hold_number(working: Working, written: Written, terms: Terms, last: bool) -> None:
    candidates = list(open_lines(working, _names_for(written), written))
    candidates = [at for at in candidates if quantity(working.solved.steps[at].target.quantity).numeric]
    if written.unit and written.value is not None:
        units = {at: working.solved.steps[at].line.unit for at in candidates}
        candidates = [
            at for at in candidates if not in_key_unit(written.value, written.unit, units[at])[1]
        ] or candidates
    found: list[tuple[int, Explained]] = []
    for at in candidates:
        step = working.solved.steps[at]
        own = _with_subtrahend(working, step, written, terms)
        if again := implied_by(working, at):
            implied = {working.solved.steps[index].target for index in again}
            own = {target: value for target, value in own.items() if target not in implied}
        found.append(
            (
                at,
                explained(
                    step.target, written, own, step.line.value, _rounding(working.solved, at), step.line.unit, terms
                ),
            )
        )
    if not found:
        return
    at, best = min(found, key=lambda pair: _cost(working, *pair))
    if last and written.label is None and found[-1][0] == len(working.states) - 1 and found[-1][1].rank < SLIPPED:
        at, best = found[-1]  # a bare value at the end is the answer
    if best.finding == "open" and written.label is None and not _final_bare(working, written):
        working.remarks.append(f"{written.text[:60]}: a side calculation, not judged")
        return
    if best.finding == "open":
        at = candidates[-1]
        best = dict(found)[at]
    if _said_before(working, at, written):
        return
    unit = working.solved.steps[at].line.unit
    if unit and not written.unit and best.finding in (*GOOD, "slip"):
        working.remarks.append(f"{written.text[:60]}: the unit is missing; it is {unit}")
    _note_subtrahend(working, at, written, terms)
    note(working, at, best, terms)


def _said_before(working: Working, at: int, written: Written) -> bool:
    """Whether a bare value only repeats what its line has said (in a comparison, say)."""
    target = working.solved.steps[at].target
    had = working.own.values.get(target)
    if not working.states[at].stated or written.value is None or not isinstance(had, Decimal):
        return False
    return all(member.shown or member.value is None for member in written.members) and agrees(
        had, written.value, target
    )


def _names_for(written: Written) -> set[str]:
    if written.label in LABELS:
        return LABELS[written.label]
    return set() if written.label in CONSTANTS else set(quantities())


def _final_bare(working: Working, written: Written) -> bool:
    """Whether an unlabelled value can be the part's answer: nothing is stated for the last line yet."""
    return not working.states[-1].stated or len(working.states) == 1


def _cost(working: Working, at: int, found: Explained) -> tuple[float, bool, int]:
    """How well a statement fits a line; one not stated yet is preferred to saying the same again, the first of them."""
    stated = working.states[at].stated
    finding, slips = found.rank
    return (finding + max(0, slips - 1) + (RESTATED if stated else 0), stated, at)


def _rounding(solved: Solved, at: int) -> Rounding | None:
    """How the answer is to be given, as the key gives it; other lines are rounded as their quantities are."""
    if at != len(solved.steps) - 1 or solved.answer.kind != "number":
        return None
    shown = solved.answer.shown
    if quantity(solved.quantity).rounding.places is not None:
        return Rounding(places=len(shown.partition(".")[2]))
    return Rounding(figures=max(1, len(Decimal(shown.replace("−", "-")).as_tuple().digits)))


def _subtraction(step: Step, written: Written) -> tuple[Decimal, Decimal] | None:
    """The (Z, S) of `23 − 19.70`, where the line is an effective nuclear charge and shows them."""
    if step.target.quantity != "effective nuclear charge":
        return None
    for member in written.members:
        if len(member.terms) == 2 and member.terms[0].product > 0 > member.terms[1].product:
            return member.terms[0].product, -member.terms[1].product
    return None


def _with_subtrahend(working: Working, step: Step, written: Written, terms: Terms) -> dict[Target, Value]:
    """The candidate's values, with the S that the line itself shows where none was stated before."""
    pair = _subtraction(step, written)
    need = step.target.to("screening constant")
    if pair is None or need in working.own.values:
        return working.own.values
    exact = _screening_meant(need, pair[1], working, terms)
    return {**working.own.values, need: exact}


def _screening_meant(need: Target, shown: Decimal, working: Working, terms: Terms) -> Decimal:
    right = evaluate(need, terms.practice, working.own.values)
    return right if isinstance(right, Decimal) and right == shown else shown


def _note_subtrahend(working: Working, at: int, written: Written, terms: Terms) -> None:
    """Take `23 − 19.70` as a statement of S = 19.70 as well, where S is a line that is not stated yet."""
    pair = _subtraction(working.solved.steps[at], written)
    need = working.solved.steps[at].target.to("screening constant")
    if pair is None or need in working.own.values:
        return
    line = next((index for index, step in enumerate(working.solved.steps) if step.target == need), None)
    value = pair[1]
    bare = Written(str(value), "chain", label="S", value=value, shown=str(value))
    key = evaluate(need, terms.practice)
    found = explained(need, bare, working.own.values, key, None, "", terms)
    if line is not None:
        note(working, line, found, terms)
    else:
        working.own.set(need, found.value, found.value != key)
