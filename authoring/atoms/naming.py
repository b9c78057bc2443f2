"""Atoms: reading species as people write them, one or a range of them."""

from __future__ import annotations

import re
from functools import cache

from authoring.atoms import reference
from authoring.atoms.configuration import Configuration
from authoring.atoms.species import Species
from authoring.atoms.subshell import quoted
from authoring.faults import ContentError

_LONGEST_TEXT = 400
_TO_ASCII = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻−–", "0123456789+---")
_WRITTEN = re.compile(r"([0-9]{0,3})\s*([A-Za-z]+)\s*(?:([0-9]{0,3})([+-]))?")
# Both ends alike: `Cl-35` is a nuclide's name to a chemist, never the elements from Cl to Br.
_RANGE = re.compile(r"(?:([A-Za-z]+)\s*-\s*([A-Za-z]+)|([0-9]{1,3})\s*-\s*([0-9]{1,3}))")


def read_species(text: str) -> Species:
    """One species; see `Species.parse`."""
    if len(text) > _LONGEST_TEXT:
        raise ContentError(f"a species has at most {_LONGEST_TEXT} characters")
    return _read(text)


@cache
def _read(text: str) -> Species:
    head, colon, stated = text.partition(":")
    plain = head.strip().translate(_TO_ASCII)
    match = _WRITTEN.fullmatch(plain)
    if match is None:
        raise ContentError(_what_is_wrong(head.strip(), plain))
    mass, word, size, sign = match.groups()
    z = _element(word).z
    charge = 0 if sign is None else int(size or 1) * (1 if sign == "+" else -1)
    if sign is not None and size and not int(size):
        raise ContentError(f"{quoted(head.strip())}: a neutral atom is written without a charge")
    species = Species(z, charge, Configuration.parse(stated) if colon else None, int(mass) if mass else None)
    _check_mass(species)
    return species


def _what_is_wrong(head: str, plain: str) -> str:
    if not plain:
        return "a species is missing (like `V`, `Fe3+`, `35Cl-`)"
    if re.fullmatch(r"[A-Za-z]+\s*[0-9]+", plain):
        return f"{quoted(head)}: a charge needs its sign (like `{plain}+`)"
    if re.fullmatch(r"[A-Za-z]+\s*[+-][0-9]+", plain):
        return f"{quoted(head)}: a charge has its sign last and a mass number stands in front (like `Fe3+`, `35Cl`)"
    return f"{quoted(head)} is not a species (like `V`, `Fe3+`, `35Cl-`, `vanadium`)"


def _check_mass(species: Species) -> None:
    if species.mass is None:
        return
    known = reference.mass_numbers().get(species.z, frozenset())
    if species.mass not in known:
        near = min(known, key=lambda mass: (abs(mass - species.mass_number), mass), default=species.mass)
        raise ContentError(f"no isotope {species.mass}{species.symbol} is known; the nearest is {near}{species.symbol}")


def _element(word: str) -> reference.ElementData:
    table = reference.elements().by_symbol
    found = table.get(word) or _by_name().get(word.lower())
    if found is None:
        raise ContentError(f"{quoted(word)} is not an element", word[:20], (*table, *_by_name()))
    return found


@cache
def _by_name() -> dict[str, reference.ElementData]:
    names = {one.name.lower(): one for one in reference.elements().by_z.values()}
    # The other accepted spellings (IUPAC Red Book 2005, table I, notes).
    for other, name in (("aluminium", "aluminum"), ("caesium", "cesium"), ("sulphur", "sulfur")):
        for one, two in ((other, name), (name, other)):
            if one in names:
                names.setdefault(two, names[one])
    return names


def parse_range(text: str) -> tuple[Species, ...]:
    """Species listed with commas, each a species or a range: `H-Kr`, `1-118`, `Na, Mg, Al3+`, `Sc-Zn`.

    `ContentError` for an empty list, an unknown element, or a range that runs backwards.
    """
    if len(text) > 10 * _LONGEST_TEXT:
        raise ContentError(f"a list of species has at most {10 * _LONGEST_TEXT} characters")
    found: list[Species] = []
    for part in text.split(","):
        match = _RANGE.fullmatch(part.strip().translate(_TO_ASCII))
        if match is not None:
            first, last = (_end(word) for word in match.groups() if word is not None)
            if last < first:
                raise ContentError(f"the range {quoted(part.strip())} runs backwards")
            found.extend(Species(z) for z in range(first, last + 1))
        elif part.strip().isascii() and part.strip().isdigit():
            found.append(Species(_end(part.strip())))
        else:
            found.append(Species.parse(part))
    return tuple(found)


def _end(word: str) -> int:
    if not word.isdigit():
        return _element(word).z
    if len(word) > 3:
        raise ContentError(f"there is no element with Z = {quoted(word)[1:-1]}")
    return Species(int(word)).z
