"""Stage 8, mark: the terms of a sum as a candidate wrote them, held against a tally."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable
from decimal import Decimal

from authoring.marking.expression import Term
from authoring.shielding.screening import Share

Counts = dict[Decimal, Decimal]

_ONE = Decimal(1)


def counts_of_shares(shares: Iterable[Share]) -> Counts:
    """Electrons per coefficient, terms that add nothing left out."""
    found: Counter[Decimal] = Counter()
    for share in shares:
        if share.count and share.coefficient:
            found[share.coefficient.normalize()] += share.count
    return {coefficient: Decimal(count) for coefficient, count in found.items()}


def counts_of_terms(terms: Iterable[Term]) -> Counts:
    """Electrons per coefficient as written; equal coefficients together, in any order."""
    found: dict[Decimal, Decimal] = {}
    for term in terms:
        if term.product:
            key = term.coefficient.normalize()
            found[key] = found.get(key, Decimal(0)) + term.count
    return {coefficient: count for coefficient, count in found.items() if count}


def products_of(terms: Iterable[Term]) -> Counter[Decimal]:
    """The products as written, for sums whose products are already worked out."""
    return Counter(term.product.normalize() for term in terms if term.product)


Key = frozenset[tuple[Decimal, Decimal | int]]


def keys_of_shares(shares: Iterable[Share]) -> tuple[Key, Key]:
    """What tells a tally: its counts at their coefficients, and its products."""
    counts = counts_of_shares(shares)
    products = Counter((coefficient * count).normalize() for coefficient, count in counts.items())
    return frozenset(counts.items()), frozenset(products.items())


def keys_of_terms(terms: Iterable[Term]) -> tuple[Key, Key]:
    """The same for a sum as written."""
    kept = tuple(terms)
    return frozenset(counts_of_terms(kept).items()), frozenset(products_of(kept).items())


def same_tally(terms: tuple[Term, ...], shares: tuple[Share, ...]) -> bool:
    """Whether a sum as written is that tally: the same counts at the same coefficients, or the same products."""
    written, wanted = keys_of_terms(terms), keys_of_shares(shares)
    return written[0] == wanted[0] or written[1] == wanted[1]


def looks_like_tally(terms: tuple[Term, ...]) -> bool:
    """Whether a sum could be a tally: more than one term, or a count times a coefficient; nothing negative."""
    if not terms or any(term.product < 0 for term in terms):
        return False
    return len(terms) > 1 or terms[0].coefficient != _ONE
