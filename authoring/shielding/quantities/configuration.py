"""The electron configuration of a species, under a practice's habits of filling and ionising."""

from __future__ import annotations

from authoring.atoms.configuration import Configuration, filling
from authoring.atoms.ionizing import add_electrons, remove_electrons
from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Sym
from authoring.working.numbers import Rounding


def configuration_of(species: Species, practice: Practice) -> Configuration:
    """The configuration that a practice gives a species. A stated configuration is taken as stated."""
    if species.stated is not None:
        return species.stated
    if species.electrons <= 0:
        raise ContentError(f"{species.label} has no electrons")
    if species.charge == 0:
        return _neutral(species, practice)
    return _ion(species, practice)


def _neutral(species: Species, practice: Practice) -> Configuration:
    if practice.neutral == "measured":
        return species.measured
    return filling(species.z, "madelung" if practice.neutral == "regular filling" else "shell")


def _ion(species: Species, practice: Practice) -> Configuration:
    if practice.ion == "measured" and practice.neutral == "measured":
        return species.measured
    atom = _neutral(Species(species.z), practice)
    if practice.ion == "as the neutral atom":
        return atom
    if practice.ion == "charge reversed":
        return ionised(atom, -species.charge)
    if practice.ion == "inner d first":
        return _inner_d_first(atom, species.charge)
    return ionised(atom, species.charge)


def _inner_d_first(atom: Configuration, charge: int) -> Configuration:
    """Remove (n−1)d before ns; where there is no such d, by the taught rule."""
    result = atom
    for _ in range(charge):
        outer = result.outermost
        inner = Subshell(outer.n - 1, 2)
        result = result.without(inner) if outer.l == 0 and result.count(inner) else ionised(result, 1)
    return result if charge > 0 else ionised(atom, charge)


def ionised(atom: Configuration, charge: int) -> Configuration:
    """An atom's configuration with electrons removed by the taught rule, or added in filling order."""
    return remove_electrons(atom, charge) if charge >= 0 else add_electrons(atom, -charge)


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    short = target.get("form") == "noble-gas core"
    chain = Chain(target.species.node(), ((":", value.node(short)),))
    return Line("configuration", target.about, chain, value, value.short() if short else value.full())


QUANTITY = Quantity(
    name="configuration",
    symbol=Sym("configuration", upright=True),
    unit="",
    source="NIST ground states through mendeleev; ions without a measured one by the rule ns, (n−1)d, (n−2)f",
    needs=lambda target, practice: (),
    value=lambda target, practice, inputs: configuration_of(target.species, practice),
    line=_line,
    points=(PointRule("B", "the configuration, with the right number of electrons", "statement", 10),),
    ask="Write the electron configuration of {species}.",
    rounding=Rounding(places=0),
    details=("form",),
    numeric=False,
    aliases=("electron configuration",),
    says="the occupied subshells and how many electrons each holds",
)
