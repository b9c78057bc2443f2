"""Atoms: a species, that is an element with a charge, and the configurations it has or is taught to have."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import Literal

from authoring.atoms import reference
from authoring.atoms.configuration import Configuration, filling
from authoring.atoms.ionizing import add_electrons, remove_electrons
from authoring.faults import ContentError
from authoring.working.nodes import Formula
from authoring.working.numbers import to_places

Kind = Literal["measured", "rule", "madelung", "filling"]
Origin = Literal["measured", "rule", "stated"]

# Oxidation numbers go down to -5 (boron); no free ion comes near it. Common practice, no source.
MOST_NEGATIVE = -5

_RAISED = str.maketrans("0123456789+-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻")


@dataclass(frozen=True, slots=True)
class Species:
    """An element (`z`) with a charge in units of e, perhaps with a stated configuration and a mass number.

    `ContentError` where the numbers do not fit each other. Configurations of a species without electrons (H+)
    raise `ContentError` when they are asked for.
    """

    z: int
    charge: int = 0
    stated: Configuration | None = None
    mass: int | None = None

    def __post_init__(self) -> None:
        if not 1 <= self.z <= reference.HEAVIEST:
            raise ContentError(f"there is no element with Z = {self.z}; Z goes from 1 to {reference.HEAVIEST}")
        if self.charge > self.z:
            raise ContentError(f"{self.label} would lose {self.charge} electrons; {self.symbol} has only {self.z}")
        if self.charge < MOST_NEGATIVE:
            raise ContentError(f"{self.label}: a charge goes down to {-MOST_NEGATIVE}- and no further")
        if self.stated is not None and self.stated.electrons != self.electrons:
            raise ContentError(
                f"the configuration stated for {self.label} has {self.stated.electrons} electrons; "
                f"{self.label} has {self.electrons}"
            )
        if self.mass is not None and self.mass < self.z:
            raise ContentError(f"mass number {self.mass} is smaller than the {self.z} protons of {self.symbol}")

    @property
    def element(self) -> reference.ElementData:
        """The element's reference data."""
        return reference.elements().by_z[self.z]

    @property
    def symbol(self) -> str:
        """The element symbol."""
        return self.element.symbol

    @property
    def name(self) -> str:
        """The element's name in lower case, as it stands in a sentence."""
        return self.element.name.lower()

    @property
    def period(self) -> int:
        """The period of the element."""
        return self.element.period

    @property
    def group(self) -> int | None:
        """The group 1-18 of the element; None in the f block."""
        return self.element.group

    @property
    def block(self) -> str:
        """s, p, d or f."""
        return self.element.block

    @property
    def protons(self) -> int:
        """Z."""
        return self.z

    @property
    def electrons(self) -> int:
        """Z minus the charge."""
        return self.z - self.charge

    @property
    def mass_number(self) -> int:
        """The mass number stated, or else the relative atomic mass rounded to a whole number."""
        return self.mass if self.mass is not None else int(to_places(self.element.weight, 0))

    @property
    def label(self) -> str:
        """In ASCII: `V2+`, `O2-`, `35Cl-`."""
        return f"{self.mass or ''}{self.symbol}{_charge(self.charge)}"

    @property
    def printed(self) -> str:
        """With raised figures: `V²⁺`, `O²⁻`, `³⁵Cl⁻`."""
        return f"{str(self.mass or '').translate(_RAISED)}{self.symbol}{_charge(self.charge).translate(_RAISED)}"

    def __str__(self) -> str:
        return self.label

    def node(self) -> Formula:
        """The species as a node of working."""
        return Formula(self.symbol, _charge(self.charge).replace("-", "−"), str(self.mass or ""))

    @property
    def measured(self) -> Configuration:
        """The configuration to work with: stated, or else measured, or else (no measurement) by the rule."""
        if self.stated is not None and self.electrons:
            return self.stated
        return _measured(self.z, self.charge)[0]

    @property
    def by_rule(self) -> Configuration:
        """The neutral atom's ground configuration with electrons removed or added by the taught rule."""
        return _by_rule(self.z, self.charge)

    @property
    def origin(self) -> Origin:
        """Where `measured` comes from."""
        return "stated" if self.stated is not None else _measured(self.z, self.charge)[1]

    @property
    def differs(self) -> bool:
        """True where a measured configuration is not the one that the taught rule gives (V+, Co+, Y+, …)."""
        return self.origin == "measured" and self.measured != self.by_rule

    def configuration(self, kind: Kind = "measured") -> Configuration:
        """`measured`; `rule`; `madelung` (ions by the rule from a strictly filled atom); `filling` (as if neutral)."""
        if kind == "measured":
            return self.measured
        if kind == "rule":
            return self.by_rule
        _needs_electrons(self.z, self.charge)
        if kind == "madelung":
            return _ionized(filling(self.z), self.charge)
        if kind == "filling":
            return filling(self.electrons)
        raise ContentError(
            f"{kind!r} is not a kind of configuration", str(kind), ("measured", "rule", "madelung", "filling")
        )

    @staticmethod
    def parse(text: str) -> Species:
        """Read `V`, `V2+`, `Fe 3+`, `Fe³⁺`, `O2-`, `35Cl-`, `vanadium`, `Cr: [Ar] 3d4 4s2`.

        `ContentError`, with the nearest symbol or name, otherwise.
        """
        from authoring.atoms.naming import read_species

        return read_species(text)


def _charge(charge: int) -> str:
    if not charge:
        return ""
    size = str(abs(charge)) if abs(charge) > 1 else ""
    return size + ("+" if charge > 0 else "-")


def _needs_electrons(z: int, charge: int) -> None:
    if z == charge:
        raise ContentError(f"{Species(z, charge).label} has no electrons")


@cache
def _measured(z: int, charge: int) -> tuple[Configuration, Origin]:
    _needs_electrons(z, charge)
    if charge == 0:
        return reference.elements().by_z[z].configuration, "measured"
    found = reference.measured_ion(z, charge) if charge > 0 else None
    return (found, "measured") if found is not None else (_by_rule(z, charge), "rule")


@cache
def _by_rule(z: int, charge: int) -> Configuration:
    _needs_electrons(z, charge)
    return _ionized(reference.elements().by_z[z].configuration, charge)


@cache
def _ionized(neutral: Configuration, charge: int) -> Configuration:
    return remove_electrons(neutral, charge) if charge >= 0 else add_electrons(neutral, -charge)


def parse_range(text: str) -> tuple[Species, ...]:
    """Species listed with commas, each a species or a range: `H-Kr`, `1-118`, `Na, Mg, Al3+`, `Sc-Zn`."""
    from authoring.atoms import naming

    return naming.parse_range(text)
