"""Stage 8, mark: what lines say, whatever their typography: `thus S = 19,70` says what `S=19.70` says.

Candidates write the same few things in a thousand ways. What one says is read for each way, and judged once.
"""

from __future__ import annotations

from dataclasses import replace

from authoring.marking.forms import Written
from authoring.marking.judge import Policy, line_of_key
from authoring.marking.written import read_line
from authoring.tasks.solved import Solved


class Sayings:
    """Numbers for what lines say: equal where nothing but the letters differ."""

    def __init__(self, policy: Policy) -> None:
        self._policy = policy
        self._of_text: dict[str, int] = {}
        self._of_saying: dict[Written, int] = {}

    def told(self, alternatives: tuple[Solved, ...], texts: tuple[str, ...]) -> object | None:
        """What tells answers to a part apart; None where the very words may count: choices, reasons, tables."""
        if not all(solved.task == "calculate" and solved.answer.kind == "number" for solved in alternatives):
            return None
        as_key = [line_of_key(solved, text, self._policy) for solved in alternatives for text in texts]
        return tuple(map(self._number, texts)), tuple(as_key)

    def _number(self, text: str) -> int:
        found = self._of_text.get(text)
        if found is None:
            said = _without_text(read_line(text, self._policy.decimal))
            found = self._of_text[text] = self._of_saying.setdefault(said, len(self._of_saying))
        return found


def _without_text(written: Written) -> Written:
    return replace(written, text="", earlier=tuple(map(_without_text, written.earlier)))
