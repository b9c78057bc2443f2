"""Measured values beside the model's: ionization energies, ionic radii and covalent radii, with their source."""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.reference import SOURCES, IonicRadius, IonizationEnergy, ionic_radii, ionization_energy
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.ionization_energy import stage_of
from authoring.shielding.quantities.orbital_energy import UNITS, in_unit
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Function, Measured, Num, Sym
from authoring.working.numbers import Rounding, shown

_R = Sym("r")


def _energy(target: Target) -> IonizationEnergy:
    charge = target.species.charge + stage_of(target) - 1
    found = ionization_energy(target.species.z, charge) if charge >= 0 else None
    if found is None:
        raise ContentError(f"no ionization energy is tabulated for {target.about}")
    return found


def _energy_value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    return in_unit(_energy(target).value, target.get("unit"))


def _radius(target: Target) -> IonicRadius:
    """The one tabulated radius that a target asks for. Raises ContentError where there is none or several."""
    species = target.species
    listed = [each for each in ionic_radii() if (each.z, each.charge) == (species.z, species.charge)]
    wanted = target.get("coordination", "VI")
    found = [each for each in listed if each.coordination == wanted]
    if target.get("spin"):
        found = [each for each in found if each.spin == target.get("spin")]
    if not found:
        known = sorted({f"{each.coordination} {each.spin}".strip() for each in listed})
        has = ", ".join(known) if known else "none"
        raise ContentError(f"no ionic radius of {species.label} in coordination {wanted[:20]}; tabulated: {has}")
    if len(found) > 1:
        raise ContentError(f"the ionic radius of {species.label} depends on its spin; give `spin` as HS or LS")
    return found[0]


def _covalent(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    radius = target.species.element.covalent_radius
    if target.species.charge or radius is None:
        raise ContentError(f"no covalent radius is tabulated for {target.species.label}")
    return radius


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    what = next(each for each in QUANTITIES if each.name == target.quantity)
    unit = target.get("unit") or what.unit
    final = rounding.apply(value)
    symbol = what.symbol if isinstance(what.symbol, Sym) else _R
    chain = Chain(Function(symbol, target.species.node()), (("=", Measured(Num(shown(final)), unit)),))
    note = what.source
    if target.quantity == ENERGY.name and _energy(target).certainty != "measured":
        note += f" ({_energy(target).certainty}, not measured)"
    return Line(what.name, target.about, chain, value, shown(final), unit, rounded=final != value, note=note)


def _stated(what: str) -> tuple[PointRule, ...]:
    return (PointRule("B", f"{what}, read from the data", "value", 80),)


ENERGY = Quantity(
    name="measured ionization energy",
    symbol=Sym("I", sub="measured"),
    unit="eV",
    source=SOURCES["ionization_energies"],
    needs=lambda target, practice: (),
    value=_energy_value,
    line=_line,
    points=_stated("the ionization energy"),
    ask="State the measured ionization energy (stage {stage}) of {species}.",
    # Two places, to stand beside the model's value; the table has more.
    rounding=Rounding(places=2),
    details=("stage", "unit"),
    defaults=(("stage", "1"),),
    units=UNITS,
    aliases=("measured ionisation energy", "measured IE"),
    says="what spectroscopy gives for taking an electron away",
)

IONIC = Quantity(
    name="measured ionic radius",
    symbol=Sym("r", sub="ion"),
    unit="pm",
    source=SOURCES["ionic_radii"],
    needs=lambda target, practice: (),
    value=lambda target, practice, inputs: _radius(target).ionic,
    line=_line,
    points=_stated("the ionic radius"),
    ask="State the tabulated ionic radius of {species} (coordination {coordination}).",
    rounding=Rounding(places=1),
    details=("coordination", "spin"),
    defaults=(("coordination", "VI"),),
    says="an ion's radius in crystals, for its coordination",
)

ATOMIC = Quantity(
    name="measured atomic radius",
    symbol=Sym("r", sub="cov"),
    unit="pm",
    source=SOURCES["covalent_radii"],
    needs=lambda target, practice: (),
    value=_covalent,
    line=_line,
    points=_stated("the covalent radius"),
    ask="State the tabulated single-bond covalent radius of {species}.",
    rounding=Rounding(places=0),
    aliases=("covalent radius",),
    says="an atom's single-bond covalent radius",
)

QUANTITIES = (ENERGY, IONIC, ATOMIC)
