"""The pool of every kind of draw, and the words that cannot be used in one."""

from __future__ import annotations

import pytest
from papers_help import drawn

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError

V = Species.parse("V")


@pytest.mark.parametrize(
    ("spec", "expected"),
    [
        (["Na-Ar"], "Na Mg Al Si P S Cl Ar"),
        (["V", "Fe", "V"], "V Fe"),
        ({"block": "d", "period": "4", "except": ["Zn"]}, "Sc Ti V Cr Mn Fe Co Ni Cu"),
        ({"group": ["17"]}, "F Cl Br I At Ts"),
        ({"among": ["Li-Ne"], "block": ["s"]}, "Li Be"),
        ({"among": ["Na", "Mg"], "charge": ["1+", "2+"]}, "Na+ Na2+ Mg+ Mg2+"),
        ({"among": ["Na", "Mg"], "charge": ["+1", "+2"], "except": ["Na2+"]}, "Na+ Mg+ Mg2+"),
        ({"among": ["H", "He"], "charge": ["1+"]}, "He+"),
        ({"among": ["O", "S"], "charge": "2-"}, "O2- S2-"),
        ({"from": "1", "to": "2", "step": "0.25"}, "1.00 1.25 1.50 1.75 2.00"),
        ({"from": "5", "to": "5"}, "5"),
        ({"from": "5", "to": "4"}, ""),
        ({"numbers": ["3.250", "3.25", "7"]}, "3.250 7"),
        ({"words": ["red", "green", "red"]}, "red green"),
    ],
)
def test_draws_that_rest_on_nothing(spec, expected):
    assert " ".join(drawn(spec)) == expected


@pytest.mark.parametrize(
    ("spec", "bound", "expected"),
    [
        ({"ion of": "metal", "charge": ["2+", "3+"]}, V, "V2+ V3+"),
        ({"ion of": "metal", "charge": "2+"}, Species.parse("H"), ""),
        ({"near": "metal"}, V, "Cr"),
        ({"near": "metal", "steps": ["-1", "2"]}, V, "Ti Mn"),
        ({"near": "metal", "steps": "1", "along": "group"}, V, "Nb"),
        ({"near": "metal", "steps": "-1", "along": "group"}, V, ""),
        ({"near": "metal"}, Species.parse("Og"), ""),
        ({"isoelectronic with": "metal", "among": ["F-", "Ne", "Mg2+", "Na"]}, Species.parse("Na+"), "F- Ne Mg2+"),
        ({"electron of": "metal"}, V, "4s"),
        ({"electron of": "metal", "shell": "inner d"}, V, "3d"),
        ({"electron of": "metal", "shell": "inner d"}, Species.parse("Ca"), ""),
        ({"electron of": "metal", "shell": "inner f"}, Species.parse("Gd"), "4f"),
        ({"electron of": "metal", "shell": "next in"}, V, "3s 3p"),
        ({"electron of": "metal", "shell": "any"}, Species.parse("C"), "1s 2s 2p"),
        ({"electron of": "metal", "among": ["3d", "4f"]}, V, "3d"),
        ({"electron of": "metal", "shell": "any", "among": ["1s", "4p"]}, V, "1s"),
        ({"for": "metal", "say": {"V": "blue", "Cr": "green"}}, V, "blue"),
        ({"for": "metal", "say": {"4s": "outer"}}, Subshell.parse("4s"), "outer"),
    ],
)
def test_draws_that_rest_on_another(spec, bound, expected):
    assert " ".join(drawn(spec, metal=bound)) == expected


@pytest.mark.parametrize(
    ("spec", "words"),
    [
        (["Vx"], "Vx"),
        (["Ar-Na"], "Ar"),
        ({"block": "x"}, "'x' is not a block"),
        ({"period": "four"}, "period: 'four' is not a whole number"),
        ({"group": ["17", "1_7"]}, "group: '1_7' is not a whole number"),
        ({"among": ["Na"], "charge": "2"}, "'2' is not a charge"),
        ({"among": ["Na"], "charge": "9999+"}, "is not a charge"),
        ({"among": ["Na"], "charge": "٢+"}, "is not a charge"),
        ({"from": "1"}, "`from` and `to`"),
        ({"from": "1", "to": "2", "step": "0"}, "`step` is greater than 0"),
        ({"from": "0", "to": "999999999", "step": "0.001"}, "over 100,000 numbers"),
        ({"near": "metal", "steps": "one"}, "steps: 'one' is not a whole number"),
        ({"electron of": "metal", "among": ["4x"]}, "4x"),
        ({"for": "metal", "say": {"Cr": "green"}}, "`say` has no word for metal = V"),
    ],
)
def test_words_that_cannot_be_drawn_by(spec, words):
    with pytest.raises(ContentError) as caught:
        drawn(spec, metal=V)
    assert words in caught.value.full_message


def test_an_electron_of_a_word_is_refused():
    with pytest.raises(ContentError, match="'metal' is not a species"):
        drawn({"electron of": "metal"}, metal="red")
