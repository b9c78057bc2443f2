"""Help for the tests of the engine: targets from short words, and arithmetic read back from printed nodes."""

from __future__ import annotations

import csv
import math
from decimal import Decimal
from pathlib import Path

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.shielding.practice import Practice, published
from authoring.shielding.quantity import Target, quantity
from authoring.shielding.solve import evaluate, work
from authoring.working.lines import Line
from authoring.working.nodes import (
    Bracket,
    Chain,
    Fraction,
    Measured,
    Negative,
    Node,
    Num,
    Power,
    Product,
    Root,
    Sum,
)
from authoring.working.text import to_text

DATA = Path(__file__).parent / "data"


def rows(name: str) -> list[dict[str, str]]:
    """A table of `tests/data`."""
    with (DATA / f"{name}.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def target(name: str, words: str, **details: str) -> Target:
    """`target("S", "V 4s")`; a detail named `from_` is `from`."""
    species, _, electron = words.partition(" ")
    pairs = tuple(sorted((key.rstrip("_"), text) for key, text in details.items()))
    return Target(quantity(name).name, Species.parse(species), Subshell.parse(electron) if electron else None, pairs)


def value(name: str, words: str, practice: Practice | None = None, **details: str) -> Decimal:
    """The exact value of a quantity, under the published practice unless another is given."""
    found = evaluate(target(name, words, **details), practice or published())
    assert isinstance(found, Decimal)
    return found


def last_line(name: str, words: str, practice: Practice | None = None, **details: str) -> Line:
    """The line that states the quantity."""
    return work(target(name, words, **details), practice or published())[-1].line


def printed(name: str, words: str, practice: Practice | None = None, **details: str) -> str:
    """That line as text."""
    return to_text(last_line(name, words, practice, **details).chain)


def practice(**changes: object) -> Practice:
    """The published practice with fields changed."""
    return published().changed(changes)


def reckoned(node: Node) -> float | None:
    """What a reader gets who works out a printed expression; None where it holds symbols or words."""
    match node:
        case Num(text):
            return float(text.replace("−", "-"))
        case Measured(inside) | Bracket(inside):
            return reckoned(inside)
        case Negative(inside):
            found = reckoned(inside)
            return None if found is None else -found
        case Root(inside):
            found = reckoned(inside)
            return None if found is None else math.sqrt(found)
        case Power(base, exponent):
            both = (reckoned(base), reckoned(exponent))
            return None if None in both else float(both[0] ** both[1])  # type: ignore[operator]
        case Fraction(top, bottom):
            above, below = reckoned(top), reckoned(bottom)
            return None if above is None or below is None else above / below
        case Product(factors):
            parts = [reckoned(each) for each in factors]
            known = [part for part in parts if part is not None]
            return math.prod(known) if len(known) == len(parts) else None
        case Sum(terms):
            signed = [(sign, reckoned(each)) for sign, each in terms]
            if any(part is None for _, part in signed):
                return None
            return math.fsum(part if sign == "+" else -part for sign, part in signed if part is not None)
        case _:
            return None


def reckonings(chain: Chain) -> list[float]:
    """Every member of a chain of equalities that can be worked out."""
    found: list[float] = []
    for relation, node in chain.rest:
        if isinstance(node, Chain):
            found += reckonings(node)
        elif relation in "=≈" and (number := reckoned(node)) is not None:
            found.append(number)
    return found
