"""Stage 2, draw: every variant of an item, enumerated; no sampling, so what holds for all is known to hold."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from authoring.faults import ContentError, Fault, FaultsFound, Source
from authoring.papers.pools import pool
from authoring.papers.views import value_text, view
from authoring.shielding.practice import Practice
from authoring.specs.item import Item

# Beyond this an item is better written with smaller pools: a class needs hundreds, and every one is checked.
MOST_VARIANTS = 200_000
MOST_TRIED = 4 * MOST_VARIANTS
_TOO_LARGE = f"more than {MOST_VARIANTS:,} combinations can be drawn; make the pools smaller"


@dataclass(frozen=True, slots=True)
class Variant:
    """An item with every drawn variable bound; `values` in the order of the item's draws."""

    item: Item
    values: tuple[tuple[str, object], ...]

    @property
    def bindings(self) -> dict[str, object]:
        """The drawn values by name."""
        return dict(self.values)

    @property
    def variables(self) -> dict[str, str]:
        """The drawn values as the record writes them."""
        return {name: value_text(value) for name, value in self.values}

    def __hash__(self) -> int:
        return hash((self.item.name, self.values))


@dataclass(frozen=True, slots=True)
class Pool:
    """Every variant of an item that meets its conditions; `possible` counts them before the conditions."""

    item: Item
    variants: tuple[Variant, ...]
    possible: int
    fixed: Mapping[str, str] = field(default_factory=dict)


def enumerated(item: Item, practice: Practice, fixed: Mapping[str, str] | None = None) -> Pool:
    """All variants of an item under a practice, in a fixed order.

    Raises FaultsFound where a draw's words cannot be used, where a pool is empty, where nothing meets the
    conditions, or where there are more than MOST_VARIANTS combinations.
    """
    found: list[Variant] = []
    possible = 0
    for bindings in _combinations(item, practice, fixed or {}):
        possible += 1
        if possible > MOST_VARIANTS:
            raise FaultsFound([Fault("pool-too-large", _TOO_LARGE, item.at("draw"))])
        if _kept(item, bindings, practice):
            found.append(Variant(item, tuple(bindings.items())))
    if not possible:
        raise FaultsFound([_empty_pool(item, practice, fixed or {})])
    if not found:
        message = f"none of the {possible:,} combinations meets all conditions under `keep`"
        raise FaultsFound([Fault("nothing-kept", message, item.at("keep"))])
    return Pool(item, tuple(dict.fromkeys(found)), possible, fixed or {})


def _combinations(
    item: Item, practice: Practice, fixed: Mapping[str, str], upto: int | None = None
) -> Iterator[dict[str, object]]:
    """The combinations of the first `upto` draws (all of them by default), without regard to the conditions."""
    names = list(item.draws)[:upto]
    tried = itertools.count(1)

    def bind(at: int, bindings: dict[str, object]) -> Iterator[dict[str, object]]:
        # Values that lead nowhere count as well: two long rows before an empty pool would take hours.
        if next(tried) > MOST_TRIED:
            raise FaultsFound([Fault("pool-too-large", _TOO_LARGE, item.at("draw"))])
        if at == len(names):
            yield dict(bindings)
            return
        name = names[at]
        for value in _allowed(item, name, bindings, practice, fixed):
            bindings[name] = value
            yield from bind(at + 1, bindings)
        bindings.pop(name, None)

    yield from bind(0, {})


def _allowed(
    item: Item, name: str, bindings: Mapping[str, object], practice: Practice, fixed: Mapping[str, str]
) -> tuple[object, ...]:
    try:
        values = pool(item.draws[name], bindings, practice)
    except ContentError as error:
        raise FaultsFound([Fault.from_error("draw", error, item.at("draw", name))]) from error
    if name in fixed:
        return tuple(value for value in values if value_text(value) == fixed[name])
    return values


def _kept(item: Item, bindings: Mapping[str, object], practice: Practice) -> bool:
    if not item.keep:
        return True
    seen = {name: view(value, practice) for name, value in bindings.items()}
    for at, condition in enumerate(item.keep):
        try:
            if not condition.holds(seen):
                return False
        except ContentError as error:
            where = ", ".join(f"{name} = {value_text(value)}" for name, value in bindings.items())
            place: Source = item.at("keep", at)
            raise FaultsFound([Fault("condition", f"{error.full_message} ({where})", place)]) from error
    return True


def _empty_pool(item: Item, practice: Practice, fixed: Mapping[str, str]) -> Fault:
    """Which draw is empty: the first that has nothing to offer in any combination before it."""
    held = "".join(f"; {name} is held at {value!r}" for name, value in fixed.items())
    for upto, name in enumerate(item.draws, start=1):
        if next(_combinations(item, practice, fixed, upto), None) is None:
            place = item.tree.key_at(("draw", name))
            return Fault("empty-pool", f"{name!r} is drawn from an empty pool{held}", place)
    return Fault("empty-pool", f"nothing can be drawn{held}", item.at("draw"))
