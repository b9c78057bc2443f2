"""Atoms: the reference data that mendeleev carries, read once from its file, without importing it.

Importing mendeleev costs more than half a second and brings pandas; its data lie in one SQLite file, which is
opened read-only. Each table is read on first use. `OutsideError` where the file is missing or not as expected.
"""

from __future__ import annotations

import importlib.util
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path
from types import MappingProxyType
from typing import Any, Literal
from urllib.parse import quote

from authoring.atoms.configuration import Configuration
from authoring.atoms.subshell import LETTERS
from authoring.faults import OutsideError

Certainty = Literal["measured", "interpolated", "calculated"]

SOURCES: Mapping[str, str] = MappingProxyType(
    {
        "elements": "mendeleev (element data; standard atomic weights: IUPAC)",
        "configurations": "mendeleev (ground configurations of neutral atoms; predicted for Z 109 and above)",
        "covalent_radii": "Pyykkö & Atsumi, Chem. Eur. J. 15 (2009) 186, as given by mendeleev",
        "ground_shells": "NIST Atomic Spectra Database, ground states and ionization energies, as given by mendeleev",
        "ionization_energies": "NIST Atomic Spectra Database, as given by mendeleev",
        "screening_constants": (
            "Clementi & Raimondi, J. Chem. Phys. 38 (1963) 2686; Clementi, Raimondi & Reinhardt, "
            "J. Chem. Phys. 47 (1967) 1300; as given by mendeleev"
        ),
        "ionic_radii": "Shannon, Acta Cryst. A32 (1976) 751; Lundberg 2016; as given by mendeleev",
        "isotopes": "IUPAC atomic masses, as given by mendeleev",
    }
)

# What each table must have; mendeleev promises no layout of its file, so it is checked before it is read.
_COLUMNS: Mapping[str, tuple[str, ...]] = {
    "elements": (
        "atomic_number",
        "symbol",
        "name",
        "period",
        "group_id",
        "block",
        "atomic_weight",
        "electronic_configuration",
        "covalent_radius_pyykko",
    ),
    "ionizationenergies": (
        "atomic_number",
        "ion_charge",
        "ground_shells",
        "ionization_energy",
        "uncertainty",
        "is_semi_empirical",
        "is_theoretical",
    ),
    "screeningconstants": ("atomic_number", "n", "s", "screening"),
    "ionicradii": ("atomic_number", "charge", "coordination", "spin", "ionic_radius", "crystal_radius"),
    "isotopes": ("atomic_number", "mass_number"),
}

HEAVIEST = 118

# NIST shortens with two cores that are no noble gases.
_OTHER_CORES = {"[Cd]": "[Kr] 4d10 5s2", "[Hg]": "[Xe] 4f14 5d10 6s2"}


@dataclass(frozen=True, slots=True)
class ElementData:
    """One element. `weight` is relative atomic mass; `covalent_radius` the single-bond radius in pm (Pyykkö)."""

    z: int
    symbol: str
    name: str
    period: int
    group: int | None
    block: str
    weight: Decimal
    configuration_text: str
    covalent_radius: Decimal | None

    @property
    def configuration(self) -> Configuration:
        """The ground configuration of the neutral atom."""
        return Configuration.parse(self.configuration_text)


@dataclass(frozen=True, slots=True)
class IonizationEnergy:
    """The energy in eV that takes one electron from a species in its ground state; uncertainty in eV."""

    value: Decimal
    uncertainty: Decimal | None
    certainty: Certainty


@dataclass(frozen=True, slots=True)
class IonicRadius:
    """Shannon's effective ionic and crystal radius in pm; coordination as a Roman numeral, spin `HS`, `LS` or empty."""

    z: int
    charge: int
    coordination: str
    spin: str
    ionic: Decimal
    crystal: Decimal


@dataclass(frozen=True, slots=True)
class Elements:
    """All elements, by symbol and by atomic number."""

    by_symbol: Mapping[str, ElementData]
    by_z: Mapping[int, ElementData]


@cache
def elements() -> Elements:
    """The 118 elements."""
    rows = _rows("elements", order="atomic_number")
    found = [_element(row) for row in rows]
    if [one.z for one in found] != list(range(1, HEAVIEST + 1)):
        raise OutsideError(f"mendeleev's element table does not hold the elements 1 to {HEAVIEST}")
    return Elements(
        MappingProxyType({one.symbol: one for one in found}),
        MappingProxyType({one.z: one for one in found}),
    )


@cache
def measured_ion(z: int, charge: int) -> Configuration | None:
    """The ground configuration of a positive ion or neutral atom from NIST; None where the table has none."""
    row = _ion_rows().get((z, charge))
    if row is None or not row[2]:
        return None
    text = str(row[2])
    for core, meaning in _OTHER_CORES.items():
        text = text.replace(core, meaning)
    configuration = Configuration.parse(text)
    if configuration.electrons != z - charge:
        raise OutsideError(f"mendeleev's ground shells for Z = {z}, charge {charge} hold the wrong number of electrons")
    return configuration


@cache
def ionization_energy(z: int, charge: int) -> IonizationEnergy | None:
    """The ionization energy in eV of element `z` with `charge` (0: the first); None where the table has none."""
    row = _ion_rows().get((z, charge))
    if row is None or row[3] is None:
        return None
    certainty: Certainty = "calculated" if row[6] else "interpolated" if row[5] else "measured"
    return IonizationEnergy(_exact(row[3]), None if row[4] is None else _exact(row[4]), certainty)


@cache
def screening_constants() -> Mapping[tuple[int, int, int], Decimal]:
    """Clementi-Raimondi screening constants sigma, by (Z, n, l); they state Z_eff = Z - sigma."""
    rows = _rows("screeningconstants")
    return MappingProxyType({(z, n, LETTERS.index(letter)): _tidy(sigma) for z, n, letter, sigma in rows})


@cache
def ionic_radii() -> tuple[IonicRadius, ...]:
    """All ionic radii, by Z, charge, coordination and spin as the table has them."""
    return tuple(
        IonicRadius(row[0], row[1], row[2] or "", row[3] or "", _tidy(row[4]), _tidy(row[5]))
        for row in _rows("ionicradii", order="atomic_number, charge, id")
        if row[4] is not None and row[5] is not None
    )


@cache
def mass_numbers() -> Mapping[int, frozenset[int]]:
    """The mass numbers of the known isotopes, by atomic number."""
    found: dict[int, set[int]] = {}
    for z, mass in _rows("isotopes"):
        if mass is not None:
            found.setdefault(z, set()).add(mass)
    return MappingProxyType({z: frozenset(masses) for z, masses in found.items()})


@cache
def _ion_rows() -> Mapping[tuple[int, int], tuple[Any, ...]]:
    return {(row[0], row[1]): row for row in _rows("ionizationenergies")}


# IUPAC's names (Red Book 2005, table I), where mendeleev has the other accepted spelling.
_NAMES = {"Aluminum": "Aluminium", "Cesium": "Caesium"}


def _element(row: tuple[Any, ...]) -> ElementData:
    z, symbol, name, period, group, block, weight, configuration, radius = row
    return ElementData(
        z,
        symbol,
        _NAMES.get(name, name),
        period,
        group,
        block,
        _exact(weight),
        configuration,
        None if radius is None else _tidy(radius),
    )


def _exact(value: float) -> Decimal:
    return Decimal(repr(value))


def _tidy(value: float) -> Decimal:
    # Tables of few figures, some of which mendeleev computed on the way in (0.3094000000000001).
    return Decimal(format(value, ".10g"))


@cache
def data_file() -> Path:
    """Where the installed mendeleev keeps its data; `OutsideError` where it is not installed."""
    spec = importlib.util.find_spec("mendeleev")
    if spec is None or spec.origin is None:
        raise OutsideError("the package mendeleev, which holds the data about the elements, is not installed")
    path = Path(spec.origin).with_name("elements.db")
    if not path.is_file():
        raise OutsideError("the installed mendeleev has no elements.db; version 1.3 or a later 1.x is needed")
    return path


def _rows(table: str, order: str = "id") -> list[tuple[Any, ...]]:
    import sqlite3

    wanted = _COLUMNS[table]
    address = f"file:{quote(str(data_file()))}?mode=ro&immutable=1"
    try:
        connection = sqlite3.connect(address, uri=True)
        try:
            present = {row[1] for row in connection.execute(f"PRAGMA table_info({table})")}
            missing = [name for name in wanted if name not in present]
            if missing:
                raise OutsideError(f"mendeleev's table {table} has no {', '.join(missing)}; version 1.3 is needed")
            return connection.execute(f"SELECT {', '.join(wanted)} FROM {table} ORDER BY {order}").fetchall()
        finally:
            connection.close()
    except sqlite3.Error as error:
        raise OutsideError(f"mendeleev's data cannot be read: {error}") from error
