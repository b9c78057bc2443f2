"""Mark points: from the quantities' default rules, or as the item's own scheme says."""

from __future__ import annotations

from collections import Counter
from collections.abc import Collection, Iterable, Sequence
from dataclasses import dataclass, replace

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target, quantities, quantity
from authoring.shielding.solve import Step
from authoring.tasks.fields import SchemeEntry
from authoring.working.lines import Point

# More than any quantity's own weight.
MAIN = 1000


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
    default: int | None = None,
    main: Collection[Target] = (),
) -> tuple[Point, ...]:
    """The mark points of a part: the scheme where there is one, else the heaviest `marks` of the default points.

    `extra` are the points of the task's own lines. `default` is the number of marks where the part says none
    (every point, unless given). The lines of `main`, what the part is about, outweigh those on the way there.
    Raises ContentError when `marks` asks for more points than the working has, or the scheme names a line that is
    not there.
    """
    own = list(extra)
    candidates = [_weighed(each, steps[each.line].target in main) for each in offered(steps)]
    return chosen([*candidates, *own], steps, marks if marks is not None or scheme else default, scheme, own)


def chosen(
    candidates: Iterable[Candidate],
    steps: Sequence[Step],
    marks: int | None,
    scheme: Sequence[SchemeEntry] = (),
    own: Sequence[Candidate] = (),
) -> tuple[Point, ...]:
    """The same from the candidates given only; `own` are those of lines that state no quantity."""
    found = sorted(candidates, key=lambda each: each.line)
    if scheme:
        found = [_from_scheme(entry, steps, own) for entry in scheme]
        if marks is not None and marks != len(found):
            raise ContentError(f"the mark scheme has {len(found)} points, but marks says {marks}")
    elif marks is not None:
        found = _heaviest(found, marks)
    return numbered(found)


def _weighed(candidate: Candidate, main: bool) -> Candidate:
    rule = candidate.rule
    return Candidate(candidate.line, replace(rule, weight=rule.weight + MAIN)) if main else candidate


def _heaviest(candidates: list[Candidate], marks: int) -> list[Candidate]:
    if marks > len(candidates):
        raise ContentError(
            f"marks: {marks}, but this working has {len(candidates)} steps that can earn a mark; "
            "lower the marks or write a scheme of your own under `scheme`"
        )
    order = sorted(range(len(candidates)), key=lambda at: -candidates[at].rule.weight)
    return [candidates[at] for at in sorted(order[:marks])]


def _from_scheme(entry: SchemeEntry, steps: Sequence[Step], own: Sequence[Candidate]) -> Candidate:
    name = _named(entry.line)
    lines = [index for index, step in enumerate(steps) if step.target.quantity == name]
    if not lines:
        raise ContentError(
            f"the scheme gives a mark for {entry.line!r}, which is no line of this working",
            entry.line,
            list(dict.fromkeys(step.target.quantity for step in steps)),
        )
    closing = tuple(each.rule for each in own if each.line in lines)
    rules = quantity(name).points if name in quantities() else closing
    fitting = [rule for rule in rules if rule.kind == entry.mark]
    base = (fitting or [*rules, PointRule(entry.mark, name, "value", 0)])[0]
    follow = base.follow_through if entry.follow_through is None else entry.follow_through
    return Candidate(lines[-1], PointRule(entry.mark, entry.what or base.what, base.aspect, base.weight, follow))


def _named(line: str) -> str:
    """A quantity's own name for an alias; the name of any other line as it is."""
    try:
        return quantity(line).name
    except ContentError:
        return line


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


def charged(points: Sequence[Point], line: int) -> Point | None:
    """The point that a mistake on a line without points costs: the accuracy point of the next line that has one."""
    later = [point for point in points if point.line > line and point.aspect not in ("choice", "reason")]
    following = [point for point in later if point.line == min(each.line for each in later)]
    return next((point for point in following if point.aspect == "value"), following[0] if following else None)


def marks_left(points: Sequence[Point], spoiled: Collection[int]) -> int:
    """What working with these lines spoiled, and the rest right on its own values, still earns."""
    pointed_lines = {point.line for point in points}
    lost = {point.code for point in points if point.line in spoiled}
    for line in spoiled:
        hit = charged(points, line) if line not in pointed_lines else None
        if hit is not None:
            lost.add(hit.code)
    return len(points) - len(lost)
