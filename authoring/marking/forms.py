"""Stage 8, mark: what a line of a script says, as a structure."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from authoring.atoms.configuration import Configuration
from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.marking.expression import Term
from authoring.shielding.screening import Group
from authoring.working.nodes import Node

Kind = Literal[
    "blank",
    "ok",
    "chain",
    "configuration",
    "groups",
    "tally",
    "ordering",
    "choice",
    "species",
    "electron",
    "words",
    "unreadable",
]
DecimalMark = Literal["auto", "point", "comma"]


@dataclass(frozen=True, slots=True)
class Member:
    """One member of an equation chain, one item of a tally or of an ordering.

    `relation` stands before it; `value` is what the member comes to, exact to 34 digits, None where a symbol or a
    trouble stands in it; `terms` where it is a sum of products; `shown` its figures where it is one bare number.
    """

    node: Node
    value: Decimal | None = None
    terms: tuple[Term, ...] = ()
    shown: str = ""
    unit: str = ""
    relation: str = ""


@dataclass(frozen=True, slots=True)
class Written:
    """A line as it was read. Fields that its kind does not use keep their empty values.

    `label` is the quantity that the line says it is about (`S`, `Zeff`, `E`, `IE`, `r`, `χ`, `μ`, `n*` …), `about`
    the species or electron it names; `value`, `shown`, `decimals` and `unit` are those of the last member that has
    a value; `order` holds the things compared, from left to right, `direction` is `<`, `>`, or `,` for a list;
    `words` is the whole text where words stand in it, `mentions` the electrons, species and numbers named in it;
    `earlier` holds statements before the last where one line makes several. `remark` is for the marker.
    """

    text: str
    kind: Kind
    label: str | None = None
    about: str = ""
    members: tuple[Member, ...] = ()
    value: Decimal | None = None
    shown: str = ""
    decimals: int | None = None
    unit: str = ""
    config: Configuration | None = None
    groups: tuple[Group, ...] = ()
    terms: tuple[Term, ...] = ()
    order: tuple[str, ...] = ()
    direction: str = ""
    choice: str = ""
    electron: Subshell | None = None
    species: Species | None = None
    words: str = ""
    mentions: tuple[str, ...] = ()
    remark: str = ""
    struck: tuple[str, ...] = ()
    earlier: tuple[Written, ...] = ()
