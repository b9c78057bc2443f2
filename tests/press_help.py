"""Help for tests of the press: a small set, made from items and a plan as YAML text."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from authoring.papers.assemble import PaperSet, assembled
from authoring.papers.questions import Terms
from authoring.specs.plan import read_plan
from authoring.specs.roster import Candidate

TANK = r"""
item: The evening tank, 50% & $ _full_
level: first-year
draw:
  metal: {block: d, period: 4, except: [Zn]}
story: |
  The Marrowgate plant keeps its power in tanks of dissolved {{ metal.name }} {~ # ^ \ < > "quoted"}.

  - one tank is *full*
  - the other is **empty**
caution: |
  A paper exercise; local rules and qualified staff govern the real thing.
parts:
  - calculate: screening constant
    of: metal
    electron: 4s
    marks: 3
    notes: [A total of 19.70 without its tally earns A1 only.]
  - calculate: effective nuclear charge
    marks: 1
  - calculate: orbital energy
    marks: 2
"""

GAUGE = """
item: The Tollermoor gauge
level: majors
draw:
  gas: [N, O, F, P, S, Cl]
story: |
  A gauge at Tollermoor follows {{ gas.name }}.
given:
  - caption: Readings
    header: [gauge, reading]
    rows: [[upper, '3.25'], [lower, '12.50']]
    source: works log (invented)
figure:
  chart: effective nuclear charge
  of: [Na-Ar]
  caption: Charges along the third period
parts:
  - select: screening constant
    of: gas
    electron: 1s
    options: 4
  - either:
    - calculate: radius of maximum density
      of: gas
      electron: outermost
      marks: 1
    - calculate: effective nuclear charge
      of: gas
      electron: 2s
      marks: 1
  - explain: Why do the lines of the gauge differ?
    rubric:
      - {mark: B, point: the inner electrons screen more}
    not: [the atom is larger]
"""

PLAN = """
plan: Screening & charge, 100%
course: CH 104
date: 14 March
time: 45 minutes
instructions: |
  Answer *all* questions.
items: [tank, gauge]
"""


def small_set(
    folder: Path,
    candidates: Sequence[Candidate | None] = (None, None),
    plan: str = "",
    items: dict[str, str] | None = None,
    head: str = PLAN,
) -> PaperSet:
    """A set of the two items above under a plan with more lines (`layout: {…}`, …)."""
    for name, text in ({"tank": TANK, "gauge": GAUGE} | (items or {})).items():
        folder.joinpath(f"{name}.yaml").write_text(text, encoding="utf-8")
    path = folder / "plan.yaml"
    path.write_text(head + plan, encoding="utf-8")
    read = read_plan(path)
    return assembled(read, Terms(read.practice, read.slips, read.figures), "a fixed seed", candidates)
