"""SCF charges, radii and constants against their tables."""

from __future__ import annotations

import pytest
import scipy.constants
from shielding_help import practice, value

from authoring.atoms.constants import constant
from authoring.atoms.reference import screening_constants
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import published
from authoring.shielding.quantities.scf_charge import trust

# Clementi & Raimondi 1963 and Clementi, Raimondi & Reinhardt 1967, as several independent copies have them.
SPOTS = [
    ("C 1s", "5.6727"),
    ("C 2s", "3.2166"),
    ("C 2p", "3.1358"),
    ("O 1s", "7.6579"),
    ("O 2s", "4.4916"),
    ("O 2p", "4.4532"),
    ("Na 3s", "2.5074"),
    ("Cl 3p", "6.1161"),
    ("K 4s", "3.4952"),
    ("Fe 3d", "11.1798"),
    ("Fe 4s", "5.4340"),
    ("Cu 3d", "13.2006"),
    ("Cu 4s", "5.8424"),
    ("Zn 3d", "13.8783"),
    ("Zn 4s", "5.9652"),
    ("Au 5d", "20.1265"),
    ("Au 6s", "10.9380"),
]


@pytest.mark.parametrize(("words", "charge"), SPOTS)
def test_scf_charges(words: str, charge: str) -> None:
    """Z − σ to the table's four places."""
    assert float(value("SCF charge", words)) == pytest.approx(float(charge), abs=5.1e-5)


def test_which_entries_are_trusted() -> None:
    """Z 1-54 without remark but for Nb, Mo, Ru-Ag and Tc 2p; 55-86 with one; outer lanthanides and Po 4d refused."""
    remarked, refused = set(), set()
    for z, n, l in screening_constants():  # noqa: E741 - the quantum number's own name
        verdict, reason = trust(z, Subshell(n, l))
        assert bool(verdict) == bool(reason)
        {"remark": remarked, "refused": refused}.get(verdict, set()).add((z, Subshell(n, l).label))
    assert {z for z, _ in remarked if z < 55} == {41, 42, 43, 44, 45, 46, 47}
    assert {label for z, label in remarked if z == 43} == {"2p"}
    assert {z for z, _ in remarked if z > 54} == set(range(55, 87))
    lanthanides = {(z, label) for z, label in refused if z < 72}
    assert {z for z, _ in lanthanides} == set(range(57, 72))
    assert {label for _, label in lanthanides} == {"4f", "5s", "5p", "5d", "6s"}
    assert refused - lanthanides == {(84, "4d")}


@pytest.mark.parametrize("words", ["Ce 4f", "La 4f", "Gd 6s", "Lu 5d", "Po 4d", "La 5d"])
def test_entries_that_are_refused(words: str) -> None:
    """The reason is given in place of a value."""
    with pytest.raises(ContentError, match="no SCF charge"):
        value("SCF charge", words)


# Separate program; 231 pm and Pauling's S = 4.52 with 95/136 pm from memory.
SPLITS = [
    ("Na+", "F-", "231", "95.8", "135.2"),
    ("K+", "Cl-", "314", "133.7", "180.3"),
    ("Rb+", "Br-", "343", "150.7", "192.3"),
    ("Cs+", "I-", "385", "169.2", "215.8"),
]


@pytest.mark.parametrize(("cation", "anion", "distance", "small", "large"), SPLITS)
def test_ionic_radii_by_screening_split(cation: str, anion: str, distance: str, small: str, large: str) -> None:
    """Both radii to 0.1 pm, and together the distance."""
    name = "ionic radius by screening split"
    first = value(name, cation, partner=anion, distance=distance)
    second = value(name, anion, partner=cation, distance=distance)
    assert float(first) == pytest.approx(float(small), abs=0.051)
    assert float(second) == pytest.approx(float(large), abs=0.051)
    assert float(first + second) == pytest.approx(float(distance))


def test_pauling_s_own_screening() -> None:
    """S = 4.52 instead of the rule's 4.15: 94.4 and 136.6 pm (separate program)."""
    given = {"distance": "231", "screening": "4.52"}
    assert float(value("univalent radius", "Na+", partner="F-", **given)) == pytest.approx(94.4, abs=0.051)
    assert float(value("univalent radius", "F-", partner="Na+", **given)) == pytest.approx(136.6, abs=0.051)


@pytest.mark.parametrize(
    ("words", "unpaired", "moment"),
    [
        ("V", 3, "3.87"),
        ("Fe3+", 5, "5.92"),
        ("Cu2+", 1, "1.73"),
        ("Gd3+", 7, "7.94"),
        ("Zn2+", 0, "0.00"),
        ("Cr", 6, "6.93"),
    ],
)
def test_spin_only_moments(words: str, unpaired: int, moment: str) -> None:
    """√3, √15, √35, √63 …: the table of spin-only moments that textbooks print; common practice, no source."""
    assert value("unpaired electrons", words) == unpaired
    assert f"{value('magnetic moment', words):.2f}" == moment


def test_measured_values_beside_their_tables() -> None:
    """NIST ASD: V 6.746 eV; Shannon 1976: Na+ 102 pm, high-spin Fe2+ 78 pm; Pyykkö 2009: V 134 pm."""
    assert float(value("measured ionization energy", "V")) == pytest.approx(6.746, abs=5e-4)
    assert value("measured ionic radius", "Na+") == 102
    assert value("measured ionic radius", "Fe2+", spin="HS") == 78
    assert value("measured atomic radius", "V") == 134


def test_constants_against_scipy() -> None:
    """Rydberg energy and Bohr radius against scipy's CODATA to nine figures (2018 and 2022 differ beyond)."""
    rydberg = scipy.constants.physical_constants["Rydberg constant times hc in eV"][0]
    bohr = scipy.constants.physical_constants["Bohr radius"][0] * 1e12
    mole = scipy.constants.e * scipy.constants.N_A / 1000
    assert float(published().rydberg) == pytest.approx(rydberg, rel=1e-9)
    assert float(constant("bohr_radius").value) == pytest.approx(bohr, rel=1e-9)
    assert float(value("orbital energy", "K 4s", unit="kJ/mol") / value("orbital energy", "K 4s")) == pytest.approx(
        mole
    )


def test_the_radius_with_n_for_n_star() -> None:
    """K 4s: 329 pm with n* = 3.7, 385 pm with n = 4 (separate program)."""
    assert float(value("radius", "K 4s")) == pytest.approx(329, abs=0.5)
    assert float(value("radius", "K 4s", practice(quantum_number="n"))) == pytest.approx(385, abs=0.5)
