"""Stage 2, draw: the values that one draw allows, given what was drawn before it."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from functools import lru_cache

from authoring.atoms.reference import elements
from authoring.atoms.species import Species, parse_range
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.specs.draws import (
    Draw,
    ElectronDraw,
    IonDraw,
    NeighbourDraw,
    NumberDraw,
    RelatedWordDraw,
    SameElectronsDraw,
    SpeciesDraw,
    WordDraw,
    charge_of,
    whole,
)

Bindings = Mapping[str, object]
MOST_NUMBERS = 100_000


def pool(draw: Draw, bindings: Bindings, practice: Practice) -> tuple[object, ...]:
    """The values a draw allows. Raises ContentError for words it cannot use; an empty pool is returned empty."""
    if isinstance(draw, SpeciesDraw):
        return _species(draw)
    if isinstance(draw, IonDraw):
        atom = _bound_species(draw.ion_of, bindings)
        return tuple(Species(atom.z, charge) for text in draw.charge if (charge := charge_of(text)) < atom.z)
    if isinstance(draw, NeighbourDraw):
        return _neighbours(draw, _bound_species(draw.near, bindings))
    if isinstance(draw, SameElectronsDraw):
        like = _bound_species(draw.isoelectronic, bindings)
        return tuple(each for each in _listed(draw.among) if each.electrons == like.electrons and each != like)
    if isinstance(draw, ElectronDraw):
        return _electrons(draw, _bound_species(draw.electron_of, bindings), practice)
    if isinstance(draw, NumberDraw):
        return _numbers(draw)
    if isinstance(draw, WordDraw):
        return tuple(dict.fromkeys(draw.words))
    return _related(draw, bindings)


def _bound_species(name: str, bindings: Bindings) -> Species:
    value = bindings[name]
    if not isinstance(value, Species):
        raise ContentError(f"{name!r} is not a species")
    return value


@lru_cache(maxsize=512)
def _listed(words: tuple[str, ...]) -> tuple[Species, ...]:
    return tuple(dict.fromkeys(each for word in words for each in parse_range(word)))


@lru_cache(maxsize=512)
def _species(draw: SpeciesDraw) -> tuple[Species, ...]:
    found = _listed(draw.among) if draw.among else tuple(Species(z) for z in sorted(elements().by_z))
    left_out = set(_listed(draw.except_)) if draw.except_ else set()
    periods = {whole(text, "period") for text in draw.period}
    groups = {whole(text, "group") for text in draw.group}
    blocks = set(draw.block)
    for block in blocks - set("spdf"):
        raise ContentError(f"{block[:20]!r} is not a block", block, ("s", "p", "d", "f"))
    kept = [
        each
        for each in found
        if (not periods or each.period in periods)
        and (not groups or each.group in groups)
        and (not blocks or each.block in blocks)
        and each not in left_out
    ]
    charges = [charge_of(text) for text in draw.charge]
    if not charges:
        return tuple(kept)
    ions = [Species(each.z, charge) for each in kept for charge in charges if charge < each.z]
    return tuple(each for each in ions if each not in left_out)


def _neighbours(draw: NeighbourDraw, species: Species) -> tuple[Species, ...]:
    found = []
    for text in draw.steps:
        steps = whole(text, "steps")
        if draw.along == "period":
            z: int | None = species.z + steps
        else:
            column = [z for z, element in sorted(elements().by_z.items()) if element.group == species.group]
            at = column.index(species.z) + steps if species.group and species.z in column else -1
            z = column[at] if 0 <= at < len(column) else None
        if z is not None and z in elements().by_z and species.charge < z:
            found.append(Species(z, species.charge))
    return tuple(found)


def _electrons(draw: ElectronDraw, species: Species, practice: Practice) -> tuple[Subshell, ...]:
    configuration = configuration_of(species, practice)
    outer = configuration.outermost
    choices = {
        "outermost": (outer,),
        "inner d": (Subshell(outer.n - 1, 2),) if outer.n > 3 else (),
        "inner f": (Subshell(outer.n - 2, 3),) if outer.n > 5 else (),
        "next in": tuple(each for each in configuration.occupied if each.n == outer.n - 1 and each.l <= 1),
        "any": configuration.occupied,
    }[draw.shell]
    if draw.among:
        wanted = [Subshell.parse(word) for word in draw.among]
        choices = tuple(wanted) if draw.shell == "outermost" else tuple(each for each in choices if each in wanted)
    return tuple(each for each in choices if configuration.count(each))


@lru_cache(maxsize=64)
def _numbers(draw: NumberDraw) -> tuple[Decimal, ...]:
    if draw.numbers:
        return tuple(dict.fromkeys(draw.numbers))
    if draw.from_ is None or draw.to is None:
        raise ContentError("a row of numbers needs `from` and `to`")
    if draw.step <= 0:
        raise ContentError("`step` is greater than 0")
    count = (draw.to - draw.from_) / draw.step
    if count >= MOST_NUMBERS:
        raise ContentError(f"this row has over {MOST_NUMBERS:,} numbers; take a larger step")
    return tuple(draw.from_ + draw.step * at for at in range(int(count) + 1)) if count >= 0 else ()


def _related(draw: RelatedWordDraw, bindings: Bindings) -> tuple[str, ...]:
    value = bindings[draw.for_]
    key = format(value, "f") if isinstance(value, Decimal) else str(getattr(value, "label", value))
    if key not in draw.say:
        raise ContentError(f"`say` has no word for {draw.for_} = {key}")
    return (draw.say[key],)
