"""Stage 8, mark: a configuration, grouping, tally or electron as stated, held against one line of the key."""

from __future__ import annotations

from collections.abc import Mapping
from functools import lru_cache

from authoring.marking.explaining import Explained, Terms
from authoring.marking.tallies import same_tally
from authoring.marking.trace import Known, Traced, frontier, traced
from authoring.shielding.quantity import Target, Value
from authoring.shielding.screening import Group
from authoring.shielding.solve import evaluate
from authoring.slips.outcomes import Combination, outcomes


def explained_statement(target: Target, value: object, own: Mapping[Target, Value], terms: Terms) -> Explained:
    """A statement of something that is no number, for one target; `own`: what the candidate has."""
    return _explained(target, value, frontier(target, terms.practice, own), terms)


@lru_cache(maxsize=8192)
def _explained(target: Target, value: object, known: Known, terms: Terms) -> Explained:
    right = evaluate(target, terms.practice, dict(known))
    if same(right, value):
        return Explained("right", right, traced(target, terms.practice, known, ()))
    if same(evaluate(target, terms.practice), value):
        return Explained(
            "key", evaluate(target, terms.practice), words="agrees with the key, though not with the line before"
        )
    for most in (1, 2):
        hits = _hits(target, value, known, terms, most)
        if hits:
            slips, trace = hits[0]
            rivals = tuple(others for others, _ in hits[1:])
            words = " ".join(slip.did for slip in slips)
            return Explained("slip", trace[-1].value, trace, slips, rivals, words, sure=not rivals and most == 1)
    kept = value if target.quantity in ("configuration", "first electron lost") else None
    return Explained("open", kept, words="no practice or slip in the catalogue explains this", sure=False)


def _hits(
    target: Target, value: object, known: Known, terms: Terms, size: int
) -> list[tuple[Combination, tuple[Traced, ...]]]:
    """The slips, or pairs of them, under which a statement is what the practice gives; likeliest first."""
    hits = []
    for outcome in outcomes(target, terms.practice, known, terms.slips, size):
        if len(outcome.slips) == size and same(outcome.answer, value):
            hits.append((outcome.slips, traced(target, terms.practice, known, outcome.slips)))
    return hits


def same(right: object, value: object) -> bool:
    """Whether a statement says what the key says: groups as sets of members, tallies by their counts."""
    if isinstance(right, tuple) and isinstance(value, tuple):
        if right and hasattr(right[0], "coefficient"):
            return same_tally(value, right)
        return _grouping(right) == _grouping(value)
    return type(right) is type(value) and right == value


def _grouping(groups: tuple[object, ...]) -> frozenset[tuple[frozenset[tuple[int, int]], int]]:
    """Groups without their order and without empty members: (4s,4p)2 and (4s)2 say the same."""
    return frozenset((_members(group), group.electrons) for group in groups if isinstance(group, Group))


def _members(group: Group) -> frozenset[tuple[int, int]]:
    """The shell and l of a group's subshells, with s standing for s and p."""
    return frozenset((each.n, 0 if each.l < 2 else each.l) for each in group.subshells)
