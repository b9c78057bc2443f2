"""A pile judged with what was judged before in mind: every script as if it were the only one."""

from __future__ import annotations

import random

import pytest
from marking_help import Candidate, styled
from papers_help import write_set

from authoring.faults import ContentError
from authoring.marking import explaining, explaining_statements
from authoring.marking.judge import Policy
from authoring.marking.pile import Judge
from authoring.marking.recall import PaperToMark, RecalledSet, recalled
from authoring.marking.sayings import Sayings
from authoring.shielding.practice import published
from authoring.slips.catalogue import applied, shipped

ITEM = """\
item: The evening tank
level: majors
draw:
  metal: {block: d, period: 4, except: [Zn]}
story: A tank holds {{ metal.name }}.
parts:
  - calculate: screening constant
    of: metal
    electron: outermost
    marks: 3
  - calculate: effective nuclear charge
    marks: 1
  - calculate: orbital energy
    marks: 2
  - decide: first electron lost
    of: metal
    marks: 3
"""


@pytest.fixture(scope="module")
def of(tmp_path_factory: pytest.TempPathFactory) -> RecalledSet:
    """A set of nine papers."""
    folder = tmp_path_factory.mktemp("pile")
    write_set(folder, ITEM, 9)
    return recalled(folder)


def script(paper: PaperToMark, rng: random.Random) -> dict[str, tuple[str, ...]]:
    """A script in some notation: all of it, or its answers, perhaps with a slip, sometimes with a part left out."""
    slips = (rng.choice(shipped().items[:12]),) if rng.random() < 0.4 else ()
    style = styled(rng, "final" if rng.random() < 0.2 else None)
    candidate = Candidate(applied(slips, published()), style, rng, published())
    found: dict[str, tuple[str, ...]] = {}
    for question in paper.questions:
        for label, (solved,) in question:
            try:
                lines = tuple(candidate.write(solved).lines)
            except ContentError:
                lines = (solved.answer.shown,)
            if rng.random() < 0.9:
                found[label] = (*lines, rng.choice(["n* = 3.7", "3.30"])) if rng.random() < 0.1 else lines
    return found


def test_every_script_is_judged_as_if_it_were_alone(of: RecalledSet) -> None:
    """Nothing of another candidate's gets into a judgement: not a mark, not a word, not a remark."""
    rng = random.Random("pile")
    together = Judge(of)
    papers = [of.paper(rng.choice(of.codes)) for _ in range(400)]
    scripts = [script(paper, rng) for paper in papers]
    judged = [together.paper(paper, answers) for paper, answers in zip(papers, scripts, strict=True)]
    for paper, answers, found in zip(papers, scripts, judged, strict=True):
        for kept in (explaining, explaining_statements):
            kept._explained.cache_clear()
        assert Judge(of).paper(paper, answers) == found, answers


def test_typography_does_not_tell_answers_apart_but_figures_do(of: RecalledSet) -> None:
    """What is judged alike says the same to the last figure; choices are never thrown together."""
    (question,) = of.paper(of.codes[0]).questions
    (_, screening), *_, (_, choice) = question
    sayings = Sayings(Policy())
    texts = ("S = 19.70", "thus S = 19,70", "S=19.70", "S = 19.7", "19.70")
    told = [sayings.told(screening, (text,)) for text in texts]
    assert told[0] == told[1] == told[2]
    assert len({told[0], told[3], told[4]}) == 3
    assert sayings.told(choice, ("4s",)) is None
