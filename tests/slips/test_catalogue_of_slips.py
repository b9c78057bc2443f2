"""The catalogue: every slip gives the wrong value it is known by, touches what it should, and reads a course's own.

`data/slips.csv`: right and wrong values computed by an independent program from Slater's rules (Phys. Rev. 36, 57,
1930), with Ry and a0 from CODATA 2018; who reports each slip stands in the catalogue.
"""

from __future__ import annotations

import ast
import csv
import dataclasses
import sys
from decimal import Decimal
from itertools import combinations
from pathlib import Path

import pytest

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice, published
from authoring.shielding.quantity import Target, quantities, quantity
from authoring.shielding.solve import evaluate
from authoring.slips.catalogue import (
    Slip,
    Slips,
    applied,
    catalogue,
    compatible,
    first_altered,
    make_slip,
    shipped,
    touching,
)
from authoring.working.numbers import to_places

HERE = Path(__file__).parent
ROOM = HERE.parents[1] / "authoring" / "slips"
ROWS = list(csv.DictReader((HERE / "data" / "slips.csv").read_text(encoding="utf-8").splitlines()))
Z_EFF = "effective nuclear charge"
# Details that some quantities must have; others ignore them.
DETAILS = {
    "ionic radius by screening split": (("distance", "231"), ("partner", "Na+")),
    "atomic number from Kα": (("energy", "8000"),),
    "percentage difference": (("from", "measured ionization energy"), ("of", "ionization energy")),
}
OWN = {"did": "Counted twice.", "tell": "Count once.", "changes": {"one shell in": "0.75"}}


def target_of(row: dict[str, str]) -> Target:
    electron = Subshell.parse(row["electron"]) if row["electron"] else None
    return Target(row["quantity"], Species.parse(row["species"]), electron)


def agrees(value: Decimal, printed: str) -> bool:
    """Whether a value is the printed one to the places printed (a trailing zero may be missing there)."""
    return to_places(value, max(0, -int(Decimal(printed).as_tuple().exponent))) == Decimal(printed)


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["slip"])
def test_each_slip_gives_its_wrong_value_and_the_published_practice_the_right_one(row: dict[str, str]) -> None:
    target = target_of(row)
    right = evaluate(target, published())
    wrong = evaluate(target, applied([catalogue()[row["slip"]]], published()))
    assert agrees(right, row["right"])
    assert agrees(wrong, row["wrong"])
    if row["quantity"] == Z_EFF:
        assert (right, wrong) == (Decimal(row["right"]), Decimal(row["wrong"]))


def test_every_slip_has_an_effect_somewhere() -> None:
    assert {row["slip"] for row in ROWS} == set(catalogue())
    assert all(Decimal(row["right"]) != Decimal(row["wrong"]) for row in ROWS)


def test_s_and_p_split_gives_the_circulated_key_for_tellurium() -> None:
    # A circulated answer key counts Te 5s without 5p: S 43.65 where the rules give 45.05.
    target = Target("screening constant", Species.parse("Te"), Subshell.parse("5s"))
    assert evaluate(target, published()) == Decimal("45.05")
    assert evaluate(target, applied([catalogue()["s left out for p"]], published())) == Decimal("43.65")


def test_every_slip_is_worded_weighted_and_sourced() -> None:
    for slip in shipped():
        assert slip.did.endswith(".") and slip.tell.endswith("."), slip.name
        assert 1 <= slip.likelihood <= 10
        assert slip.source
        assert slip.first <= set(quantities()), slip.name
        assert slip.fields <= {item.name for item in dataclasses.fields(Practice)}


def every_change() -> list[Slip]:
    """One slip for each value that each practice field could take instead of the published one."""
    found = []
    for item in dataclasses.fields(Practice):
        default = getattr(published(), item.name)
        if "choices" in item.metadata:
            others: list[object] = [each for each in item.metadata["choices"] if each != default]
        elif isinstance(default, bool):
            others = [not default]
        else:
            others = [tuple(each + 1 for each in default) if isinstance(default, tuple) else default + 1]
        for at, value in enumerate(others):
            first = first_altered([item.name])
            found.append(Slip(f"{item.name} {at}", "", "", ((item.name, value),), first, 1, ""))
    return found


@pytest.mark.parametrize("name", quantities())
def test_nothing_changes_a_target_without_touching_it(name: str) -> None:
    several = Slips((*shipped(), *every_change()))
    electrons = (None, Subshell(3, 2), Subshell(2, 1)) if "electron" in quantity(name).takes else (None,)
    changed = 0
    for text in ("H", "C", "F-", "Na+", "V", "Fe2+", "Cu", "Ce", "Sn"):
        for electron in electrons:
            target = Target(name, Species.parse(text), electron, DETAILS.get(name, ()))
            touched = set(several.touching(target))
            for slip in several:
                if slip not in touched and _value(target, [slip]) != _value(target, []):
                    raise AssertionError(f"{slip.name} changes {name} of {target.about}")
                changed += slip in touched
    by_name = {slip.name for slip in several.touching(name)}
    assert changed or not by_name


def _value(target: Target, slips: list[Slip]) -> object:
    try:
        return evaluate(target, applied(slips, published()))
    except ContentError:
        return None


def test_touching_follows_the_needs() -> None:
    names = {each: {slip.name for slip in touching(each)} for each in quantities()}
    assert "filled by rote" in names["configuration"]
    assert "self counted" not in names["configuration"]
    assert "self counted" in names["tally"]
    assert names["tally"] < names[Z_EFF] < names["orbital energy"] < names["ionization energy"]
    assert "stopped at S" not in names["screening constant"]
    assert "Z for Z minus 1" not in names["orbital energy"]
    assert {"3/4 left out", "mass for protons"} <= names["Moseley Kα energy"]
    assert names["measured ionization energy"] == set()
    assert names["ionic radius by screening split"] == names[Z_EFF]


def test_slips_that_set_one_field_cannot_combine() -> None:
    slips = catalogue()
    assert not compatible(slips["own group ignored"], slips["core only"])
    assert not compatible(slips["charge ignored"], slips["d lost before s"])
    assert compatible(slips["self counted"], slips["charge added"])
    for one, other in combinations(shipped(), 2):
        together = {**dict(one.changes), **dict(other.changes)}
        assert compatible(one, other) == (len(together) == len(one.changes) + len(other.changes))


def test_a_course_adds_its_own_slip_without_changing_the_shipped_ones() -> None:
    own = make_slip("three quarters", OWN)
    assert dict(own.changes) == dict.fromkeys(("one_in", "one_in_beside_d", "one_in_d"), Decimal("0.75"))
    assert (own.likelihood, own.source) == (5, "the course's own")
    more = shipped().with_more([own])
    assert len(more) == len(shipped()) + 1
    assert more.named("three quarters") is own
    assert own in more.touching(Z_EFF)
    with pytest.raises(ContentError, match="no slip"):
        shipped().named("three quarters")
    with pytest.raises(ContentError, match="another name"):
        more.with_more([own])
    # 17 − (6 × 0.35 + 8 × 0.75 + 2): by hand.
    chlorine = Target(Z_EFF, Species.parse("Cl"), Subshell.parse("3p"))
    assert evaluate(chlorine, applied([own], published())) == Decimal("6.90")


@pytest.mark.parametrize(
    ("changed", "says"),
    [
        ({"did": None}, "`did` is missing"),
        ({"tell": "  "}, "needs words"),
        ({"tell": 3}, "needs words"),
        ({"did": "x" * 301}, "more than 300"),
        ({"did": "a\x07b"}, "cannot be printed"),
        ({"changes": None}, "at least one practice field"),
        ({"changes": {}}, "at least one practice field"),
        ({"changes": {"one shel in": "0.75"}}, "did you mean 'one shell in'"),
        ({"changes": {"one shell in": "much"}}, "not a number"),
        ({"changes": {"neutral": "by guess"}}, "not a choice"),
        ({"changes": {"self counted": "perhaps"}}, "yes or no"),
        ({"likelihood": "11"}, "likelihood goes from 1"),
        ({"likelihood": "often"}, "likelihood goes from 1"),
        ({"likelyhood": 3}, "did you mean 'likelihood'"),
    ],
)
def test_a_wrong_slip_says_what_is_wrong(changed: dict[str, object], says: str) -> None:
    with pytest.raises(ContentError) as error:
        make_slip("three quarters", {**OWN, **changed})
    assert says in error.value.full_message
    assert "three quarters" in error.value.full_message or "changes" in changed


@pytest.mark.parametrize("name", ["", " ", "x" * 41, "a\x00b"])
def test_a_slip_needs_a_name_that_prints(name: str) -> None:
    with pytest.raises(ContentError, match="the name of a slip"):
        make_slip(name, OWN)


def test_this_room_imports_only_the_standard_library_and_the_rooms_below() -> None:
    below = {"authoring.faults", "authoring.working", "authoring.atoms", "authoring.shielding", "authoring.slips"}
    modules = [node for path in ROOM.glob("*.py") for node in ast.walk(ast.parse(path.read_text(encoding="utf-8")))]
    names = {node.module or "" for node in modules if isinstance(node, ast.ImportFrom)}
    names |= {alias.name for node in modules if isinstance(node, ast.Import) for alias in node.names}
    assert "tomllib" in names
    for name in names - {"__future__"}:
        own = any(name == each or name.startswith(each + ".") for each in below)
        assert own or name.split(".")[0] in sys.stdlib_module_names, name
        assert name.split(".")[0] != "subprocess"
