"""Species: reading, ground configurations of ions against NIST, and the taught rule."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from authoring.atoms.ionizing import add_electrons, remove_electrons
from authoring.atoms.reference import elements
from authoring.atoms.species import Species, parse_range
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.working.nodes import Formula

DATA = Path(__file__).with_name("data")


def off_the_rule() -> list[dict[str, str]]:
    lines = (DATA / "ions_off_the_rule.csv").read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


@pytest.mark.parametrize(
    ("text", "z", "charge", "mass", "label", "printed"),
    [
        ("V", 23, 0, None, "V", "V"),
        ("V2+", 23, 2, None, "V2+", "V²⁺"),
        ("Fe 3+", 26, 3, None, "Fe3+", "Fe³⁺"),
        ("Fe³⁺", 26, 3, None, "Fe3+", "Fe³⁺"),
        ("O2-", 8, -2, None, "O2-", "O²⁻"),
        ("O2−", 8, -2, None, "O2-", "O²⁻"),
        ("Na+", 11, 1, None, "Na+", "Na⁺"),
        ("35Cl", 17, 0, 35, "35Cl", "³⁵Cl"),
        ("³⁵Cl⁻", 17, -1, 35, "35Cl-", "³⁵Cl⁻"),
        ("vanadium", 23, 0, None, "V", "V"),
        ("Vanadium 2+", 23, 2, None, "V2+", "V²⁺"),
        ("sulphur", 16, 0, None, "S", "S"),
        ("aluminium", 13, 0, None, "Al", "Al"),
        ("caesium", 55, 0, None, "Cs", "Cs"),
        ("H+", 1, 1, None, "H+", "H⁺"),
    ],
)
def test_reading_species(text: str, z: int, charge: int, mass: int | None, label: str, printed: str) -> None:
    species = Species.parse(text)
    assert (species.z, species.charge, species.mass) == (z, charge, mass)
    assert (species.label, species.printed) == (label, printed)
    assert species.electrons == z - charge and species.protons == z
    assert Species.parse(printed) == species


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "missing"),
        ("fe", "did you mean 'Fe'?"),
        ("vanadum", "did you mean 'vanadium'?"),
        ("Fe3", "needs its sign (like `Fe3+`)"),
        ("Fe+3", "sign last"),
        ("Cl-35", "mass number stands in front"),
        ("Fe27+", "Fe has only 26"),
        ("O9-", "no further"),
        ("Fe0+", "without a charge"),
        ("99Cl", "no isotope 99Cl"),
        ("3Fe", "smaller than the 26 protons"),
        ("Cr: [Ar] 3d4", "has 22 electrons; Cr has 24"),
        ("Cr:", "configuration is missing"),
        ("Cr: [Ar] 3d14", "3d holds 1 to 10"),
        ("V2+ V3+", "is not a species"),
        ("V" * 500, "at most 400"),
    ],
)
def test_faulty_species_say_what_is_wrong(text: str, words: str) -> None:
    with pytest.raises(ContentError) as caught:
        Species.parse(text)
    assert words in caught.value.full_message


def test_species_out_of_range() -> None:
    for z, charge in ((0, 0), (119, 0), (1, 2), (8, -6)):
        with pytest.raises(ContentError):
            Species(z, charge)


def test_stated_configuration() -> None:
    stated = Species.parse("Cr: [Ar] 3d4 4s2")
    assert stated.origin == "stated" and not stated.differs
    assert stated.measured.short() == "[Ar] 3d4 4s2"
    assert stated.by_rule.short() == "[Ar] 3d5 4s1"
    assert stated != Species.parse("Cr") and len({stated, Species.parse("Cr: 1s2 2s2 2p6 3s2 3p6 4s2 3d4")}) == 1


def test_no_electrons_is_said_only_when_they_are_needed() -> None:
    proton = Species.parse("H+")
    assert proton.electrons == 0
    for kind in ("measured", "rule", "madelung", "filling"):
        with pytest.raises(ContentError, match="no electrons"):
            proton.configuration(kind)  # type: ignore[arg-type]


def test_element_properties_and_node() -> None:
    iron = Species.parse("56Fe2+")
    assert (iron.symbol, iron.name, iron.period, iron.group, iron.block) == ("Fe", "iron", 4, 8, "d")
    assert iron.node() == Formula("Fe", "2+", "56")
    assert Species.parse("O2-").node() == Formula("O", "2−")
    # Relative atomic mass 35.45 rounds to 35, 63.546 to 64 (IUPAC standard atomic weights).
    assert [Species.parse(word).mass_number for word in ("Cl", "Cu", "37Cl")] == [35, 64, 37]


@pytest.mark.parametrize("row", off_the_rule(), ids=lambda row: row["ion"])
def test_ions_off_the_rule(row: dict[str, str]) -> None:
    # NIST Atomic Spectra Database, ground states.
    ion = Species.parse(row["ion"])
    assert ion.origin == "measured" and ion.differs
    assert ion.measured.short() == row["measured"]
    assert ion.by_rule.short() == row["rule"]


def test_every_other_first_and_second_ion_follows_the_rule() -> None:
    # NIST Atomic Spectra Database, ground states, Z 1-103.
    found = {
        Species(z, charge).label
        for z in range(1, 104)
        for charge in (1, 2)
        if charge < z and Species(z, charge).differs
    }
    assert found == {row["ion"] for row in off_the_rule()}
    assert all(Species(z, charge).origin == "measured" for z in range(3, 104) for charge in (1, 2))


def test_dipositive_ions_of_the_first_row_are_3d() -> None:
    # NIST Atomic Spectra Database: all 3d M2+ are 3d^n.
    for z in range(21, 31):
        assert Species(z, 2).measured.beyond_core().full() == f"3d{z - 20}"


@pytest.mark.parametrize("z", range(58, 72))
def test_tripositive_lanthanides_are_4f(z: int) -> None:
    # NIST Atomic Spectra Database: Ce3+ 4f1 … Lu3+ 4f14; the 5p6 of the core stays.
    ion = Species(z, 3)
    assert ion.by_rule.short() == f"[Xe] 4f{z - 57}"
    assert ion.measured == ion.by_rule


def test_tripositive_actinides() -> None:
    # NIST Atomic Spectra Database: Th3+ is 5f1 (the rule says 6d1); from Pa on the rule holds.
    assert Species.parse("Th3+").measured.short() == "[Rn] 5f1"
    assert Species.parse("Th3+").by_rule.short() == "[Rn] 6d1"
    for z in range(91, 104):
        assert Species(z, 3).measured.short() == Species(z, 3).by_rule.short() == f"[Rn] 5f{z - 89}"


@pytest.mark.parametrize(
    ("text", "short"),
    [
        ("Mg3+", "[He] 2s2 2p5"),
        ("Al4+", "[He] 2s2 2p5"),
        ("Sn2+", "[Kr] 4d10 5s2"),
        ("Sn4+", "[Kr] 4d10"),
        ("Tl+", "[Xe] 4f14 5d10 6s2"),
        ("Rb2+", "[Ar] 3d10 4s2 4p5"),
        ("C4+", "1s2"),
    ],
)
def test_the_rule_opens_the_core_last(text: str, short: str) -> None:
    # The rule as taught, and NIST Atomic Spectra Database for the same ions.
    assert Species.parse(text).by_rule.short() == short
    assert Species.parse(text).measured.short() == short


@pytest.mark.parametrize(
    ("text", "short"), [("H-", "1s2"), ("O2-", "[He] 2s2 2p6"), ("I-", "[Kr] 4d10 5s2 5p6"), ("Cu-", "[Ar] 3d10 4s2")]
)
def test_anions_by_rule(text: str, short: str) -> None:
    # Common practice, no source.
    ion = Species.parse(text)
    assert ion.origin == "rule" and not ion.differs
    assert ion.measured.short() == short


def test_kinds_of_configuration() -> None:
    vanadium = Species.parse("V2+")
    assert vanadium.configuration("madelung").short() == "[Ar] 3d3"
    assert vanadium.configuration("filling").short() == "[Ar] 3d1 4s2"
    chromium = Species.parse("Cr")
    assert chromium.configuration("madelung").short() == "[Ar] 3d4 4s2"
    assert chromium.configuration().short() == "[Ar] 3d5 4s1"
    with pytest.raises(ContentError):
        chromium.configuration("guessed")  # type: ignore[arg-type]


def test_ranges() -> None:
    assert [one.z for one in parse_range("H-Kr")] == list(range(1, 37))
    assert len(parse_range("1-118")) == 118
    assert [one.label for one in parse_range("Sc-V, Na,Al3+ ,26")] == ["Sc", "Ti", "V", "Na", "Al3+", "Fe"]
    for text in ("", "Kr-H", "Na,,Mg", "0-3", "118-119", "Na-18", "H-Qq", "9999"):
        with pytest.raises(ContentError):
            parse_range(text)


def test_all_measured_configurations_hold_the_right_number_of_electrons() -> None:
    for z in range(1, 119):
        for charge in range(-2, z):
            assert Species(z, charge).measured.electrons == z - charge


@given(st.integers(1, 118), st.data())
def test_rule_takes_and_gives_the_right_number(z: int, data: st.DataObject) -> None:
    neutral = elements().by_z[z].configuration
    count = data.draw(st.integers(0, z))
    left = remove_electrons(neutral, count)
    assert left.electrons == z - count
    assert all(left.count(sub) <= neutral.count(sub) for sub in neutral.occupied)
    assert add_electrons(neutral, 2).electrons == z + 2
    with pytest.raises(ContentError):
        remove_electrons(neutral, z + 1)


@given(st.integers(1, 118), st.integers(-5, 118))
def test_labels_read_back(z: int, charge: int) -> None:
    if charge <= z:
        species = Species(z, charge)
        assert Species.parse(species.label) == Species.parse(species.printed) == species


@given(st.text(max_size=40) | st.text("FeClVO0123+-−²³⁺: [Ar]sd,", max_size=20))
def test_random_text_raises_nothing_but_content_errors(text: str) -> None:
    for reader in (Species.parse, parse_range):
        try:
            reader(text)
        except ContentError as error:
            assert error.full_message.isprintable()


def test_outermost_electron_of_vanadium_is_4s() -> None:
    assert Species.parse("V").measured.outermost == Subshell(4, 0)
    assert Species.parse("V2+").measured.outermost == Subshell(3, 2)
