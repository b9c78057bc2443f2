"""Subshells and configurations: reading, writing, filling; properties over random text."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from authoring.atoms.configuration import MADELUNG, Configuration, filling, noble_gas
from authoring.atoms.reference import elements
from authoring.atoms.subshell import ALL_SUBSHELLS, Subshell
from authoring.faults import ContentError
from authoring.working.nodes import Core, Occupied, Row, Words

DATA = Path(__file__).with_name("data")


def exceptions() -> list[dict[str, str]]:
    lines = (DATA / "madelung_exceptions.csv").read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


@st.composite
def configurations(draw: st.DrawFn) -> Configuration:
    subs = draw(st.sets(st.sampled_from(ALL_SUBSHELLS), min_size=1, max_size=12))
    return Configuration(tuple((sub, draw(st.integers(1, sub.capacity))) for sub in subs))


def node_text(node: object) -> str:
    assert isinstance(node, Row)
    parts = []
    for item in node.items:
        if isinstance(item, Core):
            parts.append(f"[{item.symbol}]")
        else:
            assert isinstance(item, Occupied)
            parts.append(
                item.labels[0] + "⁰¹²³⁴⁵⁶⁷⁸⁹"[item.count or 0]
                if (item.count or 0) < 10
                else f"{item.labels[0]}{item.count} "
            )
    return "".join(parts)


def test_subshell_order_label_and_capacity() -> None:
    assert sorted([Subshell(4, 0), Subshell(3, 2), Subshell(3, 1)]) == [Subshell(3, 1), Subshell(3, 2), Subshell(4, 0)]
    assert [Subshell.parse(label).capacity for label in ("1s", "2p", "3d", "4f")] == [2, 6, 10, 14]
    assert Subshell.parse(" 4s ").label == "4s"
    assert len({hash(sub) for sub in ALL_SUBSHELLS}) == len(ALL_SUBSHELLS)


@pytest.mark.parametrize("text", ["1p", "2d", "3f", "9s", "4", "s", "", "4S", "5g", "44s", "٤s"])
def test_no_such_subshell(text: str) -> None:
    with pytest.raises(ContentError):
        Subshell.parse(text)


def test_nearest_subshell_is_offered() -> None:
    with pytest.raises(ContentError) as caught:
        Subshell.parse("4S")
    assert "did you mean '4s'?" in caught.value.full_message


def test_impossible_subshell_is_refused_when_built() -> None:
    for n, letter in ((1, 1), (3, 3), (0, 0), (9, 0), (5, 4), (2, -1)):
        with pytest.raises(ContentError):
            Subshell(n, letter)


@pytest.mark.parametrize(
    "text",
    [
        "[Ar] 3d3 4s2",
        "[Ar]3d34s2",
        "[Ar] 4s2 3d3",
        "[Ar]3d³4s²",
        "[Ar].3d3.4s2",
        "[Ar] 3d^3 4s^2",
        "1s2 2s2 2p6 3s2 3p6 3d3 4s2",
        "1s²2s²2p⁶3s²3p⁶3d³4s²",
        " [Ar]  3d3 · 4s2 ",
        "[Ar] 3d3 4s2 4p0",
    ],
)
def test_ways_of_writing_vanadium(text: str) -> None:
    read = Configuration.parse(text)
    assert read.short() == "[Ar] 3d3 4s2"
    assert read.full() == "1s2 2s2 2p6 3s2 3p6 3d3 4s2"
    assert read.electrons == 23


def test_a_count_left_out_is_one() -> None:
    assert Configuration.parse("[Ar] 3d 4s").short() == "[Ar] 3d1 4s1"
    assert Configuration.parse("3d104s").full() == "3d10 4s1"


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "missing"),
        ("[Ar", "closing bracket"),
        ("[Xx] 3d3", "not a noble gas"),
        ("[Ar] 3d11", "3d holds 1 to 10 electrons, not 11"),
        ("[Ar] 3d1002", "3d holds 1 to 10"),
        ("[Ar] 3d03", "3d holds 1 to 10"),
        ("1s2 1s1", "1s stands twice"),
        ("[Ar] 3p6", "3p already stands in the core"),
        ("4s1²", "raised and ordinary"),
        ("4s²2", "not a subshell with"),
        ("3d3x", "not a subshell"),
        ("hello", "not a subshell"),
        ("4s^", "not a subshell"),
        ("1s" * 200, "at most 300"),
    ],
)
def test_faulty_configurations_say_what_is_wrong(text: str, words: str) -> None:
    with pytest.raises(ContentError) as caught:
        Configuration.parse(text)
    assert words in caught.value.full_message


def test_constructor_sorts_and_refuses() -> None:
    s1, p2 = Subshell(1, 0), Subshell(2, 1)
    assert Configuration(((p2, 3), (s1, 2))).occupied == (s1, p2)
    for counts in (((s1, 3),), ((s1, 0),), ((s1, 1), (s1, 1)), ((p2, -1),)):
        with pytest.raises(ContentError):
            Configuration(counts)


def test_outermost_count_and_changes() -> None:
    vanadium = Configuration.parse("[Ar] 3d3 4s2")
    d3, s4 = Subshell(3, 2), Subshell(4, 0)
    assert vanadium.outermost == s4 and vanadium.outer_shell == 4
    assert vanadium.count(d3) == 3 and vanadium.count(Subshell(4, 1)) == 0
    assert vanadium.without(s4, 2).short() == "[Ar] 3d3"
    assert vanadium.with_(d3, 2).without(s4).short() == "[Ar] 3d5 4s1"
    with pytest.raises(ContentError):
        vanadium.without(s4, 3)
    with pytest.raises(ContentError):
        vanadium.with_(s4)
    with pytest.raises(ContentError):
        _ = Configuration(()).outermost


@pytest.mark.parametrize(
    ("text", "core", "beyond"),
    [
        ("1s2", None, "1s2"),
        ("1s2 2s1", "He", "2s1"),
        ("1s2 2s2 2p6", "He", "2s2 2p6"),
        ("[Kr] 4d10", "Kr", "4d10"),
        ("[Kr] 4d10 4f3 5s2 5p5", "Kr", "4d10 4f3 5s2 5p5"),
        ("[Rn] 5f14 7s2 7p1", "Rn", "5f14 7s2 7p1"),
        ("3d10 4s1", None, "3d10 4s1"),
    ],
)
def test_core_is_the_largest_smaller_noble_gas(text: str, core: str | None, beyond: str) -> None:
    read = Configuration.parse(text)
    assert read.core_symbol == core
    assert read.beyond_core().full() == beyond


def test_unpaired_by_hund() -> None:
    # Hund's rule; common practice, no source.
    for text, unpaired in (
        ("[Ar] 3d5 4s1", 6),
        ("[Ar] 3d8", 2),
        ("[Xe] 4f7 5d1 6s2", 8),
        ("[He] 2s2 2p4", 2),
        ("1s2", 0),
    ):
        assert Configuration.parse(text).unpaired == unpaired


def test_nodes() -> None:
    chromium = Configuration.parse("[Ar] 3d5 4s1")
    assert chromium.node() == Row((Core("Ar"), Occupied(("3d",), 5), Occupied(("4s",), 1)))
    assert len(chromium.node(short=False).items) == 7  # type: ignore[union-attr]
    assert isinstance(Configuration(()).node(), Words)


def test_madelung_order() -> None:
    # The order as every textbook draws it; common practice, no source.
    labels = "1s 2s 2p 3s 3p 4s 3d 4p 5s 4d 5p 6s 4f 5d 6p 7s 5f 6d 7p 8s"
    assert " ".join(sub.label for sub in MADELUNG) == labels
    assert filling(19, "shell").short() == "[Ar] 3d1"
    assert filling(23, "shell").short() == "[Ar] 3d5"
    assert filling(60, "shell").full().endswith("4d10 4f14")
    with pytest.raises(ContentError):
        filling(121)
    for symbol, electrons in (("He", 2), ("Ne", 10), ("Ar", 18), ("Kr", 36), ("Xe", 54), ("Rn", 86), ("Og", 118)):
        assert noble_gas(symbol).electrons == electrons
        assert noble_gas(symbol) == elements().by_symbol[symbol].configuration


def test_exactly_these_atoms_leave_the_madelung_order() -> None:
    # NIST Atomic Spectra Database; Ds and Rg are predictions (data/madelung_exceptions.csv).
    table = {row["symbol"]: row for row in exceptions()}
    assert len(table) == 22
    found = {one.symbol for one in elements().by_z.values() if one.configuration != filling(one.z)}
    assert found == set(table)
    for symbol, row in table.items():
        assert elements().by_symbol[symbol].configuration.short() == row["ground"]
        assert filling(elements().by_symbol[symbol].z).short() == row["madelung"]


@given(configurations())
def test_written_configurations_read_back(configuration: Configuration) -> None:
    assert Configuration.parse(configuration.full()) == configuration
    assert Configuration.parse(configuration.short()) == configuration
    assert Configuration.parse(configuration.full().replace(" ", "")) == configuration
    assert Configuration.parse(node_text(configuration.node(short=True))) == configuration
    assert Configuration.parse(node_text(configuration.node(short=False))) == configuration


@given(configurations(), st.sampled_from(ALL_SUBSHELLS))
def test_with_undoes_without(configuration: Configuration, sub: Subshell) -> None:
    held = configuration.count(sub)
    if held:
        assert configuration.without(sub, held).with_(sub, held) == configuration
        assert configuration.without(sub).electrons == configuration.electrons - 1
    else:
        assert configuration.with_(sub).without(sub) == configuration


@given(st.text() | st.text("[]ArKs123spdf²⁶ .^0", max_size=30))
def test_random_text_raises_nothing_but_content_errors(text: str) -> None:
    for reader in (Configuration.parse, Subshell.parse):
        try:
            reader(text)
        except ContentError as error:
            assert error.full_message.isprintable()
