"""Stage 8, mark: from what was found for each line to marks for each mark point, with the reason.

A line that is right on the candidate's own values earns its points (`ft` where those values are wrong); a line that
a slip spoils loses them. A spoiled line that carries no point charges the next line that does, so that a mistake
costs what it costs everyone, whatever the scheme.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from authoring.marking.judgement import Certainty, PointJudged, least
from authoring.marking.line_states import LineState, Working
from authoring.tasks.points import charged
from authoring.working.lines import Point

ACCURACY_ONLY = "accuracy only"
FULL_MARKS = "full marks"


@dataclass(frozen=True, slots=True)
class Chosen:
    """What was found for a choice, an order or a reading: right or not, and why; `open` leaves it to a person."""

    right: bool
    words: str
    slips: tuple[str, ...] = ()
    rivals: tuple[str, ...] = ()
    open: bool = False
    given: bool = True
    follows: bool = False  # what the candidate's own values lead to
    names: tuple[str, ...] = ()  # what was chosen, where it is not the right answer
    reason: bool | None = None  # True: values or a comparison give the reason; None: words that a person judges


def awarded(
    working: Working, chosen: Chosen | None, policy: str, any_words: bool
) -> tuple[tuple[PointJudged, ...], Certainty]:
    """The points of a part, and how sure they are."""
    points = working.solved.points
    lost = _charged(points, working.states)
    judged = []
    for point in points:
        if chosen is not None and (point.aspect in ("choice", "reason") or working.solved.task == "read"):
            judged.append(_of_choice(point, chosen, any_words))
            continue
        state = working.states[point.line] if point.line < len(working.states) else LineState()
        if point.code in lost:
            judged.append(PointJudged(point.code, 0, lost[point.code]))
        else:
            judged.append(_of_line(point, state, policy))
    return tuple(judged), certainty_of(working, chosen, judged)


def certainty_of(working: Working, chosen: Chosen | None, judged: Sequence[PointJudged]) -> Certainty:
    """The least sure finding decides."""
    found: list[Certainty] = []
    for state in working.states:
        if state.finding == "open":
            found.append("unexplained")
        elif not state.sure:
            found.append("ambiguous")
    if chosen is not None and chosen.open:
        found.append("unexplained")
    # One of a few things chosen may be a guess; an option is the value of one slip.
    if chosen is not None and (chosen.rivals or (chosen.slips and working.solved.answer.kind != "letter")):
        found.append("ambiguous")
    if any(point.open for point in judged):
        found.append("unexplained")
    return least(found)


def _charged(points: Sequence[Point], states: Sequence[LineState]) -> dict[str, str]:
    """The points lost for mistakes on lines that carry none: the accuracy point of the next line that has one."""
    lost: dict[str, str] = {}
    pointed = {point.line for point in points}
    for at, state in enumerate(states):
        mistake = state.spoiled or (state.stated and state.finding in ("arithmetic", "unit"))
        if not mistake or at in pointed:
            continue
        hit = charged(points, at)
        if hit is not None:
            lost.setdefault(hit.code, f"a line before: {state.words}" if state.words else "a line before is wrong")
    return lost


def _of_line(point: Point, state: LineState, policy: str) -> PointJudged:
    code = point.code
    if state.finding == "unseen":
        return PointJudged(code, 0, "not shown")
    if state.spoiled:
        return PointJudged(code, 0, state.words or "spoiled by a slip")
    if not state.stated:
        if policy == ACCURACY_ONLY and point.aspect != "value":
            return PointJudged(code, 0, "not shown; a bare value earns accuracy marks only")
        return _followed(point, state, "implied by a later line")
    if state.finding in ("right", "early", "key"):
        return _followed(point, state, state.words or "right")
    if state.finding == "arithmetic":
        if point.aspect != "value":
            return PointJudged(code, 1, "the method is right")
        return PointJudged(code, 0, state.words)
    if state.finding == "slip":
        return _followed(point, state, "right on the candidate's own values")
    return PointJudged(code, 0, state.words or "a person decides", open=state.finding in ("open", "coarse"))


def _followed(point: Point, state: LineState, words: str) -> PointJudged:
    if not state.follows or state.finding == "key":
        return PointJudged(point.code, 1, words)
    if point.follow_through:
        return PointJudged(point.code, 1, "follow-through: right on the candidate's own values")
    return PointJudged(point.code, 0, "right on wrong values, and no follow-through is given here")


def _of_choice(point: Point, chosen: Chosen, any_words: bool) -> PointJudged:
    if point.aspect != "reason":
        if not chosen.given:
            words = "no answer that can be read" if chosen.open else "not answered"
            return PointJudged(point.code, 0, words, chosen.open)
        right = chosen.right or (chosen.follows and point.follow_through)
        words = f"follow-through: {chosen.words}" if right and not chosen.right else chosen.words
        return PointJudged(point.code, int(right), words, chosen.open)
    if chosen.reason:
        return PointJudged(point.code, 1, "the reason: values compared")
    if any_words:
        return PointJudged(point.code, 0, "a reason in words: a person decides", open=True)
    return PointJudged(point.code, 0, "no reason is given")
