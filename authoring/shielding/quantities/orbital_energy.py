"""The energy of one electron: −R (Z_eff/n*)²."""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.constants import constant
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantities.effective_charge import Z_EFF, Z, protons
from authoring.shielding.quantities.tally import felt_by
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Fraction, Measured, Negative, Node, Num, Power, Product, Relation, Sym
from authoring.working.numbers import EXACT, Rounding, shown

UNITS = ("eV", "kJ/mol")
N_STAR_SYMBOL = Sym("n", sup="*")
_RYDBERG_SHOWN = Rounding(figures=6)  # 13.6057 eV: what a data page prints
_TWO = Num("2")


def rydberg_node(practice: Practice) -> Measured:
    """`13.6057 eV`; a shorter value, which a course has chosen, as it stands."""
    short = len(practice.rydberg.as_tuple().digits) <= 6
    return Measured(Num(shown(practice.rydberg if short else _RYDBERG_SHOWN.apply(practice.rydberg))), "eV")


def divisor(electron: Subshell, practice: Practice) -> Decimal:
    """What divides Z_eff: n* of the shell, or n under that habit."""
    return Decimal(electron.n) if practice.quantum_number == "n" else practice.effective_number(electron.n)


def electron_energy(charge: Decimal, electron: Subshell, practice: Practice) -> Decimal:
    """−R (Z_eff/n*)² in eV (negative: bound), to 34 digits. Raises ContentError where Z_eff is not positive."""
    if charge <= 0:
        raise ContentError(f"Z_eff is {shown(charge)} for {electron.label}: such an electron is not held")
    number = divisor(electron, practice)
    ratio = EXACT.divide(charge, number)
    form = {
        "squared": lambda: EXACT.multiply(ratio, ratio),
        "not squared": lambda: ratio,
        "charge squared": lambda: EXACT.multiply(charge, ratio),
    }[practice.energy_form]()
    return EXACT.minus(EXACT.multiply(practice.rydberg, form))


def energy_shape(charge: Node, number: Node, practice: Practice) -> Node:
    """(Z_eff/n*)² as the practice writes it."""
    if practice.energy_form == "squared":
        return Power(Fraction(charge, number), _TWO)
    top = Power(charge, _TWO) if practice.energy_form == "charge squared" else charge
    return Fraction(top, number)


def per_mole() -> Decimal:
    """kJ/mol in one eV per particle."""
    return constant("kilojoules_per_mole_of_electronvolts").value


def in_unit(energy: Decimal, unit: str) -> Decimal:
    """An energy in eV (also where no unit is said), or per mole in kJ/mol. Raises ContentError for another unit."""
    if unit in ("", "eV"):
        return energy
    if unit != "kJ/mol":
        raise ContentError(f"an energy is given in eV or kJ/mol, not {unit[:20]!r}", unit, UNITS)
    return EXACT.multiply(energy, per_mole())


def _electron(target: Target, practice: Practice) -> Subshell:
    return felt_by(target, configuration_of(target.species, practice))


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (target.to("effective nuclear charge", detail=()),)


def _charge(target: Target, practice: Practice, effective: Decimal) -> Decimal:
    return effective if practice.energy_charge == "Z_eff" else Decimal(protons(target, practice))


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    charge = _charge(target, practice, inputs[0])
    return in_unit(electron_energy(charge, _electron(target, practice), practice), target.get("unit"))


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    unit = target.get("unit") or "eV"
    charge = _charge(target, practice, inputs[0])
    number = divisor(_electron(target, practice), practice)
    charge_symbol = Z_EFF if practice.energy_charge == "Z_eff" else Z
    number_symbol = N_STAR_SYMBOL if practice.quantum_number == "n*" else Sym("n")
    final = shown(rounding.apply(value))
    symbols = Negative(Product((Sym("R"), energy_shape(charge_symbol, number_symbol, practice)), juxtaposed=True))
    written = Negative(
        Product((rydberg_node(practice), energy_shape(Num(shown(charge)), Num(shown(number)), practice)))
    )
    rest: list[tuple[Relation, Node]] = [("=", symbols), ("=", written)]
    if unit == "kJ/mol":
        factor = Num(shown(Rounding(figures=6).apply(per_mole())))
        energy = electron_energy(charge, _electron(target, practice), practice)
        rest.append(("=", Measured(Num(shown(Rounding(figures=5).apply(energy))), "eV")))
        rest.append(("=", Product((Num(shown(Rounding(figures=5).apply(energy))), Measured(factor, "kJ/mol")))))
    rest.append(("=", Measured(Num(final), unit)))
    return Line("orbital energy", target.about, Chain(Sym("E"), tuple(rest)), value, final, unit, rounded=True)


QUANTITY = Quantity(
    name="orbital energy",
    symbol=Sym("E"),
    unit="eV",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930): E = −R(Z_eff/n*)²; R from CODATA 2018",
    needs=_needs,
    value=_value,
    line=_line,
    points=(
        PointRule("M", "Z_eff and n* put into −R(Z_eff/n*)²", "method", 40, follow_through=True),
        PointRule("A", "the energy with its sign and unit", "value", 105, follow_through=True),
    ),
    ask="Use Slater's rules to calculate the energy, $E$, of {electron} of {species}.",
    rounding=Rounding(figures=4),
    takes=frozenset({"electron"}),
    details=("unit",),
    units=UNITS,
    aliases=("E", "electron energy", "energy"),
    says="the energy of one electron in the screened field",
)
