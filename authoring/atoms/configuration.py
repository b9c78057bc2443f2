"""Atoms: an electron configuration, read, counted, changed and written; and the orders of filling."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from typing import Literal

from authoring.atoms.subshell import ALL_SUBSHELLS, Subshell, quoted
from authoring.faults import ContentError
from authoring.working.nodes import Core, Node, Occupied, Row, Words

Order = Literal["madelung", "shell"]

# Subshells in the order of n + l, then n (Madelung 1936); to 8s, the last that a known element's anion could need.
MADELUNG: tuple[Subshell, ...] = tuple(
    sorted((s for s in ALL_SUBSHELLS if s.n + s.l <= 8), key=lambda s: (s.n + s.l, s.n)),
)
_ORDERS: dict[str, tuple[Subshell, ...]] = {"madelung": MADELUNG, "shell": ALL_SUBSHELLS}

# Noble gases by their electrons: each is Madelung order filled up to that number.
NOBLE_GASES: dict[str, int] = {"He": 2, "Ne": 10, "Ar": 18, "Kr": 36, "Xe": 54, "Rn": 86, "Og": 118}

_SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹"
_TO_DIGITS = str.maketrans(_SUPERSCRIPTS, "0123456789")
_MIXED_COUNT = re.compile(f"[0-9^][0-9^]*[{_SUPERSCRIPTS}]")
_RAISED = re.compile(f"([{_SUPERSCRIPTS}]+)")
_SEPARATORS = re.compile(r"[\s.·]+")
# n is one digit, so that `3d34s2` reads in one way only: the digit before a letter is its n.
_TERM = re.compile(r"([0-9][a-zA-Z])(?:\^?([0-9]+?))?(?=[0-9][a-zA-Z]|$)")
_LONGEST_TEXT = 300


@dataclass(frozen=True, slots=True)
class Configuration:
    """How many electrons each subshell holds; sorted by n and l, without empty subshells.

    `ContentError` where a subshell stands twice, holds no electron, or more than its capacity.
    """

    counts: tuple[tuple[Subshell, int], ...]

    def __post_init__(self) -> None:
        ordered = tuple(sorted(self.counts))
        for index, (sub, count) in enumerate(ordered):
            if not 1 <= count <= sub.capacity:
                raise ContentError(f"{sub.label} holds 1 to {sub.capacity} electrons, not {count}")
            if index and ordered[index - 1][0] == sub:
                raise ContentError(f"{sub.label} stands twice in the configuration")
        object.__setattr__(self, "counts", ordered)

    @property
    def electrons(self) -> int:
        """The number of electrons."""
        return sum(count for _, count in self.counts)

    @property
    def occupied(self) -> tuple[Subshell, ...]:
        """The subshells that hold electrons, by n and then l."""
        return tuple(sub for sub, _ in self.counts)

    @property
    def outermost(self) -> Subshell:
        """The occupied subshell of the highest n, and in it of the highest l; `ContentError` without electrons."""
        if not self.counts:
            raise ContentError("there are no electrons")
        return self.counts[-1][0]

    @property
    def outer_shell(self) -> int:
        """The highest n that holds electrons."""
        return self.outermost.n

    @property
    def unpaired(self) -> int:
        """Unpaired electrons when every subshell follows Hund's rule."""
        return sum(min(count, sub.capacity - count) for sub, count in self.counts)

    @property
    def core_symbol(self) -> str | None:
        """The largest noble gas whose subshells are all full here and that has fewer electrons; None below helium."""
        return _core_of(self)

    def count(self, sub: Subshell) -> int:
        """Electrons in `sub` (0 where it is empty)."""
        return next((count for one, count in self.counts if one == sub), 0)

    def beyond_core(self) -> Configuration:
        """The subshells outside the noble-gas core."""
        core = self.core_symbol
        if core is None:
            return self
        inside = frozenset(noble_gas(core).occupied)
        return Configuration(tuple(entry for entry in self.counts if entry[0] not in inside))

    def without(self, sub: Subshell, k: int = 1) -> Configuration:
        """The configuration with `k` electrons fewer in `sub`."""
        return self._changed(sub, -k)

    def with_(self, sub: Subshell, k: int = 1) -> Configuration:
        """The configuration with `k` electrons more in `sub`."""
        return self._changed(sub, k)

    def _changed(self, sub: Subshell, by: int) -> Configuration:
        held = self.count(sub) + by
        if held < 0:
            raise ContentError(f"{sub.label} holds only {self.count(sub)} electrons")
        rest = tuple(entry for entry in self.counts if entry[0] != sub)
        return Configuration((*rest, (sub, held)) if held else rest)

    def full(self) -> str:
        """`1s2 2s2 2p6 3s1`."""
        return " ".join(f"{sub.label}{count}" for sub, count in self.counts)

    def short(self) -> str:
        """`[Ne] 3s1`."""
        core = self.core_symbol
        return self.full() if core is None else f"[{core}] {self.beyond_core().full()}"

    def __str__(self) -> str:
        return self.short()

    def node(self, short: bool = True) -> Node:
        """The configuration as it is printed, with or without its noble-gas core."""
        if not self.counts:
            return Words("no electrons")
        core = self.core_symbol if short else None
        shown = self.beyond_core() if core else self
        head: tuple[Node, ...] = (Core(core),) if core else ()
        return Row(head + tuple(Occupied((sub.label,), count) for sub, count in shown.counts))

    @staticmethod
    def parse(text: str) -> Configuration:
        """Read `[Ar] 3d3 4s2`, `1s2 2s2 2p6`, `1s²2s²2p⁶`, `3d10.4s`.

        A count left out is 1; `3d0` may be written and is dropped. `ContentError` for anything else.
        """
        if len(text) > _LONGEST_TEXT:
            raise ContentError(f"a configuration has at most {_LONGEST_TEXT} characters")
        return _parsed(text)


@cache
def noble_gas(symbol: str) -> Configuration:
    """The configuration of a noble gas; `ContentError` for another symbol."""
    electrons = NOBLE_GASES.get(symbol)
    if electrons is None:
        raise ContentError(f"{quoted(symbol)} is not a noble gas", symbol[:20], NOBLE_GASES)
    return filling(electrons)


@cache
def filling(electrons: int, order: Order = "madelung") -> Configuration:
    """Electrons put into subshells one after the other: by n + l and then n, or strictly shell by shell."""
    left = electrons
    counts = []
    for sub in _ORDERS[order]:
        if left <= 0:
            break
        held = min(left, sub.capacity)
        counts.append((sub, held))
        left -= held
    if left:
        raise ContentError(f"{electrons} electrons cannot be placed")
    return Configuration(tuple(counts))


@cache
def _core_of(configuration: Configuration) -> str | None:
    held = dict(configuration.counts)
    total = configuration.electrons
    found = None
    for symbol, electrons in NOBLE_GASES.items():
        if electrons >= total or any(held.get(sub) != count for sub, count in noble_gas(symbol).counts):
            break
        found = symbol
    return found


@cache
def _parsed(text: str) -> Configuration:
    core, rest = _split_core(text.strip())
    inside = core.counts if core else ()
    taken = {sub for sub, _ in inside}
    written: set[Subshell] = set()
    counts: list[tuple[Subshell, int]] = []
    for sub, count in _terms(rest):
        if sub in taken:
            raise ContentError(f"{sub.label} already stands in the core")
        if sub in written:
            raise ContentError(f"{sub.label} stands twice in the configuration")
        written.add(sub)
        if count:
            counts.append((sub, count))
    if core is None and not written:
        raise ContentError("a configuration is missing (like `[Ar] 3d3 4s2`)")
    return Configuration((*inside, *counts))


def _split_core(text: str) -> tuple[Configuration | None, str]:
    if not text.startswith("["):
        return None, text
    symbol, bracket, rest = text[1:].partition("]")
    if not bracket:
        raise ContentError(f"the core in {quoted(text)} has no closing bracket")
    return noble_gas(symbol.strip()), rest


def _terms(text: str) -> Iterable[tuple[Subshell, int]]:
    if _MIXED_COUNT.search(text):
        raise ContentError(f"{quoted(text)} mixes raised and ordinary digits in one count")
    plain = _RAISED.sub(r"\1 ", text).translate(_TO_DIGITS)
    for chunk in _SEPARATORS.split(plain):
        at = 0
        while at < len(chunk):
            match = _TERM.match(chunk, at)
            if match is None:
                raise ContentError(f"{quoted(chunk[at:])} is not a subshell with its electrons (like `3d3`)")
            sub = Subshell.parse(match[1])
            yield sub, _count(match[2], sub)
            at = match.end()


def _count(digits: str | None, sub: Subshell) -> int:
    if digits is None:
        return 1
    if len(digits) > 2 or (len(digits) == 2 and digits[0] == "0"):
        raise ContentError(f"{sub.label} holds 1 to {sub.capacity} electrons, not {quoted(digits)[1:-1]}")
    return int(digits)
