"""Every quantity's two faces agree: what it computes, what its line states, and what a reader reckons from it."""

from __future__ import annotations

from decimal import ROUND_DOWN, Decimal, localcontext

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shielding_help import last_line, printed, reckonings, target

from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.shielding.practice import N_STAR, published, with_conventions
from authoring.shielding.quantity import Target, quantities, quantity
from authoring.shielding.solve import check_details, evaluate, work
from authoring.working.latex import to_latex
from authoring.working.mathml import to_mathml
from authoring.working.numbers import shown

EXAMPLES: dict[str, tuple[str, dict[str, str]]] = {
    "configuration": ("V", {}),
    "groups": ("V", {}),
    "tally": ("V 4s", {}),
    "screening constant": ("V 4s", {}),
    "effective nuclear charge": ("V 4s", {}),
    "orbital energy": ("V 4s", {}),
    "first electron lost": ("V", {}),
    "total energy": ("V", {}),
    "ionization energy": ("V", {}),
    "radius of maximum density": ("V 4s", {}),
    "Allred-Rochow electronegativity": ("V", {}),
    "unpaired electrons": ("V", {}),
    "spin-only magnetic moment": ("V", {}),
    "Moseley Kα energy": ("V", {}),
    "atomic number from Kα": ("V", {"energy": "4952.2"}),
    "valence-count charge": ("V", {}),
    "SCF charge": ("V 4s", {}),
    "ionic radius by screening split": ("Na+", {"partner": "F-", "distance": "231"}),
    "measured ionization energy": ("V", {}),
    "measured ionic radius": ("Na+", {}),
    "measured atomic radius": ("V", {}),
    "percentage difference": ("V 4s", {"of": "effective nuclear charge", "from_": "SCF charge"}),
}


def test_every_quantity_has_an_example_here() -> None:
    """A quantity that is added is checked by this file too."""
    assert set(EXAMPLES) == set(quantities())


@pytest.mark.parametrize("name", list(EXAMPLES))
def test_the_line_states_the_value(name: str) -> None:
    """`value` and `line` agree, and the line's arithmetic leads to what it prints."""
    words, details = EXAMPLES[name]
    wanted = target(name, words, **details)
    check_details(wanted)
    line = work(wanted, published())[-1].line
    assert line.quantity == name
    assert line.value == evaluate(wanted, published())
    assert to_latex(line.chain) and to_mathml(line.chain)
    if isinstance(line.value, Decimal):
        assert line.shown == shown(quantity(name).rounding.apply(line.value))
        assert line.shown in printed(name, words, **details)
        # Members carry the final rounding, or constants with 5 or 6 figures and one electron's energy with 4 places.
        rounded = abs(float(line.shown.replace("−", "-")) - float(line.value))
        slack = 0.5 if name == "atomic number from Kα" else 0.006 + rounded
        assert reckonings(line.chain)
        for number in reckonings(line.chain):
            assert number == pytest.approx(float(line.value), rel=5e-4, abs=slack), (name, line.chain)


@pytest.mark.parametrize("name", list(EXAMPLES))
def test_every_quantity_is_documented(name: str) -> None:
    """Source, wording, points and a sentence: what the guide and the key print."""
    what = quantity(name)
    assert what.source and what.ask and what.says and what.points
    assert len({rule.weight for rule in what.points}) == len(what.points)
    assert set(what.required) <= set(what.details)
    assert {key for key, _ in what.defaults} <= set(what.details)
    assert ("unit" in what.details) == bool(what.units)
    for alias in what.aliases:
        assert quantity(alias) is what


def test_names_and_aliases_are_unique() -> None:
    """No word means two quantities."""
    words = [word.lower() for what in quantities().values() for word in (what.name, *what.aliases)]
    assert len(words) == len(set(words))


@pytest.mark.parametrize("name", ["orbital energy", "total energy", "ionization energy", "measured IE", "Kα energy"])
def test_an_energy_in_another_unit_is_refused(name: str) -> None:
    """Electronvolts are never printed under another unit's name."""
    with pytest.raises(ContentError, match="not 'J'"):
        evaluate(target(name, "V", unit="J"), published())


def test_energies_per_mole() -> None:
    """1 eV per particle is 96.485 kJ/mol (SI 2019): C 11.463 eV is 1106.0 kJ/mol."""
    text = printed("ionization energy", "C", unit="kJ/mol")
    assert text.endswith("= 11.463 eV = 1105.99 kJ/mol")


WIDE = with_conventions(published(), {"n* for 7": "4.3"})
CHAIN = (
    "tally",
    "screening constant",
    "effective nuclear charge",
    "orbital energy",
    "radius of maximum density",
    "total energy",
    "ionization energy",
    "unpaired electrons",
    "spin-only magnetic moment",
    "valence-count charge",
)


@given(
    st.integers(1, 118),
    st.integers(0, 3),
    st.sampled_from(CHAIN),
    st.sampled_from(["published", "0.35", "n", "shell", "ions"]),
    st.data(),
)
@settings(max_examples=250, deadline=None)
def test_value_and_line_agree_everywhere(z: int, charge: int, name: str, rules: str, data: st.DataObject) -> None:
    """For every species and several practices the last line states the evaluated value, and its arithmetic holds."""
    changes = {
        "published": {},
        "0.35": {"same_group_1s": "0.35", "rydberg": "13.6"},
        "n": {"quantum_number": "n"},
        "shell": {"core": "noble gas", "self_counted": True},
        "ions": {"ion": "taught rule", "ionised": "measured"},
    }[rules]
    species = Species(z, min(charge, z - 1))
    electron = data.draw(st.sampled_from(species.measured.occupied)) if quantity(name).takes else None
    wanted = Target(name, species, electron)
    practice = WIDE.changed(changes)
    line = work(wanted, practice)[-1].line
    assert line.value == evaluate(wanted, practice)
    if isinstance(line.value, Decimal):
        # A total of 118 electrons is a sum of terms rounded at the fourth place.
        for number in reckonings(line.chain):
            assert number == pytest.approx(float(line.value), rel=5e-4, abs=0.02)


def test_known_values_are_used_as_they_stand() -> None:
    """A candidate's own S leads to Z_eff without being worked again."""
    charge = target("Z_eff", "V 4s")
    steps = work(charge, published(), {charge.to("screening constant"): Decimal("16.35")})
    assert [step.line.value for step in steps] == [Decimal("6.65")]


def test_v_4s_in_full() -> None:
    """The whole working of one charge, as it is printed."""
    lines = [step.line for step in work(target("Z_eff", "V 4s"), published())]
    assert [line.quantity for line in lines] == [
        "configuration",
        "groups",
        *CHAIN[:3],
    ]
    assert printed("S", "V 4s") == "S = 1 × 0.35 + 11 × 0.85 + 10 × 1.00 = 0.35 + 9.35 + 10.00 = 19.70"
    assert printed("Z_eff", "V 4s") == "Z_eff = Z − S = 23 − 19.70 = 3.30"


def test_a_total_shows_one_term_for_each_group() -> None:
    """Number of electrons times energy, group by group, then the sum."""
    assert printed("total energy", "C").endswith("= 2 × (−442.0490 eV) + 4 × (−35.9275 eV) = −1027.808 eV")


def test_an_ionization_energy_works_both_species() -> None:
    """The others' charges change: 2s2p of C+ feel another charge, and both totals are worked."""
    lines = [step.line for step in work(target("ionization energy", "C"), published())]
    charges = {line.about: line.shown for line in lines if line.quantity == "effective nuclear charge"}
    assert charges == {"C 1s": "5.70", "C 2p": "3.25", "C+ 1s": "5.70", "C+ 2p": "3.60"}
    assert printed("ionization energy", "C") == "I = E(C⁺) − E(C) = −1016.345 eV − (−1027.808 eV) = 11.46 eV"


def test_a_course_s_short_rydberg_is_printed_as_it_is() -> None:
    """13.6 is not lengthened to 13.6000; K 4s becomes −4.808 eV (computed)."""
    rules = with_conventions(published(), {"Rydberg energy": "13.6"})
    assert printed("orbital energy", "K 4s", rules) == "E = −R (Z_eff/n*)² = −13.6 eV × (2.20/3.7)² = −4.808 eV"


@pytest.mark.parametrize(
    ("name", "words", "details", "why"),
    [
        ("orbital energy", "Fr 7s", {}, "n = 7"),
        ("total energy", "Fr", {}, "n = 7"),
        ("ionization energy", "Li", {"stage": "4"}, "stages 1 to 3"),
        ("ionization energy", "Li", {"stage": "0"}, "stages 1 to 3"),
        ("ionization energy", "Li", {"stage": "²"}, "stages 1 to 3"),
        ("electronegativity", "H", {}, "2.20 does not follow"),
        ("electronegativity", "Xe", {}, "none is kept"),
        ("electronegativity", "Na+", {}, "belongs to an atom"),
        ("electronegativity", "C", {"radius": "0"}, "positive"),
        ("Kα energy", "Be", {}, "no 2p electron"),
        ("atomic number from Kα", "Rh", {"energy": "20216"}, "Z = 46"),
        ("atomic number from Kα", "Cu", {"energy": "much"}, "not a number"),
        ("SCF charge", "Fe2+", {}, "ground-state atoms only"),
        ("SCF charge", "Fr", {}, "ends at Z = 86"),
        ("SCF charge", "C 3d", {}, "no 3d value"),
        ("univalent radius", "Na+", {"partner": "Cl-", "distance": "281"}, "same number"),
        ("univalent radius", "Mg2+", {"partner": "O2-", "distance": "210"}, "singly charged"),
        ("univalent radius", "Na+", {"partner": "F-"}, "needs 'distance'"),
        ("univalent radius", "Na+", {"partner": "F-", "distance": "231", "screening": "9.5"}, "no charge to split"),
        ("measured ionic radius", "Fe2+", {}, "spin"),
        ("measured ionic radius", "C-", {}, "tabulated: none"),
        ("measured ionization energy", "F-", {}, "no ionization energy"),
        ("measured atomic radius", "Na+", {}, "no covalent radius"),
        ("percentage difference", "V", {"of": "radius", "from_": "Z_eff"}, "different units"),
        ("percentage difference", "V", {"of": "S", "from_": "S"}, "with itself"),
        ("percentage difference", "V", {"of": "groups", "from_": "S"}, "not a number"),
        ("percentage difference", "V", {"of": "S"}, "needs 'from'"),
    ],
)
def test_what_has_no_value_is_refused_with_a_reason(name: str, words: str, details: dict[str, str], why: str) -> None:
    """A mistake in what is asked is a content error that says why."""
    with pytest.raises(ContentError, match=why):
        evaluate(target(name, words, **details), published())


def test_an_electron_that_the_nucleus_does_not_hold_has_no_energy_or_radius() -> None:
    """Where every other electron cancels one proton, an anion's outer electron feels nothing."""
    rules = published().changed(dict.fromkeys(("same_group", "one_in", "one_in_beside_d", "one_in_d", "deeper"), "1"))
    for name in ("orbital energy", "radius"):
        with pytest.raises(ContentError, match="not held"):
            evaluate(target(name, "F-"), rules)


def test_details_are_checked() -> None:
    """Unknown and missing details are named."""
    with pytest.raises(ContentError, match="takes no 'colour'"):
        check_details(target("S", "V 4s", colour="blue"))
    with pytest.raises(ContentError, match="needs 'energy'"):
        check_details(target("atomic number from Kα", "V"))


def test_notes_stand_on_the_line() -> None:
    """What speaks against a value, and the source of a measured one, reach the key."""
    assert "secondary copy" in last_line("SCF charge", "Au 6s").note
    assert "configuration" in last_line("SCF charge", "Nb 5s").note
    assert not last_line("SCF charge", "Fe 4s").note
    assert "NIST" in last_line("measured ionization energy", "V").note
    assert "differ between tables" in last_line("atomic number from Kα", "S", energy="2307.2").note


def test_values_do_not_hang_on_the_thread_s_decimal_context() -> None:
    """A caller's precision changes no value of any quantity."""

    def all_values() -> list[object]:
        return [evaluate(target(name, words, **details), published()) for name, (words, details) in EXAMPLES.items()]

    usual = all_values()
    with localcontext(prec=9, rounding=ROUND_DOWN):
        assert all_values() == usual


def test_the_published_practice_is_the_default() -> None:
    """n* of Slater 1930 for n = 1 to 6."""
    assert tuple(str(each) for each in published().n_star) == N_STAR
