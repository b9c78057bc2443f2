"""Stage 8, mark: a pile of scripts against a set: codes and labels resolved, the same work judged once."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from authoring.faults import Fault, suggestion
from authoring.marking.judge import best_judged
from authoring.marking.judgement import Judgement, Own
from authoring.marking.recall import PaperToMark, QuestionToMark, RecalledSet
from authoring.marking.scripts import Script, resolve_label

# Judgements remembered before the memory is let go: some 100 MB at the most.
MOST_REMEMBERED = 100_000
_UNANSWERED: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class ScriptJudged:
    """One script with the judgement of every part of its paper, in order; `answers` as transcribed, by label."""

    paper: PaperToMark
    judgements: tuple[Judgement, ...]
    answers: Mapping[str, tuple[str, ...]]


@dataclass(slots=True)
class _Node:
    """What the candidate has after some parts of a question, and the judgements made from there."""

    own: Own
    next: dict[tuple[str, ...], tuple[Judgement, _Node]]


class Judge:
    """Judges scripts of one set. The same lines after the same lines are judged once."""

    def __init__(self, of: RecalledSet) -> None:
        self.set = of
        self._roots: dict[tuple[object, ...], _Node] = {}
        self._remembered = 0

    def paper(self, paper: PaperToMark, answers: Mapping[str, tuple[str, ...]]) -> tuple[Judgement, ...]:
        """Every part of a paper; a part without an answer was not answered."""
        found: list[Judgement] = []
        for question in paper.questions:
            found += self._question(question, answers)
        return tuple(found)

    def _question(self, question: QuestionToMark, answers: Mapping[str, tuple[str, ...]]) -> Iterator[Judgement]:
        node = self._root(question)
        for label, alternatives in question:
            texts = answers.get(label, _UNANSWERED)
            hit = node.next.get(texts)
            if hit is None:
                own = node.own.copy()
                judgement = best_judged(label, alternatives, texts, own, self.set.terms, self.set.policy)
                hit = node.next[texts] = (judgement, _Node(own, {}))
                self._remembered += 1
            judgement, node = hit
            yield judgement

    def _root(self, question: QuestionToMark) -> _Node:
        if self._remembered > MOST_REMEMBERED:
            self._roots.clear()
            self._remembered = 0
        # Variants that differ in what no part rests on have the same parts: the set keeps them, so ids do not change.
        key = tuple([(label, *map(id, alternatives)) for label, alternatives in question])
        if key not in self._roots:
            self._roots[key] = _Node(Own(), {})
        return self._roots[key]


class Pile:
    """Scripts in, judged scripts out; what cannot be placed is gathered as faults."""

    def __init__(self, of: RecalledSet) -> None:
        self.judge = Judge(of)
        self.faults: list[Fault] = []
        self._seen: dict[str, Mapping[str, tuple[str, ...]]] = {}

    def judged(self, scripts: Iterable[Script]) -> Iterator[ScriptJudged]:
        """Each script that belongs to the set, once: a second one of the same paper is compared, not doubled."""
        codes = self.judge.set.codes
        known = set(codes)
        for script in scripts:
            code = script.paper.upper()
            if code not in known:
                message = f"no paper {script.paper[:40]!r} in this set{_nearest(code, codes)}"
                self.faults.append(Fault("script-unknown-paper", message, script.places.entry()))
                continue
            paper = self.judge.set.paper(code)
            answers = self._answers(script, paper)
            if code in self._seen:
                self._compare(script, code, answers)
                continue
            self._seen[code] = answers
            yield ScriptJudged(paper, self.judge.paper(paper, answers), answers)

    def _answers(self, script: Script, paper: PaperToMark) -> dict[str, tuple[str, ...]]:
        if script.candidate and paper.candidate and script.candidate != paper.candidate:
            message = f"paper {paper.code} is {paper.candidate!r}'s; the script says {script.candidate[:40]!r}"
            self.faults.append(Fault("script-candidate", message, script.places.entry()))
        found: dict[str, tuple[str, ...]] = {}
        for label, lines in script.answers.items():
            own = resolve_label(label, paper.labels)
            if own is None:
                message = f"paper {paper.code} has no part {label!r}{suggestion(label, paper.labels)}"
                self.faults.append(Fault("script-unknown-part", message, script.places.label(label)))
                continue
            found[own] = lines
        return found

    def _compare(self, script: Script, code: str, answers: Mapping[str, tuple[str, ...]]) -> None:
        before = self._seen[code]
        differing = [label for label in {**before, **answers} if before.get(label) != answers.get(label)]
        what = f"it differs in {', '.join(differing)}" if differing else "it says the same"
        message = f"paper {code} stands in this file twice; {what}; the first one counts"
        severity = "fault" if differing else "weakness"
        self.faults.append(Fault("script-twice", message, script.places.entry(), severity))  # type: ignore[arg-type]


def _nearest(code: str, codes: Sequence[str]) -> str:
    return suggestion(code, codes)
