"""Stage 2, draw: what item text and conditions see of a drawn value: a few names, and how it prints."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal
from functools import lru_cache

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.specs.drawn_names import HAS


@dataclass(frozen=True, slots=True)
class SpeciesView:
    """A species as item text sees it, under the plan's practice."""

    species: Species
    practice: Practice

    TEMPLATE_KIND = "species"
    TEMPLATE_NAMES = tuple(HAS["species"])

    @property
    def markup(self) -> str:
        """The species as chemistry."""
        return f"`{self.species.label}`"

    @property
    def name(self) -> str:
        """The element's name in lower case."""
        return self.species.name

    @property
    def symbol(self) -> str:
        """The element symbol."""
        return self.species.symbol

    @property
    def label(self) -> str:
        """Symbol and charge: `V2+`."""
        return self.species.label

    @property
    def z(self) -> int:
        """The atomic number."""
        return self.species.z

    @property
    def charge(self) -> int:
        """The charge."""
        return self.species.charge

    @property
    def size_of_charge(self) -> int:
        """The charge without its sign."""
        return abs(self.species.charge)

    @property
    def electrons(self) -> int:
        """The number of electrons."""
        return self.species.electrons

    @property
    def period(self) -> int:
        """The period."""
        return self.species.period

    @property
    def group(self) -> int:
        """The group, 0 in the f block."""
        return self.species.group or 0

    @property
    def block(self) -> str:
        """s, p, d or f."""
        return self.species.block

    @property
    def mass_number(self) -> int:
        """The mass number, or the rounded relative atomic mass."""
        return self.species.mass_number

    @property
    def unpaired(self) -> int:
        """Unpaired electrons by Hund's rule."""
        return configuration_of(self.species, self.practice).unpaired

    @property
    def outermost(self) -> ElectronView:
        """The outermost subshell."""
        return ElectronView(configuration_of(self.species, self.practice).outermost)

    @property
    def configuration(self) -> Written:
        """The configuration with its noble-gas core."""
        return Written(configuration_of(self.species, self.practice).short())

    @property
    def full_configuration(self) -> Written:
        """The whole configuration."""
        return Written(configuration_of(self.species, self.practice).full())

    @property
    def differs(self) -> bool:
        """Whether measurement and the taught rule give different configurations."""
        return self.species.differs

    def __str__(self) -> str:
        return self.species.label


@dataclass(frozen=True, slots=True)
class ElectronView:
    """An electron's subshell as item text sees it."""

    subshell: Subshell

    TEMPLATE_KIND = "electron"
    TEMPLATE_NAMES = tuple(HAS["electron"])

    @property
    def markup(self) -> str:
        """The subshell as chemistry."""
        return f"`{self.subshell.label}`"

    @property
    def n(self) -> int:
        """The principal quantum number."""
        return self.subshell.n

    @property
    def l(self) -> int:  # noqa: E743 - the quantum number's own name
        """The quantum number l."""
        return self.subshell.l

    @property
    def letter(self) -> str:
        """s, p, d or f."""
        return self.subshell.letter

    @property
    def label(self) -> str:
        """`4s`."""
        return self.subshell.label

    def __str__(self) -> str:
        return self.subshell.label


@dataclass(frozen=True, slots=True)
class Written:
    """Chemistry that is already written out."""

    text: str

    TEMPLATE_KIND = "configuration"
    TEMPLATE_NAMES = tuple(HAS["configuration"])

    @property
    def markup(self) -> str:
        """As inline chemistry."""
        return f"`{self.text}`"

    def __str__(self) -> str:
        return self.text


@lru_cache(maxsize=4096)
def _species_view(species: Species, practice: Practice) -> SpeciesView:
    return SpeciesView(species, practice)


def view(value: object, practice: Practice) -> object:
    """What item text sees of a drawn value: species, electron, number or word."""
    if isinstance(value, Species):
        return _species_view(value, practice)
    if isinstance(value, Subshell):
        return ElectronView(value)
    return value


def value_text(value: object) -> str:
    """A drawn value as the record writes it, and as `fix` reads it."""
    if isinstance(value, Decimal):
        return format(value, "f")
    if isinstance(value, Species) and value.stated is not None:
        return f"{value.label}: {value.stated.short()}"
    return str(getattr(value, "label", value))
