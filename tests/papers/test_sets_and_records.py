"""Papers for a class, their record, and the folder that appears whole or not at all."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
from collections import Counter
from pathlib import Path

import pytest
from papers_help import TANK, TERMS, plan

from authoring.faults import FaultsFound, UsageError
from authoring.papers.assemble import PaperSet, assembled
from authoring.papers.folder import LEDGER, checked_target, whole_folder
from authoring.papers.record import record
from authoring.papers.record_file import RECORD, read_drawn, read_record, used_variants, written
from authoring.specs.roster import Candidate

SECOND = TANK.replace("The evening tank", "The second tank").replace("[Cr, Cu, Zn]", "[Cr, Cu, Zn, Sc]")


def made(copies: int, seed: str = "s", more: str = "", **options: bool) -> PaperSet:
    """A set of two items with 7 and 6 variants."""
    return assembled(plan({"first": TANK, "second": SECOND}, more), TERMS, seed, [None] * copies, **options)


def variables(paper_set: PaperSet) -> list[tuple[str, ...]]:
    """What was drawn, paper by paper."""
    return [tuple(q.variant.variables["metal"] for q in paper.questions) for paper in paper_set.papers]


def test_no_two_papers_are_alike_while_the_pools_allow():
    assert len(set(variables(made(42)))) == 42


def test_more_papers_than_there_are_need_a_word():
    with pytest.raises(UsageError, match="43 papers are wanted, but only 42 different ones are possible"):
        made(43)
    counts = Counter(variables(made(84, allow_repeats=True)))
    assert set(counts.values()) == {2}


def test_every_variant_is_used_as_often_as_every_other():
    counts = Counter(first for first, _ in variables(made(21)))
    assert set(counts.values()) == {3}


def test_faults_of_several_items_come_together():
    broken = TANK.replace("block: d", "block: x")
    with pytest.raises(FaultsFound) as caught:
        assembled(plan({"first": broken, "second": TANK.replace("[Cr, Cu, Zn]", "[Sc-Zn]")}), TERMS, "s", [None])
    assert [(fault.code, fault.source.path) for fault in caught.value.faults if fault.source] == [
        ("draw", "first.yaml"),
        ("empty-pool", "second.yaml"),
    ]


def test_a_later_set_can_keep_apart_from_an_earlier_one(tmp_path):
    earlier = made(3)
    (tmp_path / RECORD).write_text(written(earlier), encoding="utf-8")
    used = used_variants(read_record(tmp_path))
    both = plan({"first": TANK, "second": SECOND})
    later = assembled(both, TERMS, "s", [None] * 4, apart_from=used)
    for place in (0, 1):
        assert not {row[place] for row in variables(earlier)} & {row[place] for row in variables(later)}
    everything = used_variants(record(made(42)))
    with pytest.raises(UsageError, match="every variant of first stands in the earlier set"):
        assembled(both, TERMS, "s", [None], apart_from=everything)


def test_a_record_reads_back_as_it_was_written(tmp_path):
    paper_set = made(5, more="conventions:\n  1s pair: 0.35\n")
    path = tmp_path / RECORD
    path.write_text(written(paper_set), encoding="utf-8")
    back = read_record(tmp_path)
    assert back == record(paper_set) == read_record(path)
    assert back["seed"] == "s"
    assert back["conventions"] == {"1s pair": "0.35"}
    assert [paper["code"] for paper in back["papers"]] == [paper.code for paper in paper_set.papers]
    assert back["texts"]["items"] == {"first": TANK, "second": SECOND}


def without_parts(data: dict) -> dict:
    for paper in data["papers"]:
        for item in paper["items"]:
            item["parts"] = []
    return data


def test_what_was_drawn_reads_without_the_answers(tmp_path):
    path = tmp_path / RECORD
    path.write_text(written(made(5)), encoding="utf-8")
    assert read_drawn(tmp_path) == without_parts(read_record(tmp_path))


@pytest.mark.parametrize("form", [{}, {"indent": 1}, {"indent": 2}, {"separators": (",", ":")}])
def test_a_record_laid_out_anew_reads_the_same(tmp_path, form):
    path = tmp_path / RECORD
    whole = record(made(5))
    path.write_text(json.dumps(whole, **form), encoding="utf-8")
    assert read_record(tmp_path) == whole == read_drawn(tmp_path)


def test_a_record_broken_off_is_said_at_any_place(tmp_path):
    path = tmp_path / RECORD
    text = written(made(2)).encode()
    for end in range(0, len(text) - 2, max(1, len(text) // 200)):
        path.write_bytes(text[:end])
        with pytest.raises(UsageError, match="is damaged: it is not JSON"):
            read_drawn(tmp_path)


def test_numbers_of_a_record_are_text_with_a_plain_minus():
    def walk(value: object) -> None:
        assert value is None or isinstance(value, str | list | dict) or value is True or isinstance(value, int)
        if isinstance(value, str) and value.strip("\u2212-").replace(".", "").isdigit():
            assert "\u2212" not in value
        for inner in value.values() if isinstance(value, dict) else value if isinstance(value, list) else ():
            walk(inner)

    energy = TANK + "  - calculate: orbital energy\n"
    paper_set = assembled(plan({"tank": energy}), TERMS, "s", [None])
    data = record(paper_set)
    walk(data["papers"])
    assert data["papers"][0]["items"][0]["parts"][2]["answer"].startswith("-")


def test_names_stay_out_of_the_record():
    candidates = [Candidate("s100", "Odalys Quennel", "large print", "B4")]
    text = written(assembled(plan({"tank": TANK}), TERMS, "s", candidates))
    assert '"candidate": "s100"' in text
    assert not any(word in text for word in ("Odalys", "Quennel", "large print", "B4"))


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (None, "no set to read"),
        ("{", "is damaged: it is not JSON"),
        ("[" * 100_000, "is damaged: it is not JSON"),
        ("[]", "is not a record of a set"),
        ('{"format": "other", "papers": []}', "is not a record of a set"),
        ('{"format": "shieldwright set 1"}', "is not a record of a set"),
    ],
)
def test_what_is_no_record_is_said(tmp_path, content, words):
    if content is not None:
        (tmp_path / RECORD).write_text(content, encoding="utf-8")
    for read in (read_record, read_drawn):
        with pytest.raises(UsageError) as caught:
            read(tmp_path)
        assert words in caught.value.message


# --- the folder -----------------------------------------------------------------------------------------


def fill(target: Path, text: str, replace: bool = False) -> None:
    """Write a set's folder in one go."""
    with whole_folder(target, replace) as scratch:
        (scratch / RECORD).write_text(text, encoding="utf-8")


def test_a_folder_appears_with_everything_in_it(tmp_path):
    fill(tmp_path / "new" / "set", "one")
    assert [path.name for path in (tmp_path / "new").iterdir()] == ["set"]
    assert (tmp_path / "new" / "set" / RECORD).read_text(encoding="utf-8") == "one"


def test_an_empty_folder_may_be_there_already(tmp_path):
    (tmp_path / "set").mkdir()
    fill(tmp_path / "set", "one")
    assert (tmp_path / "set" / RECORD).read_text(encoding="utf-8") == "one"


@pytest.mark.parametrize("error", [RuntimeError("broken"), KeyboardInterrupt(), FaultsFound(())])
def test_nothing_is_left_of_work_that_failed(tmp_path, error):
    with pytest.raises(type(error)), whole_folder(tmp_path / "set", False) as scratch:
        (scratch / RECORD).write_text("half", encoding="utf-8")
        raise error
    assert list(tmp_path.iterdir()) == []


def test_the_former_set_stays_where_its_replacement_fails(tmp_path):
    fill(tmp_path / "set", "one")
    with pytest.raises(RuntimeError), whole_folder(tmp_path / "set", True) as scratch:
        (scratch / RECORD).write_text("half", encoding="utf-8")
        raise RuntimeError
    assert (tmp_path / "set" / RECORD).read_text(encoding="utf-8") == "one"
    assert [path.name for path in tmp_path.iterdir()] == ["set"]


def test_the_former_set_stays_where_the_last_rename_fails(tmp_path, monkeypatch):
    fill(tmp_path / "set", "one")
    rename = Path.rename

    def refusing(self: Path, target: Path) -> Path:
        if self.name.startswith(".set-"):
            raise OSError(28, "No space left on device")
        return rename(self, target)

    monkeypatch.setattr(Path, "rename", refusing)
    with pytest.raises(UsageError, match="cannot be written: No space left"):
        fill(tmp_path / "set", "two", replace=True)
    assert (tmp_path / "set" / RECORD).read_text(encoding="utf-8") == "one"
    assert [path.name for path in tmp_path.iterdir()] == ["set"]


def test_a_set_is_replaced_only_on_request_and_never_with_marks(tmp_path):
    target = tmp_path / "set"
    fill(target, "one")
    with pytest.raises(UsageError, match="holds a set already; say --replace"):
        fill(target, "two")
    fill(target, "two", replace=True)
    assert (target / RECORD).read_text(encoding="utf-8") == "two"
    (target / LEDGER).write_bytes(b"")
    with pytest.raises(UsageError, match="holds marks already"):
        fill(target, "three", replace=True)


def test_folders_that_are_not_sets_are_left_alone(tmp_path):
    (tmp_path / "mine").mkdir()
    (tmp_path / "mine" / "thesis.txt").write_text("years of work", encoding="utf-8")
    (tmp_path / "file").write_text("", encoding="utf-8")
    (tmp_path / "link").symlink_to(tmp_path / "nowhere")
    for name, words in (("mine", "holds other files"), ("file", "is not a folder"), ("link", "is not a folder")):
        with pytest.raises(UsageError, match=words):
            checked_target(tmp_path / name, True)
    assert (tmp_path / "mine" / "thesis.txt").read_text(encoding="utf-8") == "years of work"


def test_a_place_that_cannot_be_written_is_said(tmp_path):
    (tmp_path / "file").write_text("", encoding="utf-8")
    for target in (tmp_path / "file" / "set", Path("/proc/none/set"), tmp_path / ("x" * 300)):
        with pytest.raises(UsageError):
            fill(target, "one")


WORKER = """
import sys, time
from pathlib import Path
from authoring.papers.folder import whole_folder
with whole_folder(Path(sys.argv[1]), True) as scratch:
    (scratch / "set.json").write_text("half")
    print("writing", flush=True)
    time.sleep(60)
"""


@pytest.mark.parametrize("how", [signal.SIGINT, signal.SIGKILL])
@pytest.mark.parametrize("former", [False, True])
def test_a_killed_program_leaves_no_half_written_set(tmp_path, how, former):
    """SIGKILL leaves the hidden scratch folder, as nothing can clean up then; the target is never half a set."""
    target = tmp_path / "set"
    if former:
        fill(target, "one")
    worker = subprocess.Popen(
        [sys.executable, "-c", WORKER, str(target)], stdout=subprocess.PIPE, stderr=subprocess.DEVNULL
    )
    assert worker.stdout is not None
    assert worker.stdout.readline() == b"writing\n"
    os.kill(worker.pid, how)
    worker.wait(30)
    worker.stdout.close()
    shown = sorted(path.name for path in tmp_path.iterdir() if not path.name.startswith("."))
    hidden = [path.name for path in tmp_path.iterdir() if path.name.startswith(".")]
    assert shown == (["set"] if former else [])
    assert len(hidden) == (1 if how == signal.SIGKILL else 0)
    if former:
        assert (target / RECORD).read_text(encoding="utf-8") == "one"
    fill(target, "two", replace=True)
    assert (target / RECORD).read_text(encoding="utf-8") == "two"


def test_a_record_does_not_depend_on_the_hash_seed(tmp_path):
    """Two interpreters with different hash seeds write the same bytes."""
    texts = []
    (tmp_path / "tank.yaml").write_text(TANK, encoding="utf-8")
    (tmp_path / "plan.yaml").write_text("plan: P\nitems: [tank]\n", encoding="utf-8")
    code = (
        "from pathlib import Path; from authoring.specs.plan import read_plan;"
        "from authoring.papers.assemble import assembled; from authoring.papers.questions import Terms;"
        "from authoring.papers.record_file import written; p = read_plan(Path('plan.yaml'));"
        "print(written(assembled(p, Terms(p.practice, p.slips), 's', [None] * 7)))"
    )
    for seed in ("1", "2"):
        environment = {**os.environ, "PYTHONHASHSEED": seed}
        done = subprocess.run(
            [sys.executable, "-c", code], cwd=tmp_path, env=environment, capture_output=True, check=True, timeout=60
        )
        texts.append(done.stdout)
    assert texts[0] == texts[1]
    assert json.loads(texts[0])["seed"] == "s"
