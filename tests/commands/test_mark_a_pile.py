"""`mark` with a file: the same words, faults and ledger whether one process judges or several, begun in any way."""

from __future__ import annotations

import json
import sys
from pathlib import Path

import pytest
from click.testing import CliRunner, Result
from papers_help import write_set

from authoring.cli import shieldwright
from authoring.commands import mark_file
from authoring.marking import cores
from authoring.marking.ledger import Ledger
from authoring.marking.recall import recalled

ITEM = """\
item: The evening tank
level: first-year
draw:
  metal: {block: d, period: 4, except: [Zn]}
  tank: {from: 1, to: 9}
story: Tank {{ tank }} holds {{ metal.name }}.
parts:
  - calculate: screening constant
    of: metal
    electron: outermost
    marks: 3
  - calculate: effective nuclear charge
    marks: 1
"""
PAPERS = 60


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A set of sixty papers and a pile of their scripts: right, slipped, doubled, unknown, misplaced, unreadable."""
    home = tmp_path_factory.mktemp("pile")
    made = write_set(home, ITEM, PAPERS)
    entries = []
    for at, paper in enumerate(made.papers):
        screening = paper.questions[0].parts[0].solved
        wrong = screening.wrong[at % len(screening.wrong)].shown
        said = ["ok", f"S = {screening.answer.shown}", wrong, "7.77", "what it was, I do not know"][at % 5]
        entries.append(f"- paper: {paper.code}\n  1a: '{said}'\n  1b: ['Z* = 3.30']\n")
    entries[9] = entries[9].replace("what it was, I do not know", "3.3 + = (")
    entries += [entries[3], entries[4].replace("7.77", "8.88").replace("I do", "we do")]
    entries += ["- paper: ZZZZZ\n  1a: 3\n", f"- paper: {made.papers[7].code}\n  4a: 3\n", "- paper: [x\n"]
    (home / "scripts.yaml").write_text("".join(entries), encoding="utf-8")
    return home


def marked(folder: Path, *options: str) -> tuple[Result, list[tuple[str, ...]]]:
    """What the command says, and what a new ledger keeps."""
    for kept in folder.glob("ledger*"):
        kept.unlink()
    ran = CliRunner().invoke(shieldwright, ["mark", str(folder), str(folder / "scripts.yaml"), *options])
    with Ledger.open(folder, recalled(folder).set_id, create=False) as ledger:
        return ran, [(each.kind, each.paper, each.part, each.payload) for each in ledger.history()]


@pytest.mark.parametrize("method", ["fork", "spawn"])
@pytest.mark.parametrize("options", [(), ("--full",), ("--json",)])
def test_several_processes_mark_as_one_does(
    folder: Path, monkeypatch: pytest.MonkeyPatch, method: str, options: tuple[str, ...]
) -> None:
    """Every line, every fault, every entry, in the same order."""
    if sys.platform == "win32" and method == "fork":
        pytest.skip("Windows cannot copy a process")
    monkeypatch.setattr(mark_file, "HEAP", 7)
    alone, kept_alone = marked(folder, *options)
    monkeypatch.setattr(mark_file, "FEWEST_TO_SPREAD", 1)
    monkeypatch.setattr(mark_file, "cores", lambda: 2)
    monkeypatch.setattr(cores, "method", lambda: method)
    together, kept_together = marked(folder, *options)
    assert (together.exit_code, together.output) == (alone.exit_code, alone.output)
    assert kept_together == kept_alone
    assert len(kept_alone) == 3 * PAPERS


def test_a_pile_is_judged_and_what_is_wrong_with_it_said(folder: Path) -> None:
    """The counts, the faults at their places, and the exit code."""
    ran, _ = marked(folder)
    assert ran.exit_code == 1
    assert "60 scripts, 120 parts;" in ran.output
    assert "no paper 'ZZZZZ' in this set" in ran.output
    assert "stands in this file twice; it says the same; the first one counts" in ran.output
    assert "stands in this file twice; it differs in 1a; the first one counts" in ran.output
    assert "has no part '4a'" in ran.output
    assert f"scripts.yaml:{9 * 3 + 2}:7: weakness: paper " in ran.output
    ran, _ = marked(folder, "--json")
    rows = json.loads(ran.output[: ran.output.rindex("]") + 1].partition("\n]\n")[0] + "\n]")
    assert len(rows) == 2 * PAPERS
    assert {row["certainty"] for row in rows} == {"certain", "ambiguous", "unexplained"}


def test_marking_a_pile_again_keeps_nothing_twice(folder: Path) -> None:
    """What was kept stays as it is."""
    _, first = marked(folder)
    CliRunner().invoke(shieldwright, ["mark", str(folder), str(folder / "scripts.yaml")])
    with Ledger.open(folder, recalled(folder).set_id) as ledger:
        assert len(ledger.history()) == len(first)
