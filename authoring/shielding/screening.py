"""Groups and coefficients: which electrons count, and how much, for one electron under a practice.

Source of the defaults: J. C. Slater, Phys. Rev. 36, 57 (1930).
"""

from __future__ import annotations

import functools
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from authoring.atoms.configuration import Configuration
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice

Region = Literal["same group", "one shell in", "deeper", "inside", "outside"]
REGIONS: tuple[Region, ...] = ("same group", "one shell in", "deeper", "inside", "outside")


@dataclass(frozen=True, slots=True)
class Group:
    """Electrons that the method treats alike: its subshells (s and p together even if p is empty), and how many."""

    subshells: tuple[Subshell, ...]
    electrons: int

    @property
    def label(self) -> str:
        """`2s,2p`, `3d`."""
        return ",".join(each.label for each in self.subshells)


@dataclass(frozen=True, slots=True)
class Share:
    """One term of the tally: `count` electrons of one region at one coefficient."""

    region: Region
    subshells: tuple[Subshell, ...]
    count: int
    coefficient: Decimal

    @property
    def product(self) -> Decimal:
        """What this term adds to S."""
        return self.count * self.coefficient


def group_key(subshell: Subshell, practice: Practice) -> tuple[int, int]:
    """Where a subshell's group stands, inner to outer: (n, rank in the shell)."""
    if subshell.l == 0:
        return (subshell.n, 0)
    if subshell.l == 1:
        return (subshell.n, 0 if practice.sp_split == "together" else 1)
    if subshell.l == 2 and practice.d_with_sp:
        return (subshell.n, 0)
    return (subshell.n, subshell.l)


def grouped(configuration: Configuration, practice: Practice) -> tuple[Group, ...]:
    """The occupied groups, inner to outer."""
    found: dict[tuple[int, int], list[tuple[Subshell, int]]] = {}
    for subshell, count in configuration.counts:
        found.setdefault(group_key(subshell, practice), []).append((subshell, count))
    return tuple(
        Group(_members(tuple(subshell for subshell, _ in held), practice), sum(count for _, count in held))
        for _, held in sorted(found.items())
    )


def _members(held: tuple[Subshell, ...], practice: Practice) -> tuple[Subshell, ...]:
    """The subshells of a group as it is written: (4s,4p) also where 4p is empty."""
    first = held[0]
    if first.l or first.n == 1 or practice.sp_split != "together":
        return held
    partner = Subshell(first.n, 1)
    return held if partner in held else (first, partner, *held[1:])


@functools.lru_cache(maxsize=65536)
def coefficient(electron: Subshell, other: Subshell, beside_d: bool, practice: Practice) -> tuple[Region, Decimal]:
    """The region of `other` as seen by `electron`, and the coefficient of each of its electrons.

    `beside_d`: the shell one in from `electron` also holds d or f electrons.
    """
    if group_key(other, practice) == group_key(electron, practice):
        return "same group", practice.same_group_1s if electron.n == 1 else practice.same_group
    if not _inside(electron, other, practice):
        return "outside", practice.outside
    if electron.l >= 2:
        return _inside_d(electron, other, practice)
    if other.n == electron.n:
        # Only a practice that splits s from p sees an inner group within the shell.
        return "one shell in", practice.one_in if practice.sp_split == "s inside p" else Decimal("0.00")
    if electron.n - other.n > 1:
        return "deeper", practice.deeper
    if other.l >= 2:
        return "one shell in", practice.one_in_d
    return "one shell in", practice.one_in_beside_d if beside_d else practice.one_in


def _inside(electron: Subshell, other: Subshell, practice: Practice) -> bool:
    if practice.next_s_inside_d and electron.l == 2 and (other.n, other.l) == (electron.n + 1, 0):
        return True
    if practice.d_outside_next_s and electron.l <= 1 and (other.n, other.l) == (electron.n - 1, 2):
        return False
    if practice.f_inside_d and electron.l == 2 and (other.n, other.l) == (electron.n, 3):
        return True
    return group_key(other, practice) < group_key(electron, practice)


def _inside_d(electron: Subshell, other: Subshell, practice: Practice) -> tuple[Region, Decimal]:
    if other.n == electron.n:
        return "inside", practice.inside_d_same_shell
    if electron.n - other.n == 1:
        return "inside", practice.d_one_in
    return "inside", practice.inside_d


def tallied(configuration: Configuration, electron: Subshell, practice: Practice) -> tuple[Share, ...]:
    """The terms of S for one electron, same group first, then inwards; terms that count for nothing stay.

    Raises ContentError when the configuration has no such electron.
    """
    if not configuration.count(electron):
        raise ContentError(
            f"there is no {electron.label} electron in {configuration.short()}",
            electron.label,
            [each.label for each in configuration.occupied],
        )
    beside_d = any(each.n == electron.n - 1 and each.l >= 2 for each in configuration.occupied)
    merged: dict[tuple[Region, Decimal], list[tuple[Subshell, int]]] = {}
    for subshell, count in configuration.counts:
        region, weight = coefficient(electron, subshell, beside_d, practice)
        if subshell == electron and not practice.self_counted:
            count -= 1
        merged.setdefault((region, weight), []).append((subshell, count))
    shares = [
        Share(region, tuple(subshell for subshell, _ in members), sum(count for _, count in members), weight)
        for (region, weight), members in merged.items()
    ]
    return tuple(sorted(shares, key=_inwards))


def _inwards(share: Share) -> tuple[int, Decimal, int]:
    return (REGIONS.index(share.region), share.coefficient, -share.subshells[0].n)
