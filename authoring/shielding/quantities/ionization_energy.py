"""The ionization energy: the total energy of the ion less that of the atom, both by the rules.

The others' charges change when one electron leaves, so both species are worked in full. The default ion has one
electron fewer by the taught rule, since the model takes one electron away and moves no other; the habit
`ionised` takes the measured ion instead (another value for V, Co, Ni, Y, La …).
"""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.configuration import Configuration
from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of, ionised
from authoring.shielding.quantities.first_lost import first_lost
from authoring.shielding.quantities.orbital_energy import UNITS, in_unit
from authoring.shielding.quantities.total_energy import TOTAL, energy_of
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Measured, Negative, Node, Num, Relation, Sym, difference
from authoring.working.numbers import EXACT, Rounding, shown

_HELD = ("measured", "taught rule")  # the ion configurations that lose one electron and keep the others


def stage_of(target: Target) -> int:
    """Which electron leaves, counted from the species given. Raises ContentError where it has too few."""
    text = target.get("stage", "1").strip()
    stage = int(text) if text.isascii() and text.isdigit() and len(text) <= 3 else 0
    if not 1 <= stage <= target.species.electrons:
        raise ContentError(
            f"ionization stage {text[:20]!r}: {target.species.label} has stages 1 to {target.species.electrons}"
        )
    return stage


def ionised_once(species: Species, practice: Practice) -> Species:
    """The species after one electron has left; its configuration is stated where the practice would give another."""
    ion = Species(species.z, species.charge + 1, mass=species.mass)
    if not ion.electrons or practice.ion not in _HELD:
        return ion
    held = species.stated is not None or practice.ionised == "taught rule"
    left: Configuration = ionised(configuration_of(species, practice), 1)
    return Species(ion.z, ion.charge, left, ion.mass) if held and left != configuration_of(ion, practice) else ion


def before_and_after(target: Target, practice: Practice) -> tuple[Species, Species]:
    """The species before and after the electron of this stage leaves."""
    before = target.species
    for _ in range(stage_of(target) - 1):
        before = ionised_once(before, practice)
    return before, ionised_once(before, practice)


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    before, after = before_and_after(target, practice)
    if practice.relaxation == "one electron only":
        return (Target("orbital energy", before, first_lost(configuration_of(before, practice), practice)),)
    species = (before, after) if after.electrons else (before,)
    return tuple(Target("total energy", each) for each in species)


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    after = inputs[1] if len(inputs) > 1 else Decimal("0.00")
    return in_unit(EXACT.subtract(after, inputs[0]), target.get("unit"))


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    unit = target.get("unit") or "eV"
    before, after = before_and_after(target, practice)
    energies = [Num(shown(TOTAL.apply(each))) for each in (*inputs[1:], inputs[0])]
    if practice.relaxation == "one electron only":
        rest: list[tuple[Relation, Node]] = [("=", Negative(Sym("E"))), ("=", Negative(energies[-1]))]
    else:
        names = [energy_of(Target("total energy", each)) for each in (after, before)]
        if len(energies) == 1:
            energies.insert(0, Num("0"))
        rest = [("=", difference(*names)), ("=", difference(*(Measured(each, "eV") for each in energies)))]
    final = shown(rounding.apply(value))
    if unit != "eV":
        rest.append(("=", Measured(Num(shown(TOTAL.apply(_in_ev(inputs)))), "eV")))
    rest.append(("=", Measured(Num(final), unit)))
    return Line("ionization energy", target.about, Chain(Sym("I"), tuple(rest)), value, final, unit, rounded=True)


def _in_ev(inputs: tuple[Value, ...]) -> Decimal:
    return EXACT.subtract(inputs[1] if len(inputs) > 1 else Decimal("0.00"), inputs[0])


QUANTITY = Quantity(
    name="ionization energy",
    symbol=Sym("I"),
    unit="eV",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930), difference of total energies; ion by the rule ns, (n−1)d, (n−2)f",
    needs=_needs,
    value=_value,
    line=_line,
    points=(
        PointRule(
            "M", "the total energy of the ion less that of the atom, with the charges of each", "method", 60, True
        ),
        PointRule("A", "the ionization energy with its unit", "value", 106, follow_through=True),
    ),
    ask="Use total energies from Slater's rules to calculate the ionization energy (stage {stage}) of {species}.",
    # Two places, one fewer than the total energies: more would not follow from the line above.
    rounding=Rounding(places=2),
    details=("stage", "unit"),
    defaults=(("stage", "1"),),
    units=UNITS,
    aliases=("IE", "ionisation energy", "I"),
    says="the energy that takes one electron away, the others' charges changing as it goes",
)
