"""What simulated scripts deserve, worked out without the judge: marks, and whether a slip can be told at all."""

from __future__ import annotations

import functools
import random
from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

from marking_help import LOST, Candidate, S, Written

from authoring.faults import ContentError
from authoring.papers.questions import Question, Terms, question
from authoring.papers.variants import enumerated
from authoring.shielding.practice import Practice, published
from authoring.shielding.quantity import Target, Value, quantities, quantity
from authoring.shielding.solve import evaluate, evaluate_into, work
from authoring.slips.catalogue import Slip, applied, shipped
from authoring.specs.item import read_item
from authoring.specs.shipped import shipped_folder, shipped_names
from authoring.tasks.solved import Solved

PUBLISHED = published()
TERMS = Terms(PUBLISHED, shipped())


def bank(variants: int, seed: str = "bank") -> Iterator[Question]:
    """Some variants of every shipped item, solved."""
    for name in shipped_names("items"):
        rng = random.Random(f"{seed} {name}")
        item = read_item(shipped_folder("scenarios") / "items" / f"{name}.yaml")
        pool = enumerated(item, PUBLISHED).variants
        for at, variant in enumerate(rng.sample(pool, min(variants, len(pool)))):
            yield question(variant, TERMS, at)


def solved_parts(asked: Question) -> list[Solved]:
    """The parts of a question; of alternatives (explanations) the first."""
    return [part.solved for part in asked.parts]


@dataclass(frozen=True)
class Deserved:
    """What a part deserves: the codes that are lost, the lines that deviate, and whether it can be told at all."""

    lost: frozenset[str]
    deviating: tuple[Target, ...]
    settled: bool  # False: what it deserves is a matter of policy; marks are not compared


def deserved(solved: Solved, candidate: Candidate, before: Mapping[Target, Value], written: Written) -> Deserved:
    """Marks lost: those of the lines that deviate from the practice on the candidate's own inputs.

    A deviating line without a point charges the value point of the next line that has one.
    """
    own = dict(before)
    targets = [target for target in solved.targets if target.quantity in quantities()]
    _has_its_electrons(targets, candidate)
    chain = {step.target for target in targets for step in work(target, candidate.practice, own)} | set(own)
    lost: set[str] = set()
    by_luck = False  # a wrong way that ends in the key's value earns what a marker makes of it
    deviating: list[Target] = []
    pointed = {point.line for point in solved.points}
    for at, step in enumerate(solved.steps):
        target = step.target
        if target.quantity not in quantities() or target in before:
            continue
        if target not in chain:
            by_luck = by_luck or _same_end(solved, candidate)
            lost |= {point.code for point in solved.points if point.line == at}
            continue
        if not _deviates(target, candidate):
            if _rests_on_wrong(target, candidate):
                lost |= {
                    p.code
                    for p in solved.points
                    if p.line == at and p.aspect not in ("choice", "reason") and not p.follow_through
                }
            continue
        if target not in written.shows and _leaves_no_trace(solved, at, candidate):
            continue
        if quantity(target.quantity).numeric and _shown(target, candidate.value(target)) == _shown(
            target, step.line.value
        ):
            by_luck = True
        deviating.append(target)
        if at in pointed:
            lost |= {point.code for point in solved.points if point.line == at}
        else:
            lost |= _charged(solved, at)
    # What is worked out on the way and is no line of the part was to be had from the parts before it.
    lines = {step.target for step in solved.steps} | set(before)
    by_luck = by_luck or any(target not in lines and _deviates(target, candidate) for target in chain)
    settled, choice = _choice(solved, candidate)
    return Deserved(frozenset(lost | choice), tuple(deviating), settled and not by_luck)


def _has_its_electrons(targets: Sequence[Target], candidate: Candidate) -> None:
    """Raise ContentError where the candidate's configuration has no such electron: nothing sensible is written."""
    for target in targets:
        if target.electron is not None:
            configuration = evaluate(Target("configuration", target.species), candidate.practice)
            if not configuration.count(target.electron):
                raise ContentError("no such electron")


def _leaves_no_trace(solved: Solved, line: int, candidate: Candidate) -> bool:
    """Whether a line that is not written leads to the right numbers all the same."""
    if quantity(solved.steps[line].target.quantity).numeric:
        return False
    later = [step.target for step in solved.steps[line + 1 :] if step.target.quantity in quantities()]
    following = next((target for target in later if quantity(target.quantity).numeric), None)
    return following is not None and candidate.value(following) == evaluate(following, PUBLISHED)


def _same_end(solved: Solved, candidate: Candidate) -> bool:
    """Whether another way ends in the key's values."""
    numeric = [each for each in solved.targets if quantity(each.quantity).numeric]
    return all(_shown(each, candidate.value(each)) == _shown(each, evaluate(each, PUBLISHED)) for each in numeric)


def _shown(target: Target, value: Value) -> Decimal:
    """A number as the quantity is printed."""
    return quantity(target.quantity).rounding.apply(value)


def _rests_on_wrong(target: Target, candidate: Candidate) -> bool:
    """Whether a line's inputs are not the key's, and neither is its value."""
    key = evaluate(target, PUBLISHED)
    needs = quantity(target.quantity).needs(target, PUBLISHED)
    return key != candidate.value(target) and any(evaluate(each, PUBLISHED) != candidate.value(each) for each in needs)


def _deviates(target: Target, candidate: Candidate) -> bool:
    what = quantity(target.quantity)
    mine = candidate.value(target)
    try:
        inputs = tuple(candidate.value(need) for need in what.needs(target, PUBLISHED))
        right = what.value(target, PUBLISHED, inputs)
        return _members(right) != _members(mine) if target.quantity == "groups" else bool(right != mine)
    except ContentError:
        return True


def _members(groups: Value) -> object:
    """Groups without empty subshells: (3s,3p) of one s electron is (3s)."""
    return frozenset(
        (frozenset((each.n, max(0, each.l - 1)) for each in group.subshells), group.electrons) for group in groups
    )


def _charged(solved: Solved, line: int) -> set[str]:
    later = [point for point in solved.points if point.line > line and point.aspect not in ("choice", "reason")]
    if not later:
        return set()
    nearest = min(point.line for point in later)
    here = [point for point in later if point.line == nearest]
    return {next((point.code for point in here if point.aspect == "value"), here[0].code)}


def _choice(solved: Solved, candidate: Candidate) -> tuple[bool, set[str]]:
    """Whether a choice is settled, and the points that it loses."""
    points = [point for point in solved.points if point.aspect == "choice"]
    if not points or solved.task in ("identify", "correct"):
        return True, set()
    if solved.task == "select":
        return True, set()
    (one, *_) = solved.targets
    if one.quantity == LOST:
        lost = candidate.value(one)
        needs = [each for each in quantity(LOST).needs(one, candidate.practice) if each.electron is not None]
        smallest = min(needs, key=candidate.value)
        right = lost.label == solved.answer.shown
        # Charges that do not bear out the choice are no reason for it: a person may see it otherwise.
        return right and smallest.electron == lost, set() if right else {points[0].code}
    values = [candidate.value(each) for each in solved.targets]
    if len({round(value, 3) for value in values}) < len(values):
        return False, set()
    mine = candidate.answer(solved)
    key = solved.answer.shown if isinstance(mine, str) else tuple(solved.answer.shown.replace(">", "<").split(" < "))
    if mine == key or points[0].follow_through:
        return True, set()
    return True, {points[0].code}


# --- whether a slip can be told ---------------------------------------------------------------------------

Signature = tuple[tuple[Target, object], ...]


def signature(practice: Practice, written: Written, solved: Solved, before: Mapping[Target, Value]) -> Signature | None:
    """What a script of this kind would show under a practice: counts or printed values of the lines it shows."""
    values = dict(before)
    found: list[tuple[Target, object]] = []
    try:
        for target in solved.targets:
            evaluate_into(values, target, practice)
        for target, how in written.shows.items():
            if target not in values:
                return None
            found.append((target, _seen(target, how, values, practice)))
    except ContentError:
        return None
    return tuple(found)


def _seen(target: Target, how: str, values: Mapping[Target, Value], practice: Practice) -> object:
    if how in ("counts", "products") and target.quantity == S:
        shares = values.get(target.to("tally"), ())
        counted: Counter[Decimal] = Counter()
        for share in shares:
            counted[share.coefficient] += share.count
        counts = {weight: count for weight, count in counted.items() if count and weight}
        return frozenset(counts.items()) if how == "counts" else frozenset((w * c) for w, c in counts.items())
    value = values[target]
    if isinstance(value, Decimal):
        return quantity(target.quantity).rounding.apply(value)
    return str(value)


def same(one: Signature | None, other: Signature | None) -> bool:
    """Whether two signatures look alike: values one unit in the last of their figures apart do."""
    if one is None or other is None or len(one) != len(other):
        return False
    return all(
        mine == theirs or _near(target, mine, theirs) for (target, mine), (_, theirs) in zip(one, other, strict=True)
    )


def _near(target: Target, mine: object, theirs: object) -> bool:
    if not (isinstance(mine, Decimal) and isinstance(theirs, Decimal)):
        return False
    if quantity(target.quantity).rounding.figures is None:
        return False
    return abs(mine - theirs) <= abs(mine) * Decimal("0.005")


def can_tell(
    slips: Sequence[Slip], written: Written, solved: Solved, before: Mapping[Target, Value], singles: bool = True
) -> bool:
    """Whether what is shown differs from the right working and from that of every other single slip."""
    mine = signature(applied(slips, PUBLISHED), written, solved, before)
    if mine is None or same(mine, signature(PUBLISHED, written, solved, before)):
        return False
    others = [slip for slip in shipped() if slip not in slips]
    return not any(same(mine, signature(with_slip(slip), written, solved, before)) for slip in others)


@functools.lru_cache(maxsize=256)
def with_slip(slip: Slip) -> Practice:
    """The published practice with one slip."""
    return applied((slip,), PUBLISHED)


def touching(asked: Question) -> list[Slip]:
    """The slips that can touch a question's parts."""
    targets = {target for solved in solved_parts(asked) for target in solved.targets}
    return [slip for slip in shipped() if any(slip in shipped().touching(target) for target in targets)]
