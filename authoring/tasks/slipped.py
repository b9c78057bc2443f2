"""What slips make of a target: the wrong answers of choices, orders and decisions."""

from __future__ import annotations

import contextlib
import functools
from collections.abc import Callable, Mapping
from types import MappingProxyType

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value
from authoring.shielding.solve import Step, evaluate, work
from authoring.slips.catalogue import Slip, Slips, applied
from authoring.tasks.setting import Setting
from authoring.tasks.solved import Wrong
from authoring.working.numbers import Rounding


@functools.lru_cache(maxsize=512)
def practice_with(slip: Slip, practice: Practice) -> Practice:
    """A practice under one slip."""
    return applied((slip,), practice)


@functools.lru_cache(maxsize=16384)
def values_under(target: Target, practice: Practice, slips: Slips) -> Mapping[str, Value]:
    """The exact value that each slip leads to from the start, likeliest first; no entry where it leads nowhere."""
    found = {}
    for slip in sorted(slips.touching(target.quantity), key=lambda each: (-each.likelihood, each.name)):
        with contextlib.suppress(ContentError):
            found[slip.name] = evaluate(target, practice_with(slip, practice))
    return MappingProxyType(found)


def steps_under(target: Target, slip: Slip, practice: Practice, rounding: Rounding) -> tuple[Step, ...]:
    """The working under a slip, from the start; empty where the slip leads nowhere."""
    try:
        return work(target, practice_with(slip, practice), None, rounding)
    except ContentError:
        return ()


def misjudged(
    right: Mapping[Target, Value], judge: Callable[[Mapping[Target, Value]], str | None], setting: Setting
) -> tuple[Wrong, ...]:
    """What single slips make of a judgement on several values: each other judgement, with the slip behind it.

    `judge` gives the judgement in text, or None where the values decide nothing.
    """
    tables = {target: values_under(target, setting.practice, setting.slips) for target in right}
    verdict = judge(right)
    found = []
    for name in next(iter(tables.values())):
        if any(name not in table for table in tables.values()):
            continue
        values = {target: table[name] for target, table in tables.items()}
        text = judge(values) if values != right else None
        if text is not None and text != verdict:
            found.append(Wrong((name,), text))
    return tuple(found)
