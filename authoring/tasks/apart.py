"""Telling lines apart: `S(4s)` and `S(3d)` where one working has both."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from authoring.shielding.quantity import Target
from authoring.shielding.solve import Step
from authoring.working.nodes import Function, Node, Occupied, Row, Sym


def told_apart(steps: Sequence[Step], others: Sequence[Step] = ()) -> tuple[Step, ...]:
    """The steps, with the argument added to a symbol that stands for several things in them (and in `others`)."""
    targets = {step.target for step in (*steps, *others)}
    if len({(target.species, target.electron) for target in targets}) < 2:
        return tuple(steps)
    return tuple(_labelled(step, targets) for step in steps)


def _labelled(step: Step, targets: set[Target]) -> Step:
    first = step.line.chain.first
    like = [each for each in targets if each.quantity == step.target.quantity]
    if not isinstance(first, Sym) or len(like) < 2:
        return step
    argument = _argument(step.target, like)
    chain = replace(step.line.chain, first=Function(first, argument))
    return replace(step, line=replace(step.line, chain=chain))


def _argument(target: Target, like: list[Target]) -> Node:
    nodes: list[Node] = []
    if len({each.species for each in like}) > 1:
        nodes.append(target.species.node())
    if len({each.electron for each in like}) > 1 and target.electron is not None:
        nodes.append(Occupied((target.electron.label,)))
    if not nodes:
        nodes.append(target.species.node())
    return nodes[0] if len(nodes) == 1 else Row(tuple(nodes))
