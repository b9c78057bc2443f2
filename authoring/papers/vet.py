"""Stage 3, vet: an item or plan checked as a whole: every variant solved, and what is weak about it said."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from authoring.faults import Fault, FaultsFound, ShieldwrightError
from authoring.papers.questions import Question, Terms, question, species_of
from authoring.papers.variants import enumerated
from authoring.shielding.practice import published
from authoring.slips.catalogue import shipped
from authoring.specs.item import Item, read_item
from authoring.specs.plan import read_plan



@dataclass(frozen=True, slots=True)
class Vetted:
    """What was found: variants possible, variants sound, and findings."""

    item: str
    possible: int
    sound: int
    findings: tuple[Fault, ...]
    marks: int = 0

    @property
    def words(self) -> str:
        """One line for the terminal."""
        state = "sound" if not any(finding.severity == "fault" for finding in self.findings) else "has faults"
        return f"{self.item}: {state}; {self.sound} of {self.possible} variants, {self.marks} marks"

    def data(self) -> dict[str, Any]:
        """`{item, possible, sound, findings}`."""
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
                }
                for each in self.findings
            ],
        }


def vetted_plan(path: Path) -> list[Vetted]:
    """Every item of a plan under the plan's terms."""
    try:
        plan = read_plan(path)
    except ShieldwrightError as error:
        return [Vetted(path.stem, 0, 0, faults_of(error))]
    terms = Terms(plan.practice, plan.slips, plan.figures)
    return [vetted(item, terms, fixed) for item, fixed in zip(plan.items, plan.fixed, strict=True)]


def vetted_item(path: Path) -> Vetted:
    """One item under the published practice."""
    try:
        item = read_item(path)
    except ShieldwrightError as error:
        return Vetted(path.stem, 0, 0, faults_of(error))
    return vetted(item, Terms(published(), shipped()), {})


def faults_of(error: ShieldwrightError) -> tuple[Fault, ...]:
    """The faults an error carries, or the error as one."""
    return error.faults if isinstance(error, FaultsFound) else (Fault("unreadable", error.message),)


def vetted(item: Item, terms: Terms, fixed: Any) -> Vetted:
    """Solve every variant of an item; gather faults and weaknesses."""
    try:
        pool = enumerated(item, terms.practice, fixed)
    except FaultsFound as error:
        return Vetted(item.name, 0, 0, error.faults)
    faults: dict[tuple[str, object], list[Fault]] = {}
    sound: list[Question] = []
    for variant in pool.variants:
        try:
            sound.append(question(variant, terms))
        except FaultsFound as error:
            for fault in error.faults:
                faults.setdefault((fault.code, fault.source), []).append(fault)
    findings = [_with_count(alike) for alike in faults.values()]
    findings += _weaknesses(item, sound)
    marks = sound[0].marks if sound else 0
    return Vetted(item.name, len(pool.variants), len(sound), tuple(findings), marks)


def _with_count(alike: list[Fault]) -> Fault:
    first = alike[0]
    if len(alike) == 1:
        return first
    return Fault(first.code, f"{first.message}; and {len(alike) - 1} more variants", first.source, first.severity)


def _weaknesses(item: Item, sound: list[Question]) -> list[Fault]:
    found: list[Fault] = []
    if len(sound) == 1 and item.draws:
        found.append(_weak("one-variant", "only one variant is possible: every candidate gets the same", item, "draw"))
    marks = Counter(each.marks for each in sound)
    if len(marks) > 1:
        words = " or ".join(str(number) for number in sorted(marks))
        found.append(_weak("unequal-marks", f"variants give {words} marks; say `marks` in every part", item, "parts"))
    lengths = [sum(len(part.solved.steps) for part in each.parts) for each in sound]
    if lengths and max(lengths) > min(lengths) + 3:
        words = f"the working takes from {min(lengths)} to {max(lengths)} lines: variants may not be equally hard"
        found.append(_weak("unequal-working", words, item, "draw"))
    odd = sorted({species.label for each in sound for species in species_of(each.variant) if species.differs})
    if odd:
        words = f"measurement and the taught rule give different configurations for {', '.join(odd)}"
        found.append(_weak("rule-differs", words, item, "draw"))
    return found


def _weak(code: str, message: str, item: Item, *steps: str) -> Fault:
    return Fault(code, message, item.at(*steps), "weakness")


