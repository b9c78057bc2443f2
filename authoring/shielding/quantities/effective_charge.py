"""The effective nuclear charge: Z − S."""

from __future__ import annotations

from decimal import Decimal
from typing import Literal

from authoring.shielding.practice import Practice
from authoring.shielding.quantities.screening_constant import S
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Node, Num, Relation, Sum, Sym, Words
from authoring.working.numbers import Rounding, shown

Z = Sym("Z")
Z_EFF = Sym("Z", sub="eff")

_Term = tuple[Literal["+", "−"], Node]


def protons(target: Target, practice: Practice) -> int:
    """The number that a practice takes as the nuclear charge."""
    species = target.species
    if practice.protons == "atomic number":
        return species.z
    return species.electrons if practice.protons == "electron count" else species.mass_number


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (target.to("screening constant"),)


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    screening: Decimal = inputs[0]
    if practice.reported == "S":
        return screening
    charge = protons(target, practice) - screening
    return charge + target.species.charge if practice.charge_added else charge


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    final = rounding.apply(value)
    written: list[_Term] = [("+", Num(str(protons(target, practice)))), ("−", Num(shown(inputs[0])))]
    symbols: list[_Term] = [("+", Z), ("−", S)]
    if practice.charge_added and target.species.charge:
        sign: Literal["+", "−"] = "+" if target.species.charge > 0 else "−"
        written.append((sign, Num(str(abs(target.species.charge)))))
        symbols.append((sign, Words("charge")))
    if practice.reported == "S":
        chain = Chain(Z_EFF, (("=", S), ("=", Num(shown(final)))))
    else:
        relation: Relation = "=" if final == value else "≈"
        chain = Chain(Z_EFF, (("=", Sum(tuple(symbols))), ("=", Sum(tuple(written))), (relation, Num(shown(final)))))
    return Line("effective nuclear charge", target.about, chain, value, shown(final), rounded=final != value)


QUANTITY = Quantity(
    name="effective nuclear charge",
    symbol=Z_EFF,
    unit="",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930): Z_eff = Z − S",
    needs=_needs,
    value=_value,
    line=_line,
    points=(PointRule("A", "Z_eff = Z − S", "value", 110, follow_through=True),),
    ask="Calculate the effective nuclear charge, $Z_{eff}$, felt by {electron} of {species}.",
    takes=frozenset({"electron"}),
    aliases=("Z_eff", "Zeff", "effective charge", "Z*"),
    says="the nuclear charge that is left for one electron",
)
