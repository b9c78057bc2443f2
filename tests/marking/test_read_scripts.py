"""Files of scripts: what is read, where it stands, and that a broken entry costs only itself."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from authoring.faults import FaultsFound, UsageError
from authoring.marking.script_lines import certain_entry
from authoring.marking.script_yaml import gathered, parse_scripts
from authoring.marking.scripts import (
    HEAD,
    Script,
    ScriptFile,
    canonical_label,
    read_scripts,
    resolve_label,
    write_blank_form,
)
from authoring.specs.yaml_tree import parse_tree

GOOD = """\
- paper: K7QD2
  candidate: c-014
  a: 0.35 + 11*0.85 + 10 = 19.70      # as written
  b:
    - S = 19.70
    - Z = 23
  c: 4s, because its effective charge is lower
- paper: M31TX
  a: ok
  b: |
    first
    second
  c: No
"""


def answers(script: Script) -> dict[str, list[str]]:
    """The texts of a script."""
    return {label: list(lines) for label, lines in script.answers.items()}


def test_lines_are_text_with_their_places() -> None:
    """`No` stays text; a list and a block are several lines."""
    found = parse_scripts(GOOD, "pile.yaml")
    assert not found.faults
    first, second = found.scripts
    assert (first.paper, first.candidate) == ("K7QD2", "c-014")
    assert answers(first) == {
        "a": ["0.35 + 11*0.85 + 10 = 19.70"],
        "b": ["S = 19.70", "Z = 23"],
        "c": ["4s, because its effective charge is lower"],
    }
    assert answers(second) == {"a": ["ok"], "b": ["first", "second"], "c": ["No"]}
    assert str(first.places.line("b", 1)) == "pile.yaml:6:7"
    assert str(second.places.line("b", 1)) == "pile.yaml:12:5"
    assert str(second.places.entry()) == "pile.yaml:8:3"


BROKEN = """\
- paper: AAAAA
  a: 3.30
- paper: BBBBB
    a: 'never closed
   b: x
- paper: CCCCC
  a: 4.15
"""


def test_a_broken_entry_costs_only_itself() -> None:
    """The fault stands in the broken entry; what is before and after is read."""
    found = parse_scripts(BROKEN, "pile.yaml")
    assert [script.paper for script in found.scripts] == ["AAAAA", "CCCCC"]
    assert found.faults
    assert all(fault.source is not None and 3 <= fault.source.line <= 5 for fault in found.faults)
    assert str(found.scripts[1].places.line("a", 0)) == "pile.yaml:7:6"


def test_lines_that_are_no_yaml_are_taken_as_they_stand() -> None:
    """Handwriting begins with brackets and signs; a transcriber need not know YAML's quotes."""
    text = "- paper: A\n  a: [Ar] 3d3 4s2   # good\n  b: -\n  c: so: 3.30\n  d:\n    - x: 1\n    - [Ne] 3s1\n"
    found = parse_scripts(text, "pile.yaml")
    assert not found.faults
    (script,) = found.scripts
    assert answers(script) == {
        "a": ["[Ar] 3d3 4s2"],
        "b": ["-"],
        "c": ["so: 3.30"],
        "d": ["x: 1", "[Ne] 3s1"],
    }
    assert str(script.places.line("a", 0)) == "pile.yaml:2:6"


def test_brackets_that_are_yaml_by_accident_stay_text() -> None:
    """`[Ar]` is a core, not a list."""
    found = parse_scripts("- paper: A\n  a: [Ar]\n  b: 3.30\n", "pile.yaml")
    assert answers(found.scripts[0]) == {"a": ["[Ar]"], "b": ["3.30"]}


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("", "scripts-none"),
        ("paper: A\n", "scripts-list"),
        ("- A\n", "script-entry"),
        ("- a: 3\n", "script-paper"),
        ("- paper: [A, B]\n  a: 3\n", "script-entry"),
        ("- paper: A\n  papre: 3\n", "script-label"),
        ("- paper: A\n  1a: 3\n  1A: 4\n", "script-label"),
        ("- paper: A\n  a:\n    b: 4\n", "script-lines"),
        ("- paper: A\n  a: 3\n  a: 4\n", "yaml-duplicate-key"),
        ("- paper: A\n  a: \x07\n", "control-character"),
    ],
)
def test_every_mistake_is_a_fault_at_its_place(text: str, code: str) -> None:
    """With a line that exists."""
    faults = parse_scripts(text, "pile.yaml").faults
    assert code in [fault.code for fault in faults]
    assert all(fault.source is not None and fault.source.line <= text.count("\n") + 1 for fault in faults)


def test_the_same_paper_twice_is_kept_twice() -> None:
    """Which counts is the caller's question."""
    found = parse_scripts("- paper: A\n  a: 1\n- paper: A\n  a: 2\n", "pile.yaml")
    assert [answers(script)["a"] for script in found.scripts] == [["1"], ["2"]]


@pytest.mark.parametrize(
    ("text", "label"),
    [
        ("a", "a"),
        ("A", "a"),
        ("(b)", "b"),
        ("2b", "2b"),
        ("2(b)", "2b"),
        ("2 b", "2b"),
        ("3", "3"),
        ("x1", None),
        ("", None),
    ],
)
def test_labels(text: str, label: str | None) -> None:
    """Question number and letter."""
    assert canonical_label(text) == label


@pytest.mark.parametrize(
    ("label", "known", "expected"),
    [
        ("2b", ("1a", "2b"), "2b"),
        ("a", ("1a", "1b"), "1a"),
        ("a", ("1a", "2a"), None),
        ("1a", ("a", "b"), "a"),
        ("12a", ("a", "b"), None),
        ("3", ("1a", "3a"), "3a"),
        ("c", ("a", "b"), None),
    ],
)
def test_labels_of_a_paper(label: str, known: tuple[str, ...], expected: str | None) -> None:
    """A short label is taken where it can mean only one part."""
    assert resolve_label(label, known) == expected


@pytest.mark.parametrize("mark", [",", ";", "\t"])
def test_a_table_of_final_answers(tmp_path: Path, mark: str) -> None:
    """A row a paper, whatever the spreadsheet puts between the cells."""
    rows = [["paper", "candidate", "1a", "1b"], ["A", "c1", "19.70", '"3.30 = x"'], ["B", "c2", "", "ok"]]
    path = tmp_path / "answers.csv"
    path.write_text("\n".join(mark.join(row) for row in rows) + "\n", encoding="utf-8")
    found = read_scripts(path)
    assert not found.faults
    assert [(script.paper, script.candidate, answers(script)) for script in found.scripts] == [
        ("A", "c1", {"1a": ["19.70"], "1b": ["3.30 = x"]}),
        ("B", "c2", {"1a": [""], "1b": ["ok"]}),
    ]
    assert found.scripts[1].places.line("1b", 0).line == 3


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("", "scripts-none"),
        ("papre,1a\nA,3\n", "csv-column"),
        ("paper,1a,1a\nA,3,4\n", "csv-column"),
        ("candidate,1a\nA,3\n", "csv-column"),
        ("paper,1a\nA,3,4\n", "csv-row"),
        ("paper,1a\n,3\n", "script-paper"),
        ('paper,1a\nA,"3\n', "csv-syntax"),
        ('paper,1a\nA,"3"x\nB,4\n', "csv-syntax"),
    ],
)
def test_every_mistake_in_a_table_is_a_fault(tmp_path: Path, text: str, code: str) -> None:
    """At a line that exists."""
    path = tmp_path / "answers.csv"
    path.write_text(text, encoding="utf-8")
    faults = read_scripts(path).faults
    assert code in [fault.code for fault in faults]
    assert all(fault.source is not None and fault.source.line <= text.count("\n") + 1 for fault in faults)


def test_a_blank_form_reads_back_blank() -> None:
    """Every paper and part stands in it once, without a word."""
    form = write_blank_form([("K7QD2", ("1a", "1b")), ("12E45", ("1a",))], {"K7QD2": "c: 14"})
    found = parse_scripts(form, "form.yaml")
    assert not found.faults
    assert [(script.paper, script.candidate, answers(script)) for script in found.scripts] == [
        ("K7QD2", "c: 14", {"1a": [""], "1b": [""]}),
        ("12E45", "", {"1a": [""]}),
    ]


def test_files_that_cannot_be_read(tmp_path: Path) -> None:
    """Missing: wrong usage. Not UTF-8: a fault."""
    with pytest.raises(UsageError):
        read_scripts(tmp_path / "none.yaml")
    path = tmp_path / "pile.yaml"
    path.write_bytes(b"- paper: A\n  a: \xff\n")
    assert [fault.code for fault in read_scripts(path).faults] == ["not-utf8"]


PIECES = st.sampled_from(
    ["- paper: A\n", "  a: 3.30\n", "  b: [Ar] 3d3\n", "  c: 'x\n", "- ", "\n", "  1a:\n    - x\n", "\t", "{", "&a ",
     "  d: |\n    x\n", ": ", "#", "- - -\n", "---\n", "\x00", "  paper: B\n", "'", '"', "  a: y\n", "!x "]
)  # fmt: skip


@given(st.lists(PIECES, max_size=25).map("".join))
def test_no_file_stops_the_reader(text: str) -> None:
    """Whatever the file, there is a result, and every place in it can be shown."""
    for name in ("pile.yaml",):
        found = parse_scripts(text, name)
        for script in found.scripts:
            assert script.paper
            for label, lines in script.answers.items():
                places = [script.places.line(label, at) for at in range(len(lines))]
                assert all(place.line <= text.count("\n") + 1 for place in places)


@given(st.text(alphabet='paper,1ab;"\n\t x', max_size=60))
def test_no_table_stops_the_reader(text: str) -> None:
    """The same for tables."""
    from authoring.marking.script_table import parse_table

    found = parse_table(text, "answers.csv")
    assert all(fault.source is not None for fault in found.faults)


def test_a_list_of_quoted_lines_on_one_line_is_a_list() -> None:
    """Brackets before a quotation mark are YAML's; before a noble gas they are the candidate's."""
    text = '- paper: K7QD2\n  a: ["S = 19.70", "3.30"]\n- paper: M31TX\n  a: [Ar] 3d3 4s2\n'
    found = parse_scripts(text, "pile.yaml")
    assert [answers(script) for script in found.scripts] == [{"a": ["S = 19.70", "3.30"]}, {"a": ["[Ar] 3d3 4s2"]}]


# What people type, and what YAML makes something else of.
ROWS = st.sampled_from(
    ["- paper: A1", "- paper: 'B2'", "  - paper: C", "-  paper: D", "- ", "-", "- {paper: E, a: 3}",
     "- paper: F # late", "  candidate: c-014", "  marker: \"AB\"", "  candidate: [x]", "  paper: G", "  paper:",
     "  1a: 0.35 + 3*0.85 = 2.90", "  1b: '3.30 '", "  1b: 'it''s'", "  1b: '''x'", "  1b: '''", "  1b: 'a' 'b'",
     "  2(b): 3.30", "  a: -4.81", "  a: - 4.81", "  a: ~~3.4~~ 3.3", "  a: [\"S = 1\", \"2\"]",
     "  a: ['x' , \"\"]  ", "  a: [\"x\", ]", "  a: [\"x\": 1]", "  a: [Ar] 3d3", "  a: []", "  a: \"q\" # why",
     "  a: \"\\x41\"", "  a: \"\"", "  a: ''", "  c: so: x", "  c: x:", "  c:x", "  c: x #1", "  c: x#1",
     "  c: u://x", "  c: |", "    block", "    - deep", "  d:", "  - one", "  - two: 2", "    - one", "   - odd",
     "    - 'q'", "    -", "    - -3", "  - ''", "  -", "  # said", "# said", "", "   ", "  e: <<", "  e: &x y",
     "  e: *x", "  e: !t y", "  e: %", "  e: @", "  e: ,x", "  e: \u00a0x", "  e: x\ty", "  \te: y", "  e: >", "---",
     "...", "  é: x", "  12: x", "  0: x", "  a b: x", "  ? a", "  : b", "\tf: x", "  f: 'two", "  lines'"]
)  # fmt: skip


def told(found: ScriptFile) -> object:
    """All that a file of scripts says, with the place of everything (nothing has no place of its own)."""
    scripts = [
        (
            script,
            str(script.places.entry()),
            [str(script.places.label(label)) for label in script.answers],
            [
                str(script.places.line(label, at))
                for label, lines in script.answers.items()
                for at, line in enumerate(lines)
                if line
            ],
        )
        for script in found.scripts
    ]
    return scripts, [(fault, fault.source) for fault in found.faults]


@settings(max_examples=1000)
@given(st.lists(ROWS, max_size=12).map("\n".join))
def test_the_quick_reader_says_what_the_yaml_parser_says(text: str) -> None:
    """In all that YAML takes as a list, also where the quick reader took some of it."""
    try:
        tree = parse_tree(text, "pile.yaml")
    except FaultsFound:
        return
    if isinstance(tree.data, list):
        assert told(parse_scripts(text, "pile.yaml")) == told(gathered(tree, 0))


@settings(max_examples=1000)
@given(st.text(alphabet="ab'\":#- [],\\|>&*3.=\t", max_size=12), st.lists(ROWS, max_size=5))
def test_what_is_certain_is_so(typed: str, rows: list[str]) -> None:
    """An entry that the quick reader takes is one that YAML takes, and with the same words in it."""
    lines = ["- paper: A1", f"  1c: {typed}", *rows]
    found = certain_entry(lines, 0)
    if found is None:
        return
    (script,) = gathered(parse_tree("\n".join(lines), "pile.yaml"), 0).scripts
    head, answers = found
    assert (script.paper, script.candidate, script.marker) == tuple(head.get(name, "") for name in HEAD)
    assert (list(script.answers), script.answers) == (list(answers), answers)


def test_the_plain_forms_are_read_without_the_yaml_parser() -> None:
    """What transcribers mostly type costs no second reading."""
    rows = [
        "- paper: 'A1'",
        "  candidate: c-014",
        "",
        "  1a: 3.30",
        "  1b: -4.81",
        "  1c: ['S = 1', \"Z = 2\"]",
        "  2a:",
    ]
    rows += ["    - S = 1", "", "    - 'it''s'", "  2b: ok   "]
    assert certain_entry(rows, 0) == (
        {"paper": "A1", "candidate": "c-014"},
        {"1a": ("3.30",), "1b": ("-4.81",), "1c": ("S = 1", "Z = 2"), "2a": ("S = 1", "it's"), "2b": ("ok",)},
    )
