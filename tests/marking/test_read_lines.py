"""Lines as candidates write them: every notation, and no text that stops the reader."""

from __future__ import annotations

import time
from dataclasses import replace
from decimal import Decimal

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.marking.chains import read_chain
from authoring.marking.quick import read_quick
from authoring.marking.written import Written, read_line
from authoring.shielding.practice import published
from authoring.shielding.quantity import Target
from authoring.shielding.solve import work
from authoring.working.text import to_text

# line, label, value, decimals shown, unit
CHAINS = [
    ("3.30", None, "3.30", 2, ""),
    ("3,30", None, "3.30", 2, ""),
    ("-4.81 eV", None, "-4.81", 2, "eV"),
    ("−4.81 eV", None, "-4.81", 2, "eV"),
    ("–4.81eV", None, "-4.81", 2, "eV"),
    ("0.35 + 11*0.85 + 10 = 19.70", None, "19.70", 2, ""),
    ("0.35 + 11x0.85 + 10 = 19.7", None, "19.7", 1, ""),
    ("0,35 + 11·0,85 + 10 = 19,70", None, "19.70", 2, ""),
    (".35 + 9.35 = 9.7", None, "9.7", 1, ""),
    ("S = 1 × 0.35 + 11 × 0.85 + 10 × 1.00 = 19.70", "S", "19.70", 2, ""),
    ("S = (1)(0.35) + 11(0.85) + 10[1.00] = 19.70", "S", "19.70", 2, ""),
    ("σ = 19,70", "S", "19.70", 2, ""),
    ("s = 19.7", "S", "19.7", 1, ""),
    ("S: 19.70", "S", "19.70", 2, ""),
    ("S(4s) = 19.70", "S", "19.70", 2, ""),
    ("Z* = 3.30", "Zeff", "3.30", 2, ""),
    ("Z*=23-19.7=3.3", "Zeff", "3.3", 1, ""),
    ("Zeff = 3.30", "Zeff", "3.30", 2, ""),
    ("Z_eff = 3.30", "Zeff", "3.30", 2, ""),
    ("Z_{eff} = 3.30", "Zeff", "3.30", 2, ""),
    ("Z(eff) = 3.30", "Zeff", "3.30", 2, ""),
    ("Z eff = 3.30", "Zeff", "3.30", 2, ""),
    ("Z*(4s) = 3.30", "Zeff", "3.30", 2, ""),
    ("Zeff = 3.30 (4s)", "Zeff", "3.30", 2, ""),
    ("Z − S = 23 − 19.70 = 3.30", "Zeff", "3.30", 2, ""),
    ("E = -R(Zeff/n*)^2 = -13.6057 × (3.30/3.7)^2 = -10.82 eV", "E", "-10.82", 2, "eV"),
    ("E = −R(Z*/n*)² = −13.6057 × (3.30 ÷ 3.7)² ≈ −10.82 eV", "E", "-10.82", 2, "eV"),
    ("E = -13.6057*(3.30/3.7)**2 => -10.82 eV", "E", "-10.82", 2, "eV"),
    ("E: -4.81 keV", "E", "-4.81", 2, "keV"),
    ("r = 219.5 pm", "r", "219.5", 1, "pm"),
    ("r = 2.195 Å", "r", "2.195", 3, "Å"),
    ("IE = 811.5 kJ/mol", "IE", "811.5", 1, "kJ/mol"),
    ("IE = 811.5 kJ mol-1", "IE", "811.5", 1, "kJ/mol"),
    ("I1 = 811.5 kJ·mol⁻¹", "IE", "811.5", 1, "kJ/mol"),
    ("χ = 1.45", "χ", "1.45", 2, ""),
    ("µ = √(3 × (3 + 2)) = 3.87 μB", "μ", "3.87", 2, "μB"),
    ("μ = 3.87 B.M.", "μ", "3.87", 2, "μB"),
    ("n* = 3.7", "n*", "3.7", 1, ""),
    ("2.18e-18 J", None, "2.18E-18", None, "J"),
    ("2.18 × 10⁻¹⁸ J", None, "2.18E-18", None, "J"),
    ("15 %", None, "15", 0, "%"),
    ("= 3.30", None, "3.30", 2, ""),
    ("~3.3", None, "3.3", 1, ""),
    ("so Zeff is 3.30", "Zeff", "3.30", 2, ""),
    ("effective nuclear charge 3.30", "Zeff", "3.30", 2, ""),
    ("the screening constant is 19.70", "S", "19.70", 2, ""),
    ("~~3.40~~ 3.30", None, "3.30", 2, ""),
]


@pytest.mark.parametrize(("line", "label", "value", "decimals", "unit"), CHAINS)
def test_a_chain_gives_its_label_value_figures_and_unit(
    line: str, label: str | None, value: str, decimals: int | None, unit: str
) -> None:
    """What the last member says is what the candidate answers."""
    found = read_line(line)
    assert (found.kind, found.label, found.value, found.decimals, found.unit) == (
        "chain", label, Decimal(value), decimals, unit,
    )  # fmt: skip
    assert str(found.value) == value


def test_every_member_has_its_own_value_and_terms() -> None:
    """So that a judge can say that 11 × 0.85 is 9.35, not 9.45."""
    found = read_line("S = 0.35 + 11*0.85 + 10 = 0.35 + 9.45 + 10 = 19.80")
    assert [str(member.value) for member in found.members] == ["None", "19.70", "19.80", "19.80"]
    terms = [[(str(term.count), str(term.coefficient)) for term in member.terms] for member in found.members]
    assert terms[1] == [("1", "0.35"), ("11", "0.85"), ("10", "1")]
    assert terms[2] == [("1", "0.35"), ("1", "9.45"), ("10", "1")]


@pytest.mark.parametrize("line", ["0.85 × 11", "11 × 0.85", "(11)(0.85)", "0.85(11)", "(18 - 7) * 0.85"])
def test_a_term_is_count_and_coefficient_whichever_way_round(line: str) -> None:
    """A count is a whole number."""
    (term,) = read_line(line).members[0].terms
    assert (term.count, term.coefficient) == (11, Decimal("0.85"))


@pytest.mark.parametrize(
    ("line", "full"),
    [
        ("1s²2s²2p²", "1s2 2s2 2p2"),
        ("1s22s22p2", "1s2 2s2 2p2"),
        ("1s^2 2s^2 2p^2", "1s2 2s2 2p2"),
        ("1s2, 2s2, 2p2", "1s2 2s2 2p2"),
        ("[He] 2s2 2p2", "1s2 2s2 2p2"),
        ("[He]2s²2p²", "1s2 2s2 2p2"),
        ("C: 1s² 2s² 2p²", "1s2 2s2 2p2"),
        ("C [He] 2s2 2p2", "1s2 2s2 2p2"),
        ("3d³4s²", "3d3 4s2"),
    ],
)
def test_configurations(line: str, full: str) -> None:
    """Raised, plain, spaced, with a core, with the species in front."""
    found = read_line(line)
    assert found.kind == "configuration"
    assert found.config is not None
    assert found.config.full() == full


def test_an_impossible_configuration_is_one_with_a_remark() -> None:
    """It is an answer, if a wrong one."""
    found = read_line("[Ar] 3d12")
    assert (found.kind, found.config) == ("configuration", None)
    assert "1 to 10" in found.remark


@pytest.mark.parametrize(
    "line",
    [
        "(1s)2(2s2p)8(3s,3p)8(3d)3(4s,4p)2",
        "(1s)²(2s,2p)⁸(3s,3p)⁸(3d)³(4s,4p)²",
        "(1s)^2 (2s 2p)^8 (3s 3p)^8 (3d)^3 (4s 4p)^2",
        "V: (1s)2 (2s,p)8 (3s,p)8 (3d)3 (4s,p)2",
        "[1s]2 [2s2p]8 [3s3p]8 [3d]3 [4s4p]2",
    ],
)
def test_groups(line: str) -> None:
    """Labels and electrons, in whatever brackets."""
    found = read_line(line)
    assert found.kind == "groups"
    assert [(group.label, group.electrons) for group in found.groups] == [
        ("1s", 2), ("2s,2p", 8), ("3s,3p", 8), ("3d", 3), ("4s,4p", 2),
    ]  # fmt: skip


@pytest.mark.parametrize(
    "line",
    [
        "1 x 0.35, 11 x 0.85, 10 x 1.00",
        "1 × 0,35; 11 × 0,85; 10 × 1,00",
        "0.35: 1; 0.85: 11; 1.00: 10",
        "1 at 0.35, 11 at 0.85 and 10 at 1.00",
        "same group 1 × 0.35; one shell in 11 × 0.85; deeper 10 × 1.00",
        "same group: 1 × 0.35; one shell in: 11 × 0.85; deeper: 10 × 1.00",
        "1 × 0.35 = 0.35; 11 × 0.85 = 9.35; 10 × 1.00 = 10.00",
    ],
)
def test_tallies(line: str) -> None:
    """Counts with coefficients, stated and not added."""
    found = read_line(line)
    assert found.kind == "tally"
    assert [(str(term.count), str(term.coefficient)) for term in found.terms] == [
        ("1", "0.35"), ("11", "0.85"), ("10", "1.00"),
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("line", "order", "direction"),
    [
        ("Na > Mg > Al", ("Na", "Mg", "Al"), ">"),
        ("F- > Na+", ("F-", "Na+"), ">"),
        ("F⁻>Na⁺>Mg²⁺", ("F-", "Na+", "Mg2+"), ">"),
        ("4s < 3d", ("4s", "3d"), "<"),
        ("Z_eff(4s) < Z_eff(3d)", ("4s", "3d"), "<"),
        ("Na, Mg, Al", ("Na", "Mg", "Al"), ","),
        ("4s, 3d", ("4s", "3d"), ","),
        ("3.30 < 4.30", ("3.30", "4.30"), "<"),
    ],
)
def test_orderings(line: str, order: tuple[str, ...], direction: str) -> None:
    """Things compared, or listed."""
    found = read_line(line)
    assert (found.kind, found.order, found.direction) == ("ordering", order, direction)


def test_a_comparison_with_its_values_and_conclusion() -> None:
    """The values compared are there, and what is drawn from them."""
    found = read_line("Z_eff(4s) = 3.30 < Z_eff(3d) = 4.30 → first electron lost: 4s")
    assert [str(member.value) for member in found.members] == ["3.30", "4.30"]
    assert (found.label, found.electron) == ("Zeff", Subshell.parse("4s"))


@pytest.mark.parametrize(
    ("line", "kind", "field", "value"),
    [
        ("B", "choice", "choice", "B"),
        ("(b)", "choice", "choice", "B"),
        ("c)", "choice", "choice", "C"),
        ("option B", "choice", "choice", "B"),
        ("Fe2+", "species", "species", Species.parse("Fe2+")),
        ("Fe³⁺", "species", "species", Species.parse("Fe3+")),
        ("B", "choice", "species", Species.parse("B")),
        ("4s", "electron", "electron", Subshell.parse("4s")),
        ("the 4s electron", "electron", "electron", Subshell.parse("4s")),
        ("4s, because its effective charge is lower", "electron", "electron", Subshell.parse("4s")),
        ("ok", "ok", "value", None),
        ("OK", "ok", "value", None),
        ("", "blank", "value", None),
        ("-", "blank", "value", None),
        ("~~3.30~~", "blank", "struck", ("3.30",)),
        ("3 + + ) 4", "unreadable", "value", None),
        ("not 4s", "words", "electron", None),
        ("4s, or 3d", "words", "electron", None),
        ("the 3d is higher than the 4s", "words", "mentions", ("3d", "4s")),
    ],
)
def test_single_answers_and_words(line: str, kind: str, field: str, value: object) -> None:
    """A letter, a species, an electron; words that might turn the meaning stay words."""
    found = read_line(line)
    assert (found.kind, getattr(found, field)) == (kind, value)


@pytest.mark.parametrize(
    ("line", "decimal", "value", "remark"),
    [
        ("0,35 + 9.35 = 9.70", "auto", "9.70", "in one line"),
        ("1,312 kJ/mol", "auto", "1.312", "thousands"),
        ("1,312.75", "auto", "1312.75", ""),
        ("3,35", "comma", "3.35", ""),
        ("3,35", "point", "3.35", "points are used"),
        ("3.35", "comma", "3.35", "commas are used"),
    ],
)
def test_decimal_marks(line: str, decimal: str, value: str, remark: str) -> None:
    """Either mark is taken; where two readings are possible, the marker is told."""
    found = read_line(line, decimal)  # type: ignore[arg-type]
    assert str(found.value) == value
    assert remark in found.remark and bool(remark) == bool(found.remark)


@pytest.mark.parametrize(
    ("line", "remark"),
    [
        ("9**9**9", "too large"),
        ("10^999", "too large"),
        ("1/0", "division by zero"),
        ("0^-1", "division by zero"),
        ("√(0 - 2)", "negative"),
        ("(" * 41 + "1" + ")" * 41, "deeper than 40"),
        ("1" * 31, "30 digits"),
        ("1" * 2001, "2000 characters"),
    ],
)
def test_what_has_no_value_says_why(line: str, remark: str) -> None:
    """And says it at once."""
    start = time.perf_counter()
    found = read_line(line)
    assert time.perf_counter() - start < 1
    assert found.value is None
    assert remark in found.remark


def test_several_statements_on_one_line() -> None:
    """The last is the answer; the others stand before it."""
    found = read_line("S = 19.70, Zeff = 23 - 19.70 = 3.30")
    assert (found.label, str(found.value)) == ("Zeff", "3.30")
    assert [(each.label, str(each.value)) for each in found.earlier] == [("S", "19.70")]


@pytest.mark.parametrize(("species", "electron"), [("V", "4s"), ("Fe3+", "3d"), ("O2-", "2p"), ("Rb", "5s")])
def test_the_lines_of_a_key_are_read(species: str, electron: str) -> None:
    """What the press prints, a candidate may write: the value of each line comes back."""
    last = Target("first electron lost", Species.parse(species))
    energy = Target("orbital energy", Species.parse(species), Subshell.parse(electron))
    kinds = {"configuration": "configuration", "groups": "groups", "tally": "tally"}
    for target in (last, energy):
        for step in work(target, published()):
            found = read_line(to_text(step.line.chain))
            if step.line.number is not None:
                assert found.shown.replace("-", "−") == step.line.shown, step.line
                assert found.unit == step.line.unit
            elif step.target.quantity in kinds:
                assert found.kind == kinds[step.target.quantity]
            else:
                assert found.electron == step.line.value


NUMBERS = st.from_regex(r"[0-9]{1,3}(\.[0-9]{1,3})?", fullmatch=True)
SIGNS = st.sampled_from([" + ", "-", " × ", "*", " = ", "="])


HEADS = st.sampled_from(
    ["", "S = ", "σ=", "-", "Zeff = Z - S = ", "Z_{eff} = ", "Z* = Z − σ = ", "Z - S = ", "Z_eff=", "E = "]
)


@given(first=NUMBERS, rest=st.lists(st.tuples(SIGNS, NUMBERS), max_size=8), head=HEADS)
def test_the_quick_reader_and_the_grammar_agree(first: str, rest: list[tuple[str, str]], head: str) -> None:
    """Two readers of one form give one structure."""
    line = head + first + "".join(sign + number for sign, number in rest)
    quick = read_quick(line)
    assert quick is not None
    slow = read_chain(line.replace("×", "*").replace("−", "-"), "auto")
    assert slow is not None
    assert (quick.members, quick.label, quick.value, quick.shown) == (slow.members, slow.label, slow.value, slow.shown)


@pytest.mark.parametrize("word", ["so ", "Thus, ", "therefore ", "∴ ", "hence "])
@pytest.mark.parametrize("line", ["S = 2*0.35 + 1,0 = 1,7", "Z* = Z − S = 3 − 1.7 = 1.3", "1.7", "σ = 1.7"])
def test_what_leads_over_to_a_line_adds_nothing(word: str, line: str) -> None:
    """The line says the same without it."""
    assert replace(read_line(word + line), text="") == replace(read_line(line), text="")


PIECES = st.sampled_from(
    [
        "1s", "2", "²", "(", ")", "[", "]", "{", "}", "[Ar]", " ", "=", "<", ">", "→", ",", ".", ";", ":", "x", "×",
        "*", "**", "^", "/", "-", "−", "+", "√", "0.35", "Zeff", "Z*", "n*", "S", "eV", "kJ mol", "⁻¹", "Fe", "3+",
        "~~", "because", "is", "4s", "and", "at", "%", "e", "E", "_", "μ", "1e9", ",35", "\n", "\t", "\u00a0",
    ]
)  # fmt: skip


@settings(max_examples=600, deadline=2000)
@given(st.one_of(st.text(max_size=300), st.lists(PIECES, max_size=60).map("".join)), st.sampled_from(["auto", "comma"]))
def test_no_text_stops_the_reader(text: str, decimal: str) -> None:
    """Any text is read, in bounded time."""
    found = read_line(text, decimal)  # type: ignore[arg-type]
    assert isinstance(found, Written)
    assert found.value is None or found.value.is_finite()


@pytest.mark.parametrize(
    "piece",
    ["(", "-", "2^", "1/", "√", "1+", "a", "[(1s", "3d34s", "~~", "x ", "(1s)2", "Na>", "1,000,", "=, ", "S=1;", "the ",
     "\u00b2", "Z*", "1 at ", "V : ", "e-", "1s2", "a, ", "4s ", "√√2 ", "^{2}"],
)  # fmt: skip
def test_long_repetitions_take_no_time(piece: str) -> None:
    """The worst line of the longest allowed length takes less than a second."""
    line = (piece * 2000)[:2000]
    start = time.perf_counter()
    read_line(line)
    assert time.perf_counter() - start < 1


def test_plain_forms_are_quick() -> None:
    """60,000 lines of a pile, most of them alike, must not be what marking waits for."""
    lines = [f"0.35 + {n % 40}*0.85 + 10 = {n % 60}.70" for n in range(3000)] + ["3.30", "ok"] * 20000
    start = time.perf_counter()
    for line in lines:
        read_line(line)
    # 20 µs a line on the machine that this was written on takes a third of this.
    assert (time.perf_counter() - start) / len(lines) < 60e-6


def test_a_name_before_several_statements_holds_until_another_is_named() -> None:
    """`V 4s: S = …; Z = …` is about V 4s throughout; in `F8+: …; E(F8+) = …; I = …` the I is not the ion's."""
    both = read_line("3d: S = 12.60; Zeff = 8.40")
    assert [each.about for each in (*both.earlier, both)] == ["3d", "3d"]
    ion = read_line("F8+: 1s1; S = 0.00; E(F8+) = -1102.061; I = -1102.061 + 2059.630 = 957.57")
    assert [each.about for each in (*ion.earlier, ion)] == ["F8+", "F8+", "F8+", ""]
