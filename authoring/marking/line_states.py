"""Stage 8, mark: what was found for each line of a key, and how a finding is entered, also for lines it implies."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from authoring.marking.explaining import Explained, Terms
from authoring.marking.forms import Written
from authoring.marking.judgement import Own
from authoring.marking.trace import frontier
from authoring.shielding.quantity import Target, Value, quantities
from authoring.shielding.solve import evaluate
from authoring.tasks.solved import Solved


@dataclass(slots=True)
class LineState:
    """What was found for one line of the key."""

    finding: str = "unseen"
    stated: bool = False
    follows: bool = False  # right on the candidate's own, wrong, earlier values
    spoiled: bool = False
    slips: tuple[str, ...] = ()
    rivals: tuple[str, ...] = ()
    words: str = ""
    sure: bool = True
    by: int = -1  # the stated line that implies this one, where it is not stated itself


@dataclass(slots=True)
class Working:
    """The lines of a part with what was found for each, and the candidate's own values."""

    solved: Solved
    states: list[LineState]
    own: Own
    remarks: list[str] = field(default_factory=list)
    places: dict[Target, int] = field(init=False)

    def __post_init__(self) -> None:
        self.places = {step.target: at for at, step in enumerate(self.solved.steps)}


def open_lines(working: Working, names: set[str], written: Written) -> Iterator[int]:
    """The lines of the key that a statement could be about, by quantity and by what the statement names."""
    for at, step in enumerate(working.solved.steps):
        target = step.target
        if target.quantity in names and target.quantity in quantities() and _is_about(target, written.about):
            yield at


def _is_about(target: Target, about: str) -> bool:
    if not about:
        return True
    words = about.replace(",", " ").split()
    labels = {target.species.label, target.species.symbol if not target.species.charge else target.species.label}
    if target.electron is not None:
        labels.add(target.electron.label)
    return all(word in labels for word in words) or not any(_names_a_thing(word) for word in words)


def _names_a_thing(word: str) -> bool:
    return word[:1].isupper() or (len(word) == 2 and word[0].isdigit())


def note(working: Working, at: int, found: Explained, terms: Terms) -> None:
    """Enter a finding for a line, and for the lines before it that it took along."""
    own = working.own
    for implied in implied_by(working, at):
        own.drop(working.solved.steps[implied].target)
        working.states[implied] = LineState()
    had = set(own.values)
    places = working.places
    slips = tuple(slip.name for slip in found.slips)
    rivals = tuple(" + ".join(slip.name for slip in each) for each in found.rivals)
    target = working.solved.steps[at].target
    for each in found.trace[:-1]:
        index = places.get(each.target)
        if index is None or working.states[index].stated:
            continue
        finding = "slip" if each.spoiled else "right"
        working.states[index] = LineState(
            finding,
            False,
            _follows(each.target, own, terms),
            each.spoiled,
            slips if each.spoiled else (),
            rivals if each.spoiled else (),
            found.words if each.spoiled else "",
            found.sure or not each.spoiled,
            at,
        )
        own.set(each.target, each.value, each.value != evaluate(each.target, terms.practice))
    before = any(each.spoiled for each in found.trace[:-1] if each.target not in places and each.target not in had)
    spoiled = found.finding == "slip" and bool(found.trace) and (found.trace[-1].spoiled or before)
    state = LineState(
        found.finding,
        True,
        _follows(target, own, terms),
        spoiled,
        slips if spoiled or not found.trace else (),
        rivals if spoiled else (),
        found.words,
        found.sure,
    )
    if found.finding == "slip" and not spoiled:
        state.finding, state.words, state.sure = "right", "", True
    working.states[at] = state
    if found.value is not None:
        key = working.solved.steps[at].line.value
        own.set(target, found.value, not _as_key(found, key))


def implied_by(working: Working, at: int) -> list[int]:
    """The lines that nothing but what was said before on this line implies."""
    return [index for index, state in enumerate(working.states) if state.by == at and not state.stated]


def _as_key(found: Explained, key: Value) -> bool:
    return found.finding == "key" or found.value == key


def _follows(target: Target, own: Own, terms: Terms) -> bool:
    """Whether the inputs of a line are the candidate's own and not the key's."""
    return any(need in own.off for need, _ in frontier(target, terms.practice, own.values))
