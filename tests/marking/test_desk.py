"""The desk: lines in, judgement at once, accepted or changed, kept; stop and go on anywhere."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from click.testing import CliRunner

from authoring.cli import shieldwright
from authoring.faults import UsageError
from authoring.marking.desk import KEYS, WIDTH, Desk
from authoring.marking.ledger import Ledger
from authoring.marking.pile import Judge
from authoring.marking.recall import RecalledSet, recalled
from authoring.papers.assemble import assembled
from authoring.papers.questions import Terms
from authoring.papers.record_file import RECORD, written
from authoring.specs.plan import read_plan

ITEM = """\
item: The evening tank
level: first-year
draw:
  metal: [V]
story: A tank of {{ metal.name }}.
parts:
  - calculate: screening constant
    of: metal
    electron: 4s
    marks: 3
  - calculate: effective nuclear charge
    marks: 1
  - decide: first electron lost
    of: metal
    marks: 2
"""


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    """A set of two papers (the same variant)."""
    (tmp_path / "tank.yaml").write_text(ITEM, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: Desk\nitems: [tank.yaml]\n", encoding="utf-8")
    plan = read_plan(tmp_path / "plan.yaml")
    made = assembled(plan, Terms(plan.practice, plan.slips), "desk", [None, None], allow_repeats=True)
    target = tmp_path / "set"
    target.mkdir()
    (target / RECORD).write_text(written(made), encoding="utf-8")
    return target


def sit(folder: Path, typed: list[str], marker: str = "m1") -> tuple[list[str], RecalledSet]:
    """A sitting with what is typed; the rest of it is `stop`."""
    of = recalled(folder)
    said: list[str] = []
    keys: Iterator[str] = iter(typed)

    def ask(words: str) -> str:
        said.append(words)
        return next(keys, "stop")

    with Ledger.open(folder, of.set_id) as ledger:
        Desk(of, ledger, marker, ask, said.append).run()
    return said, of


def marks(folder: Path, marker: str | None = None) -> dict[str, int]:
    """The current marks of the first paper by part."""
    of = recalled(folder)
    with Ledger.open(folder, of.set_id) as ledger:
        events = ledger.current(paper=of.codes[0], marker=marker)
        return {event.part: event.mark.judgement.awarded for event in events}


RIGHT = ["", "0.35 + 11*0.85 + 10 = 19.70", "", "", "3.30", "", "", "Zeff(4s) = 3.30 < Zeff(3d) = 4.30 → 4s", "", ""]


def test_a_right_script_earns_full_marks(folder: Path) -> None:
    """Every part accepted as proposed."""
    said, _ = sit(folder, RIGHT)
    assert marks(folder) == {"1a": 3, "1b": 1, "1c": 2}
    assert "1 of 2 papers are marked" in said[-1]


def test_other_marks_need_a_reason_and_are_kept_with_it(folder: Path) -> None:
    """The judgement stays in the history beside the change."""
    sit(folder, ["", "19.70", "", "2", "", "no working shown", "stop"])
    assert marks(folder) == {"1a": 2}
    of = recalled(folder)
    with Ledger.open(folder, of.set_id) as ledger:
        kinds = [(event.kind, event.reason) for event in ledger.history(part="1a")]
    assert ("judgement", "") in kinds
    assert ("change", "no working shown") in kinds


def test_it_goes_on_where_it_stopped_with_the_candidates_own_values(folder: Path) -> None:
    """After a wrong S in the first sitting, Z_eff is judged on it in the second."""
    sit(folder, ["", "0.35 + 11 + 10 = 21.35", "", "", "stop"])
    said, _ = sit(folder, ["", "1.65", "", "", "stop"])
    assert marks(folder) == {"1a": 2, "1b": 1}
    assert any("follow-through" in words for words in said)


def test_later_leaves_a_part_open(folder: Path) -> None:
    """A part left for later is not marked, and the paper is not done."""
    said, of = sit(folder, ["", "later", "3.30", "", "", "later"])
    assert marks(folder) == {"1b": 1}
    assert "0 of 2 papers" in said[-1]
    assert of.codes[0] in [word for words in said for word in words.replace("[", " ").replace("]", " ").split()]


def test_unknown_codes_and_marks_are_asked_again(folder: Path) -> None:
    """The nearest code is named; marks beyond the part's are refused."""
    said, of = sit(folder, ["QQQQQ", "", "ok", "9", "0", "copied from a neighbour", "stop"])
    assert any("no paper 'QQQQQ'" in words for words in said)
    assert any("a number from 0 to 3" in words for words in said)
    assert marks(folder) == {"1a": 0}
    assert len(of.codes) == 2


def test_the_screen_is_narrow_enough() -> None:
    """Readable at 80 columns."""
    assert max(map(len, KEYS.splitlines())) <= WIDTH


def test_two_markers_differ_and_a_decision_settles_it(folder: Path, tmp_path: Path) -> None:
    """Double marking: differences are shown, a decision with a reason settles them."""
    sit(folder, ["", "19.70", "", ""], "m1")
    sit(folder, ["", "19.70", "", "1", "method not shown"], "m2")
    code = recalled(folder).codes[0]
    run = CliRunner()
    shown = run.invoke(shieldwright, ["mark", str(folder), "--differences"])
    assert f"{code}  1a  m1 3, m2 1" in shown.output
    refused = run.invoke(shieldwright, ["mark", str(folder), "--decide", code, "1a", "2"])
    assert isinstance(refused.exception, UsageError)
    settled = run.invoke(
        shieldwright, ["mark", str(folder), "--decide", code, "1a", "2", "--reason", "agreed", "--differences"]
    )
    assert "2 of 3 decided" in settled.output
    assert "0 parts differ" in settled.output


def test_a_file_is_judged_and_kept(folder: Path, tmp_path: Path) -> None:
    """With a file: what needs a person is listed, everything is in the ledger, doubles are compared."""
    code, other = recalled(folder).codes
    scripts = tmp_path / "scripts.yaml"
    scripts.write_text(
        f"- paper: {code}\n  a: ok\n  b: 17.77\n  c: 4s\n- paper: {other}\n  a: ok\n- paper: {other}\n  a: 19.70\n"
        "- paper: ZZZZZ\n  a: ok\n",
        encoding="utf-8",
    )
    result = CliRunner().invoke(shieldwright, ["mark", str(folder), str(scripts)])
    assert result.exit_code == 1
    assert "unexplained: 0 of 1" in result.output
    assert "stands in this file twice; it differs in 1a" in result.output
    assert "no paper 'ZZZZZ'" in result.output
    assert "a person to confirm" in result.output
    assert marks(folder) == {"1a": 3, "1b": 0, "1c": 1}


def test_of_alternatives_the_better_one_counts_once(tmp_path: Path) -> None:
    """A part of `either` is marked under its own label, out of one alternative's marks."""
    two = "  - either:\n      - calculate: effective nuclear charge\n        of: V\n        electron: 4s\n"
    two += "        marks: 1\n"
    two += "      - calculate: effective nuclear charge\n        of: V\n        electron: 3d\n        marks: 1\n"
    (tmp_path / "two.yaml").write_text(f"item: Two\nlevel: majors\nstory: Two ways.\nparts:\n{two}", encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: Two\nitems: [two.yaml]\n", encoding="utf-8")
    plan = read_plan(tmp_path / "plan.yaml")
    made = assembled(plan, Terms(plan.practice, plan.slips), "two", [None])
    folder = tmp_path / "set"
    folder.mkdir()
    (folder / RECORD).write_text(written(made), encoding="utf-8")
    of = recalled(folder)
    paper = of.paper(of.codes[0])
    assert paper.labels == ("1a",)
    for line, awarded in (("3.30", 1), ("4.30", 1), ("9.99", 0)):
        (judgement,) = Judge(of).paper(paper, {"1a": (line,)})
        assert (judgement.awarded, judgement.out_of) == (awarded, 1)
