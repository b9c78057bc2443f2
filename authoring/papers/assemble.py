"""Stage 4, assemble: papers for candidates, no two alike while the pools allow, each pool used evenly."""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

from authoring.faults import Fault, FaultsFound, UsageError
from authoring.papers.chance import Chance, codes
from authoring.papers.questions import Kept, Question, Terms, parts_of, question, wordings
from authoring.papers.variants import Pool, Variant, enumerated
from authoring.papers.vet import with_count
from authoring.specs.plan import Plan
from authoring.specs.roster import Candidate

# What turns with the place of a paper (options, wordings) comes round after as many papers: a multiple of 2 to 6.
ROUND = 60

Progress = Callable[[int, int], None]


@dataclass(frozen=True, slots=True)
class Paper:
    """What one candidate gets. `questions` in the order of the plan; labels of parts are `1a`, `1b`, `2a` …"""

    code: str
    candidate: Candidate | None
    questions: tuple[Question, ...]

    @property
    def marks(self) -> int:
        """The total of the paper."""
        return sum(question.marks for question in self.questions)


@dataclass(frozen=True, slots=True)
class PaperSet:
    """Every paper of a set, and what they were made from."""

    plan: Plan
    terms: Terms
    seed: str
    papers: tuple[Paper, ...]


def pools_of(plan: Plan) -> tuple[Pool, ...]:
    """The variants of each item of a plan. Raises FaultsFound with the faults of all of them."""
    pools: list[Pool] = []
    faults: list[Fault] = []
    for item, fixed in zip(plan.items, plan.fixed, strict=True):
        try:
            pools.append(enumerated(item, plan.practice, fixed))
        except FaultsFound as error:
            faults += error.faults
    if faults:
        raise FaultsFound(faults)
    return tuple(pools)


def assembled(
    plan: Plan,
    terms: Terms,
    seed: str,
    candidates: Sequence[Candidate | None],
    *,
    allow_repeats: bool = False,
    apart_from: frozenset[tuple[str, tuple[tuple[str, str], ...]]] = frozenset(),
    progress: Progress | None = None,
) -> PaperSet:
    """Papers for candidates (None: a numbered copy), each different while the pools allow.

    `apart_from` holds (item, variables) that must not be used again. Raises FaultsFound for faults in any variant
    used, UsageError where there are fewer different papers than candidates.
    """
    pools = tuple(_apart(pool, apart_from) for pool in pools_of(plan))
    possible = math.prod(len(pool.variants) for pool in pools)
    if len(candidates) > possible and not allow_repeats:
        raise UsageError(
            f"{len(candidates)} papers are wanted, but only {possible} different ones are possible; "
            "make the pools of the items larger, or say --allow-repeats"
        )
    choices = itertools.islice(chosen([len(pool.variants) for pool in pools], seed), len(candidates))
    solver = _Solver(terms)
    papers = []
    for at, (code, candidate, choice) in enumerate(
        zip(codes(seed, len(candidates)), candidates, choices, strict=True)
    ):
        variants = [pool.variants[index] for pool, index in zip(pools, choice, strict=True)]
        papers.append(Paper(code, candidate, tuple(solver.solved(variant, at) for variant in variants)))
        if progress:
            progress(at + 1, len(candidates))
    if solver.faults:
        raise FaultsFound([with_count(fault, count) for fault, count in solver.faults.values()])
    return PaperSet(plan, terms, seed, tuple(papers))


def chosen(sizes: Sequence[int], seed: str) -> Iterator[tuple[int, ...]]:
    """Index tuples without end, all different until every one has been used; each pool's indices used evenly.

    Each pool is walked in a random order of its own; after a round in which a walk would repeat itself, the walks
    are shifted against each other, so that tuples repeat only when all have been used.
    """
    orders = [Chance(seed, "order", at).shuffled(range(size)) for at, size in enumerate(sizes)]
    total = math.prod(sizes)
    period = math.lcm(*sizes) if sizes else 1
    while True:
        for start in range(total // period):
            shifts = _shifts(start, sizes)
            for step in range(period):
                yield tuple(
                    order[(step + shift) % len(order)] for order, shift in zip(orders, shifts, strict=True)
                )


def _shifts(start: int, sizes: Sequence[int]) -> list[int]:
    """The shift of each walk for the start-th round: one for each class of tuples that a common walk connects.

    Walking all pools together visits, from (s₁, …, sₖ), the tuples (s₁+t, …, sₖ+t). Pool k repeats against the
    pools before it with period gcd(lcm of those, its size), so shifts 0 … gcd − 1 of each give different classes.
    """
    shifts = []
    so_far = 1
    for size in sizes:
        classes = math.gcd(so_far, size)
        shifts.append(start % classes)
        start //= classes
        so_far = math.lcm(so_far, size)
    return shifts


def _apart(pool: Pool, used: frozenset[tuple[str, tuple[tuple[str, str], ...]]]) -> Pool:
    if not used:
        return pool
    left = tuple(
        variant for variant in pool.variants if (pool.item.name, tuple(sorted(variant.variables.items()))) not in used
    )
    if not left:
        raise UsageError(f"every variant of {pool.item.name} stands in the earlier set; nothing is left to draw")
    return Pool(pool.item, left, pool.possible, pool.fixed)


class _Solver:
    """Solves each variant once (once per turn where what is printed depends on the place in the set)."""

    def __init__(self, terms: Terms) -> None:
        self.terms = terms
        self.faults: dict[tuple[str, object], tuple[Fault, int]] = {}
        self._made: dict[tuple[Variant, int], Question] = {}
        self._kept = Kept()

    def solved(self, variant: Variant, place: int) -> Question:
        turn = place % ROUND if turns(variant) else 0
        key = (variant, turn)
        if key not in self._made:
            try:
                self._made[key] = question(variant, self.terms, turn, self._kept)
            except FaultsFound as error:
                for fault in error.faults:
                    first, count = self.faults.get((fault.code, fault.source), (fault, 0))
                    self.faults[fault.code, fault.source] = (first, count + 1)
                self._made[key] = Question(variant, "", (), (), (), (), None, (), ())
        return self._made[key]


def turns(variant: Variant) -> bool:
    """Whether what is printed depends on the place of the paper in the set."""
    return wordings(variant.item) > 1 or any(part.task.turns for part in parts_of(variant.item))
