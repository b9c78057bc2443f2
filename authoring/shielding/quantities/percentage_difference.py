"""How far one quantity lies from another, in per cent of the second: model against model or measurement."""

from __future__ import annotations

from decimal import Decimal

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import PointRule, Quantity, Target, Value, quantity
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Fraction, Measured, Node, Num, Product, Words, difference
from authoring.working.numbers import EXACT, Rounding, shown

_OWN = ("of", "from")


def _compared(target: Target, name: str) -> Target:
    """The target that the detail `of` or `from` names, with such of the other details as it takes."""
    if not target.get(name):
        raise ContentError(f"{target.quantity} needs {name!r}, the name of a quantity")
    what = quantity(target.get(name))
    if what.name == NAME or not what.numeric:
        raise ContentError(f"{name}: {what.name} is not a number that can be compared")
    detail = tuple(pair for pair in target.detail if pair[0] in what.details and pair[0] not in _OWN)
    return Target(what.name, target.species, target.electron if "electron" in what.takes else None, detail)


def compared(target: Target) -> tuple[Target, Target]:
    """The two targets compared. Raises ContentError where they are the same or differ in unit."""
    of, reference = (_compared(target, name) for name in _OWN)
    if of == reference:
        raise ContentError(f"{of.quantity} cannot be compared with itself")
    units = [quantity(each.quantity).unit for each in (of, reference)]
    if units[0] != units[1]:
        raise ContentError(f"{of.quantity} and {reference.quantity} have different units")
    return of, reference


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    of, reference = inputs
    if not reference:
        raise ContentError(f"{target.get('from')} is 0 here, and nothing can be given in per cent of it")
    return EXACT.multiply(Decimal(100), EXACT.divide(EXACT.subtract(of, reference), reference.copy_abs()))


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    targets = compared(target)
    numbers = [
        Num(shown(quantity(each.quantity).rounding.apply(got))) for each, got in zip(targets, inputs, strict=True)
    ]
    final = shown(rounding.apply(value))
    below: Node = numbers[1] if inputs[1] > 0 else Num(numbers[1].text.removeprefix("−"))
    fraction = Fraction(difference(numbers[0], numbers[1]), below)
    chain = Chain(
        Words("difference"),
        (("=", Product((fraction, Measured(Num("100"), "%")))), ("=", Measured(Num(final), "%"))),
    )
    return Line(NAME, target.about, chain, value, final, "%", rounded=True)


NAME = "percentage difference"

QUANTITY = Quantity(
    name=NAME,
    symbol=Words("difference"),
    unit="%",
    source="100 × (value − reference)/reference; common practice, no source",
    needs=lambda target, practice: compared(target),
    value=_value,
    line=_line,
    points=(
        PointRule("M", "the difference divided by the reference value", "method", 40, follow_through=True),
        PointRule("A", "the percentage with its sign", "value", 98, follow_through=True),
    ),
    ask="Calculate by how many per cent the {of} of {species} differs from its {from}.",
    rounding=Rounding(places=1),
    takes=frozenset({"electron"}),
    details=("of", "from", "stage", "radius", "coordination", "spin", "partner", "distance", "screening"),
    required=_OWN,
    aliases=("per cent difference", "percent difference"),
    says="how far a model's value lies from another's, or from the measured one",
)
