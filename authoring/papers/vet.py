"""Stage 3, vet: an item or plan checked as a whole: every variant solved, and what is weak about it said."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

from authoring.faults import Fault, FaultsFound, ShieldwrightError
from authoring.papers.questions import Kept, Question, Terms, question, species_of, wordings
from authoring.papers.variants import Variant, enumerated
from authoring.shielding.practice import published
from authoring.slips.catalogue import shipped
from authoring.specs.item import Item, parts_of, read_item, texts_in
from authoring.specs.plan import read_plan
from authoring.tasks.solved import Solved

# A wording that speaks of rounding in any of the usual words (common practice, no source).
_ROUNDING_SAID = re.compile(
    r"\{\{[^}]*\brounding\b|\bround|\bsignificant|\bfigures?\b|\bdecimals?\b|\bplaces?\b|\bdigits?\b|\bnearest\b"
    r"|\b[sd]\.? ?[fp]\b",
    re.IGNORECASE,
)
# The keys of an item whose texts may hold templates.
_TEXTS = ("story", "caution", "notes", "given", "figure", "parts")


@dataclass(frozen=True, slots=True)
class Vetted:
    """What was found: variants possible, variants sound, and findings.

    `counts[i]` is how many variants finding i is about; a finding beyond its end is about the file as a whole.
    """

    item: str
    possible: int
    sound: int
    findings: tuple[Fault, ...]
    marks: int = 0
    counts: tuple[int, ...] = ()

    @property
    def words(self) -> str:
        """One line for the terminal."""
        state = "sound" if not any(finding.severity == "fault" for finding in self.findings) else "has faults"
        return f"{self.item}: {state}; {self.sound} of {self.possible} variants, {self.marks} marks"

    def data(self) -> dict[str, Any]:
        """`{item, possible, sound, findings: [{code, severity, message, source, variants}]}`."""
        return {
            "item": self.item,
            "possible": self.possible,
            "sound": self.sound,
            "findings": [
                {
                    "code": each.code,
                    "severity": each.severity,
                    "message": each.message,
                    "source": str(each.source) if each.source else "",
                    "variants": count,
                }
                for each, count in zip(self.findings, (*self.counts, *[0] * len(self.findings)), strict=False)
            ],
        }


def vetted_plan(path: Path) -> list[Vetted]:
    """Every item of a plan under the plan's terms."""
    try:
        plan = read_plan(path)
    except ShieldwrightError as error:
        return [Vetted(path.stem, 0, 0, faults_of(error))]
    terms = Terms(plan.practice, plan.slips, plan.figures, new=True)
    return [vetted(item, terms, fixed) for item, fixed in zip(plan.items, plan.fixed, strict=True)]


def vetted_item(path: Path) -> Vetted:
    """One item under the published practice."""
    try:
        item = read_item(path)
    except ShieldwrightError as error:
        return Vetted(path.stem, 0, 0, faults_of(error))
    return vetted(item, Terms(published(), shipped(), new=True), {})


def faults_of(error: ShieldwrightError) -> tuple[Fault, ...]:
    """The faults an error carries, or the error as one."""
    return error.faults if isinstance(error, FaultsFound) else (Fault("unreadable", error.message),)


def vetted(item: Item, terms: Terms, fixed: Any) -> Vetted:
    """Solve every variant of an item; gather faults and weaknesses."""
    try:
        pool = enumerated(item, terms.practice, fixed)
    except FaultsFound as error:
        return Vetted(item.name, 0, 0, error.faults)
    seen = _Seen(item)
    kept = Kept()
    for variant in pool.variants:
        seen.add(variant, _solved(variant, terms, kept))
    return seen.vetted(len(pool.variants))


def _solved(variant: Variant, terms: Terms, kept: Kept) -> Question | tuple[Fault, ...]:
    """A variant's question, or its faults: in every wording that papers take turns with."""
    faults: list[Fault] = []
    made: Question | None = None
    for turn in range(wordings(variant.item)):
        try:
            made = question(variant, terms, turn, kept)
        except FaultsFound as error:
            faults += error.faults
    return tuple(dict.fromkeys(faults)) if faults or made is None else made


class _Seen:
    """What the variants of an item have shown so far; the questions themselves are let go."""

    def __init__(self, item: Item) -> None:
        self.item = item
        self.sound = 0
        self.faults: dict[tuple[str, object], tuple[Fault, int]] = {}
        self.marks: set[int] = set()
        self.lengths: set[int] = set()
        self.differing: set[str] = set()
        self.unrounded: set[int] = set()

    def add(self, variant: Variant, made: Question | tuple[Fault, ...]) -> None:
        """Take note of one variant."""
        if isinstance(made, tuple):
            for fault in {(each.code, each.source): each for each in reversed(made)}.values():
                first, count = self.faults.get((fault.code, fault.source), (fault, 0))
                self.faults[fault.code, fault.source] = (first, count + 1)
            return
        self.sound += 1
        self.marks.add(made.marks)
        self.lengths.add(sum(len(part.solved.steps) for part in made.parts))
        self.unrounded.update(at for at, solved in enumerate(_solved_parts(made)) if _is_rounded(solved))
        self.differing.update(species.label for species in species_of(variant) if species.differs)

    def vetted(self, possible: int) -> Vetted:
        """What was found in all of them."""
        found = [(counted(fault, count, possible), count) for fault, count in self.faults.values()]
        found += [(weakness, self.sound) for weakness in self.weaknesses()]
        findings, counts = tuple(each for each, _ in found), tuple(count for _, count in found)
        return Vetted(self.item.name, possible, self.sound, findings, min(self.marks, default=0), counts)

    def weaknesses(self) -> list[Fault]:
        """What is weak about the sound variants as a whole."""
        found: list[Fault] = []
        if self.sound == 1 and self.item.draws:
            words = "only one variant is possible: every candidate gets the same"
            found.append(self.weak("one-variant", words, "draw"))
        if len(self.marks) > 1:
            marks = " or ".join(str(number) for number in sorted(self.marks))
            found.append(self.weak("unequal-marks", f"variants give {marks} marks; say `marks` in every part", "parts"))
        if self.lengths and max(self.lengths) > min(self.lengths) + 3:
            words = f"the working takes from {min(self.lengths)} to {max(self.lengths)} lines"
            found.append(self.weak("unequal-working", f"{words}: variants may not be equally hard", "draw"))
        if self.differing:
            labels = ", ".join(sorted(self.differing))
            words = f"measurement and the taught rule give different configurations for {labels}"
            found.append(self.weak("rule-differs", words, "draw"))
        return found + self.wording_weaknesses()

    def wording_weaknesses(self) -> list[Fault]:
        """What the item's own wordings leave out, and names in single braces."""
        found = self.single_braces()
        for at, part in enumerate(parts_of(self.item)):
            for turn, text in enumerate(part.fields.ask):
                steps = (*part.steps, "ask", turn)
                if at in self.unrounded and not _ROUNDING_SAID.search(text):
                    words = "this wording does not say how to round; write, say, `Give your answer {{ rounding }}.`"
                    found.append(self.weak("no-rounding", words, *steps))
        return found

    def single_braces(self) -> list[Fault]:
        """Names that mean something in two braces and stand in one, anywhere in the item's text."""
        drawn = "|".join(map(re.escape, (*self.item.draws, "species", "electron", "rounding")))
        # Not in formulas, where braces hold an index together, nor in what is a template already.
        one = re.compile(rf"(?<![{{%_^\\}}]){{\s*(?:{drawn})(?:\.\w+)*\s*}}(?!}})")
        found = []
        for steps, text in texts_in(self.item.tree.data):
            for braces in one.finditer(text) if steps[0] in _TEXTS else ():
                before = text[: braces.start()].split("\n")
                place = self.item.tree.block_line(steps, len(before) - 1, len(before[-1]) + 1)
                words = f"{braces[0]} is printed as it stands; drawn values and rounding take two braces: {{{{ … }}}}"
                found.append(Fault("single-braces", words, place, "weakness"))
        return found

    def weak(self, code: str, message: str, *steps: str | int) -> Fault:
        """A weakness at a place of the item."""
        return Fault(code, message, self.item.at(*steps), "weakness")


def _solved_parts(made: Question) -> tuple[Solved, ...]:
    """What was solved, in the order of `parts_of`."""
    return tuple(each.solved for part in made.parts for each in part.choices or (part,))


def _is_rounded(solved: Solved) -> bool:
    """Whether the default wording of the part says how to round."""
    return solved.task in ("calculate", "correct") and bool(solved.steps) and solved.steps[-1].line.rounded


def counted(first: Fault, count: int, possible: int) -> Fault:
    """A fault of some variants, told once; one of all variants has none of them to name."""
    words, here, _ = first.message.rpartition(" (in the variant ")
    if count == possible > 1 and here:
        return replace(first, message=f"{words} (in every variant)")
    return with_count(first, count)


def with_count(first: Fault, count: int) -> Fault:
    """A fault of several variants, told once."""
    if count == 1:
        return first
    plural = "s" if count > 2 else ""
    return Fault(first.code, f"{first.message}; and {count - 1} more variant{plural}", first.source, first.severity)
