"""Moseley's law for the Kα line: E = ¾ R (Z − 1)², and its inverse.

Against measured Kα1 lines the law is within 1 % for Z = 14-34; from Z = 45 the inverse rounds to a wrong Z.
"""

from __future__ import annotations

from decimal import Decimal

from authoring.faults import ContentError
from authoring.shielding.details import positive
from authoring.shielding.practice import Practice, published
from authoring.shielding.quantities.effective_charge import Z, protons
from authoring.shielding.quantities.orbital_energy import rydberg_node
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import (
    Bracket,
    Chain,
    Fraction,
    Measured,
    Node,
    Num,
    Power,
    Product,
    Relation,
    Root,
    Sum,
    Sym,
    difference,
)
from authoring.working.numbers import EXACT, Rounding, shown, to_places

UNITS = ("eV", "keV")
LAST_RIGHT = 44  # the last Z that the inverse finds from a measured line (compared with xraydb's table)
# Published Kα energies of these elements differ by more than 0.05 % between tables.
UNSURE_LINES = frozenset({"Na", "P", "S", "Sc"})
_FIRST = 5  # the first atom with a 2p electron
_FACTORS = {"1 − 1/4": Decimal("0.75"), "1": Decimal(1), "1 − 1/2": Decimal("0.5")}
_TWO = Num("2")
_E = Sym("E", sub="Kα")


def _scale(target: Target) -> int:
    """Electronvolts in the target's unit. Raises ContentError for a unit that X-ray lines are not given in."""
    unit = target.get("unit", "eV")
    if unit not in UNITS:
        raise ContentError(f"the energy of a line is given in eV or keV, not {unit[:20]!r}", unit, UNITS)
    return 1000 if unit == "keV" else 1


def _factor(practice: Practice) -> tuple[Node, ...]:
    """The term difference as a person writes it; nothing where the practice leaves it out."""
    return {"1 − 1/4": (Fraction(Num("3"), Num("4")),), "1": (), "1 − 1/2": (Fraction(Num("1"), Num("2")),)}[
        practice.moseley_factor
    ]


def _screened(z: Node, practice: Practice) -> Node:
    screening = practice.moseley_screening
    return Bracket(difference(z, Num(shown(screening)))) if screening else z


def _energy(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    if target.species.z < _FIRST:
        raise ContentError(f"{target.species.symbol} has no 2p electron to give a Kα line")
    felt = protons(target, practice) - practice.moseley_screening
    energy = EXACT.multiply(EXACT.multiply(_FACTORS[practice.moseley_factor], practice.rydberg), felt * felt)
    return EXACT.divide(energy, Decimal(_scale(target)))


def _energy_line(
    target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding
) -> Line:
    unit = target.get("unit", "eV")
    felt = Num(str(protons(target, practice)))
    final = shown(rounding.apply(value))
    rest: list[tuple[Relation, Node]] = [
        ("=", Product((*_factor(practice), Sym("R"), Power(_screened(Z, practice), _TWO)), juxtaposed=True)),
        (
            "=",
            Product((*_factor(practice), rydberg_node(practice), Power(_screened(felt, practice), _TWO))),
        ),
    ]
    if unit != "eV":
        energy = Rounding(figures=5).apply(EXACT.multiply(value, Decimal(_scale(target))))
        rest.append(("=", Measured(Num(shown(energy)), "eV")))
    rest.append(("=", Measured(Num(final), unit)))
    return Line(ENERGY.name, target.about, Chain(_E, tuple(rest)), value, final, unit, rounded=True)


def _unrounded(target: Target, practice: Practice) -> Decimal:
    energy = positive(target, "energy") * _scale(target)
    ratio = EXACT.divide(energy, EXACT.multiply(_FACTORS[practice.moseley_factor], practice.rydberg))
    return EXACT.add(practice.moseley_screening, ratio.sqrt(EXACT))


def number_remark(target: Target) -> str:
    """What a setter should know about this use of the inverse; empty where nothing speaks against it."""
    if target.species.z > LAST_RIGHT:
        return f"beyond Z = {LAST_RIGHT} a measured Kα energy gives a wrong Z by this law"
    if target.species.symbol in UNSURE_LINES:
        return f"published Kα energies of {target.species.symbol} differ between tables; print the one used"
    return ""


def _number(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    found = to_places(_unrounded(target, published()), 0)
    if found != target.species.z:
        raise ContentError(
            f"by Moseley's law {target.get('energy')} {target.get('unit', 'eV')} belongs to Z = {shown(found)}, "
            f"but {target.species.symbol} has Z = {target.species.z}"
        )
    return to_places(_unrounded(target, practice), 0)


def _number_line(
    target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding
) -> Line:
    energy = Num(shown((positive(target, "energy") * _scale(target)).normalize(EXACT)))

    def root(top: Node, unit: Node, juxtaposed: bool) -> Node:
        below: Node = Product((*_factor(practice), unit), juxtaposed) if _factor(practice) else unit
        inside = Root(Fraction(top, below))
        screening = practice.moseley_screening
        return Sum((("+", Num(shown(screening))), ("+", inside))) if screening else inside

    exact = Rounding(places=2).apply(_unrounded(target, practice))
    final = shown(value)
    chain = Chain(
        Z,
        (
            ("=", root(_E, Sym("R"), True)),
            ("=", root(Measured(energy, "eV"), rydberg_node(practice), False)),
            ("=", Num(shown(exact))),
            ("≈", Num(final)),
        ),
    )
    return Line(NUMBER.name, target.about, chain, value, final, note=number_remark(target))


ENERGY = Quantity(
    name="Moseley Kα energy",
    symbol=_E,
    unit="eV",
    source="H. G. J. Moseley, Phil. Mag. 26, 1024 (1913); 27, 703 (1914): ¾R(Z − 1)²; R from CODATA 2018",
    needs=lambda target, practice: (),
    value=_energy,
    line=_energy_line,
    points=(
        PointRule("M", "Z − 1 and the factor 3/4 put into Moseley's law", "method", 40, follow_through=True),
        PointRule("A", "the energy of the line with its unit", "value", 100, follow_through=True),
    ),
    ask="Use Moseley's law to calculate the energy of the Kα line of {species}.",
    rounding=Rounding(figures=4),
    details=("unit",),
    units=UNITS,
    aliases=("Kα energy", "Moseley K-alpha energy", "K-alpha energy"),
    says="the energy of the X-ray line that fills a gap in 1s from 2p",
)

NUMBER = Quantity(
    name="atomic number from Kα",
    symbol=Z,
    unit="",
    source=ENERGY.source,
    needs=lambda target, practice: (),
    value=_number,
    line=_number_line,
    points=(
        PointRule("M", "Moseley's law solved for Z", "method", 40),
        PointRule("A", "the atomic number, as a whole number", "value", 100),
    ),
    ask="An element's Kα line has the energy {energy} {unit}. Use Moseley's law to find its atomic number.",
    rounding=Rounding(places=0),
    details=("energy", "unit"),
    required=("energy",),
    defaults=(("unit", "eV"),),
    units=UNITS,
    aliases=("atomic number from K-alpha",),
    says="the element that an X-ray line belongs to",
)

QUANTITIES = (ENERGY, NUMBER)
