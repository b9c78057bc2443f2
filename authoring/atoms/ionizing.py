"""Atoms: the taught rule for ions: which electrons leave first, and where added ones go."""

from __future__ import annotations

from authoring.atoms.configuration import MADELUNG, Configuration
from authoring.faults import ContentError


def remove_electrons(neutral: Configuration, count: int) -> Configuration:
    """Take electrons away as taught: np, ns, then (n-1)d, then (n-2)f; the core only after all outside it.

    Common practice; the core is needed in the wording because Pr3+ keeps its 5p6 (NIST ASD) though 5 > 4.
    `ContentError` where there are too few electrons.
    """
    if count > neutral.electrons:
        raise ContentError(f"{count} electrons cannot leave an atom that has {neutral.electrons}")
    left = neutral
    while count:
        leaving = left.beyond_core().outermost
        step = min(count, left.count(leaving))
        left = left.without(leaving, step)
        count -= step
    return left


def add_electrons(neutral: Configuration, count: int) -> Configuration:
    """Put electrons into the first subshells in Madelung order that have room (common practice)."""
    grown = neutral
    for sub in MADELUNG:
        if not count:
            break
        step = min(count, sub.capacity - grown.count(sub))
        if step:
            grown = grown.with_(sub, step)
            count -= step
    if count:
        raise ContentError(f"{count} more electrons cannot be placed")
    return grown
