"""Stage: solve. The catalogue of slips: a misunderstanding is a practice with some fields changed.

The shipped ones stand in `catalogue.toml`, each with its source; a course's own are made by `make_slip` and added
to a `Slips` that is handed on. What a slip touches follows from the fields it changes, so no rule knows its name.
"""

from __future__ import annotations

import contextlib
import dataclasses
import functools
import tomllib
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from importlib import resources
from typing import Any

from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.shielding.practice import Practice, convention_changes, convention_fields, published, read_field
from authoring.shielding.quantity import Target, quantity

LIKELIEST = 10
_LONGEST_NAME = 40
_LONGEST_SENTENCE = 300
_KEYS = ("did", "tell", "changes", "likelihood", "source")
# Between them these need whatever a quantity of any species needs: a neutral d metal, a cation, an ion of a salt.
_SAMPLES: tuple[tuple[Species, tuple[tuple[str, str], ...]], ...] = (
    (Species(26), ()),
    (Species(26, 2), ()),
    (Species(9, -1), (("partner", "Na+"),)),
)


@dataclass(frozen=True, slots=True)
class Slip:
    """A misunderstanding: what the candidate did, what to tell them, and the practice fields it changes.

    `changes` are (field, value) in the field's own type; `first` names the quantities they alter first;
    `likelihood` is 1 (rare) to 10 (in nearly every class), an estimate.
    """

    name: str
    did: str
    tell: str
    changes: tuple[tuple[str, object], ...]
    first: frozenset[str]
    likelihood: int
    source: str

    def __hash__(self) -> int:
        return hash(self.name)

    @property
    def fields(self) -> frozenset[str]:
        """The practice fields that it sets."""
        return frozenset(name for name, _ in self.changes)


@dataclass(frozen=True, slots=True)
class Slips:
    """Slips by name, the shipped ones or with a course's own; names differ."""

    items: tuple[Slip, ...]
    _by_name: dict[str, Slip] = field(init=False, repr=False, compare=False)
    _hash: int = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        by_name: dict[str, Slip] = {}
        for slip in self.items:
            if slip.name in by_name:
                raise ContentError(f"there is a slip {slip.name!r} already: give yours another name")
            by_name[slip.name] = slip
        object.__setattr__(self, "_by_name", by_name)
        object.__setattr__(self, "_hash", hash(self.items))

    def __hash__(self) -> int:
        return self._hash

    def __iter__(self) -> Iterator[Slip]:
        return iter(self.items)

    def __len__(self) -> int:
        return len(self.items)

    def named(self, name: str) -> Slip:
        """The slip of that name. Raises ContentError with the nearest name."""
        try:
            return self._by_name[name]
        except KeyError:
            raise ContentError(f"no slip {name[:_LONGEST_NAME]!r}", name, self._by_name) from None

    def with_more(self, more: Iterable[Slip]) -> Slips:
        """These and more. Raises ContentError where a name is taken."""
        return Slips((*self.items, *more))

    def touching(self, about: str | Target) -> tuple[Slip, ...]:
        """The slips that can change a quantity (by name) or a target, itself or through what it needs."""
        targets = [about] if isinstance(about, Target) else _samples_of(about)
        needed = frozenset().union(*(upstream(each) for each in targets))
        return tuple(slip for slip in self.items if slip.first & needed)


def _samples_of(name: str) -> list[Target]:
    what = quantity(name).name
    return [Target(what, species, detail=detail) for species, detail in _SAMPLES]


@functools.cache
def shipped() -> Slips:
    """The slips of the catalogue."""
    return Slips(tuple(catalogue().values()))


@functools.cache
def catalogue() -> dict[str, Slip]:
    """The shipped slips by name, in the order of the catalogue."""
    return {name: make_slip(name, fields) for name, fields in _data()["slips"].items()}


@functools.cache
def _data() -> dict[str, Any]:
    text = resources.files("authoring.slips").joinpath("catalogue.toml").read_text(encoding="utf-8")
    return tomllib.loads(text)


def first_altered(fields: Iterable[str]) -> frozenset[str]:
    """The quantities that practice fields alter first; what needs them follows."""
    table = _data()["first"]
    return frozenset(name for each in fields for name in table[each])


def make_slip(name: str, fields: Mapping[str, object]) -> Slip:
    """A slip from its words: `did`, `tell`, `changes`, and perhaps `likelihood` and `source`.

    `changes` names practice fields, or conventions by the words that plans use (`one shell in`).
    Raises ContentError for what is missing, unknown or cannot be used.
    """
    title = _sentence(name, "the name of a slip", _LONGEST_NAME)
    for key in fields:
        if key not in _KEYS:
            raise ContentError(f"slip {title!r} has no {str(key)[:_LONGEST_NAME]!r}", str(key), _KEYS)
    changes = _changes(title, fields.get("changes"))
    return Slip(
        title,
        _sentence(fields.get("did"), f"slip {title!r}: `did`", _LONGEST_SENTENCE),
        _sentence(fields.get("tell"), f"slip {title!r}: `tell`", _LONGEST_SENTENCE),
        changes,
        first_altered(each for each, _ in changes),
        _likelihood(title, fields.get("likelihood", LIKELIEST // 2)),
        _sentence(fields.get("source", "the course's own"), f"slip {title!r}: `source`", _LONGEST_SENTENCE),
    )


def _sentence(value: object, what: str, longest: int) -> str:
    if value is None:
        raise ContentError(f"{what} is missing")
    if not isinstance(value, str) or not value.strip():
        raise ContentError(f"{what} needs words")
    text = " ".join(value.split())
    if len(text) > longest:
        raise ContentError(f"{what} has more than {longest} characters")
    if not text.isprintable():
        raise ContentError(f"{what} has characters that cannot be printed")
    return text


def _changes(title: str, value: object) -> tuple[tuple[str, object], ...]:
    if not isinstance(value, Mapping) or not value:
        raise ContentError(f"slip {title!r}: `changes` needs at least one practice field and its value")
    known = {item.name: item for item in dataclasses.fields(Practice)}
    found: dict[str, object] = {}
    for name, setting in value.items():
        if name not in known and name not in convention_fields():
            allowed = (*convention_fields(), *known)
            raise ContentError(f"slip {title!r} changes {str(name)[:60]!r}, which is no convention", str(name), allowed)
        for each, text in ({name: setting} if name in known else convention_changes(name, setting)).items():
            found[each] = read_field(known[each], text)
    return tuple(sorted(found.items()))


def _likelihood(title: str, value: object) -> int:
    text = str(value).strip()
    if not (text.isascii() and text.isdigit() and len(text) < 4 and 1 <= int(text) <= LIKELIEST):
        raise ContentError(f"slip {title!r}: likelihood goes from 1 (rare) to {LIKELIEST} (in nearly every class)")
    return int(text)


def applied(slips: Sequence[Slip], practice: Practice) -> Practice:
    """A practice with the slips' fields set; of two that set the same field the later one counts."""
    changes = {name: value for slip in slips for name, value in slip.changes}
    return dataclasses.replace(practice, **changes) if changes else practice  # type: ignore[arg-type]


def compatible(one: Slip, other: Slip) -> bool:
    """Whether two slips can happen together: they set no field in common."""
    return one.fields.isdisjoint(other.fields)


def touching(about: str | Target, slips: Slips | None = None) -> tuple[Slip, ...]:
    """The slips (shipped ones unless others are given) that can change a quantity or target, or what it needs."""
    return (slips or shipped()).touching(about)


@functools.lru_cache(maxsize=16384)
def upstream(target: Target) -> frozenset[str]:
    """The names of a target's quantity and of everything that it needs, however far up."""
    what = quantity(target.quantity)
    found = {what.name}
    # Needs that cannot be told (a missing detail, an impossible ion) leave what stands beside them.
    with contextlib.suppress(ContentError):
        for need in what.needs(target, published()):
            found |= upstream(need)
    return frozenset(found)
