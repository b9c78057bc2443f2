"""Exact numbers as markers write them: Decimals, half-up rounding, trailing zeros kept."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import ROUND_HALF_UP, Context, Decimal

from authoring.faults import ContentError

# 34 digits (decimal128) leave at least 25 beyond any printed figure; a context of our own, so that neither the
# thread's nor a caller's settings change a key.
EXACT = Context(prec=34, rounding=ROUND_HALF_UP)


@dataclass(frozen=True, slots=True)
class Rounding:
    """How a value is printed: a number of decimal places, or of significant figures (exactly one of them)."""

    places: int | None = None
    figures: int | None = None

    def __post_init__(self) -> None:
        if (self.places is None) == (self.figures is None):
            raise ContentError("a rounding has either decimal places or significant figures")

    def apply(self, value: Decimal) -> Decimal:
        """`value` rounded half-up, with its trailing zeros."""
        return to_places(value, self.places) if self.places is not None else to_figures(value, self.figures or 1)


def to_places(value: Decimal, places: int) -> Decimal:
    """Round half-up (away from zero at a tie) to decimal places, keeping trailing zeros."""
    return value.quantize(Decimal(1).scaleb(-places), context=EXACT)


def to_figures(value: Decimal, figures: int) -> Decimal:
    """Round half-up to significant figures; 9.996 to 3 figures is 10.0. Zero prints as `0`."""
    if not value:
        return Decimal(0)
    rounded = to_places(value, figures - 1 - value.adjusted())
    return to_places(value, figures - 1 - rounded.adjusted())


def shown(value: Decimal) -> str:
    """Plain digits, never an exponent; the minus sign is U+2212, as the press prints it."""
    text = format(value, "f")
    if text.startswith("-"):
        return text[1:] if not value else "−" + text[1:]
    return text


def ascii_shown(value: Decimal) -> str:
    """Plain digits with an ASCII minus: for records and other programs."""
    return format(value, "f")
