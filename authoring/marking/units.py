"""Stage 8, mark: values in another unit than the key's."""

from __future__ import annotations

from decimal import Decimal
from functools import cache

from authoring.atoms.constants import constant
from authoring.working.numbers import EXACT

# How many of the first unit make one of the second's dimension base (eV, pm, Bohr magneton).
FEWEST = 3
_LENGTHS = {"pm": Decimal(1), "Å": Decimal(100), "A": Decimal(100), "nm": Decimal(1000), "m": Decimal("1e12")}


@cache
def _energies() -> dict[str, Decimal]:
    per_mole = constant("kilojoules_per_mole_of_electronvolts").value
    return {
        "eV": Decimal(1),
        "keV": Decimal(1000),
        "kJ/mol": EXACT.divide(Decimal(1), per_mole),
        "MJ/mol": EXACT.divide(Decimal(1000), per_mole),
        "J/mol": EXACT.divide(Decimal("0.001"), per_mole),
        # 1 eV = 1.602176634e-19 J, exact (CODATA 2018).
        "J": EXACT.divide(Decimal(1), Decimal("1.602176634e-19")),
    }


def in_key_unit(value: Decimal, written: str, key: str) -> tuple[Decimal, str]:
    """A value in the key's unit, and what is wrong with the unit as written (nothing where none is written)."""
    written = written.replace("_", "")
    key = key.replace("_", "")  # `μ_B` prints as a symbol with a subscript and is typed without it
    if not written or written == key:
        return value, ""
    for table in (_energies(), _LENGTHS):
        if written in table and key in table:
            converted = EXACT.divide(EXACT.multiply(value, table[written]), table[key])
            return _as_precise(converted, value), ""
    if not key:
        return value, f"the quantity has no unit; {written} is written"
    return value, f"the unit is {key}; {written} is written"


def _as_precise(converted: Decimal, given: Decimal) -> Decimal:
    """A converted value with as many significant figures as were given."""
    return with_figures(converted, len(given.as_tuple().digits))


def with_figures(value: Decimal, figures: int) -> Decimal:
    """A value cut to significant figures, where it is not zero and of a sensible size."""
    if not value:
        return value
    places = figures - 1 - value.adjusted()
    return value.quantize(Decimal(1).scaleb(-places), context=EXACT) if abs(places) < 25 else value


def fewer_figures(given: Decimal) -> tuple[int, ...]:
    """How many figures a whole number may have been given to: the zeros at its end may only fill places."""
    _, digits, exponent = given.as_tuple()
    kept = len("".join(map(str, digits)).rstrip("0"))
    if exponent != 0 or kept == len(digits):
        return ()
    return tuple(dict.fromkeys(each for each in (kept + 1, kept) if FEWEST <= each < len(digits)))
