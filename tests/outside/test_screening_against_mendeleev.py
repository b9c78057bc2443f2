"""Every occupied subshell of every atom against mendeleev's own Slater screening."""

from __future__ import annotations

from decimal import Decimal

import pytest
from mendeleev.econf import ElectronicConfiguration
from shielding_help import practice, rows

from authoring.atoms.reference import elements
from authoring.atoms.species import Species
from authoring.shielding.practice import Practice, published
from authoring.shielding.quantity import Target
from authoring.shielding.solve import evaluate

DEPARTURES = rows("mendeleev_slater_departures")  # separate program; see tests/data/README.md


def _pairs(rules: Practice, itself: bool = False) -> dict[tuple[str, str], tuple[Decimal, Decimal]]:
    """By element and subshell: our S and mendeleev's."""
    found = {}
    for element in elements().by_z.values():
        theirs = ElectronicConfiguration(element.configuration_text)
        for electron in element.configuration.occupied:
            ours = evaluate(Target("screening constant", Species(element.z), electron), rules)
            other = theirs.slater_screening(electron.n, electron.letter, alle=itself)
            found[element.symbol, electron.label] = (ours, Decimal(repr(round(other, 6))))
    return found


def test_all_subshells_agree_but_the_89_where_f_counts_for_d() -> None:
    """mendeleev counts nf electrons for an nd one, against Slater's groups; nothing else differs in 1,381 subshells."""
    pairs = _pairs(published())
    assert len(pairs) == 1381
    differing = {key: both for key, both in pairs.items() if both[0] != both[1]}
    expected = {
        (row["symbol"], row["subshell"]): (Decimal(row["S_slater"]), Decimal(row["S_mendeleev"])) for row in DEPARTURES
    }
    assert len(expected) == 89
    assert differing == expected


def test_with_f_inside_d_all_subshells_agree() -> None:
    """The habit that mendeleev has is one field of a practice."""
    assert all(ours == theirs for ours, theirs in _pairs(practice(f_inside_d=True)).values())


@pytest.mark.parametrize("symbol", ["C", "Fe", "Br", "Sn"])
def test_the_electron_itself_counted(symbol: str) -> None:
    """mendeleev's `alle=True` is the charge of Allred and Rochow."""
    pairs = _pairs(practice(self_counted=True), itself=True)
    own = {key: both for key, both in pairs.items() if key[0] == symbol}
    assert own and all(ours == theirs for ours, theirs in own.values())
