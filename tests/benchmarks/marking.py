"""How long judging takes, stage by stage, against parsing the same YAML with the C loader: no ledger, no terminal.

`python tests/benchmarks/marking.py`; the whole command has its rows in run.py, which lets this file write its class.
"""

from __future__ import annotations

import json
import random
import sys
import tempfile
import time
import tracemalloc
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import TypeVar

if __name__ == "__main__":
    sys.path[:0] = [str(Path(__file__).parents[1]), str(Path(__file__).parents[2])]

import yaml
from marking_help import Candidate, styled
from run import write_plan

from authoring.faults import ContentError
from authoring.marking.pile import Judge
from authoring.marking.recall import RecalledSet, recalled
from authoring.marking.scripts import read_scripts
from authoring.papers.assemble import assembled
from authoring.papers.questions import Terms
from authoring.papers.record_file import RECORD, written
from authoring.shielding.practice import published
from authoring.slips.catalogue import applied, shipped
from authoring.specs.plan import read_plan
from authoring.tasks.solved import Solved

SCRIPTS = 10_000
Made = TypeVar("Made")


@dataclass(frozen=True)
class Measured:
    """Seconds for each stage, and the growth of memory while judging, in MB."""

    parsing: float
    recalling: float
    reading: float
    judging: float
    growth: float

    @property
    def ratio(self) -> float:
        """Reading and judging against parsing the same file with the C loader."""
        return (self.reading + self.judging) / self.parsing


def class_of(count: int, folder: Path) -> None:
    """A set of papers, and a script for each: as the key, worked in many notations, with a slip, or bare values."""
    write_plan(folder)
    plan = read_plan(folder / "plan.yaml")
    made = assembled(plan, Terms(plan.practice, plan.slips), "marking", [None] * count)
    (folder / RECORD).write_text(written(made), encoding="utf-8")
    rng = random.Random("class")
    lines = []
    for paper in made.papers:
        lines.append(f"- paper: {paper.code}")
        for at, question in enumerate(paper.questions, 1):
            parts = [(f"{at}{part.label}", part.solved) for part in question.parts]
            lines += [f"  {label}: {json.dumps(answer, ensure_ascii=False)}" for label, answer in _answers(parts, rng)]
    (folder / "scripts.yaml").write_text("\n".join(lines) + "\n", encoding="utf-8")


def _answers(parts: list[tuple[str, Solved]], rng: random.Random) -> list[tuple[str, list[str]]]:
    kind = rng.choice(["ok", "right", "right", "slip", "bare"])
    if kind == "ok":
        return [(label, ["ok"]) for label, _ in parts]
    slips = (rng.choice(shipped().items[:12]),) if kind == "slip" else ()
    style = styled(rng, "final" if kind == "bare" else None)
    candidate = Candidate(applied(slips, published()), style, rng, published())
    try:
        return [(label, candidate.write(solved).lines) for label, solved in parts]
    except ContentError:
        return [(label, [solved.answer.shown]) for label, solved in parts]


def timed(make: Callable[[], Made]) -> tuple[float, Made]:
    """Seconds that something takes, and what it makes."""
    begun = time.perf_counter()
    made = make()
    return time.perf_counter() - begun, made


def judged_all(of: RecalledSet, path: Path) -> int:
    """Judge every script of a file, keeping nothing."""
    judge = Judge(of)
    return sum(1 for script in read_scripts(path).scripts if judge.script(script))


def marking_ratio(count: int = SCRIPTS) -> Measured:
    """Each stage of marking on a class of scripts with six parts each."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        class_of(count, folder)
        path = folder / "scripts.yaml"
        parsing, _ = timed(lambda: yaml.load(path.read_text(encoding="utf-8"), yaml.CSafeLoader))
        recalling, of = timed(lambda: recalled(folder))
        reading, read = timed(lambda: read_scripts(path))
        judge = Judge(of)
        judging, _ = timed(lambda: sum(1 for script in read.scripts if judge.script(script)))
        tracemalloc.start()
        judged_all(recalled(folder), path)
        growth = tracemalloc.get_traced_memory()[0] / 1e6
        tracemalloc.stop()
    return Measured(parsing, recalling, reading, judging, growth)


def main() -> None:
    """Print the stages; with a folder, only write a class there."""
    if len(sys.argv) > 1:
        class_of(SCRIPTS, Path(sys.argv[1]))
        return
    found = marking_ratio()
    sys.stdout.write(
        f"{SCRIPTS:,} scripts of 6 parts: C loader {found.parsing:.2f} s; record {found.recalling:.2f} s, "
        f"reading {found.reading:.2f} s, judging {found.judging:.2f} s: {found.ratio:.1f} x without the record; "
        f"{found.growth:.0f} MB kept\n"
    )


if __name__ == "__main__":
    main()
