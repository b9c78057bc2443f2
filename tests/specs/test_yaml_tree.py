"""YAML text becomes a tree that knows its places, or faults that say what to change."""

import time

import pytest
import yaml
from hypothesis import example, given
from hypothesis import strategies as st

from authoring.faults import FaultsFound, UsageError
from authoring.specs import yaml_tree
from authoring.specs.yaml_tree import parse_tree, read_tree

ITEM = """\
item: The lamp at Orrinmoor
draw:
  metal: {block: d, period: 4, except: [No, Y]}
story: |
  First line.

  Third {{ metal.name }}.
parts:
  - calculate: screening constant
    marks: 3
  - "given": 'It''s 3.250'
keep:
- metal.unpaired > 0
"""


@pytest.fixture(params=["C", "pure"])
def loader(request, monkeypatch):
    """Both parsers: some machines have no C extension."""
    name = "CSafeLoader" if request.param == "C" else "SafeLoader"
    monkeypatch.setattr(yaml_tree, "_Loader", getattr(yaml, name))


def faults_of(text):
    with pytest.raises(FaultsFound) as found:
        parse_tree(text, "f.yaml")
    return [(f.code, f.source.line, f.source.column) for f in found.value.faults]


def test_scalars_stay_text(loader):
    text = "[No, 3.250, 012, 1e3, =, 2024-01-02, 1:30, null, ~, yes, '']"
    expected = ["No", "3.250", "012", "1e3", "=", "2024-01-02", "1:30", "null", "~", "yes", ""]
    assert parse_tree(text, "f").data == expected


def test_an_empty_value_and_an_empty_file_are_empty_text(loader):
    assert parse_tree("a:\nb: 1\n", "f").data == {"a": "", "b": "1"}
    assert parse_tree("", "f").data == ""
    assert str(parse_tree("", "f").at()) == "f:1:1"


def test_every_node_knows_its_place(loader):
    tree = parse_tree(ITEM, "f.yaml")
    assert str(tree.at(("item",))) == "f.yaml:1:7"
    assert str(tree.at(("draw", "metal", "except", 1))) == "f.yaml:3:45"
    assert str(tree.key_at(("draw", "metal", "period"))) == "f.yaml:3:21"
    assert str(tree.key_at(("parts", 1, "given"))) == "f.yaml:11:5"
    assert tree.at(("parts", 0, "marks")).text == "    marks: 3"
    assert tree.data["parts"][1] == {"given": "It's 3.250"}


def test_a_path_that_leads_nowhere_gives_its_nearest_parent(loader):
    tree = parse_tree(ITEM, "f.yaml")
    assert tree.at(("parts", 0, "bogus", 3)) == tree.at(("parts", 0))
    assert tree.at(("parts", 9)) == tree.at(("parts",))
    assert tree.at(("item", 0)) == tree.at(("item",))
    assert tree.has(("parts", 0, "marks")) and not tree.has(("parts", 0, "bogus")) and not tree.has(("item", 0))


def test_lines_of_a_text_block_have_places(loader):
    tree = parse_tree(ITEM, "f.yaml")
    lines = tree.data["story"].split("\n")
    place = tree.block_line(("story",), 2, lines[2].index("metal") + 1)
    assert (place.line, place.column) == (7, 12)
    assert place.text[place.column - 1 :].startswith("metal.name")


def test_lines_of_text_without_a_block_have_places(loader):
    tree = parse_tree("a: one\n  two\n\n  three\nb: 'x y'\n", "f")
    assert tree.data["a"] == "one two\nthree"
    assert [str(tree.block_line(("a",), k)) for k in (0, 1, 7)] == ["f:1:4", "f:4:3", "f:1:4"]
    assert str(tree.block_line(("b",), 0, 3)) == "f:5:7"


def test_windows_line_ends_and_a_byte_order_mark_change_nothing(loader):
    plain, windows = parse_tree(ITEM, "f"), parse_tree("\ufeff" + ITEM.replace("\n", "\r\n"), "f")
    assert plain.data == windows.data
    assert plain.at(("parts", 1, "given")) == windows.at(("parts", 1, "given"))


def test_all_refusals_of_a_file_are_gathered(loader):
    text = "a: 1\na: 2\n? [1]\n: 3\nb: &x 1\nc: *x\nd: !!int 3\n<<: 4\ne: >\n  d\nf: [1, 2}\n"
    assert faults_of(text) == [
        ("yaml-duplicate-key", 2, 1),
        ("yaml-key", 3, 3),
        ("yaml-alias", 5, 4),
        ("yaml-alias", 6, 4),
        ("yaml-tag", 7, 4),
        ("yaml-merge-key", 8, 1),
        ("yaml-folded", 9, 4),
        ("yaml-syntax", 11, 9),
    ]


@pytest.mark.parametrize(
    ("text", "code", "line", "column", "words"),
    [
        ("a: b: c\n", "yaml-syntax", 1, 5, "colon in quotes"),
        ("a: 'x\nb: 2\n", "yaml-syntax", 1, 4, "never closed"),
        ("a:\n\t- b\n", "yaml-syntax", 2, 1, "tab"),
        ("a: `Fe3+`", "yaml-syntax", 1, 4, "begins with ` needs quotes"),
        ("a: [1, 2\nb: 3\n", "yaml-syntax", 2, 2, "bracket is missing"),
        ("a: - b\n", "yaml-syntax", 1, 4, "list"),
        ("- a\nb: 1", "yaml-syntax", 2, 1, "this"),
        ("x: {{ y }}\n", "yaml-key", 1, 4, "begins with {{"),
        ("a: 1\n---\nb: 2\n", "yaml-documents", 2, 1, "one document"),
        ("? |\n  a\n: b", "yaml-key", 1, 3, "one line"),
        ('a: "\\0"', "control-character", 1, 4, "U+0000"),
        ("a: b\x07c", "control-character", 1, 5, "U+0007"),
        ("a: b\u2028c", "control-character", 1, 5, "LINE SEPARATOR"),
        ("a: \ud800", "control-character", 1, 4, "U+D800"),
        ("{[a]: 1, b: 2}", "yaml-key", 1, 2, "not a list"),
        ("[" * 100, "yaml-depth", 1, 51, "50 levels"),
        ("- " * 100_000, "yaml-depth", 1, 101, "50 levels"),
    ],
)
def test_a_mistake_is_named_at_its_place(loader, text, code, line, column, words):
    with pytest.raises(FaultsFound) as found:
        parse_tree(text, "f.yaml")
    (fault,) = found.value.faults
    assert (fault.code, fault.source.line, fault.source.column) == (code, line, column)
    assert words in fault.message


def test_an_alias_bomb_is_refused_without_growing(loader):
    bomb = "a0: &a0 [x]\n" + "".join(f"a{i}: &a{i} [{', '.join([f'*a{i - 1}'] * 9)}]\n" for i in range(1, 30))
    codes = {code for code, _, _ in faults_of(bomb)}
    assert codes == {"yaml-alias"}


def test_brackets_without_end_are_too_deep(loader):
    assert [code for code, _, _ in faults_of("a: " + "[" * 100_000)] == ["yaml-depth"]
    assert [code for code, _, _ in faults_of("{a: " * 100_000)] == ["yaml-depth"]


def test_unreadable_files_end_the_command(tmp_path):
    with pytest.raises(UsageError, match="No such file"):
        read_tree(tmp_path / "none.yaml")
    with pytest.raises(UsageError, match="directory"):
        read_tree(tmp_path)
    big = tmp_path / "big.yaml"
    big.write_text("a: " + "x" * 100)
    with pytest.raises(UsageError, match="larger than"):
        read_tree(big, most_bytes=50)
    assert read_tree(big).data == {"a": "x" * 100}


def test_bytes_that_are_not_utf8_have_a_place(tmp_path):
    file = tmp_path / "latin.yaml"
    file.write_bytes("a: 1\r\nb: Å x\r\n".encode("latin-1"))
    with pytest.raises(FaultsFound) as found:
        read_tree(file)
    (fault,) = found.value.faults
    assert (fault.code, fault.source.line, fault.source.column) == ("not-utf8", 2, 4)
    assert fault.source.text == "b: \ufffd x"
    file.write_bytes("a: 1".encode("utf-16"))
    with pytest.raises(FaultsFound) as found:
        read_tree(file)
    assert "UTF-16" in found.value.faults[0].message


def test_a_pile_of_scripts_reads_faster_than_the_library_loads_it():
    lines = "- paper: K{0:05d}\n  a: 0.35 + 11*0.85 + 10 = 19.70\n  b: 3.30\n  c: 4s\n  d: Na > Mg\n  e: 4.15\n"
    text = "".join(lines.format(i) for i in range(10_000))
    start = time.perf_counter()
    tree = parse_tree(text, "f")
    ours = time.perf_counter() - start
    start = time.perf_counter()
    yaml.load(text, Loader=yaml.CSafeLoader)
    theirs = time.perf_counter() - start
    assert len(tree.data) == 10_000 and tree.at((9_999, "e")).line == 60_000
    assert ours < 1.5 * theirs


YAMLISH = st.text(st.sampled_from("ab01 \n\n  :-?[]{},#&*!|>'\"%@`<\t\r\\xu~=.\u00a0\u2028é"), max_size=60)


@given(st.one_of(st.text(max_size=80), YAMLISH))
@example("'" + "x" * 10_000)
@example("a: " + "x " * 5_000)
@example("\r")
@example("? ")
@example("%")
def test_any_text_gives_a_tree_or_faults_with_places(text):
    try:
        tree = parse_tree(text, "f")
    except FaultsFound as found:
        assert found.faults and all(fault.source is not None for fault in found.faults)
    else:
        check_places(tree, tree.data, ())


def check_places(tree, node, path):
    """Every node answers, and its place lies in the text."""
    source = tree.at(path)
    assert source.line >= 1 and source.column >= 1
    tree.block_line(path, 1)
    if isinstance(node, dict):
        for key, child in node.items():
            tree.key_at((*path, key))
            check_places(tree, child, (*path, key))
    elif isinstance(node, list):
        for i, child in enumerate(node):
            check_places(tree, child, (*path, i))
    else:
        assert isinstance(node, str)
