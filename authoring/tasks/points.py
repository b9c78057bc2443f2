"""Mark points: from the quantities' default rules, or as the item's own scheme says."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, quantities, quantity
from authoring.shielding.solve import Step
from authoring.tasks.fields import SchemeEntry
from authoring.working.lines import Point


@dataclass(frozen=True, slots=True)
class Candidate:
    """A point that a line could earn."""

    line: int
    rule: PointRule


def offered(steps: Sequence[Step]) -> list[Candidate]:
    """Every default point of a working's lines, in order; a closing comparison brings its own from the task."""
    return [
        Candidate(index, rule)
        for index, step in enumerate(steps)
        if step.target.quantity in quantities()
        for rule in quantity(step.target.quantity).points
    ]


def pointed(
    steps: Sequence[Step],
    marks: int | None,
    scheme: Sequence[SchemeEntry] = (),
    extra: Iterable[Candidate] = (),
) -> tuple[Point, ...]:
    """The mark points of a part: the scheme where there is one, else the heaviest `marks` of the default points.

    Raises ContentError when `marks` asks for more points than the working has, or the scheme names a line that
    is not there.
    """
    candidates = sorted([*offered(steps), *extra], key=lambda each: each.line)
    if scheme:
        candidates = [_from_scheme(entry, steps) for entry in scheme]
        if marks is not None and marks != len(candidates):
            raise ContentError(f"the mark scheme has {len(candidates)} points, but marks says {marks}")
    elif marks is not None:
        candidates = _heaviest(candidates, marks)
    return numbered(candidates)


def _heaviest(candidates: list[Candidate], marks: int) -> list[Candidate]:
    if marks > len(candidates):
        raise ContentError(
            f"marks: {marks}, but this working has {len(candidates)} steps that can earn a mark; "
            "lower the marks or write a scheme of your own under `scheme`"
        )
    order = sorted(range(len(candidates)), key=lambda at: -candidates[at].rule.weight)
    return [candidates[at] for at in sorted(order[:marks])]


def _from_scheme(entry: SchemeEntry, steps: Sequence[Step]) -> Candidate:
    lines = [index for index, step in enumerate(steps) if step.target.quantity == entry.line]
    if not lines:
        raise ContentError(
            f"the scheme gives a mark for {entry.line!r}, which is no line of this working",
            entry.line,
            list(dict.fromkeys(step.target.quantity for step in steps)),
        )
    rules = [rule for rule in quantity(entry.line).points if rule.kind == entry.mark]
    base = (rules or list(quantity(entry.line).points))[0]
    follow = base.follow_through if entry.follow_through is None else entry.follow_through
    return Candidate(lines[-1], PointRule(entry.mark, entry.what or base.what, base.aspect, base.weight, follow))


def numbered(candidates: Iterable[Candidate]) -> tuple[Point, ...]:
    """Points with their codes: M1, M2, A1 … in the order of the working."""
    seen: Counter[str] = Counter()
    points = []
    for each in candidates:
        seen[each.rule.kind] += 1
        code = f"{each.rule.kind}{seen[each.rule.kind]}"
        points.append(
            Point(code, each.rule.kind, each.line, each.rule.what, each.rule.follow_through, each.rule.aspect)
        )
    return tuple(points)
