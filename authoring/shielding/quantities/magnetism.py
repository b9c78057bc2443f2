"""Unpaired electrons of a free atom or ion (Hund's rule), and the spin-only magnetic moment."""

from __future__ import annotations

from decimal import Decimal

from authoring.shielding.practice import Practice
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Measured, Node, Num, Occupied, Product, Root, Row, Sum, Sym, Words
from authoring.working.numbers import EXACT, Rounding, shown

N_UNPAIRED = Sym("n")
_MU = Sym("μ")


def _configuration(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (Target("configuration", target.species),)


def _open(configuration: Value) -> list[tuple[str, int]]:
    """The subshells that are neither empty nor full."""
    return [(each.label, count) for each, count in configuration.counts if count < each.capacity]


def _count_line(
    target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding
) -> Line:
    found = [Occupied((label,), count) for label, count in _open(inputs[0])]
    node: Node = Row(tuple(found)) if found else Words("all subshells full")
    final = shown(value)
    chain = Chain(target.species.node(), ((":", node), ("→", Chain(N_UNPAIRED, (("=", Num(final)),)))))
    return Line(UNPAIRED.name, target.about, chain, value, final)


def _moment(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> Decimal:
    unpaired: Decimal = inputs[0]
    return EXACT.sqrt(unpaired * (unpaired + 2))


def _moment_line(
    target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding
) -> Line:
    def under(n: Node) -> Node:
        return Root(Product((n, Sum((("+", n), ("+", Num("2"))))), juxtaposed=isinstance(n, Sym)))

    final = shown(rounding.apply(value))
    chain = Chain(
        _MU,
        (
            ("=", Measured(under(N_UNPAIRED), "μ_B")),
            ("=", Measured(under(Num(shown(inputs[0]))), "μ_B")),
            ("=", Measured(Num(final), "μ_B")),
        ),
    )
    return Line(MOMENT.name, target.about, chain, value, final, "μ_B", rounded=rounding.apply(value) != value)


UNPAIRED = Quantity(
    name="unpaired electrons",
    symbol=N_UNPAIRED,
    unit="",
    source="Hund's rule of greatest multiplicity, for a free atom or ion",
    needs=_configuration,
    value=lambda target, practice, inputs: Decimal(inputs[0].unpaired),
    line=_count_line,
    points=(PointRule("B", "the number of unpaired electrons", "value", 95, follow_through=True),),
    ask="State how many unpaired electrons a free {species} has in its ground state.",
    rounding=Rounding(places=0),
    aliases=("unpaired", "number of unpaired electrons"),
    says="the electrons that have no partner, by Hund's rule",
)

MOMENT = Quantity(
    name="spin-only magnetic moment",
    symbol=_MU,
    unit="μ_B",
    source="the spin-only formula μ = √(n(n + 2)) μ_B; common practice, no source",
    needs=lambda target, practice: (Target("unpaired electrons", target.species),),
    value=_moment,
    line=_moment_line,
    points=(
        PointRule("M", "the number of unpaired electrons put into √(n(n + 2))", "method", 35, follow_through=True),
        PointRule("A", "the moment with its unit", "value", 101, follow_through=True),
    ),
    ask="Calculate the spin-only magnetic moment of {species}, in Bohr magnetons.",
    rounding=Rounding(places=2),
    aliases=("magnetic moment", "spin-only moment"),
    says="the magnetic moment that the unpaired spins alone would give",
)

QUANTITIES = (UNPAIRED, MOMENT)
