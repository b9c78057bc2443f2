"""The radius of an ion in a salt of two univalent ions alike in electrons: their distance split as 1/(Z − S)."""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.shielding.details import positive
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.effective_charge import Z_EFF
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Fraction, Function, Measured, Node, Num, Product, Sum, Sym
from authoring.working.numbers import EXACT, Rounding, shown


def pair(target: Target) -> tuple[Species, Species]:
    """The ion and its partner. Raises ContentError unless they are univalent, opposite and alike in electrons."""
    if not target.get("partner"):
        raise ContentError(f"{target.quantity} needs 'partner', the other ion of the salt")
    ion, partner = target.species, Species.parse(target.get("partner"))
    if abs(ion.charge) != 1 or ion.charge + partner.charge:
        raise ContentError(f"{ion.label} and {partner.label}: one singly charged cation and anion are needed")
    if ion.electrons != partner.electrons:
        raise ContentError(
            f"{ion.label} and {partner.label} have {ion.electrons} and {partner.electrons} electrons; "
            "the split needs ions with the same number"
        )
    return ion, partner


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    if target.get("screening"):
        return ()
    return tuple(Target("effective nuclear charge", ion) for ion in pair(target))


def _charges(target: Target, inputs: tuple[Value, ...]) -> tuple[Decimal, Decimal]:
    if inputs:
        return inputs[0], inputs[1]
    ion, partner = pair(target)
    screening = positive(target, "screening")
    return ion.z - screening, partner.z - screening


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    own, other = _charges(target, inputs)
    if own <= 0 or other <= 0:
        raise ContentError(f"{target.about}: the screening leaves no charge to split by")
    return EXACT.divide(EXACT.multiply(positive(target, "distance"), other), EXACT.add(own, other))


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    def split(distance: Node, own: Node, other: Node, juxtaposed: bool) -> Node:
        return Product((distance, Fraction(other, Sum((("+", own), ("+", other))))), juxtaposed)

    ion, partner = pair(target)
    own, other = (Num(shown(each)) for each in _charges(target, inputs))
    distance = Measured(Num(shown(positive(target, "distance"))), "pm")
    final = shown(rounding.apply(value))
    chain = Chain(
        Function(Sym("r"), ion.node()),
        (
            ("=", split(Sym("d"), Function(Z_EFF, ion.node()), Function(Z_EFF, partner.node()), True)),
            ("=", split(distance, own, other, False)),
            ("=", Measured(Num(final), "pm")),
        ),
    )
    return Line(QUANTITY.name, target.about, chain, value, final, "pm", rounded=True)


QUANTITY = Quantity(
    name="ionic radius by screening split",
    symbol=Sym("r", sub="ion"),
    unit="pm",
    source="L. Pauling, J. Am. Chem. Soc. 49, 765 (1927), from memory: r in proportion to 1/(Z − S)",
    needs=_needs,
    value=_value,
    line=_line,
    points=(
        PointRule("M", "the distance split in inverse proportion to the effective charges", "method", 45, True),
        PointRule("A", "the radius with its unit", "value", 103, follow_through=True),
    ),
    ask="The distance between {species} and {partner} in their salt is {distance} pm. Both ions have the same number "
    "of electrons. Split the distance in inverse proportion to the effective nuclear charges to find the radius of "
    "{species}.",
    rounding=Rounding(places=1),
    details=("partner", "distance", "screening"),
    required=("partner", "distance"),
    aliases=("univalent radius", "screening split"),
    says="an ion's share of the distance to its partner",
)
