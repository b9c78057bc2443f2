"""Stage: solve. Plain arithmetic: whether a value is the right one but for a miscount or a slip of the pen."""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value, quantity
from authoring.shielding.screening import Share
from authoring.shielding.solve import evaluate
from authoring.slips.diagnose import agrees
from authoring.slips.outcomes import as_known, right_value
from authoring.working.numbers import Rounding, shown

_SHIFTS = (
    (1, "10 times too large"),
    (-1, "10 times too small"),
    (2, "100 times too large"),
    (-2, "100 times too small"),
)

Kind = Literal["miscount", "dropped term", "carry", "decimal point", "sign", "swapped digits"]


@dataclass(frozen=True, slots=True)
class Arithmetic:
    """A slip of counting or arithmetic that gives a value: its kind, and one sentence about it for the marker."""

    kind: Kind
    words: str


def plain_arithmetic(
    target: Target,
    value: Value,
    practice: Practice,
    known: Mapping[Target, Value] | None = None,
    rounding: Rounding | None = None,
) -> tuple[Arithmetic, ...]:
    """What simple mistake turns the right value (on the inputs in `known`) into this one; empty where none does.

    Looks for: one electron too many or too few in a term of the tally, a term left out, a carry or borrow, a
    misplaced decimal point, a sign, two digits swapped. Never raises for a value.
    """
    right = right_value(target, practice, as_known(known))
    if not isinstance(right, Decimal) or not isinstance(value, Decimal) or agrees(right, value, target, rounding):
        return ()
    written = (rounding or quantity(target.quantity).rounding).apply(right)
    found = [
        *_in_the_tally(target, value, practice, dict(known or {}), rounding),
        *(slip for answer, slip in _in_the_figures(written) if _same(answer, value)),
    ]
    return tuple(dict.fromkeys(found))


def _same(answer: Decimal, value: Decimal) -> bool:
    return value.is_finite() and answer == value


def _in_the_tally(
    target: Target, value: Decimal, practice: Practice, known: dict[Target, Value], rounding: Rounding | None
) -> Iterator[Arithmetic]:
    for tally in _tallies(target, practice, known):
        shares: tuple[Share, ...] = evaluate(tally, practice, known)
        for index, share in enumerate(shares):
            for count, slip in _recounted(share):
                changed = dataclasses.replace(share, count=count)
                altered = {**known, tally: (*shares[:index], changed, *shares[index + 1 :])}
                answer = right_value(target, practice, tuple(altered.items()))
                if agrees(answer, value, target, rounding):
                    yield slip


def _tallies(target: Target, practice: Practice, known: Mapping[Target, Value]) -> tuple[Target, ...]:
    """The tallies that a target rests on, unless values further down are known already."""
    found: dict[Target, None] = {}
    _seek(target, practice, known, found)
    return tuple(found)


def _seek(target: Target, practice: Practice, known: Mapping[Target, Value], found: dict[Target, None]) -> None:
    if target in known:
        return
    if target.quantity == "tally":
        found[target] = None
        return
    try:
        needs = quantity(target.quantity).needs(target, practice)
    except ContentError:
        return
    for need in needs:
        _seek(need, practice, known, found)


def _recounted(share: Share) -> Iterator[tuple[int, Arithmetic]]:
    if not share.coefficient:
        return
    where = f"{share.region} ({', '.join(each.label for each in share.subshells)})"
    counted = share.count
    yield counted + 1, Arithmetic("miscount", f"{where}: one electron too many, {counted + 1} for {counted}.")
    if counted:
        yield counted - 1, Arithmetic("miscount", f"{where}: one electron too few, {counted - 1} for {counted}.")
    if counted > 1:
        term = f"{counted} × {shown(share.coefficient)}"
        yield 0, Arithmetic("dropped term", f"{where}: the term {term} was left out.")


def _in_the_figures(right: Decimal) -> Iterator[tuple[Decimal, Arithmetic]]:
    """What slips of the pen make of the right value as printed."""
    if not right:
        return
    for shift, words in _SHIFTS:
        yield right.scaleb(shift), Arithmetic("decimal point", f"The decimal point is misplaced: {words}.")
    yield -right, Arithmetic("sign", "The sign is the wrong way round.")
    exponent = int(right.as_tuple().exponent)
    # Nothing is carried into the last place.
    for place in range(exponent + 1, right.adjusted() + 1):
        unit = Decimal(1).scaleb(place)
        for changed in (right + unit, right - unit):
            yield changed, Arithmetic("carry", f"Off by exactly {shown(unit)}: a carry or borrow went wrong.")
    sign, digits, _ = right.as_tuple()
    for at in range(len(digits) - 1):
        if digits[at] != digits[at + 1]:
            swapped = (*digits[:at], digits[at + 1], digits[at], *digits[at + 2 :])
            words = f"Two digits are swapped: {digits[at + 1]}{digits[at]} for {digits[at]}{digits[at + 1]}."
            yield Decimal((sign, swapped, exponent)), Arithmetic("swapped digits", words)
