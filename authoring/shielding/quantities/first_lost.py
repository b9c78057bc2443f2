"""The first electron lost when a species is ionised: outermost shell first, with the charges that show why.

The reason offered is the lower effective nuclear charge of the outer electron. The total energies of the same
rules say otherwise for Sc–Fe and Cu (3d before 4s), so no line here argues from total energies.
"""

from __future__ import annotations

from authoring.atoms.configuration import Configuration
from authoring.atoms.subshell import Subshell
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantities.effective_charge import Z_EFF
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Function, Node, Num, Occupied, Relation, Words
from authoring.working.numbers import Rounding, shown


def contenders(configuration: Configuration) -> tuple[Subshell, ...]:
    """The outermost subshell, and the (n−1)d and (n−2)f that a candidate may take for it."""
    # The core stays closed: Pr3+ keeps 5p6 and would lose 4f (NIST).
    open_part = configuration.beyond_core()
    outer = open_part.outermost
    places = ((outer.n - 1, 2), (outer.n - 2, 3))
    return (outer, *(each for each in reversed(open_part.occupied) if (each.n, each.l) in places))


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    found = contenders(configuration_of(target.species, practice))
    charges = tuple(Target("effective nuclear charge", target.species, each) for each in found)
    return (Target("configuration", target.species), *charges)


def first_lost(configuration: Configuration, practice: Practice) -> Subshell:
    """The subshell that loses an electron first: the outermost, or (n−1)d under that habit."""
    found = contenders(configuration)
    inner = [each for each in found[1:] if each.l == 2]
    return inner[0] if practice.ion == "inner d first" and inner else found[0]


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Subshell:
    return first_lost(inputs[0], practice)


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    found = contenders(inputs[0])
    lost = Words(f"first electron lost: {value.label}")
    if len(found) == 1:
        chain = Chain(target.species.node(), ((":", lost),))
        return Line("first electron lost", target.about, chain, value, value.label)
    rising = sorted(zip(inputs[1:], found, strict=True), key=lambda pair: pair[0])
    names = [Function(Z_EFF, Occupied((each.label,))) for _, each in rising]
    rest: list[tuple[Relation, Node]] = [("=", Num(shown(rising[0][0])))]
    for index in range(1, len(rising)):
        # Sc and La: both charges are 3.00, and only the outer shell is a reason.
        equal = rising[index][0] == rising[index - 1][0]
        rest += [("=" if equal else "<", names[index]), ("=", Num(shown(rising[index][0])))]
    return Line("first electron lost", target.about, Chain(names[0], (*rest, ("→", lost))), value, value.label)


QUANTITY = Quantity(
    name="first electron lost",
    symbol=Words("first electron lost"),
    unit="",
    source="NIST ground states of ions: ns before (n−1)d before (n−2)f",
    needs=_needs,
    value=_value,
    line=_line,
    points=(
        PointRule("B", "the electron lost first", "choice", 100),
        PointRule("M", "the reason: lower effective nuclear charge, or the outer shell", "reason", 60, True),
    ),
    ask="Decide which electron {species} loses first, and give the reason.",
    numeric=False,
    aliases=("electron lost first",),
    says="which electron goes when the species is ionised",
)
