"""The tally: how many electrons count, and how much each, for one electron."""

from __future__ import annotations

from authoring.atoms.configuration import Configuration
from authoring.atoms.subshell import Subshell
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.shielding.screening import Share, tallied
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Listed, Node, Num, Occupied, Product, Row, Words
from authoring.working.numbers import Rounding, shown


def felt_by(target: Target, configuration: Configuration) -> Subshell:
    """The electron that a target is about: the one named, or the outermost one that the configuration has.

    A practice that fills differently may leave the named subshell empty; its user then takes the outermost
    electron, as a candidate does.
    """
    if target.electron is not None and configuration.count(target.electron):
        return target.electron
    return configuration.outermost


def share_node(share: Share) -> Node:
    """`11 × 0.85`."""
    return Product((Num(str(share.count)), Num(shown(share.coefficient))))


def counting(shares: tuple[Share, ...]) -> tuple[Share, ...]:
    """The terms that add something: the ones a person writes."""
    return tuple(share for share in shares if share.count and share.coefficient)


def _needs(target: Target, practice: Practice) -> tuple[Target, ...]:
    return (Target("configuration", target.species), Target("groups", target.species))


def _value(target: Target, practice: Practice, inputs: tuple[Value, ...]) -> tuple[Share, ...]:
    return tallied(inputs[0], felt_by(target, inputs[0]), practice)


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    electron = felt_by(target, inputs[0])
    terms = tuple(Row((Words(share.region), share_node(share))) for share in value if share.count)
    body: Node = Listed(terms) if terms else Words("no other electron")
    text = "; ".join(f"{share.region}: {share.count} × {shown(share.coefficient)}" for share in value if share.count)
    return Line("tally", target.about, Chain(Occupied((electron.label,)), ((":", body),)), value, text or "none")


QUANTITY = Quantity(
    name="tally",
    symbol=Words("tally"),
    unit="",
    source="J. C. Slater, Phys. Rev. 36, 57 (1930): 0.35 (1s 0.30), 0.85, 1.00; groups further out count nothing",
    needs=_needs,
    value=_value,
    line=_line,
    points=(PointRule("M", "each group counted with its coefficient", "method", 30, follow_through=True),),
    ask="State how many electrons screen {electron} of {species}, and with which coefficient each counts.",
    rounding=Rounding(places=2),
    takes=frozenset({"electron"}),
    numeric=False,
    aliases=("count",),
    says="how many electrons count, and how much each",
)
