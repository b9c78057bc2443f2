"""The nodes of arithmetic as a person writes it, and of prose: one structure, printed three ways.

Nothing here simplifies or computes; a node says what stands on the page. `text`, `latex` and `mathml`
beside this file print it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal

Relation = Literal["=", "≈", "<", ">", "→", ":"]


@dataclass(frozen=True, slots=True)
class Num:
    """A number exactly as it is printed: `3`, `0.35`, `-4.81`, `1.0974e7` is never used (see `Scientific`)."""

    text: str


@dataclass(frozen=True, slots=True)
class Sym:
    """A symbol with an optional subscript and superscript: Z, S, Z_eff, n*.

    `base` is italic unless `upright`; a subscript of more than one letter prints upright.
    """

    base: str
    sub: str = ""
    sup: str = ""
    upright: bool = False


@dataclass(frozen=True, slots=True)
class Words:
    """Upright words inside a formula: `same group`, `for each electron of 3d`."""

    text: str


@dataclass(frozen=True, slots=True)
class Formula:
    """A chemical species or subshell label printed upright with its marks: element symbol and charge.

    `mass` is the mass number as a left superscript, `charge` is `2+`, `−` … as a right superscript.
    """

    symbol: str
    charge: str = ""
    mass: str = ""


@dataclass(frozen=True, slots=True)
class Occupied:
    """Subshells and how many electrons they hold: `3d³`, `(2s,2p)⁸`; `count` None prints the label alone."""

    labels: tuple[str, ...]
    count: int | None = None
    grouped: bool = False


@dataclass(frozen=True, slots=True)
class Core:
    """A noble-gas core: `[Ar]`."""

    symbol: str


@dataclass(frozen=True, slots=True)
class Row:
    """Nodes one after the other with a thin space: a configuration."""

    items: tuple[Node, ...]


@dataclass(frozen=True, slots=True)
class Listed:
    """Nodes one after the other with semicolons between them: the terms of a tally."""

    items: tuple[Node, ...]


@dataclass(frozen=True, slots=True)
class Sum:
    """`a + b − c`: terms with their sign; `("+", a)` first prints without a sign."""

    terms: tuple[tuple[Literal["+", "−"], Node], ...]


@dataclass(frozen=True, slots=True)
class Product:
    """`a × b × c`; `juxtaposed` prints without the cross (symbols only)."""

    factors: tuple[Node, ...]
    juxtaposed: bool = False


@dataclass(frozen=True, slots=True)
class Fraction:
    """`top / bottom`, as a built-up fraction where the medium has one."""

    top: Node
    bottom: Node


@dataclass(frozen=True, slots=True)
class Power:
    """`base` raised to `exponent`; a base that is not one symbol or number is bracketed by the printer."""

    base: Node
    exponent: Node


@dataclass(frozen=True, slots=True)
class Root:
    """The square root of `inside`."""

    inside: Node


@dataclass(frozen=True, slots=True)
class Negative:
    """`−x`."""

    inside: Node


@dataclass(frozen=True, slots=True)
class Bracket:
    """`(x)`, as the person wrote it."""

    inside: Node


@dataclass(frozen=True, slots=True)
class Function:
    """A named function or a symbol of something: `E(Fe2+)`, `μ(V)`."""

    name: Node
    argument: Node


@dataclass(frozen=True, slots=True)
class Measured:
    """A value with its unit: `−4.81 eV`; units are written as `kJ/mol`, `pm`, `eV`, `Å`."""

    value: Node
    unit: str


@dataclass(frozen=True, slots=True)
class Chain:
    """`a = b = c ≈ d`: first node, then (relation, node) pairs. One line of working is one chain."""

    first: Node
    rest: tuple[tuple[Relation, Node], ...] = ()


Node = (
    Num
    | Sym
    | Words
    | Formula
    | Occupied
    | Core
    | Row
    | Listed
    | Sum
    | Product
    | Fraction
    | Power
    | Root
    | Negative
    | Bracket
    | Function
    | Measured
    | Chain
)


# --- prose: what a story, a wording or a note is made of -------------------------------------------


@dataclass(frozen=True, slots=True)
class Plain:
    """Running text, exactly as it is read (no markup in it)."""

    text: str


@dataclass(frozen=True, slots=True)
class Emphasis:
    """Emphasised (`strong=False`) or strongly emphasised text."""

    children: tuple[Inline, ...]
    strong: bool = False


@dataclass(frozen=True, slots=True)
class Math:
    """A formula inside running text; `display` sets it on a line of its own."""

    node: Node
    display: bool = False


Inline = Plain | Emphasis | Math


@dataclass(frozen=True, slots=True)
class Paragraph:
    """One paragraph of inlines."""

    children: tuple[Inline, ...]


@dataclass(frozen=True, slots=True)
class ListBlock:
    """A bulleted or numbered list; each entry is a tuple of blocks."""

    entries: tuple[tuple[Block, ...], ...]
    ordered: bool = False


@dataclass(frozen=True, slots=True)
class TableBlock:
    """A small table: header cells, rows of cells, a caption and a source line (either may be empty)."""

    header: tuple[tuple[Inline, ...], ...]
    rows: tuple[tuple[tuple[Inline, ...], ...], ...]
    caption: tuple[Inline, ...] = ()
    origin: tuple[Inline, ...] = ()


Block = Paragraph | ListBlock | TableBlock

Prose = tuple[Block, ...]


def sum_of(terms: Iterable[Node]) -> Node:
    """A sum with plus signs; a single term stands alone."""
    parts = tuple(terms)
    if len(parts) == 1:
        return parts[0]
    return Sum(tuple(("+", term) for term in parts))


def difference(left: Node, right: Node) -> Sum:
    """`left − right`."""
    return Sum((("+", left), ("−", right)))


def says(text: str) -> Prose:
    """One paragraph of plain text."""
    return (Paragraph((Plain(text),)),)
