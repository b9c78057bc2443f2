"""Several things side by side: species, or electrons of one species, with the same quantity of each."""

from __future__ import annotations

import itertools
import zlib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

from authoring.atoms.species import Species, parse_range
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantity import Quantity, Target, Value, quantity
from authoring.shielding.solve import Step, evaluate, work
from authoring.tasks.fields import TargetFields
from authoring.tasks.setting import Setting, details_of, electron_named, must_have, rounding_of, species_named
from authoring.tasks.wording import electron_words, measure_words, species_words
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Function, Measured, Node, Num, Occupied, Relation
from authoring.working.numbers import Rounding, shown

# Names of closing lines, which state no quantity.
COMPARISON = "comparison"
CHOICE = "choice"
FIRST_WRONG = "first wrong line"
READING = "reading"


@dataclass(frozen=True, slots=True)
class Things:
    """What is compared: one quantity of several species, or of several electrons of one species."""

    what: Quantity
    targets: tuple[Target, ...]
    by_electron: bool
    rounding: Rounding

    def words(self, target: Target) -> str:
        """A thing in item Markdown: `vanadium`, `` `4s` ``."""
        if self.by_electron and target.electron is not None:
            return f"`{target.electron.label}`"
        return species_words(target.species)

    @property
    def measure(self) -> str:
        """The quantity in a sentence."""
        return measure_words(self.targets[0])

    def node(self, target: Target) -> Node:
        """A thing as a node."""
        if self.by_electron and target.electron is not None:
            return Occupied((target.electron.label,))
        return target.species.node()

    def label(self, target: Target) -> str:
        """A thing as it is typed: `V2+`, `4s`."""
        return target.electron.label if self.by_electron and target.electron else target.species.label

    def value(self, target: Target) -> Species | Subshell:
        """A thing itself."""
        return target.electron if self.by_electron and target.electron else target.species

    def of_each(self) -> str:
        """What the wording says once for all: ` of vanadium`, `` for a `4s` electron of each ``, or nothing."""
        if self.by_electron:
            return f" of {species_words(self.targets[0].species)}"
        if "electron" in self.what.takes:
            return f", for {electron_words(self.targets[0].electron)} of each,"
        return ""

    def printed(self, value: Value) -> str:
        """A value as it is printed, without its unit."""
        return printed(value, self.rounding)

    def with_unit(self, value: Value) -> Node:
        """A printed number with its unit, as a node."""
        return measured(self.printed(value), self.unit)

    @property
    def unit(self) -> str:
        """The unit of the values."""
        return self.targets[0].get("unit") or self.what.unit

    def named(self, target: Target) -> Node:
        """`Z_eff(V)`: the quantity of a thing."""
        return Function(self.what.symbol, self.node(target))


def printed(value: Value, rounding: Rounding) -> str:
    """A value as it is printed, without its unit."""
    if isinstance(value, Decimal):
        return shown(rounding.apply(value))
    return str(getattr(value, "label", value))


def measured(text: str, unit: str) -> Node:
    """A printed number as a node, with its unit where it has one."""
    return Measured(Num(text), unit) if unit else Num(text)


def things(name: str, words: Sequence[str], part: TargetFields, setting: Setting, key: str = "among") -> Things:
    """The things that a list names: electrons of the species under `of`, or else species or ranges of them.

    Raises ContentError for a thing named twice, or an electron that a species has not.
    """
    what = quantity(name)
    detail = details_of(what, part, setting)
    takes = "electron" in what.takes
    if not takes and part.electron is not None:
        raise ContentError(f"{what.name} is not a quantity of an electron; leave `electron` out")
    by_electron = part.of is not None
    if by_electron:
        if not takes:
            raise ContentError(f"{what.name} is not a quantity of an electron; leave `of` out and list species")
        species = species_named(part.of or "", setting)
        found = [Target(what.name, species, each, detail) for each in _electrons(words, species, setting)]
    else:
        electron = electron_named(part.electron, setting) if part.electron and takes else None
        found = [Target(what.name, each, electron, detail) for each in species_listed(words, setting)]
    for at, target in enumerate(found):
        if target in found[:at]:
            raise ContentError(f"`{key}` names the same thing twice: {target.about}")
        must_have(target, setting.practice)
    return Things(what, tuple(found), by_electron, rounding_of(what, part, setting))


def species_listed(words: Iterable[str], setting: Setting) -> tuple[Species, ...]:
    """Species by drawn name, label or range (`Na-Ar`)."""
    found: list[Species] = []
    for word in words:
        if word in setting.bindings or ":" in word:
            found.append(species_named(word, setting))
            continue
        try:
            found += parse_range(word)
        except ContentError as error:
            drawn = [name for name, value in setting.bindings.items() if isinstance(value, Species)]
            hint = "; a range is written `Na-Ar`" if len(word.split()) > 1 else ""
            raise ContentError(error.message + hint, word, drawn or error.allowed) from error
    return tuple(found)


def _electrons(words: Iterable[str], species: Species, setting: Setting) -> tuple[Subshell, ...]:
    named = [each.strip() for word in words for each in word.split(",")]
    outermost = configuration_of(species, setting.practice).outermost
    return tuple(electron_named(word, setting) or outermost for word in named)


def values_of(compared: Things, setting: Setting) -> dict[Target, Decimal]:
    """The exact value of each thing; ContentError where they are not numbers."""
    if not compared.what.numeric:
        raise ContentError(f"{compared.what.name} has no size to compare by; take a quantity that is a number")
    known = setting.known
    return {target: evaluate(target, setting.practice, known) for target in compared.targets}


def worked(compared: Things, setting: Setting) -> list[Step]:
    """The working of every thing, one after the other, without what stands already."""
    known = setting.known
    steps: list[Step] = []
    for target in compared.targets:
        new = work(target, setting.practice, known, compared.rounding)
        known.update({step.target: step.line.value for step in new})
        steps += new
    return steps


def rising(compared: Things, values: Mapping[Target, Decimal]) -> tuple[Target, ...]:
    """The things from the smallest value to the largest. ContentError for a tie, in value or as printed."""
    order = sorted(compared.targets, key=lambda target: values[target])
    texts = [compared.printed(values[target]) for target in order]
    for at, (one, other) in enumerate(itertools.pairwise(order)):
        if values[one] == values[other] or texts[at] == texts[at + 1]:
            raise ContentError(
                f"{compared.what.name} does not order {compared.label(one)} and {compared.label(other)}: "
                f"both are {texts[at]}"
            )
    return tuple(order)


def comparison(compared: Things, order: Sequence[Target], values: Mapping[Target, Decimal], conclusion: Node) -> Chain:
    """`Z_eff(Na) = 2.20 < Z_eff(Mg) = 2.85 → …`, equal values joined by an equals sign."""
    rest: list[tuple[Relation, Node]] = []
    for at, target in enumerate(order):
        if at:
            before, after = values[order[at - 1]], values[target]
            rest.append(("=" if before == after else "<" if before < after else ">", compared.named(target)))
        value = compared.with_unit(values[target])
        rest.append(("=" if compared.what.rounding.figures is None else "≈", value))
    return Chain(compared.named(order[0]), (*rest, ("→", conclusion)))


def closing(name: str, target: Target, chain: Chain, value: object, text: str, note: str = "") -> Step:
    """A line that ends a working without stating a quantity."""
    line = Line(name, target.about, chain, value, text, note=note)
    return Step(Target(name, target.species, target.electron), line)


def scattered(*words: str) -> int:
    """A number that differs between texts in no visible pattern, the same on every machine."""
    return zlib.crc32("\n".join(words).encode())


def joined(words: Sequence[str], last: str = "and") -> str:
    """`a, b and c`."""
    if len(words) < 2:
        return "".join(words)
    return f"{', '.join(words[:-1])} {last} {words[-1]}"


def listed(compared: Things, last: str = "and", most: int = 8) -> str:
    """The things in item Markdown; a long row of neighbouring elements by its ends."""
    species = [target.species for target in compared.targets]
    row = all(
        each.charge == 0 and each.stated is None and each.mass is None and each.z == species[0].z + at
        for at, each in enumerate(species)
    )
    if not compared.by_electron and row and len(species) > most:
        return f"the elements from {species[0].name} to {species[-1].name}"
    return joined([compared.words(target) for target in compared.targets], last)
