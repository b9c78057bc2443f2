"""Moseley's law against the Kα lines of xraydb (Elam's table)."""

from __future__ import annotations

import pytest
import xraydb
from shielding_help import rows, target, value

from authoring.atoms.reference import elements
from authoring.faults import ContentError
from authoring.shielding.quantities.moseley import LAST_RIGHT, UNSURE_LINES, number_remark

TABLE = {int(row["Z"]): row for row in rows("moseley_11_60")}  # see tests/data/README.md


def _symbol(z: int) -> str:
    return elements().by_z[z].symbol


def _line(z: int) -> float:
    return float(xraydb.xray_lines(_symbol(z))["Ka1"].energy)


def _error(z: int) -> float:
    return 100 * (float(value("Moseley Kα energy", _symbol(z))) / _line(z) - 1)


@pytest.mark.parametrize("z", TABLE)
def test_the_law_and_its_error(z: int) -> None:
    """The separate program's energy to 0.1 eV, and its error against xraydb to 0.01 %."""
    row = TABLE[z]
    assert float(value("Moseley Kα energy", row["sym"])) == pytest.approx(float(row["moseley_eV"]), abs=0.051)
    assert _error(z) == pytest.approx(float(row["err_Ka1_%"]), abs=0.006)


def test_where_the_law_is_good() -> None:
    """Within 1 % for Z = 14-34 and nowhere else from 11 to 60; within 0.5 % for 17-27; always too low."""
    errors = {z: _error(z) for z in range(11, 61)}
    assert [z for z, error in errors.items() if abs(error) < 1] == list(range(14, 35))
    assert [z for z, error in errors.items() if abs(error) < 0.5] == list(range(17, 28))
    assert all(error < 0 for error in errors.values())


def test_the_inverse_finds_the_element_up_to_44_and_is_refused_beyond() -> None:
    """From Z = 45 a measured line rounds to Z + 1 (60: Z + 2); the quantity says so and gives no wrong key."""
    for z in range(11, LAST_RIGHT + 1):
        assert value("atomic number from Kα", _symbol(z), energy=str(_line(z))) == z
    for z in range(LAST_RIGHT + 1, 61):
        with pytest.raises(ContentError, match=f"belongs to Z = {z + (2 if z == 60 else 1)},"):
            value("atomic number from Kα", _symbol(z), energy=str(_line(z)))


def test_lines_on_which_tables_differ_are_remarked_on() -> None:
    """Na, P, S, Sc: two tables differ by more than 0.05 %; no other element of the comparison does."""
    unsure = set()
    for row in TABLE.values():
        if row["xraydb_minus_second_eV"]:
            differs = abs(float(row["xraydb_minus_second_eV"])) / float(row["Ka1_eV"]) > 5e-4
            unsure |= {row["sym"]} if differs else set()
    assert unsure == UNSURE_LINES
    for symbol in UNSURE_LINES:
        assert number_remark(target("atomic number from Kα", symbol))
    assert number_remark(target("atomic number from Kα", "Ag"))
    assert not number_remark(target("atomic number from Kα", "Cu"))


def test_energies_in_kev() -> None:
    """The unit is a choice of the item."""
    assert value("Moseley Kα energy", "Cu", unit="keV") * 1000 == value("Moseley Kα energy", "Cu")
    assert value("atomic number from Kα", "Cu", energy="8.0463", unit="keV") == 29
