"""What a quantity is, and a target: one quantity of one species (and electron).

A quantity says what it needs, computes its value from those inputs under a practice (`value`, quick: the judge
and the tables live on it), and states it as a line of working (`line`, for the page).
"""

from __future__ import annotations

import functools
import importlib
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.working.lines import Line, PointKind
from authoring.working.nodes import Node
from authoring.working.numbers import Rounding

Value = Any  # Decimal, Configuration, tuple[Group, ...], tuple[Share, ...], Subshell: what the quantity states


class _Hashed:
    """Room for a hash that is worked out once: targets are looked up tens of times for each line that is judged."""

    __slots__ = ("_hash",)
    _hash: int


@dataclass(frozen=True, slots=True)
class Target(_Hashed):
    """One quantity of one species: what a line of working is about.

    `electron` None means the outermost electron, whatever the practice says that is. `detail` holds what else the
    quantity takes (`stage`, `distance`, …) as sorted (name, text) pairs.
    """

    quantity: str
    species: Species
    electron: Subshell | None = None
    detail: tuple[tuple[str, str], ...] = ()

    def __hash__(self) -> int:
        try:
            return self._hash
        except AttributeError:
            object.__setattr__(self, "_hash", hash((self.quantity, self.species, self.electron, self.detail)))
            return self._hash

    def get(self, name: str, default: str = "") -> str:
        """A detail by name."""
        return dict(self.detail).get(name, default)

    def to(self, quantity: str, **changes: Any) -> Target:
        """Another quantity of the same species (and electron, and details unless changed)."""
        return Target(
            quantity,
            changes.get("species", self.species),
            changes.get("electron", self.electron),
            changes.get("detail", self.detail),
        )

    @property
    def about(self) -> str:
        """`V 4s`, `Fe2+`: tells lines of one quantity apart, in a record or a message."""
        words = [self.species.label]
        if self.electron is not None:
            words.append(self.electron.label)
        words += [f"{name} {text}" for name, text in self.detail]
        return " ".join(words)


@dataclass(frozen=True, slots=True)
class PointRule:
    """A default mark point of a quantity's line.

    `aspect` says what the judge looks at: `value`, `method` (the arithmetic as written), `statement`.
    `weight` decides which points stay when a part gives fewer marks than its working has steps (heavy ones stay).
    """

    kind: PointKind
    what: str
    aspect: str
    weight: int
    follow_through: bool = False


@dataclass(frozen=True, slots=True)
class Quantity:
    """One quantity: its words, its needs, and its two faces, `value` and `line`.

    `takes`: `electron` where it is a quantity of an electron, and the names of details it takes.
    `needs(target, practice)`: the targets whose values are its inputs, in the order `value` receives them.
    `value(target, practice, inputs)`: the exact value. Raises ContentError where the species has none.
    `line(target, practice, inputs, value, rounding)`: the line of working.
    `required`: the details that must be given; `defaults`: what the others are where they are not.
    `ask`: the wording of *calculate* in item Markdown with {electron}, {species} and detail names in braces.
    """

    name: str
    symbol: Node
    unit: str
    source: str
    needs: Callable[[Target, Practice], tuple[Target, ...]]
    value: Callable[[Target, Practice, tuple[Value, ...]], Value]
    line: Callable[[Target, Practice, tuple[Value, ...], Value, Rounding], Line]
    points: tuple[PointRule, ...]
    ask: str
    rounding: Rounding = field(default_factory=lambda: Rounding(places=2))
    takes: frozenset[str] = frozenset()
    details: tuple[str, ...] = ()
    required: tuple[str, ...] = ()
    defaults: tuple[tuple[str, str], ...] = ()
    units: tuple[str, ...] = ()
    numeric: bool = True
    aliases: tuple[str, ...] = ()
    says: str = ""


# One module each in authoring/shielding/quantities/, which defines QUANTITY (or QUANTITIES, a tuple).
MODULES = (
    "configuration",
    "groups",
    "tally",
    "screening_constant",
    "effective_charge",
    "orbital_energy",
    "first_lost",
    "total_energy",
    "ionization_energy",
    "radius",
    "electronegativity",
    "magnetism",
    "moseley",
    "valence_count",
    "scf_charge",
    "ionic_radius",
    "measured",
    "percentage_difference",
)


@functools.cache
def quantities() -> dict[str, Quantity]:
    """Every quantity by name, in teaching order."""
    found = {}
    for module in MODULES:
        loaded = importlib.import_module(f"authoring.shielding.quantities.{module}")
        several = getattr(loaded, "QUANTITIES", None) or (loaded.QUANTITY,)
        found.update({each.name: each for each in several})
    return found


@functools.cache
def _by_any_name() -> dict[str, Quantity]:
    found = {}
    for each in quantities().values():
        for name in (each.name, *each.aliases):
            found[name.lower()] = each
    return found


def quantity(name: str) -> Quantity:
    """A quantity by its name or an alias. Raises ContentError with the nearest name."""
    try:
        return _by_any_name()[name] if name in _by_any_name() else _by_any_name()[" ".join(name.lower().split())]
    except KeyError:
        raise ContentError(f"no quantity {name[:60]!r}", name, list(quantities())) from None
