"""Allred-Rochow electronegativity: 0.359 Z/r² + 0.744, where the screening counts the electron itself too.

The published values follow only when all outer electrons, the one considered among them, count 0.35, every 3d
metal is taken as 4s2, and r is Pauling's single-bond radius (found by inversion of the published values).
"""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.configuration import filling
from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.shielding.details import data, positive
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantities.effective_charge import Z_EFF
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Fraction, Node, Num, Power, Product, Relation, Sum, Sym, difference
from authoring.working.numbers import EXACT, Rounding, shown

SLOPE = Decimal("0.359")  # with r in angstrom
_THREE_D = range(21, 31)


def radius_of(target: Target) -> Decimal:
    """The radius in angstrom: the detail `radius`, or the element's. Raises ContentError where there is neither."""
    if target.get("radius"):
        return positive(target, "radius")
    radii = data("allred_rochow_radii")["radii"]
    symbol = target.species.symbol
    if symbol not in radii:
        why = "its tabulated 2.20 does not follow from the formula" if symbol == "H" else "none is kept for it"
        raise ContentError(f"no radius for the Allred-Rochow electronegativity of {symbol}: {why}; give `radius` in Å")
    return Decimal(radii[symbol])


def _atom(target: Target, practice: Practice) -> Species:
    species = target.species
    if species.charge:
        raise ContentError(f"the Allred-Rochow electronegativity belongs to an atom, not to {species.label}")
    regular = filling(species.z)
    if species.stated is None and species.z in _THREE_D and configuration_of(species, practice) != regular:
        return Species(species.z, 0, regular, species.mass)
    return species


def _itself(target: Target, practice: Practice) -> Decimal:
    """What the electron's own share takes from Slater's Z_eff."""
    if practice.negativity_charge == "Z_eff" or practice.self_counted:
        return Decimal("0.00")
    outer = configuration_of(_atom(target, practice), practice).outermost
    return practice.same_group_1s if outer.n == 1 else practice.same_group


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    radius = radius_of(target)
    below = radius if practice.negativity_radius == "not squared" else EXACT.multiply(radius, radius)
    charge = EXACT.subtract(inputs[0], _itself(target, practice))
    return EXACT.add(EXACT.divide(EXACT.multiply(SLOPE, charge), below), practice.negativity_offset)


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    itself = _itself(target, practice)

    def formula(charge: Node, radius: Node, juxtaposed: bool) -> Node:
        top = Product((Num(shown(SLOPE)), difference(charge, Num(shown(itself))) if itself else charge), juxtaposed)
        below = radius if practice.negativity_radius == "not squared" else Power(radius, Num("2"))
        fraction = Fraction(top, below)
        offset = practice.negativity_offset
        return Sum((("+", fraction), ("+", Num(shown(offset))))) if offset else fraction

    final = shown(rounding.apply(value))
    rest: tuple[tuple[Relation, Node], ...] = (
        ("=", formula(Z_EFF, Sym("r"), True)),
        ("=", formula(Num(shown(inputs[0])), Num(shown(radius_of(target))), False)),
        ("=", Num(final)),
    )
    return Line(QUANTITY.name, target.about, Chain(QUANTITY.symbol, rest), value, final, rounded=True)


QUANTITY = Quantity(
    name="Allred-Rochow electronegativity",
    symbol=Sym("χ"),
    unit="",
    source="A. L. Allred, E. G. Rochow, J. Inorg. Nucl. Chem. 5, 264 (1958): 0.359 Z/r² + 0.744, r in Å",
    needs=lambda target, practice: (Target("effective nuclear charge", _atom(target, practice)),),
    value=_value,
    line=_line,
    points=(
        PointRule("M", "the charge, with the electron itself counted, and r² put into the formula", "method", 45, True),
        PointRule("A", "the electronegativity", "value", 102, follow_through=True),
    ),
    ask="Calculate the Allred–Rochow electronegativity of {species}.",
    rounding=Rounding(places=2),
    details=("radius",),
    aliases=("electronegativity", "Allred–Rochow electronegativity", "χ"),
    says="the pull on a bonding electron at the covalent radius",
)
