"""Press: where a character that no font has stands in what people wrote."""

from __future__ import annotations

import unicodedata

from authoring.faults import Source
from authoring.papers.assemble import PaperSet
from authoring.specs.item import texts_in


def place_of(character: str, paper_set: PaperSet) -> Source | None:
    """Its first place in the items, the plan, the slips or the roster; None where none of them has it.

    A character that is written as an escape has the place of its text.
    """
    plan = paper_set.plan
    trees = (*(item.tree for item in plan.items), plan.tree, *([plan.slips_tree] if plan.slips_tree else []))
    for tree in trees:
        start = next((tree.at(steps) for steps, text in texts_in(tree.data) if _has(text, character)), None)
        if start:
            return _found(character, start, tree.text.split("\n"))
    for who in (paper.candidate for paper in paper_set.papers):
        if who and who.source and _has(f"{who.id} {who.name} {who.seat}", character):
            return _found(character, who.source, [""] * (who.source.line - 1) + [who.source.text])
    return None


def _has(text: str, character: str) -> bool:
    # Texts are composed before they are printed: a letter and its accent are one character to TeX.
    return character in text or character in unicodedata.normalize("NFC", text)


def _found(character: str, start: Source, lines: list[str]) -> Source:
    """The character in the lines from a place onwards."""
    for at, line in enumerate(lines[start.line - 1 :], start.line):
        column = line.find(character, start.column - 1 if at == start.line else 0)
        if column >= 0:
            return Source(start.path, at, column + 1, line)
    return start
