"""Stage 8, mark: the desk: one paper after the other at the keyboard, a judgement as soon as a part is typed.

The desk talks through two functions (`ask`, `say`), so that it runs at a terminal and in a test alike. What was
accepted is in the ledger before the next question is asked.
"""

from __future__ import annotations

import textwrap
from collections.abc import Callable
from dataclasses import dataclass, field, replace

from authoring.faults import UsageError, suggestion
from authoring.marking.judge import best_judged
from authoring.marking.judgement import Judgement, Own, PointJudged
from authoring.marking.ledger import Ledger
from authoring.marking.ledger_mark import Mark
from authoring.marking.recall import PaperToMark, RecalledSet
from authoring.tasks.solved import Solved
from authoring.working.text import to_text

WIDTH = 79
KEYS = """\
Type the candidate's lines, one at a time; an empty line ends the part.
  ok   exactly as the key         later  leave this part for later
  key  show the key's working     stop   stop here; what was accepted is kept
After the judgement: Enter accepts, a number gives other marks, `again` begins
the part anew.
Proposed marks are for you to confirm; your institution's rules apply."""

Ask = Callable[[str], str]
Say = Callable[[str], None]


class Stop(Exception):
    """The marker stops; what was accepted is kept."""


class Later(Exception):
    """The marker leaves a part for later."""


@dataclass(slots=True)
class Desk:
    """A marker at work on a set."""

    of: RecalledSet
    ledger: Ledger
    marker: str
    ask: Ask
    say: Say
    done: dict[str, set[str]] = field(default_factory=dict)

    def run(self) -> int:
        """Mark until the marker stops or nothing is left; returns how many papers are still open."""
        for event in self.ledger.current(marker=self.marker):
            self.done.setdefault(event.paper, set()).add(event.part)
        self.say(KEYS)
        try:
            while self.open_papers():
                self.paper(self.next_code())
        except Stop:
            pass
        left = len(self.open_papers())
        self.say(f"{len(self.of.codes) - left} of {len(self.of.codes)} papers are marked")
        return left

    # --- which paper -----------------------------------------------------------------------------------

    def open_papers(self) -> list[str]:
        """The codes of papers with a part that this marker has not marked."""
        # A paper is solved only once somebody has begun it: a set of a thousand opens at once.
        return [
            code for code in self.of.codes if code not in self.done or set(self.of.paper(code).labels) - self.done[code]
        ]

    def next_code(self) -> str:
        """Ask for a paper; Enter takes the next one that is open."""
        left = self.open_papers()
        done = len(self.of.codes) - len(left)
        while True:
            typed = self.ask(f"paper [{left[0]}] ({done} of {len(self.of.codes)} marked): ").strip()
            if typed.lower() == "stop":
                raise Stop
            code = typed.upper() or left[0]
            if code in self.of.codes:
                return code
            self.say(f"no paper {typed[:40]!r}{suggestion(code, self.of.codes)}")

    # --- one paper -------------------------------------------------------------------------------------

    def paper(self, code: str) -> None:
        """Go through the parts of a paper that are not marked yet."""
        paper = self.of.paper(code)
        answers = self.transcribed(code)
        done = self.done.get(code, set())
        self.say(f"paper {code}" + (f", candidate {paper.candidate}" if paper.candidate else ""))
        for question in paper.questions:
            own = Own()
            for label, alternatives in question:
                if label in done:
                    best_judged(label, alternatives, tuple(answers.get(label, ())), own, self.of.terms, self.of.policy)
                    continue
                try:
                    self.part(paper, label, alternatives, own, answers)
                except Later:
                    continue

    def transcribed(self, code: str) -> dict[str, list[str]]:
        """What this marker has typed of a paper so far."""
        events = [event for event in self.ledger.scripts(paper=code) if event.marker == self.marker]
        return {label: list(lines) for label, lines in events[-1].content["answers"].items()} if events else {}

    def part(
        self,
        paper: PaperToMark,
        label: str,
        alternatives: tuple[Solved, ...],
        own: Own,
        answers: dict[str, list[str]],
    ) -> None:
        """One part: lines in, judgement out, accepted or changed, kept."""
        solved = alternatives[0]
        while True:
            self.say("")
            for each in alternatives:
                self.say(f"{label}  {headline(each)}  [{each.marks}]  key: {answer_words(each)}")
            lines = self.lines(label, solved)
            mine = own.copy()
            judgement = best_judged(label, alternatives, tuple(lines), mine, self.of.terms, self.of.policy)
            self.say(judgement_words(judgement))
            accepted = self.accept(solved, judgement)
            if accepted is None:
                continue
            answers[label] = lines
            self.keep(paper, answers, judgement, *accepted)
            self.done.setdefault(paper.code, set()).add(label)
            own.update(mine.values, mine.off)
            return

    def lines(self, label: str, solved: Solved) -> list[str]:
        """The candidate's lines of one part."""
        found: list[str] = []
        while True:
            typed = self.ask(f"{label}> " if not found else "  … ").rstrip()
            word = typed.strip().lower()
            if word == "stop":
                raise Stop
            if word == "later":
                raise Later
            if word == "key":
                for step in solved.steps:
                    self.say(f"    {to_text(step.line.chain)}")
                for code, text in solved.rubric:
                    self.say(f"    {code}: {text}")
                continue
            if not typed.strip():
                return found
            found.append(typed)
            if word == "ok":
                return found

    def accept(self, solved: Solved, judgement: Judgement) -> tuple[int, str] | None:
        """(marks, reason): the proposal, or others with a reason; None: type the part again."""
        prompt = f"marks [{judgement.awarded}]: "
        if judgement.needs_person:
            prompt = f"you decide; marks [{judgement.awarded}]: "
        while True:
            typed = self.ask(prompt).strip().lower()
            if typed == "stop":
                raise Stop
            if typed == "later":
                raise Later
            if typed == "again":
                return None
            if not typed:
                return judgement.awarded, ""
            if typed.isascii() and typed.isdigit() and len(typed) < 4 and int(typed) <= solved.marks:
                if int(typed) == judgement.awarded:
                    return int(typed), ""
                return int(typed), self.reason()
            self.say(f"a number from 0 to {solved.marks}, Enter, again, later or stop")

    def reason(self) -> str:
        """Why the marks differ from the proposal: it is kept with them."""
        while True:
            typed = self.ask("reason: ").strip()
            if typed:
                return typed[:1000]
            self.say("marks that differ from the proposal need a reason")

    def keep(
        self, paper: PaperToMark, answers: dict[str, list[str]], judgement: Judgement, marks: int, reason: str
    ) -> None:
        """Write script and judgement, and the change if there is one; on disk when this returns."""
        self.ledger.add_script(paper.code, answers, self.marker, paper.candidate)
        self.ledger.add_judgement(Mark(paper.code, judgement, paper.candidate), self.marker)
        if marks != judgement.awarded or judgement.needs_person:
            changed = with_marks(judgement, marks, reason or "confirmed by the marker")
            self.ledger.add_change(
                Mark(paper.code, changed, paper.candidate), self.marker, reason or "confirmed by the marker"
            )


# --- words ---------------------------------------------------------------------------------------------


def headline(solved: Solved) -> str:
    """`calculate screening constant: V 4s`."""
    about = solved.targets[0].about if solved.targets else ""
    words = f"{solved.task} {solved.quantity}".strip()
    return f"{words}: {about}" if about else words


def answer_words(solved: Solved) -> str:
    """The key's answer in a few words."""
    return f"{solved.answer.shown} {solved.answer.unit}".strip()[:120]


def judgement_words(judgement: Judgement) -> str:
    """A judgement at the terminal: the marks, then each point with its reason, the decisive number last."""
    lines = [_wrapped(f"    {point.code:<4}{point.awarded}  ", point.reason) for point in judgement.points]
    if judgement.slips:
        lines.append(f"    slip: {', '.join(judgement.slips)}")
    if judgement.rivals:
        lines.append(f"    or:   {', '.join(judgement.rivals)}")
    lines += [_wrapped("    note: ", remark) for remark in judgement.remarks]
    lines.append(f"    {judgement.certainty}: {judgement.awarded} of {judgement.out_of}")
    return "\n".join(lines)


def _wrapped(head: str, text: str) -> str:
    """A reason within the terminal's width, without the markup of item text."""
    plain = text.replace("`", "")
    return textwrap.fill(plain, WIDTH, initial_indent=head, subsequent_indent=" " * len(head), break_on_hyphens=False)


def with_marks(judgement: Judgement, marks: int, reason: str) -> Judgement:
    """The judgement a person has decided: so many marks, points kept as far as they agree."""
    if not 0 <= marks <= judgement.out_of:
        raise UsageError(f"part {judgement.label} has {judgement.out_of} marks; {marks} cannot be given")
    points = list(judgement.points)
    excess = sum(point.awarded for point in points) - marks
    for at in range(len(points) - 1, -1, -1) if excess > 0 else range(len(points)):
        if not excess:
            break
        if excess > 0 and points[at].awarded:
            points[at] = PointJudged(points[at].code, 0, reason)
            excess -= 1
        elif excess < 0 and not points[at].awarded:
            points[at] = PointJudged(points[at].code, 1, reason)
            excess += 1
    decided = tuple(replace(point, open=False) for point in points)
    return replace(judgement, points=decided, certainty="certain")
