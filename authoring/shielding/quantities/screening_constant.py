"""The screening constant S: the tally added up."""

from __future__ import annotations

from decimal import Decimal

from authoring.shielding.practice import Practice
from authoring.shielding.quantities.tally import counting, share_node
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Node, Num, Relation, Sym, sum_of
from authoring.working.numbers import Rounding, shown

S = Sym("S")
_ZERO = Decimal("0.00")


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (target.to("tally"),)


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    return sum((share.product for share in inputs[0]), _ZERO)


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    shares = counting(inputs[0])
    rest: list[tuple[Relation, Node]] = []
    if shares:
        rest.append(("=", sum_of(share_node(share) for share in shares)))
    if len(shares) > 1:
        rest.append(("=", sum_of(Num(shown(share.product)) for share in shares)))
    final = rounding.apply(value)
    rest.append(("=" if final == value else "≈", Num(shown(final))))
    return Line("screening constant", target.about, Chain(S, tuple(rest)), value, shown(final), rounded=final != value)


QUANTITY = Quantity(
    name="screening constant",
    symbol=S,
    unit="",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930)",
    needs=_needs,
    value=_value,
    line=_line,
    points=(PointRule("A", "S from the tally", "value", 100, follow_through=True),),
    ask="Use Slater's rules to calculate the screening constant, $S$, for {electron} of {species}.",
    takes=frozenset({"electron"}),
    aliases=("S", "σ", "shielding constant", "screening"),
    says="how much of the nuclear charge the other electrons cancel",
)
