"""For every quantity, task, slip and fault code: a guide entry, and a trigger in this file's table."""

from __future__ import annotations

import ast
from collections.abc import Iterable
from pathlib import Path

import pytest
from commands_help import run
from papers_help import TANK, TERMS, plan

import authoring
from authoring.commands.guide_topics import TOPICS, topic
from authoring.faults import Fault, FaultsFound
from authoring.marking.pile import Firsts, Judge
from authoring.marking.recall import recalled
from authoring.marking.scripts import read_scripts
from authoring.papers.assemble import assembled
from authoring.papers.questions import Terms
from authoring.papers.record_file import RECORD, written
from authoring.papers.vet import vetted_item, vetted_plan
from authoring.shielding.quantity import quantities
from authoring.slips.catalogue import catalogue
from authoring.specs.plan import read_plan
from authoring.specs.roster import Candidate, read_roster
from authoring.tasks.task import tasks

HOUSE = Path(authoring.__file__).parent
ENTRIES = [
    *(("quantity", name) for name in quantities()),
    *(("task", name) for name in tasks()),
    *(("slip", name) for name in catalogue()),
    *((name, "") for name in TOPICS),
]


@pytest.mark.parametrize(("name", "detail"), ENTRIES)
def test_the_guide_has_an_entry_within_80_columns(name, detail):
    text = topic(name, detail)
    assert len(text) > 80
    assert detail.lower() in text.lower()
    assert [line for line in text.splitlines() if len(line) > 80] == []


def test_the_guide_lists_every_topic():
    ran = run("guide")
    assert ran.code == 0
    assert all(f"  {name} " in ran.out for name in TOPICS)


def test_an_unknown_topic_is_answered_with_the_nearest():
    ran = run("guide", "quantiy")
    assert (ran.code, "did you mean 'quantity'?" in ran.err) == (2, True)
    ran = run("guide", "task", "selct")
    assert (ran.code, "did you mean 'select'?" in ran.err) == (1, True)


# --- fault codes ----------------------------------------------------------------------------------------

MAKERS = {"Fault", "from_error", "fault", "complain", "weak", "_fault"}


def strings(node: ast.expr) -> Iterable[str]:
    """The texts that an argument may be: a constant, or either branch of a choice."""
    if isinstance(node, ast.Constant) and isinstance(node.value, str):
        yield node.value
    elif isinstance(node, ast.IfExp):
        yield from (*strings(node.body), *strings(node.orelse))


def codes_in_source() -> set[str]:
    """Every fault code that the program can give."""
    found: set[str] = set()
    for path in HOUSE.rglob("*.py"):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call) and node.args:
                name = node.func.attr if isinstance(node.func, ast.Attribute) else getattr(node.func, "id", "")
                if name in MAKERS:
                    found.update(strings(node.args[0]))
    return found


PLAN = "plan: P\nitems: [tank]\n"
WHOLE = (
    "item: T\nlevel: majors\ndraw:\n  metal: {among: [He, V]}\nstory: A paper exercise.\n"
    "parts:\n  - calculate: total energy\n    of: metal\n"
)
EITHER = (
    "  - either:\n      - calculate: screening constant\n        of: metal\n        electron: outer\n        marks: 3\n"
    "      - calculate: first electron lost\n        of: metal\n        marks: 1\n"
)

# The kind of file, and its text: what it is read as gives the code.
TRIGGERS: dict[str, tuple[str, str | bytes]] = {
    "condition": ("item", TANK.replace("story:", "keep:\n  - metal.name > 3\nstory:")),
    "control-character": ("item", TANK.replace("evening", "eve\x07ning")),
    "convention": ("plan", PLAN + "conventions: {1s pear: 0.30}\n"),
    "csv-column": ("scripts.csv", "paper,colour\nABCDE,red\n"),
    "csv-row": ("scripts.csv", "paper,1a\nABCDE,1,2,3\n"),
    "csv-syntax": ("scripts.csv", 'paper,1a\n"ABCDE" x,"1"\n'),
    "draw": ("item", TANK.replace("block: d", "block: x")),
    "draw-name": ("item", TANK.replace("  metal:", "  Metal:")),
    "empty-pool": ("item", TANK.replace("shell: outermost", "shell: inner f")),
    "given": ("item", TANK + "given:\n  - caption: Nothing\n"),
    "missing-key": ("item", TANK.replace("level: first-year\n", "")),
    "no-item": ("plan", PLAN.replace("tank", "nowhere")),
    "no-language": ("plan", PLAN + "language: xx\n"),
    "no-rounding": ("item", TANK + "  - calculate: orbital energy\n    ask: Find the energy.\n"),
    "no-slips": ("plan", PLAN + "slips: nowhere.yaml\n"),
    "no-task": ("item", TANK.replace("- calculate: eff", "- computed: eff")),
    "not-utf8": ("item", TANK.encode().replace(b"evening", b"ev\xe9ning")),
    "nothing-kept": ("item", TANK.replace("story:", "keep:\n  - metal.z > 99\nstory:")),
    "one-variant": ("item", TANK.replace("block: d, period: 4, except: [Cr, Cu, Zn]", "among: [V]")),
    "pool-too-large": ("item", TANK.replace("draw:\n", "draw:\n  a: {from: 1, to: 90000}\n  b: {from: 1, to: 9}\n")),
    "roster-candidate": ("roster", "candidate,name\n,A\n"),
    "roster-cell": ("roster", "candidate,name\ns1,A,B\n"),
    "roster-columns": ("roster", "id\ns1\n"),
    "roster-duplicate": ("roster", "candidate\ns1\ns1\n"),
    "roster-empty": ("roster", ""),
    "roster-quotes": ("roster", 'candidate\n"s1\n'),
    "roster-size": ("roster", "candidate\n" + "\n".join(f"s{at}" for at in range(20_001))),
    "rule-differs": ("item", TANK.replace("block: d, period: 4, except: [Cr, Cu, Zn]", "among: [V, Mn], charge: 1+")),
    "script-entry": ("scripts.yaml", "- just words\n- paper: ABCDE\n"),
    "script-label": ("scripts.yaml", "- paper: ABCDE\n  answers: x\n"),
    "script-lines": ("scripts.yaml", "- paper: ABCDE\n  1a:\n    b: x\n"),
    # CODE is the code of the only paper of a set of the tank, sat by s1.
    "script-candidate": ("pile", "- paper: CODE\n  candidate: s2\n  1a: ok\n"),
    "script-twice": ("pile", "- paper: CODE\n  1a: ok\n- paper: CODE\n  1a: 3.30\n"),
    "script-unknown-paper": ("pile", "- paper: ZZZZZ\n  1a: ok\n"),
    "script-unreadable": ("pile", "- paper: CODE\n  1a:\n    - S = 3.30\n    - = = (\n"),
    "script-unknown-part": ("pile", "- paper: CODE\n  9z: ok\n"),
    "script-paper": ("scripts.yaml", "- 1a: 3.30\n"),
    "scripts-list": ("scripts.yaml", "paper: ABCDE\n"),
    "scripts-none": ("scripts.yaml", ""),
    "slip": ("slips", "my-slip: {did: nothing}\n"),
    "slips": ("slips", "- a\n"),
    "single-braces": ("item", TANK + "    ask: Find it for {species}.\n"),
    "template": ("item", TANK.replace("metal.name", "metal.colour")),
    "text": ("item", TANK.replace("dissolved", "`Xq`")),
    "undefined": ("item", TANK.replace("metal.name", "steel.name")),
    "unequal": ("item", TANK.split("parts:")[0] + "parts:\n" + EITHER),
    "unequal-marks": ("item", WHOLE),
    "unequal-working": ("item", WHOLE),
    "unknown-key": ("item", TANK + "colour: red\n"),
    "unreadable": ("nothing", ""),
    "unsolvable": ("item", TANK.replace("electron: outer\n", "electron: 5s\n")),
    "wrong-value": ("item", TANK.replace("electron: outer\n", "electron: outer\n    marks: three\n")),
    "wrong-word": ("item", TANK.replace("first-year", "second-year")),
    "yaml-alias": ("item", TANK.replace("The evening", "&a The evening")),
    "yaml-depth": ("item", "[" * 60),
    "yaml-documents": ("item", TANK + "---\na: b\n"),
    "yaml-duplicate-key": ("item", TANK + "level: majors\n"),
    "yaml-folded": ("item", TANK.replace("story: |", "story: >")),
    "yaml-key": ("item", TANK + "? [a]\n: b\n"),
    "yaml-merge-key": ("item", TANK + "<<: {a: b}\n"),
    "yaml-syntax": ("item", TANK + "a: b: c\n"),
    "yaml-tag": ("item", TANK.replace("The evening", "!!str The evening")),
}


def pile_faults(folder: Path, text: str) -> tuple[Fault, ...]:
    """What marking says of scripts that read well but do not fit their set."""
    made = assembled(plan({"tank": TANK}), TERMS, "s", [Candidate("s1")])
    (folder / RECORD).write_text(written(made), encoding="utf-8")
    (folder / "scripts.yaml").write_text(text.replace("CODE", made.papers[0].code), encoding="utf-8")
    read = read_scripts(folder / "scripts.yaml")
    assert read.faults == ()
    of = recalled(folder)
    judge, firsts = Judge(of), Firsts(of)
    faults: list[Fault] = []
    for script in read.scripts:
        judged, found = judge.script(script)
        again = firsts.again(script) if judged else None
        faults += [*found, *([again] if again else [])]
    return tuple(faults)


def faults_of(folder: Path, kind: str, text: str | bytes) -> tuple[Fault, ...]:
    """What the reader of a kind of file says of a text."""
    path = folder / (kind if "." in kind else "tank.yaml" if kind == "item" else f"{kind}.yaml")
    if kind != "nothing":
        path.write_bytes(text if isinstance(text, bytes) else text.encode())
    if kind == "plan" or kind == "slips":
        (folder / "tank.yaml").write_text(TANK, encoding="utf-8")
        if kind == "slips":
            path = folder / "plan.yaml"
            path.write_text(PLAN + "slips: slips.yaml\n", encoding="utf-8")
        return vetted_plan(path)[0].findings
    if kind == "pile":
        return pile_faults(folder, str(text))
    if kind == "roster":
        with pytest.raises(FaultsFound) as caught:
            read_roster(path)
        return caught.value.faults
    return read_scripts(path).faults if kind.startswith("scripts") else vetted_item(path).findings


@pytest.mark.parametrize("code", TRIGGERS)
def test_a_fault_is_triggered_at_a_place(tmp_path, code):
    found = {fault.code: fault for fault in faults_of(tmp_path, *TRIGGERS[code])}
    assert code in found
    source = found[code].source
    assert code == "unreadable" or (source is not None and source.line >= 1 and source.column >= 1)


def test_every_code_in_the_source_has_a_trigger():
    assert codes_in_source() == set(TRIGGERS)


def test_faults_met_while_assembling_are_told_once_for_many_papers(tmp_path):
    (tmp_path / "tank.yaml").write_text(TANK.replace("dissolved", "`Xq`"), encoding="utf-8")
    (tmp_path / "plan.yaml").write_text(PLAN, encoding="utf-8")
    read = read_plan(tmp_path / "plan.yaml")
    with pytest.raises(FaultsFound) as caught:
        assembled(read, Terms(read.practice, read.slips), "s", [None] * 7)
    assert [(fault.code, fault.message.endswith("; and 6 more variants")) for fault in caught.value.faults] == [
        ("text", True)
    ]
