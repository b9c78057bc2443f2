"""The groups that the method sorts a configuration into."""

from __future__ import annotations

from authoring.shielding.practice import Practice
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.shielding.screening import Group, grouped
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Occupied, Row, Sym
from authoring.working.numbers import Rounding


def group_node(group: Group) -> Occupied:
    """`(2s,2p)⁸`."""
    return Occupied(tuple(each.label for each in group.subshells), group.electrons, grouped=True)


def groups_text(groups: tuple[Group, ...]) -> str:
    """`(1s)2 (2s,2p)8`: as a person types it."""
    return " ".join(f"({group.label}){group.electrons}" for group in groups)


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (Target("configuration", target.species),)


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> tuple[Group, ...]:
    return grouped(inputs[0], practice)


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    node = Row(tuple(group_node(group) for group in value))
    return Line("groups", target.about, Chain(target.species.node(), ((":", node),)), value, groups_text(value))


QUANTITY = Quantity(
    name="groups",
    symbol=Sym("groups", upright=True),
    unit="",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930): (1s)(2s,2p)(3s,3p)(3d)(4s,4p)(4d)(4f)…",
    needs=_needs,
    value=_value,
    line=_line,
    points=(PointRule("M", "the electrons sorted into groups", "statement", 20, follow_through=True),),
    ask="Sort the electrons of {species} into the groups that Slater's rules use.",
    rounding=Rounding(places=0),
    numeric=False,
    aliases=("Slater groups", "grouping"),
    says="the electrons sorted as the method needs them",
)
