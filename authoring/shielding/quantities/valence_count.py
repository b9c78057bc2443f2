"""The valence-count charge: each core electron cancels one proton, and shell-mates cancel nothing."""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.configuration import Configuration, noble_gas
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.effective_charge import Z, protons
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Num, Sym, Words, difference
from authoring.working.numbers import Rounding, shown


def core_electrons(configuration: Configuration, practice: Practice) -> int:
    """Electrons of the core: all shells below the outermost, or the noble-gas core (differs for d and early p)."""
    if practice.core == "noble gas":
        symbol = configuration.core_symbol
        return noble_gas(symbol).electrons if symbol else 0
    return sum(count for each, count in configuration.counts if each.n < configuration.outer_shell)


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    return Decimal(protons(target, practice) - core_electrons(inputs[0], practice))


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    numbers = difference(Num(str(protons(target, practice))), Num(str(core_electrons(inputs[0], practice))))
    final = shown(rounding.apply(value))
    chain = Chain(QUANTITY.symbol, (("=", difference(Z, Words("core electrons"))), ("=", numbers), ("=", Num(final))))
    return Line(QUANTITY.name, target.about, chain, value, final)


QUANTITY = Quantity(
    name="valence-count charge",
    symbol=Sym("Z", sub="core"),
    unit="",
    source="first-year usage: Z minus the core electrons; common practice, no source",
    needs=lambda target, practice: (Target("configuration", target.species),),
    value=_value,
    line=_line,
    points=(
        PointRule("M", "the core electrons counted", "method", 30, follow_through=True),
        PointRule("A", "Z less the core electrons", "value", 90, follow_through=True),
    ),
    ask="Calculate the charge felt by an outer electron of {species} if each core electron cancels one proton and "
    "outer electrons cancel nothing.",
    rounding=Rounding(places=0),
    aliases=("core charge", "Z minus core"),
    says="what is left when the core shields fully and shell-mates not at all",
)
