"""Reference data against mendeleev's own reader, and constants against scipy's."""

from __future__ import annotations

import importlib.util
import sqlite3
import subprocess
import sys
import warnings
from decimal import Decimal
from importlib.machinery import ModuleSpec
from pathlib import Path

import pytest

from authoring.atoms import reference
from authoring.atoms.configuration import Configuration
from authoring.atoms.constants import constant, constants
from authoring.faults import ContentError, OutsideError


@pytest.fixture(scope="module")
def tables():  # type: ignore[no-untyped-def]
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        from mendeleev.fetch import fetch_table

        names = ("elements", "ionizationenergies", "screeningconstants", "ionicradii", "isotopes")
        return {name: fetch_table(name) for name in names}


def test_elements_equal_mendeleevs_own_table(tables) -> None:  # type: ignore[no-untyped-def]
    frame = tables["elements"]
    assert len(frame) == len(reference.elements().by_z) == 118
    for row in frame.to_dict("records"):
        one = reference.elements().by_z[row["atomic_number"]]
        assert reference.elements().by_symbol[row["symbol"]] is one
        # IUPAC Red Book 2005, table I, has aluminium and caesium.
        name = {"Aluminum": "Aluminium", "Cesium": "Caesium"}.get(row["name"], row["name"])
        assert (one.name, one.period, one.block) == (name, row["period"], row["block"])
        assert one.group == (None if row["group_id"] != row["group_id"] else row["group_id"])
        assert float(one.weight) == row["atomic_weight"]
        assert one.configuration == Configuration.parse(row["electronic_configuration"])
        assert one.configuration.electrons == one.z
        assert float(one.covalent_radius or 0) == pytest.approx(row["covalent_radius_pyykko"], rel=1e-12)


def test_ionization_energies_equal_mendeleevs_own_table(tables) -> None:  # type: ignore[no-untyped-def]
    rows = tables["ionizationenergies"].to_dict("records")
    assert len(rows) > 5000
    for row in rows:
        found = reference.ionization_energy(row["atomic_number"], row["ion_charge"])
        assert found is not None and float(found.value) == row["ionization_energy"]
        expected = "calculated" if row["is_theoretical"] else "interpolated" if row["is_semi_empirical"] else "measured"
        assert found.certainty == expected


def test_screening_constants_equal_mendeleevs_own_table(tables) -> None:  # type: ignore[no-untyped-def]
    rows = tables["screeningconstants"].to_dict("records")
    assert len(rows) == len(reference.screening_constants()) == 811
    for row in rows:
        found = reference.screening_constants()[row["atomic_number"], row["n"], "spdf".index(row["s"])]
        assert abs(float(found) - row["screening"]) < 1e-9
        assert found == round(found, 4)


def test_ionic_radii_and_isotopes_equal_mendeleevs_own_table(tables) -> None:  # type: ignore[no-untyped-def]
    radii = tables["ionicradii"]
    assert len(radii) == len(reference.ionic_radii())
    expected = sorted(
        (row["atomic_number"], row["charge"], row["coordination"], row["spin"] or "", round(row["ionic_radius"], 6))
        for row in radii.astype({"spin": object}).where(radii.notna(), None).to_dict("records")
    )
    assert expected == sorted((r.z, r.charge, r.coordination, r.spin, float(r.ionic)) for r in reference.ionic_radii())
    isotopes = tables["isotopes"]
    assert sum(len(masses) for masses in reference.mass_numbers().values()) == len(
        isotopes[["atomic_number", "mass_number"]].drop_duplicates()
    )


def test_spot_values() -> None:
    # NIST ASD: first ionization energy of hydrogen 13.598434599702 eV (calculated).
    hydrogen = reference.ionization_energy(1, 0)
    assert hydrogen is not None and hydrogen.value == Decimal("13.598434599702")
    assert hydrogen.certainty == "calculated"
    # Clementi & Raimondi 1963: C 1s/2s/2p 5.6727/3.2166/3.1358; Fe 3d/4s 11.1798/5.4340 (as Z_eff).
    sigma = reference.screening_constants()
    assert [6 - sigma[key] for key in ((6, 1, 0), (6, 2, 0), (6, 2, 1))] == [
        Decimal("5.6727"),
        Decimal("3.2166"),
        Decimal("3.1358"),
    ]
    assert 26 - sigma[26, 3, 2] == Decimal("11.1798") and 26 - sigma[26, 4, 0] == Decimal("5.4340")
    # Shannon 1976: Na+ in sixfold coordination 102 pm; Fe2+ 61 pm low spin, 78 pm high spin.
    found = {(r.z, r.charge, r.coordination, r.spin): r.ionic for r in reference.ionic_radii()}
    assert found[11, 1, "VI", ""] == 102
    assert found[26, 2, "VI", "LS"] == 61 and found[26, 2, "VI", "HS"] == 78
    assert {35, 37} <= reference.mass_numbers()[17]
    assert reference.ionization_energy(8, -1) is None and reference.measured_ion(8, -1) is None


def test_neutral_atoms_equal_nist_where_it_has_them() -> None:
    # NIST Atomic Spectra Database has ground states of neutral atoms up to Hs (Z 108).
    known = [z for z in range(1, 119) if reference.measured_ion(z, 0) is not None]
    assert known == list(range(1, 109))
    assert all(reference.measured_ion(z, 0) == reference.elements().by_z[z].configuration for z in known)


def test_every_table_names_its_source() -> None:
    assert all(len(text) > 20 for text in reference.SOURCES.values())
    assert len(reference.SOURCES) == 8


def test_nothing_heavy_is_imported() -> None:
    code = (
        "import sys\n"
        "from authoring.atoms.species import Species\n"
        "assert Species.parse('V2+').measured.short() == '[Ar] 3d3'\n"
        "print([m for m in ('mendeleev', 'pandas', 'sqlalchemy', 'numpy', 'yaml', 'jinja2') if m in sys.modules])\n"
    )
    root = Path(reference.__file__).parents[2]
    done = subprocess.run([sys.executable, "-c", code], cwd=root, capture_output=True, text=True, timeout=60)
    assert done.returncode == 0, done.stderr
    assert done.stdout.strip() == "[]"


@pytest.fixture
def forgotten():  # type: ignore[no-untyped-def]
    reference.data_file.cache_clear()
    yield
    reference.data_file.cache_clear()


def test_missing_package_or_file_is_an_outside_error(monkeypatch, tmp_path, forgotten) -> None:  # type: ignore[no-untyped-def]
    monkeypatch.setattr(importlib.util, "find_spec", lambda name: None)
    with pytest.raises(OutsideError, match="not installed"):
        reference.data_file()
    spec = ModuleSpec("mendeleev", None, origin=str(tmp_path / "__init__.py"))
    monkeypatch.setattr(importlib.util, "find_spec", lambda name: spec)
    with pytest.raises(OutsideError, match=r"elements\.db"):
        reference.data_file()


def test_a_file_of_another_layout_is_an_outside_error(monkeypatch, tmp_path, forgotten) -> None:  # type: ignore[no-untyped-def]
    path = tmp_path / "elements.db"
    spec = ModuleSpec("mendeleev", None, origin=str(tmp_path / "__init__.py"))
    monkeypatch.setattr(importlib.util, "find_spec", lambda name: spec)
    connection = sqlite3.connect(path)
    connection.execute("CREATE TABLE isotopes (atomic_number INTEGER, nucleons INTEGER)")
    connection.commit()
    connection.close()
    read = reference.mass_numbers.__wrapped__
    with pytest.raises(OutsideError, match="has no mass_number"):
        read()
    assert OutsideError.exit_code == 3
    path.write_bytes(b"this is no database" * 100)
    with pytest.raises(OutsideError, match="cannot be read"):
        read()


def test_constants_agree_with_scipy() -> None:
    # scipy may carry CODATA 2022, which moves Ry and a0 by parts in 1e10; hence 1e-8 and not exact.
    from scipy import constants as codata

    volts = codata.physical_constants["Rydberg constant times hc in eV"][0]
    assert float(constant("rydberg_energy").value) == pytest.approx(volts, rel=1e-8)
    radius = codata.physical_constants["Bohr radius"][0] * 1e12
    assert float(constant("bohr_radius").value) == pytest.approx(radius, rel=1e-8)
    molar = codata.e * codata.N_A / 1000
    assert float(constant("kilojoules_per_mole_of_electronvolts").value) == pytest.approx(molar, rel=1e-12)


def test_constants_are_complete() -> None:
    for name, one in constants().items():
        assert one.name == name and one.unit and one.year == 2018 and one.source
        assert one.value.is_finite() and one.value > 0
    with pytest.raises(ContentError) as caught:
        constant("bohr_radios")
    assert "did you mean 'bohr_radius'?" in caught.value.full_message
