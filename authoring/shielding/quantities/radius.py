"""The radius of maximum density of one electron: n*² a₀/Z_eff."""

from __future__ import annotations

from decimal import Decimal

from authoring.atoms.constants import constant
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantities.effective_charge import Z_EFF
from authoring.shielding.quantities.orbital_energy import N_STAR_SYMBOL, divisor
from authoring.shielding.quantities.tally import felt_by
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Fraction, Measured, Node, Num, Power, Product, Sym
from authoring.working.numbers import EXACT, Rounding, shown

_BOHR_SHOWN = Rounding(figures=5)  # 52.918 pm: what a data page prints


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (target.to("effective nuclear charge", detail=()),)


def _number(target: Target, practice: Practice) -> Decimal:
    return divisor(felt_by(target, configuration_of(target.species, practice)), practice)


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    if inputs[0] <= 0:
        raise ContentError(f"Z_eff is {shown(inputs[0])} for {target.about}: such an electron is not held")
    number = _number(target, practice)
    top = number if practice.radius_form == "not squared" else EXACT.multiply(number, number)
    return EXACT.divide(EXACT.multiply(top, constant("bohr_radius").value), inputs[0])


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    def raised(node: Node) -> Node:
        return node if practice.radius_form == "not squared" else Power(node, Num("2"))

    symbol = N_STAR_SYMBOL if practice.quantum_number == "n*" else Sym("n")
    bohr = Measured(Num(shown(_BOHR_SHOWN.apply(constant("bohr_radius").value))), "pm")
    final = shown(rounding.apply(value))
    chain = Chain(
        QUANTITY.symbol,
        (
            ("=", Fraction(Product((raised(symbol), Sym("a", sub="0")), juxtaposed=True), Z_EFF)),
            ("=", Fraction(Product((raised(Num(shown(_number(target, practice)))), bohr)), Num(shown(inputs[0])))),
            ("=", Measured(Num(final), "pm")),
        ),
    )
    return Line(QUANTITY.name, target.about, chain, value, final, "pm", rounded=True)


QUANTITY = Quantity(
    name="radius of maximum density",
    symbol=Sym("r", sub="max"),
    unit="pm",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930): maximum of r^(2n*) exp(−2Z_eff r/(n*a₀)); a₀ from CODATA 2018",
    needs=_needs,
    value=_value,
    line=_line,
    points=(
        PointRule("M", "Z_eff and n* put into n*²a₀/Z_eff", "method", 40, follow_through=True),
        PointRule("A", "the radius with its unit", "value", 103, follow_through=True),
    ),
    ask="Calculate the radius of maximum density, $r_{max}$, of {electron} of {species}.",
    rounding=Rounding(figures=4),
    takes=frozenset({"electron"}),
    aliases=("r_max", "radius", "atomic radius"),
    says="where the electron is found most often",
)
