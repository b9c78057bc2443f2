"""Atoms: constants of physics, each with its unit, source and year; kept in `constants.toml`."""

from __future__ import annotations

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path
from types import MappingProxyType

from authoring.faults import ContentError


@dataclass(frozen=True, slots=True)
class Constant:
    """A constant: its exact decimal value as tabulated, in `unit`, from `source`, of the adjustment of `year`."""

    name: str
    symbol: str
    value: Decimal
    unit: str
    source: str
    year: int


@cache
def constants() -> Mapping[str, Constant]:
    """All constants by name."""
    with Path(__file__).with_name("constants.toml").open("rb") as file:
        entries = tomllib.load(file)
    return MappingProxyType(
        {
            name: Constant(name, one["symbol"], Decimal(one["value"]), one["unit"], one["source"], one["year"])
            for name, one in entries.items()
        }
    )


def constant(name: str) -> Constant:
    """The constant `rydberg_energy` (eV), `bohr_radius` (pm) or `kilojoules_per_mole_of_electronvolts`.

    `ContentError` with the nearest name for another word.
    """
    found = constants().get(name)
    if found is None:
        raise ContentError(f"{name!r} is not a constant", name, constants())
    return found
