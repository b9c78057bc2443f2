"""The promised ratios, measured: `python tests/benchmarks/run.py [NAME…]`; no part of the test suite.

Every row compares two things in one run, in pairs, one after the other, and gives the median of the pairs' ratios,
so that a slow moment of the machine strikes both. Names: start, tabulate, set, vet, mark.
"""

from __future__ import annotations

import json
import os
import re
import shutil
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from pathlib import Path
from typing import TextIO

HERE = Path(__file__).resolve().parent
PROGRAM = [sys.executable, "-c", "from authoring.cli import main; main()"]


@dataclass(frozen=True, slots=True)
class Row:
    """One promise: what was measured, how it was promised, and whether it holds."""

    what: str
    measured: str
    promised: str
    holds: bool


def seconds(command: list[str], folder: Path | None = None, environment: dict[str, str] | None = None) -> float:
    """The time of one command that must succeed; its output is thrown away."""
    begun = time.perf_counter()
    done = subprocess.run(command, cwd=folder, env=environment, stdout=subprocess.DEVNULL, stderr=subprocess.PIPE)
    taken = time.perf_counter() - begun
    if done.returncode:
        sys.exit(f"{' '.join(command)[:200]}: exit code {done.returncode}\n{done.stderr.decode()[-2000:]}")
    return taken


def ratio(pairs: int, ours: Callable[[], float], theirs: Callable[[], float]) -> tuple[float, float, float]:
    """Medians over pairs: the ratio, our seconds, their seconds. One round before them warms the caches."""
    ours(), theirs()
    measured = [(ours(), theirs()) for _ in range(pairs)]
    ratios = [one / other for one, other in measured]
    return (
        statistics.median(ratios),
        statistics.median(one for one, _ in measured),
        statistics.median(other for _, other in measured),
    )


def start() -> list[Row]:
    """`--version` and `--help` against an empty Python."""
    rows = []
    for word in ("--version", "--help"):
        found, ours, empty = ratio(
            15, lambda word=word: seconds([*PROGRAM, word]), lambda: seconds([sys.executable, "-c", ""])
        )
        rows.append(
            Row(
                f"{word}: {ours * 1e3:.0f} ms; empty Python: {empty * 1e3:.0f} ms",
                f"{found:.1f} ×",
                "≤ 8 ×",
                found <= 8,
            )
        )
    return rows


# A dozen elements over the whole table; all subshells of each.
SAMPLE = (1, 6, 11, 18, 26, 36, 47, 56, 64, 79, 92, 118)
THEIRS = """
import sys, mendeleev
for z in map(int, sys.argv[1:]):
    element = mendeleev.element(z)
    for (n, kind), count in element.ec.conf.items():
        element.zeff(n=n, o=kind, method="slater")
"""


def tabulate() -> list[Row]:
    """All occupied subshells of all elements; the reference library works a sample, start-up measured apart."""
    ours_command = [*PROGRAM, "tabulate", "effective nuclear charge", "--species", "1-118", "--csv"]
    with_sample = [sys.executable, "-c", THEIRS, *map(str, SAMPLE)]
    only_start = [sys.executable, "-c", "import mendeleev"]

    def theirs() -> float:
        begin = seconds(only_start)
        return begin + (seconds(with_sample) - begin) * 118 / len(SAMPLE)

    found, ours, other = ratio(3, lambda: seconds(ours_command), theirs)
    words = f"tabulate 1-118: {ours:.2f} s; reference library ({len(SAMPLE)} elements, scaled to 118): {other:.1f} s"
    return [Row(words, f"{1 / found:.0f} × faster", "≥ 100 × faster", 1 / found >= 100)]


SIX_PARTS = """item: Item {number} of three
level: majors
draw:
  metal: {{block: d, period: 4, except: [Zn]}}
  tank: {{from: 1, to: 20}}
story: |
  A paper exercise: tank {{{{ tank }}}} of row {number} holds dissolved {{{{ metal.name }}}}. Its keeper wants to know
  how strongly the nucleus holds the outer electrons of an atom of {{{{ metal.name }}}}.
parts:
  - calculate: screening constant
    of: metal
    electron: outermost
    marks: 3
  - calculate: effective nuclear charge
    marks: 1
"""


def write_plan(folder: Path) -> None:
    """A plan of three items with two parts each."""
    for number in (1, 2, 3):
        (folder / f"item-{number}.yaml").write_text(SIX_PARTS.format(number=number), encoding="utf-8")
    (folder / "plan.yaml").write_text("plan: Benchmark\nitems: [item-1, item-2, item-3]\n", encoding="utf-8")


PEAK = """
import resource, subprocess, sys
subprocess.run(sys.argv[1:], check=True, stdout=subprocess.DEVNULL)
print(resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss)
"""


def set_papers() -> list[Row]:
    """1,000 papers of 6 parts."""
    return set_ratio("6 parts", write_plan, [])


def set_with_figure() -> list[Row]:
    """1,000 papers of 8 mixed parts (decide, explain, select, calculate, correct) with a chart on each."""

    def write(folder: Path) -> None:
        names = "thornwick-bead-box, dunmere-lamp-room, corvane-evening-class"
        (folder / "plan.yaml").write_text(f"plan: Eight parts\nitems: [{names}]\n", encoding="utf-8")

    return set_ratio("8 mixed parts and a chart", write, ["--allow-repeats"])


def set_ratio(what: str, write: Callable[[Path], object], options: list[str]) -> list[Row]:
    """1,000 papers against TeX alone on the same two files, run as often as it asks for, both at once."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        write(folder)
        made = folder / "made"

        def command(target: Path) -> list[str]:
            words = ["set", "plan.yaml", "--copies", "1000", "--seed", "benchmark", "--into", str(target), *options]
            return [*PROGRAM, *words]

        def ours() -> float:
            shutil.rmtree(made, ignore_errors=True)
            return seconds(command(made), folder)

        def theirs() -> float:
            begun = time.perf_counter()
            jobs = [tex_alone(made / f"{each}.tex", folder / each) for each in ("sheets", "key")]
            with ThreadPoolExecutor(2) as pool:
                list(pool.map(typeset, jobs))
            return time.perf_counter() - begun

        found, one, other = ratio(3, ours, theirs)
        shutil.rmtree(made)
        peak = subprocess.run([sys.executable, "-c", PEAK, *command(made)], cwd=folder, capture_output=True, check=True)
        megabytes = int(peak.stdout) / 1024
    return [
        Row(
            f"set 1,000 papers, {what}: {one:.1f} s; TeX alone: {other:.1f} s",
            f"{found:.2f} ×",
            "≤ 1.5 ×",
            found <= 1.5,
        ),
        Row(f"set 1,000 papers, {what}: peak memory", f"{megabytes:.0f} MB", "< 1000 MB", megabytes < 1000),
    ]


AGAIN = re.compile(rb"Rerun to get|Label\(s\) may have changed|Rerun LaTeX")


def typeset(job: tuple[list[str], Path]) -> None:
    """Run TeX on a file, and again while its log asks for it: as many runs as `set` has to make."""
    command, folder = job
    for _ in range(3):
        done = subprocess.run(command, cwd=folder, stdout=subprocess.DEVNULL)
        if done.returncode:
            sys.exit("TeX alone failed")
        if not AGAIN.search(next(folder.glob("*.log")).read_bytes()):
            return


def tex_alone(source: Path, folder: Path) -> tuple[list[str], Path]:
    """The command that typesets one of our files, and a fresh folder to run it in."""
    shutil.rmtree(folder, ignore_errors=True)
    folder.mkdir()
    shutil.copy(source, folder / source.name)
    engine = "lualatex" if "fontspec" in source.read_text(encoding="utf-8")[:20_000] else "pdflatex"
    return [engine, "-interaction=batchmode", "-halt-on-error", source.name], folder


VETTED = """item: Many variants
level: majors
draw:
  metal: {{block: d, period: [4, 5]}}
  tank: {{from: 1, to: {most}}}
  outer: {{electron of: metal, shell: outermost}}
story: |
  A paper exercise: tank {{{{ tank }}}} holds dissolved {{{{ metal.name }}}}, whose `4s` electrons go first.
parts:
  - calculate: screening constant
    of: metal
    electron: outer
    marks: 3
  - calculate: effective nuclear charge
    marks: 1
  - decide: first electron lost
    of: metal
    marks: 2
"""


def vet() -> list[Row]:
    """5,000, 10,000 and 20,000 variants in one process each; the start-up is measured with 20 and taken off."""
    with tempfile.TemporaryDirectory() as name:
        path = Path(name, "item.yaml")

        def taken(most: int) -> float:
            path.write_text(VETTED.format(most=most), encoding="utf-8")
            return seconds([*PROGRAM, "vet", str(path)])

        # Round by round, so that a slow moment strikes all sizes; the quickest of each is the least disturbed.
        rounds = [[taken(most) for most in (1, 250, 500, 1000)] for _ in range(5)]
        bare, half, whole, double = map(min, zip(*rounds, strict=True))
    each = (whole - bare) / 10_000 * 1e3
    growth = (double - bare) / (half - bare)
    return [
        Row(f"vet 10,000 variants: {whole:.2f} s", f"{each:.2f} ms a variant", "< 0.5 ms", each < 0.5),
        Row("vet 20,000 against 5,000 variants (linear: 4)", f"{growth:.2f} ×", "≤ 4.8 ×", growth <= 4.8),
    ]


# The record of a set without its printing, which has a row of its own.
RECORDING = """
import sys
from pathlib import Path
from authoring.papers.assemble import assembled
from authoring.papers.questions import Terms
from authoring.papers.record_file import written
from authoring.specs.plan import read_plan
plan = read_plan(Path("plan.yaml"))
made = assembled(plan, Terms(plan.practice, plan.slips), "benchmark", [None] * int(sys.argv[1]))
Path("made").mkdir()
Path("made", "set.json").write_text(written(made), encoding="utf-8")
"""
PARSING = "import sys, yaml; yaml.load(open(sys.argv[1], encoding='utf-8'), yaml.CSafeLoader)"


def answers(paper: dict, at: int) -> list[str]:
    """A script: most parts as the key, some with a slip, as candidates write."""
    lines = [f"- paper: {paper['code']}"]
    for part in (part for item in paper["items"] for part in item["parts"]):
        shown = part["slips"][at % len(part["slips"])]["answer"] if at % 5 == 0 and part["slips"] else part["answer"]
        last = part["points"][-1]["line"].split(" = ")
        value = f"{last[-2]} = {shown}" if len(last) > 2 and at % 5 else shown
        lines.append(f"  {part['label']}: '{value}'")
    return lines


def write_final(folder: Path) -> None:
    """A set of 10,000 papers, and scripts that give the answer of each part with its last line."""
    write_plan(folder)
    seconds([sys.executable, "-c", RECORDING, "10000"], folder)
    papers = json.loads((folder / "made" / "set.json").read_text(encoding="utf-8"))["papers"]
    lines = [line for at, each in enumerate(papers) for line in answers(each, at)]
    (folder / "scripts.yaml").write_text("\n".join(lines) + "\n", encoding="utf-8")


def write_worked(folder: Path) -> None:
    """The same with scripts worked in many notations, with slips, or as bare values."""
    seconds([sys.executable, str(HERE / "marking.py"), str(folder)])
    (folder / "made").mkdir()
    (folder / "set.json").rename(folder / "made" / "set.json")


def mark_ratio(what: str, write: Callable[[Path], None]) -> list[Row]:
    """10,000 scripts of 6 parts into a new ledger, the whole command, against parsing the same YAML."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        write(folder)
        scripts = folder / "scripts.yaml"
        command = [*PROGRAM, "mark", "made", "scripts.yaml"]

        def unmarked() -> None:
            for ledger in (folder / "made").glob("ledger*"):
                ledger.unlink()

        def ours() -> float:
            unmarked()
            return seconds(command, folder)

        found, one, other = ratio(3, ours, lambda: seconds([sys.executable, "-c", PARSING, str(scripts)]))
        unmarked()
        peak = subprocess.run([sys.executable, "-c", PEAK, *command], cwd=folder, capture_output=True, check=True)
        megabytes = int(peak.stdout) / 1024
    words = f"mark 10,000 scripts, {what}"
    return [
        Row(f"{words}: {one:.1f} s; C loader alone: {other:.1f} s", f"{found:.1f} ×", "≤ 3 ×", found <= 3),
        Row(f"{words}: peak memory of a process", f"{megabytes:.0f} MB", "< 500 MB", megabytes < 500),
    ]


def mark() -> list[Row]:
    """10,000 scripts, as answers and as worked lines."""
    return [*mark_ratio("answers", write_final), *mark_ratio("worked lines", write_worked)]


BENCHMARKS = {
    "start": start,
    "tabulate": tabulate,
    "set": set_papers,
    "figure": set_with_figure,
    "vet": vet,
    "mark": mark,
}


def say(words: str, file: TextIO = sys.stdout) -> None:
    """A line for the reader."""
    file.write(words + "\n")
    file.flush()


def main() -> int:
    """Measure what is asked for (everything by default) and print the table."""
    names = sys.argv[1:] or list(BENCHMARKS)
    unknown = [name for name in names if name not in BENCHMARKS]
    if unknown:
        say(f"no benchmark {unknown[0]!r}; one of: {', '.join(BENCHMARKS)}", file=sys.stderr)
        return 2
    os.environ.pop("PYTHONHASHSEED", None)
    rows: list[Row] = []
    for name in names:
        say(f"measuring {name} …", file=sys.stderr)
        rows += BENCHMARKS[name]()
    width = max(len(row.what) for row in rows)
    say(f"{'what'.ljust(width)}  {'measured':>16}  {'promised':>15}  holds")
    for row in rows:
        say(f"{row.what.ljust(width)}  {row.measured:>16}  {row.promised:>15}  {'yes' if row.holds else 'NO'}")
    return 0 if all(row.holds for row in rows) else 1


if __name__ == "__main__":
    sys.exit(main())
