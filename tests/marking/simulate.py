"""Simulated scripts over the whole bank, judged, and how often the judge is right: `python tests/marking/simulate.py`.

The same rounds, smaller, are tests (test_simulated_scripts.py).
"""

from __future__ import annotations

import argparse
import random
import sys
from collections.abc import Iterator
from dataclasses import dataclass, field
from decimal import Decimal
from pathlib import Path

if __name__ == "__main__":
    sys.path[:0] = [str(Path(__file__).parents[1]), str(Path(__file__).parents[2])]

from marking_help import Z_EFF, Candidate, S, Style, Written, styled
from marking_truth import Deserved, bank, can_tell, deserved, solved_parts, touching

from authoring.faults import ContentError
from authoring.marking.explaining import Terms
from authoring.marking.judge import Policy, judged
from authoring.marking.judgement import Judgement, Own
from authoring.papers.questions import Question
from authoring.shielding.practice import published
from authoring.shielding.quantity import Target, Value
from authoring.slips.catalogue import Slip, applied, compatible, shipped
from authoring.tasks.solved import Solved

PUBLISHED = published()
TERMS = Terms(PUBLISHED, shipped())


@dataclass
class Rate:
    """How often something held, and what it looked like where it did not."""

    what: str
    cases: int = 0
    good: int = 0
    bad: list[str] = field(default_factory=list)

    def note(self, held: bool, words: object = "") -> None:
        """Count one case."""
        self.cases += 1
        self.good += held
        if not held:
            self.bad.append(str(words))

    @property
    def share(self) -> float:
        """The share of the cases in which it held."""
        return self.good / self.cases if self.cases else 0.0

    def words(self, examples: int = 3) -> str:
        """For the reader."""
        shown = "".join(f"\n    {each}" for each in self.bad[:examples])
        return f"{self.what}: {self.good} of {self.cases} ({100 * self.share:.2f} %){shown}"


@dataclass(frozen=True)
class Case:
    """One part of one simulated script, judged."""

    solved: Solved
    written: Written
    deserved: Deserved
    judgement: Judgement
    before: dict[Target, Value]

    @property
    def lost(self) -> frozenset[str]:
        """The codes that the judge does not give, reasons in words aside."""
        return frozenset(point.code for point in self.judgement.points if not point.awarded)

    def told(self) -> str:
        """For a message."""
        part = f"{self.solved.task} {self.solved.quantity} {self.solved.targets[0].about}"
        points = [(each.code, each.awarded, each.reason) for each in self.judgement.points]
        return (
            f"{part} {self.written.lines} lost {sorted(self.lost)}, deserved {sorted(self.deserved.lost)}; "
            f"{self.judgement.certainty} {self.judgement.slips} {self.judgement.rivals} {points}"
        )


def sat(asked: Question, slips: tuple[Slip, ...], style: Style, rng: random.Random) -> Iterator[Case]:
    """One candidate's question, part by part; ends where the slips leave no value."""
    candidate = Candidate(applied(slips, PUBLISHED), style, rng, PUBLISHED)
    own = Own()
    policy = Policy("full marks", "comma" if style.decimal == "," else "auto")
    for at, solved in enumerate(solved_parts(asked)):
        if solved.task == "explain":
            continue
        before = dict(candidate.own)
        try:
            written = candidate.write(solved)
            truth = deserved(solved, candidate, before, written) if written.lines else Deserved(frozenset(), (), False)
        except ContentError:
            return
        texts = tuple(written.lines)
        yield Case(solved, written, truth, judged(f"1{'abcdef'[at]}", solved, texts, own, TERMS, policy), before)


def rounds(variants: int, seed: str, show: str | None) -> Iterator[tuple[Question, Style, random.Random]]:
    """Each question with a style and chance of its own."""
    for at, asked in enumerate(bank(variants, seed)):
        rng = random.Random(f"{seed} {at}")
        yield asked, styled(rng, show), rng


def right_scripts(variants: int, seed: str = "right") -> Rate:
    """The right method in any notation earns full marks."""
    rate = Rate("right method, any notation: full marks")
    for asked, style, rng in rounds(variants, seed, None):
        for case in sat(asked, (), style, rng):
            if case.written.lines:
                rate.note(not case.lost and not case.judgement.slips, f"{style} {case.told()}")
    return rate


def one_slip(variants: int, seed: str = "one", show: str | None = None) -> tuple[Rate, Rate, Rate]:
    """One slip: named as certain where it can be told, never another one as certain, and the marks exact."""
    kind = show or "any"
    named = Rate(f"one slip ({kind}): named as certain where it can be told")
    wrongly = Rate(f"one slip ({kind}): no other one named as certain")
    exact = Rate(f"one slip ({kind}): exactly the marks lost that it spoils")
    for asked, style, rng in rounds(variants, seed, show):
        several = touching(asked)
        for slip in rng.sample(several, min(3, len(several))):
            for case in sat(asked, (slip,), style, rng):
                if case.solved.task not in ("calculate", "rank", "decide") or not case.written.lines:
                    continue
                found = case.judgement
                deviates = bool(case.deserved.deviating)
                tells = deviates and can_tell((slip,), case.written, case.solved, case.before)
                words = f"{slip.name}: {style.show} {case.told()}"
                sure = found.certainty == "certain"
                if tells:
                    named.note(sure and found.slips == (slip.name,), words)
                wrong = sure and bool(set(found.slips) - {slip.name})
                wrongly.note(not (wrong and (tells or not deviates)), words)
                if case.deserved.settled and (tells or not deviates):
                    exact.note(case.lost == case.deserved.lost, words)
    return named, wrongly, exact


def two_slips(variants: int, seed: str = "two") -> Rate:
    """Two slips at once: both named, or called ambiguous."""
    rate = Rate("two slips: right or called ambiguous")
    for asked, style, rng in rounds(variants, seed, None):
        several = touching(asked)
        pairs = [(a, b) for a in several for b in several if a.name < b.name and compatible(a, b)]
        for pair in rng.sample(pairs, min(2, len(pairs))):
            for case in sat(asked, pair, style, rng):
                told = can_tell(pair, case.written, case.solved, case.before) and case.deserved.deviating
                if case.solved.task == "calculate" and case.written.lines and told:
                    names = {slip.name for slip in pair}
                    found = case.judgement
                    right = bool(found.slips) and set(found.slips) <= names
                    words = f"{sorted(names)}: {style.show} {case.told()}"
                    rate.note(right or found.certainty == "ambiguous", words)
    return rate


def arithmetic(variants: int, seed: str = "arithmetic") -> tuple[Rate, Rate]:
    """Errors of the pen: no slip named as certain, and the method points kept where the lines show the method."""
    told = Rate("arithmetic error: no slip named as certain")
    kept = Rate("arithmetic error: only its own value point lost")
    for asked, style, rng in rounds(variants, seed, "lines"):
        candidate = Careless(PUBLISHED, style, rng, PUBLISHED)
        own = Own()
        policy = Policy("full marks", "comma" if style.decimal == "," else "auto")
        for at, solved in enumerate(solved_parts(asked)):
            if solved.task != "calculate" or solved.answer.kind != "number":
                continue
            candidate.erred = None
            try:
                written = candidate.write(solved)
            except ContentError:
                break  # the error leaves no charge that could hold an electron: nobody goes on from there
            found = judged(f"1{'abcdef'[at]}", solved, tuple(written.lines), own, TERMS, policy)
            if candidate.erred is None:
                continue
            words = f"{candidate.erred.quantity} {written.lines} {found}"
            told.note(not (found.certainty == "certain" and found.slips), words)
            expected = _arithmetic_loss(solved, candidate.erred)
            lost = {point.code for point in found.points if not point.awarded}
            kept.note(lost == expected, f"expected {expected}: {words}")
            break
    return told, kept


def _arithmetic_loss(solved: Solved, erred: Target) -> set[str]:
    line = next(at for at, step in enumerate(solved.steps) if step.target == erred)
    here = [point for point in solved.points if point.line == line]
    later = [point for point in solved.points if point.line > line]
    lost = {point.code for point in later if not point.follow_through}
    if here:
        return lost | {point.code for point in here if point.aspect == "value"}
    nearest = [point for point in later if point.line == min(each.line for each in later)]
    hit = next((point.code for point in nearest if point.aspect == "value"), nearest[0].code if nearest else "")
    return lost | ({hit} if hit else set())


class Careless(Candidate):
    """A candidate who works rightly but makes one error of the pen, in a sum or a difference, and goes on with it."""

    erred: Target | None = None

    def write(self, solved: Solved) -> Written:
        """A part with one error in it, if it has a sum or a difference to err in."""
        steps = self.chain(solved)
        lines = {step.target for step in solved.steps}
        places = [step.target for step in steps if step.target.quantity in (S, Z_EFF) and step.target in lines]
        if not places or any(target in self.own for target in places):
            return super().write(solved)
        place = self.rng.choice(places)
        right = next(step.line.value for step in steps if step.target == place)
        self.wrong = self._erring(right)
        self.place = place
        for step in steps:
            if step.target == place:
                break
            self.own[step.target] = step.line.value
        self.own[place] = self.wrong
        self.erred = place
        written = Written()
        for step in steps:
            if step.target.quantity == S or step.target.quantity == Z_EFF:
                written.lines.append(self._erred_line(step))
            elif step.target.quantity not in ("configuration", "groups", "tally"):
                from authoring.shielding.solve import work

                step = work(step.target, self.practice, {k: v for k, v in self.own.items() if k != step.target})[-1]
                self.own[step.target] = step.line.value
                written.lines.append(self._chain(step, self._label(step, False)))
        return written

    def _erring(self, right: Decimal) -> Decimal:
        digits = str(right)
        how = self.rng.choice(["carry", "tenth", "swapped"])
        if how == "swapped":
            places = [at for at in range(len(digits) - 1) if (digits[at] + digits[at + 1]).isdigit()]
            places = [at for at in places if digits[at] != digits[at + 1] and digits[at + 1] != "0"]
            if places:
                at = self.rng.choice(places)
                return Decimal(digits[:at] + digits[at + 1] + digits[at] + digits[at + 2 :])
        return right + (Decimal("1.00") if how == "carry" else Decimal("0.10"))

    def _erred_line(self, step: object) -> str:
        from marking_help import typeset

        from authoring.shielding.solve import work
        from authoring.working.numbers import shown
        from authoring.working.text import to_text

        target = step.target  # type: ignore[attr-defined]
        label = self.style.s if target.quantity == S else self.style.z
        mine = {k: v for k, v in self.own.items() if k != target}
        fresh = work(target, self.practice, mine)[-1]
        pieces = to_text(fresh.line.chain).split(" = ")
        value = self.own.setdefault(target, fresh.line.value)
        body = pieces[1] if target.quantity == S else pieces[-2]
        return typeset(f"{label} = {body} = {shown(value)}", self.style)


def main() -> int:
    """Every round, printed."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--papers", type=int, default=10, help="variants of each item and round")
    parser.add_argument("--examples", type=int, default=3)
    parser.add_argument("--only", default="")
    options = parser.parse_args()
    makers = {
        "right": lambda: [right_scripts(options.papers)],
        "lines": lambda: one_slip(options.papers, "lines", "lines"),
        "values": lambda: one_slip(options.papers, "values", "values"),
        "final": lambda: one_slip(options.papers, "final", "final"),
        "two": lambda: [two_slips(options.papers)],
        "arithmetic": lambda: arithmetic(options.papers),
    }
    for name, make in makers.items():
        if not options.only or name in options.only.split(","):
            for rate in make():
                sys.stdout.write(rate.words(options.examples) + "\n")
    return 0


if __name__ == "__main__":
    sys.exit(main())
