"""Bad input to `set`, end to end: the exit code, the place of what is wrong, no traceback, and no folder left."""

from __future__ import annotations

from pathlib import Path

import pytest
from commands_help import Ran, places, run
from papers_help import TANK

HEAD = TANK.split("draw:")[0]
DRAW = TANK[TANK.index("draw:") : TANK.index("story:")]
STORY = TANK[TANK.index("story:") : TANK.index("parts:")]
PARTS = TANK[TANK.index("parts:") :]


def set_item(folder: Path, text: str, *more: str) -> Ran:
    """`set` on a plan of one item with this text; whatever is wrong, nothing may be left of the target."""
    (folder / "tank.yaml").write_text(text, encoding="utf-8")
    (folder / "plan.yaml").write_text("plan: P\nitems: [tank]\n", encoding="utf-8")
    return set_plan(folder, *more)


def set_plan(folder: Path, *more: str) -> Ran:
    """`set` on plan.yaml of a folder."""
    arguments = more or ("--copies", "2")
    ran = run("set", folder / "plan.yaml", *arguments, "--into", folder / "made")
    assert "Traceback" not in ran.said
    assert ran.code == 0 or not (folder / "made").exists()
    assert not [path for path in folder.iterdir() if path.name.startswith(".made")]
    return ran


# What is changed in the item, the line and column of the complaint, and a piece of its words.
FAULTS = {
    "unknown key": ((STORY, STORY + "storry: x\n"), (8, 1), "no key 'storry' here; did you mean 'story'?"),
    "unknown key of a part": (("    electron: outer\n", "    electorn: outer\n"), (11, 5), "did you mean 'electron'?"),
    "unknown key of a draw": (("period: 4", "perriod: 4"), (4, 21), "no key 'perriod' here; did you mean 'period'?"),
    "unknown task": (("- calculate: eff", "- calculat: eff"), (12, 5), "did you mean 'calculate'?"),
    "unknown quantity": (("effective nuclear charge", "effective age"), (12, 16), "'effective age'"),
    "unknown species": (("of: metal\n    electron: outer", "of: Vx\n    electron: outer"), (10, 9), "'Vx'"),
    "an electron it lacks": (("electron: outer\n", "electron: 5s\n"), (11, 15), "has no 5s electron"),
    "wrong unit": (
        ("- calculate: effective nuclear charge", "- calculate: orbital energy\n    unit: furlong"),
        (13, 11),
        "is not given in 'furlong'",
    ),
    "a slip that leaves no such electron": (
        (
            "- calculate: effective nuclear charge",
            "- correct: effective nuclear charge\n    electron: 4s\n    slip: d filled before next s",
        ),
        (14, 11),
        "has no 4s electron, so the flawed working would be about another electron",
    ),
    "a name that no species has": (
        (STORY, "keep:\n  - metal.blok == 'd'\n" + STORY),
        (7, 11),
        "did you mean 'block'?",
    ),
    "a key given twice": (("draw:\n", "level: majors\ndraw:\n"), (3, 1), "already given on line 2"),
    "text where a list belongs": ((PARTS, "parts: all of them\n"), (8, 8), "a list is needed here"),
    "a list where text belongs": (("item: The evening tank", "item: [The, tank]"), (1, 7), "text is needed here"),
    "keys where text belongs": (("item: The evening tank", "item: {a: b}"), (1, 7), "text is needed here"),
    "no number of marks": (("electron: outer\n", "electron: outer\n    marks: three\n"), (12, 12), "whole number"),
    "too many marks": (("electron: outer\n", "electron: outer\n    marks: 999999999999\n"), (12, 12), "whole number"),
    "an unknown level": (("first-year", "second-year"), (2, 8), "one of: first-year, majors, inorganic"),
    "a missing key": ((STORY, ""), (1, 1), "`story` is missing"),
    "no parts": ((PARTS, "parts: []\n"), (8, 8), ""),
    "an empty pool": (("shell: outermost", "shell: inner f"), (5, 3), "'outer' is drawn from an empty pool"),
    "a pool of nothing": (("{block: d, period: 4, except: [Cr, Cu, Zn]}", "{}"), (4, 3), "drawn from nothing"),
    "a condition that nothing meets": (
        (STORY, "keep:\n  - metal.z > 99\n" + STORY),
        (7, 3),
        "none of the 7 combinations meets all conditions",
    ),
    "an undefined variable": (("metal.name", "meta.name"), (7, 39), "'meta' is not drawn; did you mean 'metal'?"),
    "a draw before what it rests on": (("electron of: metal", "electron of: steel"), (5, 3), "rests on 'steel'"),
    "an undefined name in a condition": ((STORY, "keep:\n  - steel.z > 3\n" + STORY), (7, 5), "'steel' is not drawn"),
    "an open template": (("{{ metal.name }}", "{{ metal.name"), (7, 3), ""),
    "a template with a call": (("{{ metal.name }}", "{{ metal.name.upper() }}"), (7, 3), ""),
    "a template that reaches inside": (("{{ metal.name }}", "{{ metal.__class__ }}"), (7, 3), ""),
    "an unknown filter": (("{{ metal.name }}", "{{ metal.name | shout }}"), (7, 52), "shout"),
    "an endless template": (("{{ metal.name }}", "{% for a in b %}{% endfor %}"), (7, 3), ""),
    "chemistry that is none": (("dissolved", "`Vx3+` and dissolved"), (7, 27), "Vx"),
    "a formula that is none": (("dissolved", "$\\foo$ and dissolved"), (7, 27), "\\foo"),
    "TeX in a formula": (("dissolved", "$\\input{/etc/hostname}$ and dissolved"), (7, 27), "\\input is not known"),
    "an alias bomb": (
        (HEAD, "a: &a [x, x]\nb: &b [*a, *a]\nc: &c [*b, *b]\n" + HEAD),
        (1, 4),
        "anchors (&a) are not used here",
    ),
    "a tag": (("item: The", "item: !!python/object/apply:os.system The"), (1, 7), "tags"),
    "deep nesting": (("item: The evening tank", "item: " + "[" * 2000), (1, 1006), "nested too deeply"),
    "a tab for indentation": (("  metal:", "\tmetal:"), (4, 1), "tab"),
    "an invisible character": (("evening", "eve\x07ning"), (1, 14), "invisible character U+0007"),
}


@pytest.mark.parametrize("case", FAULTS)
def test_what_is_wrong_is_named_at_its_place(tmp_path, case):
    (old, new), place, words = FAULTS[case]
    assert old in TANK
    ran = set_item(tmp_path, TANK.replace(old, new, 1))
    assert ran.code == 1, ran.said
    assert place in places(ran, tmp_path / "tank.yaml"), ran.said
    assert words in ran.err


def test_many_faults_come_at_once_in_the_order_of_the_file(tmp_path):
    text = (
        TANK.replace("first-year", "second-year").replace("period: 4", "perriod: 4").replace("electron: o", "lepton: o")
    )
    ran = set_item(tmp_path, text)
    found = places(ran, tmp_path / "tank.yaml")
    assert found == sorted(found)
    assert [line for line, _ in found] == [2, 4, 11]
    assert ran.err.rstrip().endswith("3 faults")


@pytest.mark.parametrize(
    "story",
    [
        "Costs 50% of #1 & more_or_less ~ {braces} \\ backslash ^ <b>bold</b> \"quoted\" 'single' |bars|",
        "\\input{/etc/hostname} \\def\\a{\\a}\\a \\end{document} \\csname",
        "Ünïcödé, Ελληνικά, Кириллица, 日本語, עברית, العربية, Tiếng Việt, ﬁ, 𝔘, 👩‍🔬",
        "x" * 10_000,
        "word " * 2_000,
        "a < b > c << d >> e; `V2+`; $Z_{eff}$ at 3 % -- and so on... ---",
    ],
)
def test_any_text_is_printed_or_refused_in_words(tmp_path, story):
    """Texts are never TeX or HTML: papers come out, or a fault at its place, or the font that is wanting is named."""
    ran = set_item(tmp_path, TANK.replace("dissolved", story), "--copies", "1")
    assert ran.code in (0, 1) or (ran.code == 3 and "no installed font has the character" in ran.err), ran.said
    assert (tmp_path / "made" / "set.json").is_file() == (ran.code == 0)
    if ran.code == 1:
        assert places(ran, tmp_path / "tank.yaml"), ran.said


@pytest.mark.parametrize(
    ("plan", "place", "words"),
    [
        ("plan: P\nitems: [tnak]\n", (2, 9), "no item 'tnak'"),
        ("plan: P\nitems: [tank, tank]\nitmes: x\n", (3, 1), "did you mean 'items'?"),
        ("plan: P\nitems: []\n", (2, 8), ""),
        ("plan: P\n", (1, 1), "`items` is missing"),
        ("plan: P\nitems: [tank]\nconventions:\n  1s pear: 0.30\n", (4, 3), "1s pear"),
        ("plan: P\nitems: [tank]\nconventions:\n  1s pair: lots\n", (4, 3), "lots"),
        ("plan: P\nitems: [tank]\nfigures: 99\n", (3, 10), "at most 8"),
        ("plan: P\nitems: [tank]\nlayout: {paper: A5}\n", (3, 17), "'A5' does not do here"),
        ("plan: P\nitems: [tank]\nlayout: {type: 200}\n", (3, 16), "at most 20"),
        ("plan: P\nitems:\n  - item: tank\n    fix: {mettal: V}\n", (4, 11), "did you mean 'metal'?"),
        ("plan: P\nitems: [tank]\nslips: none.yaml\n", (3, 8), "none.yaml"),
        ("plan: P\nitems: [tank]\nattach: [calculator]\n", (3, 10), "'calculator' does not do here"),
    ],
)
def test_what_is_wrong_in_a_plan_is_named_at_its_place(tmp_path, plan, place, words):
    (tmp_path / "tank.yaml").write_text(TANK, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text(plan, encoding="utf-8")
    ran = set_plan(tmp_path)
    assert ran.code == 1, ran.said
    assert place in places(ran, tmp_path / "plan.yaml"), ran.said
    assert words in ran.err


def test_a_language_that_is_not_there_is_said(tmp_path):
    (tmp_path / "tank.yaml").write_text(TANK, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: P\nlanguage: xx\nitems: [tank]\n", encoding="utf-8")
    ran = set_plan(tmp_path)
    assert ran.code in (1, 2)
    assert "xx" in ran.err


# --- rosters --------------------------------------------------------------------------------------------

NAMES = ["Siobhán O'Dálaigh", "D’Arcy-Łukaszewicz", "עדי לוריא", "ليلى الهادي", "王 小美", "김하나", "50% & {Sons}_#"]


def roster(folder: Path, content: str | bytes) -> Ran:
    """`set` on the tank with a roster."""
    path = folder / "class.csv"
    path.write_bytes(content if isinstance(content, bytes) else content.encode())
    return set_item(folder, TANK, "--candidates", str(path))


@pytest.mark.parametrize(
    ("content", "place", "words"),
    [
        ("", (1, 1), "the roster is empty"),
        ("candidate,name\n", (1, 1), "names no candidate"),
        ("id,name\ns1,A\n", (1, 1), "must name a column `candidate`"),
        ("candidate\ns1\ns2\nS1\n", (4, 1), "'S1' already stands on line 2"),
        ("candidate,name\n,A\n", (2, 1), "the candidate has no id"),
        ("candidate,name\ns1,A,B\n", (2, 6), "more cells than"),
        ('candidate,name\ns1,"A\n', (2, 4), "quotes"),
        ("candidate\n" + "x" * 65 + "\n", (2, 1), "at most 64 characters"),
        (b"candidate,name\ns1,Andr\xe9\n", (2, 8), "is not UTF-8"),
        ("candidate\ns\x001\n", (2, 2), "invisible character U+0000"),
    ],
)
def test_a_roster_that_cannot_be_used(tmp_path, content, place, words):
    ran = roster(tmp_path, content)
    assert ran.code == 1, ran.said
    assert place in places(ran, tmp_path / "class.csv"), ran.said
    assert words in ran.err


@pytest.mark.parametrize("mark", [",", ";", "\t"])
@pytest.mark.parametrize("end", ["\n", "\r\n"])
@pytest.mark.parametrize("start", ["", "\ufeff"])
def test_rosters_of_every_spreadsheet_are_read(tmp_path, mark, end, start):
    rows = [("candidate", "name"), ("s1", "Wren Aldous"), ("", ""), ("s2", "Ike Borrow")]
    ran = roster(tmp_path, start + end.join(mark.join(row) for row in rows) + end)
    assert ran.code == 0, ran.said
    assert "2 papers" in ran.out


def test_names_of_any_script_are_printed(tmp_path):
    rows = "".join(f's{at},"{name}"\n' for at, name in enumerate(NAMES, 1))
    ran = roster(tmp_path, "candidate,name\n" + rows)
    assert ran.code == 0, ran.said
    assert "Traceback" not in ran.said


def test_names_too_odd_to_print_never_crash(tmp_path):
    ran = roster(tmp_path, "candidate,name\ns1," + "\u0301" * 50 + "👩‍🔬🏳️‍🌈 \u202eevil\u202c ﷽ 𒐫\n")
    assert ran.code in (0, 1, 3), ran.said


# --- usage ----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ((), "say for whom"),
        (("--copies", "2", "--candidates", "x.csv"), "one of them"),
        (("--copies", "0"), "--copies"),
        (("--copies", "many"), "--copies"),
        (("--copies", "2", "--seed", ""), "a seed is"),
        (("--copies", "2", "--seed", "a\nb"), "a seed is"),
        (("--candidates", "nowhere.csv"), "cannot read nowhere.csv"),
        (("--copies", "8"), "8 papers are wanted, but only 7 different ones are possible"),
        (("--copies", "2", "--coppies", "3"), "--coppies"),
    ],
)
def test_wrong_usage_ends_with_2(tmp_path, arguments, words):
    (tmp_path / "tank.yaml").write_text(TANK, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: P\nitems: [tank]\n", encoding="utf-8")
    ran = run("set", tmp_path / "plan.yaml", *arguments, "--into", tmp_path / "made")
    assert ran.code == 2, ran.said
    assert words in ran.err
    assert not (tmp_path / "made").exists()


@pytest.mark.parametrize("name", ["nowhere", "x" * 5000, "a\nb", "../../../nowhere", "weekly-shee"])
def test_a_plan_that_is_not_there_ends_with_2(tmp_path, name):
    ran = run("set", name, "--copies", "1", "--into", tmp_path / "made")
    assert ran.code == 2
    assert "no plan" in ran.err


def test_a_target_that_exists_is_left_alone(tmp_path):
    (tmp_path / "made").mkdir()
    (tmp_path / "made" / "thesis.txt").write_text("years", encoding="utf-8")
    (tmp_path / "tank.yaml").write_text(TANK, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: P\nitems: [tank]\n", encoding="utf-8")
    for arguments in ((), ("--replace",)):
        ran = run("set", tmp_path / "plan.yaml", "--copies", "1", *arguments, "--into", tmp_path / "made")
        assert ran.code == 2
        assert "holds other files" in ran.err
    assert [path.name for path in (tmp_path / "made").iterdir()] == ["thesis.txt"]


@pytest.mark.parametrize("into", ["x" * 300, "tank.yaml/made", "tank.yaml", "/proc/none/made"])
def test_a_target_that_cannot_be_made_is_said(tmp_path, into):
    (tmp_path / "tank.yaml").write_text(TANK, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: P\nitems: [tank]\n", encoding="utf-8")
    ran = run("set", tmp_path / "plan.yaml", "--copies", "1", "--into", tmp_path / into)
    assert ran.code == 2, ran.said
    assert "Traceback" not in ran.said
