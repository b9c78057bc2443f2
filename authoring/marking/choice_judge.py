"""Stage 8, mark: choices: a letter, a species, an electron, an order, a reading off a chart."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import replace
from decimal import Decimal

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.marking.awarding import Chosen
from authoring.marking.forms import Written
from authoring.marking.judgement import Own
from authoring.marking.written import read_line
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target
from authoring.shielding.solve import evaluate
from authoring.tasks.solved import Answer, Option, Options, Solved
from authoring.working.numbers import shown

_NEGATED = re.compile(r"\b(?:not|neither|nor|never|isn't|nicht|kein\w*)\b", re.IGNORECASE)


def chosen(solved: Solved, lines: Sequence[Written], own: Own, practice: Practice) -> Chosen:
    """What a script's lines choose, held against the part's answer and against the candidate's own values."""
    found = _held(solved, lines)
    if found.right or not found.given or found.open or not found.names:
        return found
    mine = own_order(solved, own, practice)
    if not mine:
        return found
    led = found.names == mine if solved.answer.kind == "order" else found.names == (mine[_end(solved, practice)],)
    if not led:
        return found
    # The values say all about what was misunderstood: nothing more was in the choice.
    return replace(found, follows=True, slips=(), rivals=(), words=f"{found.words}; the candidate's own values say so")


def own_order(solved: Solved, own: Own, practice: Practice) -> tuple[str, ...]:
    """The things compared from small to large by the candidate's values; empty where none of these is wrong."""
    if len(solved.targets) < 2 or not any(target in own.off for target in solved.targets):
        return ()
    values = [(own.values.get(target, evaluate(target, practice)), _name(target, solved)) for target in solved.targets]
    return tuple(name for _, name in sorted(values))


def _end(solved: Solved, practice: Practice) -> int:
    """Whether the largest (-1) or the smallest (0) of the things is asked for."""
    ordered = sorted((evaluate(target, practice), _name(target, solved)) for target in solved.targets)
    return -1 if ordered[-1][1] == solved.answer.shown else 0


def _name(target: Target, solved: Solved) -> str:
    value = solved.answer.value
    by_electron = isinstance(value[0] if isinstance(value, tuple) else value, Subshell)
    return target.electron.label if by_electron and target.electron else target.species.label


def _held(solved: Solved, lines: Sequence[Written]) -> Chosen:
    answer = solved.answer
    if answer.kind == "letter":
        return _letter(solved, lines)
    if answer.kind == "order":
        return _order(solved, lines)
    if answer.kind == "number":
        return _reading(answer, lines)
    return _thing(solved, lines)


# --- letters ------------------------------------------------------------------------------------------


def options_of(solved: Solved) -> tuple[Option, ...]:
    """The options printed with a part."""
    return tuple(option for exhibit in solved.exhibits if isinstance(exhibit, Options) for option in exhibit.options)


def _letter(solved: Solved, lines: Sequence[Written]) -> Chosen:
    options = {option.letter: option for option in options_of(solved)}
    for written in reversed(lines):
        option = options.get(written.choice) or _by_value(options.values(), written)
        if option is None:
            continue
        if option.letter == solved.answer.value:
            return Chosen(True, f"({option.letter}), the right option")
        words = f"({option.letter}): {', '.join(option.slips) or 'wrong'}"
        return Chosen(False, words, option.slips, names=(option.letter,))
    return _nothing(lines)


def _by_value(options: Iterable[Option], written: Written) -> Option | None:
    """An option named by its value instead of its letter."""
    if written.value is None:
        return None
    wanted = shown(written.value)
    fits = [option for option in options if option.shown.replace("-", "−") == wanted]
    return fits[0] if len(fits) == 1 else None


# --- species and electrons ------------------------------------------------------------------------------


def _thing(solved: Solved, lines: Sequence[Written]) -> Chosen:
    value = solved.answer.value
    right = value.label if isinstance(value, Species | Subshell) else str(value)
    for written in reversed(lines):
        named = things_named(written, solved)
        if len(named) != 1:
            continue
        if _NEGATED.search(written.text):
            return Chosen(False, "a negation: a person decides", open=True)
        (label,) = named
        if label == right:
            return Chosen(True, f"{label}: the right choice", reason=compares(lines))
        slips = next((wrong.slips for wrong in solved.wrong if wrong.shown == label), ())
        rivals = tuple(" + ".join(wrong.slips) for wrong in solved.wrong if wrong.shown == label)[1:]
        words = f"{label}, not {right}"
        return Chosen(False, words, slips, rivals, reason=compares(lines), names=(label,))
    return _nothing(lines)


def things_named(written: Written, solved: Solved) -> set[str]:
    """The species or electrons that a statement settles on, of the kind that the part asks for."""
    by_electron = isinstance(solved.answer.value, Subshell)
    if by_electron and written.electron is not None:
        return {written.electron.label}
    if not by_electron and written.species is not None:
        return {written.species.label}
    if written.kind not in ("words", "choice"):
        return set()
    labels = {word for word in written.mentions if _is_kind(word, by_electron)}
    return labels or (set() if by_electron else _elements_in(written.text, solved))


def _is_kind(word: str, by_electron: bool) -> bool:
    return word[:1].isdigit() and word[1:2].isalpha() if by_electron else word[:1].isupper()


def _elements_in(text: str, solved: Solved) -> set[str]:
    """Elements named in full."""
    lowered = text.lower()
    things = {target.species for target in solved.targets}
    if isinstance(solved.answer.value, Species):
        things.add(solved.answer.value)
    return {each.label for each in things if re.search(rf"\b{each.name}\b", lowered)}


def compares(lines: Sequence[Written]) -> bool | None:
    """Whether a line compares values (they are judged as statements of their own); None where words may do so."""
    if any(written.kind == "ordering" and any(each.value is not None for each in written.members) for written in lines):
        return True
    return None


# --- orders --------------------------------------------------------------------------------------------


def rising_order(order: Sequence[str], direction: str) -> tuple[str, ...]:
    """Names from small to large."""
    return tuple(reversed(order)) if direction == ">" else tuple(order)


def _order(solved: Solved, lines: Sequence[Written]) -> Chosen:
    key = read_line(solved.answer.shown)
    right = rising_order(key.order, key.direction)
    for written in reversed(lines):
        if written.kind != "ordering" or set(written.order) != set(right):
            continue
        asked = key.direction if written.direction == "," else written.direction
        found = rising_order(written.order, asked)
        if found == right:
            return Chosen(True, "the right order", reason=compares(lines))
        slips = _slips_of_order(solved, found)
        words = "the order reversed" if found == tuple(reversed(right)) else "not the right order"
        rivals = tuple(map(" + ".join, slips[1:]))
        first = slips[0] if slips else ()
        return Chosen(False, words, first, rivals, reason=compares(lines), names=found)
    return _nothing(lines)


def _slips_of_order(solved: Solved, found: tuple[str, ...]) -> list[tuple[str, ...]]:
    hits = []
    for wrong in solved.wrong:
        read = read_line(wrong.shown)
        if rising_order(read.order, read.direction) == found:
            hits.append(wrong.slips)
    return hits


# --- readings off a chart --------------------------------------------------------------------------------


def _reading(answer: Answer, lines: Sequence[Written]) -> Chosen:
    low, high = answer.accepted or (answer.value, answer.value)
    for written in reversed(lines):
        if written.value is None:
            continue
        if isinstance(low, Decimal) and isinstance(high, Decimal) and low <= written.value <= high:
            return Chosen(True, f"within {shown(low)} to {shown(high)}", reason=True)
        return Chosen(False, f"outside {low} to {high}")
    return _nothing(lines)


def _nothing(lines: Sequence[Written]) -> Chosen:
    """No answer found: nothing was written, or nothing that can be read."""
    anything = any(written.kind != "blank" for written in lines)
    return Chosen(False, "not answered", given=False, open=anything)
