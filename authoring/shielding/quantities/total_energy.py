"""The total energy of all electrons: Σ −R N (Z_eff/n*)², one term for each group."""

from __future__ import annotations

from decimal import Decimal

from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantities.effective_charge import Z_EFF, Z, protons
from authoring.shielding.quantities.orbital_energy import (
    N_STAR_SYMBOL,
    UNITS,
    divisor,
    electron_energy,
    energy_shape,
    in_unit,
    rydberg_node,
)
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.shielding.screening import Group, grouped
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Function, Measured, Negative, Node, Num, Product, Relation, Sym, sum_of
from authoring.working.numbers import EXACT, Rounding, shown

# Totals serve in differences, so they keep decimal places rather than figures; each step of the working carries one
# place more than the next (one electron 4, total 3, ionization energy 2), so that a reader who adds up agrees.
TOTAL = Rounding(places=3)
_ONE_ELECTRON = Rounding(places=4)


def groups_of(target: Target, practice: Practice) -> tuple[Group, ...]:
    """The occupied groups of a target's species."""
    return grouped(configuration_of(target.species, practice), practice)


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    # All electrons of a group feel one charge; its last subshell that has electrons stands for it.
    held = configuration_of(target.species, practice).count
    charges = tuple(
        Target("effective nuclear charge", target.species, [each for each in group.subshells if held(each)][-1])
        for group in groups_of(target, practice)
    )
    return (Target("groups", target.species), *charges)


def _charges(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> list[tuple[Group, Decimal]]:
    felt = inputs[1:]
    if practice.energy_charge != "Z_eff":
        felt = (Decimal(protons(target, practice)),) * len(felt)
    return list(zip(groups_of(target, practice), felt, strict=True))


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    total = Decimal("0.00")
    for group, charge in _charges(target, practice, inputs):
        energy = electron_energy(charge, group.subshells[-1], practice)
        total = EXACT.add(total, EXACT.multiply(Decimal(group.electrons), energy))
    return in_unit(total, target.get("unit"))


def energy_of(target: Target) -> Function:
    """`E(Fe²⁺)`."""
    return Function(Sym("E"), target.species.node())


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    unit = target.get("unit") or "eV"
    charge_symbol = Z_EFF if practice.energy_charge == "Z_eff" else Z
    number_symbol = N_STAR_SYMBOL if practice.quantum_number == "n*" else Sym("n")
    shape = energy_shape(charge_symbol, number_symbol, practice)
    symbols = Negative(Product((Sym("R"), Sym("Σ", upright=True), Sym("N"), shape), juxtaposed=True))
    written, terms = [], []
    for group, charge in _charges(target, practice, inputs):
        electron = group.subshells[-1]
        count = Num(str(group.electrons))
        number = Num(shown(divisor(electron, practice)))
        energy = _ONE_ELECTRON.apply(electron_energy(charge, electron, practice))
        written.append(Product((count, energy_shape(Num(shown(charge)), number, practice))))
        terms.append(Product((count, Measured(Num(shown(energy)), "eV"))))
    final = shown(rounding.apply(value))
    between: list[tuple[Relation, Node]] = [("=", sum_of(terms))]
    if unit != "eV":
        energy = _value(target.to(target.quantity, detail=()), practice, inputs)
        between.append(("=", Measured(Num(shown(TOTAL.apply(energy))), "eV")))
    chain = Chain(
        energy_of(target),
        (
            ("=", symbols),
            ("=", Negative(Product((rydberg_node(practice), sum_of(written))))),
            *between,
            ("=", Measured(Num(final), unit)),
        ),
    )
    return Line("total energy", target.about, chain, value, final, unit, rounded=True)


QUANTITY = Quantity(
    name="total energy",
    symbol=Sym("E", sub="total"),
    unit="eV",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930): the sum of −R(Z_eff/n*)² over all electrons; R from CODATA 2018",
    needs=_needs,
    value=_value,
    line=_line,
    points=(
        PointRule("M", "one term −R N(Z_eff/n*)² for every group, and the terms added", "method", 50, True),
        PointRule("A", "the total energy with its sign and unit", "value", 104, follow_through=True),
    ),
    ask="Calculate the total energy of the electrons of {species} from Slater's rules.",
    rounding=TOTAL,
    details=("unit",),
    units=UNITS,
    aliases=("E_total", "sum of energies"),
    says="the energy of all electrons together, group by group",
)
