"""Stage 8, mark: a pile of scripts against a set: codes and labels resolved, the same work judged once."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from authoring.faults import Fault, suggestion
from authoring.marking.judge import best_judged
from authoring.marking.judgement import Judgement, Own
from authoring.marking.recall import PaperToMark, QuestionToMark, RecalledSet
from authoring.marking.sayings import Sayings
from authoring.marking.scripts import Script, resolve_label
from authoring.marking.written import read_line
from authoring.tasks.solved import Solved

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
    next: dict[tuple[str, ...], tuple[Judgement, _Node]] = field(default_factory=dict)
    alike: dict[object, tuple[Judgement, _Node]] = field(default_factory=dict)


class Judge:
    """Judges scripts of one set. Lines that say the same, after lines that say the same, are judged once."""

    def __init__(self, of: RecalledSet) -> None:
        self.set = of
        self._roots: dict[tuple[object, ...], _Node] = {}
        self._sayings = Sayings(of.policy)
        self._remembered = 0

    def script(self, script: Script) -> tuple[ScriptJudged | None, tuple[Fault, ...]]:
        """A script judged, and what is wrong with it; None where its paper is not in the set."""
        code = script.paper.upper()
        if code not in self.set:
            message = f"no paper {script.paper[:40]!r} in this set{suggestion(code, self.set.codes)}"
            return None, (Fault("script-unknown-paper", message, script.places.entry()),)
        paper = self.set.paper(code)
        answers, faults = _placed(script, paper)
        unread = self._unread(script, paper)
        return ScriptJudged(paper, self.paper(paper, answers), answers), (*faults, *unread)

    def _unread(self, script: Script, paper: PaperToMark) -> Iterator[Fault]:
        """The lines that cannot be read, at their places: a person has to."""
        for label, lines in script.answers.items():
            for at, text in enumerate(lines):
                found = read_line(text, self.set.policy.decimal)
                if found.kind == "unreadable":
                    message = f"paper {paper.code} {label}: {found.remark}; a person has to read it"
                    yield Fault("script-unreadable", message, script.places.line(label, at), "weakness")

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
            judgement, node = node.next.get(texts) or self._judged(node, label, alternatives, texts)
            yield judgement

    def _judged(
        self, node: _Node, label: str, alternatives: tuple[Solved, ...], texts: tuple[str, ...]
    ) -> tuple[Judgement, _Node]:
        told = self._sayings.told(alternatives, texts)
        hit = node.alike.get(told) if told is not None else None
        if hit is None:
            own = node.own.copy()
            judgement = best_judged(label, alternatives, texts, own, self.set.terms, self.set.policy)
            hit = (judgement, _Node(own))
            # A remark quotes the very words.
            if told is not None and not judgement.remarks:
                node.alike[told] = hit
        node.next[texts] = hit
        self._remembered += 1
        return hit

    def _root(self, question: QuestionToMark) -> _Node:
        if self._remembered > MOST_REMEMBERED:
            self._roots.clear()
            self._sayings = Sayings(self.set.policy)
            self._remembered = 0
        # Variants that differ in what no part rests on have the same parts: the set keeps them, so ids do not change.
        key = tuple([(label, *map(id, alternatives)) for label, alternatives in question])
        if key not in self._roots:
            self._roots[key] = _Node(Own())
        return self._roots[key]


def _placed(script: Script, paper: PaperToMark) -> tuple[dict[str, tuple[str, ...]], tuple[Fault, ...]]:
    """A script's answers by the paper's own labels."""
    faults: list[Fault] = []
    if script.candidate and paper.candidate and script.candidate != paper.candidate:
        message = f"paper {paper.code} is {paper.candidate!r}'s; the script says {script.candidate[:40]!r}"
        faults.append(Fault("script-candidate", message, script.places.entry()))
    labels = paper.labels
    found: dict[str, tuple[str, ...]] = {}
    for label, lines in script.answers.items():
        own = resolve_label(label, labels)
        if own is None:
            message = f"paper {paper.code} has no part {label!r}{suggestion(label, labels)}"
            faults.append(Fault("script-unknown-part", message, script.places.label(label)))
            continue
        found[own] = lines
    return found, tuple(faults)


class Firsts:
    """The first script of each paper counts: a second one is compared, not doubled."""

    def __init__(self, of: RecalledSet) -> None:
        self.set = of
        self._seen: dict[str, Script] = {}

    def again(self, script: Script) -> Fault | None:
        """Nothing for the first script of a paper of the set; what to say of a later one."""
        code = script.paper.upper()
        first = self._seen.setdefault(code, script)
        if first is script:
            return None
        paper = self.set.paper(code)
        (before, _), (now, _) = _placed(first, paper), _placed(script, paper)
        differing = [label for label in {**before, **now} if before.get(label) != now.get(label)]
        what = f"it differs in {', '.join(differing)}" if differing else "it says the same"
        message = f"paper {code} stands in this file twice; {what}; the first one counts"
        return Fault("script-twice", message, script.places.entry(), "fault" if differing else "weakness")
