"""Stage 8, mark: one part of one script becomes a judgement; parts of a paper in order, on the candidate's own values.

Nothing is guessed in silence: what no practice, slip or arithmetic explains is *unexplained* and left to a person.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from authoring.marking.awarding import Chosen, awarded
from authoring.marking.chain_judge import read_working, statements_of
from authoring.marking.choice_judge import chosen, options_of
from authoring.marking.explaining import Terms, explained
from authoring.marking.forms import DecimalMark, Written
from authoring.marking.judgement import Certainty, Judgement, Own, PointJudged, least
from authoring.marking.line_states import LineState, Working
from authoring.marking.tidy import lowered, tidied, without_struck
from authoring.marking.trace import way_to
from authoring.marking.written import read_line
from authoring.shielding.quantity import quantities
from authoring.slips.diagnose import agrees
from authoring.tasks.complete import roman
from authoring.tasks.solved import Answer, Solved
from authoring.working.numbers import Rounding
from authoring.working.text import to_text

_LINE_NUMBER = re.compile(
    r"^\W*(?:first wrong line|wrong line|line|zeile|l\.?)?\s*[:(]?\s*(\d{1,2})\b[):.;,\s-]*", re.IGNORECASE
)
# `3, S = 19.70`: the space tells the number of a line from a decimal comma.
_SET_APART = re.compile(r"\W*\d{1,2}\s*[,:)]\s+\S")
_BLANK_LABEL = re.compile(r"^\s*\(?([ivxl]{1,6})[).:]+\s*", re.IGNORECASE)

_ONE_TYPE = str.maketrans({",": ".", "{": None, "}": None, "x": "*"})

MOST_PRINTED = 5000
_PRINTED: dict[int, tuple[Solved, dict[str, int]]] = {}

Texts = tuple[str, ...]


class Policy:
    """How a plan wants scripts judged: what bare values earn, and the decimal mark."""

    __slots__ = ("bare_values", "decimal")

    def __init__(self, bare_values: str = "full marks", decimal: DecimalMark = "auto") -> None:
        self.bare_values = bare_values
        self.decimal = decimal


def judged(label: str, solved: Solved, texts: Texts, own: Own, terms: Terms, policy: Policy) -> Judgement:
    """Judge one part. `own` takes up what the candidate states; parts after it are judged on that."""
    lines = [read_line(text, policy.decimal) for text in texts]
    lines = [written for written in lines if written.kind != "blank"]
    remarks = tuple(f"crossed out: {piece}" for written in lines for piece in written.struck)
    lines = [_without_struck(written) if written.struck else written for written in lines]
    if not lines:
        return _all(label, solved, 0, "not answered", remarks)
    if any(written.kind == "ok" for written in lines):
        _take_key(solved, own)
        return _all(label, solved, 1, "exactly as the key", remarks)
    if solved.task == "explain":
        return _explained_in_words(label, solved, remarks)
    judge = {"table": _table, "correction": _correction}.get(solved.answer.kind, _worked)
    found = judge(label, solved, lines, own, terms, policy, remarks)
    if any(written.kind == "unreadable" for written in lines):
        return _left_to_person(found, "a line that could not be read may say it")
    return found


def _without_struck(written: Written) -> Written:
    """What is crossed out is no part of a line's words either."""
    return replace(written, text=without_struck(written.text)[0])


def _left_to_person(found: Judgement, why: str) -> Judgement:
    """A judgement whose lost points a person has to look at."""
    points = tuple(point if point.awarded else replace(point, reason=why, open=True) for point in found.points)
    return replace(found, points=points, certainty="unexplained") if points != found.points else found


def best_judged(
    label: str, alternatives: tuple[Solved, ...], texts: Texts, own: Own, terms: Terms, policy: Policy
) -> Judgement:
    """Judge a part of which the candidate answers one alternative: the one that the lines answer best counts."""
    if len(alternatives) == 1:
        return judged(label, alternatives[0], texts, own, terms, policy)
    tried = []
    for solved in alternatives:
        mine = own.copy()
        tried.append((judged(label, solved, texts, mine, terms, policy), mine))
    judgement, mine = max(tried, key=lambda pair: pair[0].awarded)
    own.update(mine.values, mine.off)
    return judgement


def _all(label: str, solved: Solved, marks: int, reason: str, remarks: tuple[str, ...]) -> Judgement:
    points = tuple(PointJudged(point.code, marks, reason) for point in solved.points)
    return Judgement(label, points, "certain", remarks=remarks)


def _take_key(solved: Solved, own: Own) -> None:
    for step in solved.steps:
        if step.target.quantity in quantities():
            own.set(step.target, step.line.value, False)


def _explained_in_words(label: str, solved: Solved, remarks: tuple[str, ...]) -> Judgement:
    points = tuple(PointJudged(point.code, 0, f"a person decides: {point.what}", open=True) for point in solved.points)
    return Judgement(label, points, "unexplained", remarks=remarks)


def _worked(
    label: str, solved: Solved, lines: list[Written], own: Own, terms: Terms, policy: Policy, remarks: tuple[str, ...]
) -> Judgement:
    """Working and, where the part asks for one, a choice at its end."""
    as_key, others = _as_the_key(solved, lines, policy)
    for at in as_key:
        step = solved.steps[at]
        if step.target.quantity in quantities():
            own.set(step.target, step.line.value, False)
    working = read_working(solved, [each for written in others for each in statements_of(written)], own, terms)
    for at in as_key:
        working.states[at] = LineState("key", stated=True, words="as the key has it")
    _imply(working, as_key, terms)
    if any(point.line in as_key for point in solved.points if point.aspect in ("choice", "reason")):
        choice: Chosen | None = Chosen(True, "as the key has it", reason=True)
    else:
        choice = _choice(solved, working, lines, terms)
    any_words = any(written.words for written in lines)
    points, certainty = awarded(working, choice, policy.bare_values, any_words)
    found = _judgement(label, working.states, choice, points, certainty, (*remarks, *working.remarks))
    if working_shows(working) or choice is not None:
        return found
    return _left_to_person(found, "what is written is about no line of the key")


def _imply(working: Working, as_key: set[int], terms: Terms) -> None:
    """The lines on the way to lines of the key are implied by them, where nothing else is said about them."""
    implied = {
        target
        for at in as_key
        if working.solved.steps[at].target.quantity in quantities()
        for target in way_to(working.solved.steps[at].target, terms.practice)
    }
    for at, step in enumerate(working.solved.steps):
        if step.target in implied and working.states[at].finding == "unseen":
            working.states[at] = LineState("key")
            working.own.set(step.target, step.line.value, False)


def _as_the_key(solved: Solved, lines: Sequence[Written], policy: Policy) -> tuple[set[int], list[Written]]:
    """The lines of the key that stand in the script as the key prints them, and the script's other lines."""
    found: set[int] = set()
    others: list[Written] = []
    for written in lines:
        at = line_of_key(solved, written.text, policy)
        if at is None:
            others.append(written)
        else:
            found.add(at)
    return found, others


def line_of_key(solved: Solved, text: str, policy: Policy) -> int | None:
    """The place of the line of the key that a text is, as the key prints it; None where it is none of them."""
    if not any(sign in text for sign in "=:→≈"):
        return None
    return _printed(solved).get(_plain(text.replace(",", ".") if policy.decimal == "comma" else text))


def _printed(solved: Solved) -> dict[str, int]:
    """The lines of a key as text, each with its place; kept, since many scripts answer the same part."""
    kept = _PRINTED.get(id(solved))
    if kept is None or kept[0] is not solved:
        if len(_PRINTED) > MOST_PRINTED:
            _PRINTED.clear()
        lines = {_plain(to_text(step.line.chain)): at for at, step in enumerate(solved.steps)}
        kept = _PRINTED[id(solved)] = (solved, lines)
    return kept[1]


def _plain(text: str) -> str:
    """A line without its spaces, in one typography."""
    return "".join(lowered(tidied(text)).split()).translate(_ONE_TYPE)


def _choice(solved: Solved, working: Working, lines: Sequence[Written], terms: Terms) -> Chosen | None:
    """What was chosen; None where the part asks for no choice."""
    if not any(point.aspect in ("choice", "reason") for point in solved.points) and solved.answer.accepted is None:
        return None
    found = chosen(solved, lines, working.own, terms.practice)
    if found.slips and any(state.stated and state.slips for state in working.states):
        found = replace(found, slips=(), rivals=())  # the lines say more than the choice
    if solved.answer.kind == "letter":
        _take_option(solved, found, working.own)
    last = working.states[-1] if working.states else LineState()
    if found.reason is None and last.stated and last.spoiled:
        return replace(found, slips=found.slips or last.slips, rivals=found.rivals or last.rivals)
    if found.reason and any(state.stated and state.finding in ("open", "slip") for state in working.states):
        return replace(found, reason=None if any(state.finding == "open" for state in working.states) else True)
    return found


def _take_option(solved: Solved, found: Chosen, own: Own) -> None:
    """The candidate goes on with the value of the option chosen."""
    (target,) = solved.targets
    letter = str(solved.answer.value) if found.right else "".join(found.names)
    option = next((each for each in options_of(solved) if each.letter == letter), None)
    number = read_line(option.shown).value if option else None
    if number is None:
        return
    key = next(step.line.value for step in solved.steps if step.target == target)
    own.set(target, key if found.right else number, not found.right)


def _judgement(
    label: str,
    states: Sequence[LineState],
    choice: Chosen | None,
    points: tuple[PointJudged, ...],
    certainty: Certainty,
    remarks: tuple[str, ...],
) -> Judgement:
    named: dict[str, None] = {}
    rivals: dict[str, None] = {}
    for state in states:
        named.update(dict.fromkeys(state.slips))
        rivals.update(dict.fromkeys(state.rivals))
    if choice is not None:
        named.update(dict.fromkeys(choice.slips))
        rivals.update(dict.fromkeys(choice.rivals))
    return Judgement(label, points, certainty, tuple(named), tuple(rivals), tuple(dict.fromkeys(remarks)))


# --- tables -------------------------------------------------------------------------------------------


def _table(
    label: str, solved: Solved, lines: list[Written], own: Own, terms: Terms, policy: Policy, remarks: tuple[str, ...]
) -> Judgement:
    """Blanks in reading order, or by their labels (i), (ii) …; each on the candidate's own values."""
    answers: tuple[Answer, ...] = solved.answer.value  # type: ignore[assignment]
    written = _by_blank(lines, len(answers), policy)
    points: list[PointJudged] = []
    slips: dict[str, None] = {}
    rivals: dict[str, None] = {}
    found: list[Certainty] = []
    for at, point in enumerate(solved.points):
        line = written.get(at)
        if line is None:
            points.append(PointJudged(point.code, 0, "not answered"))
            continue
        judged_point, state = _blank(solved, at, line, own, terms)
        points.append(judged_point)
        slips.update(dict.fromkeys(state.slips))
        rivals.update(dict.fromkeys(state.rivals))
        found.append("unexplained" if judged_point.open else "certain" if state.sure else "ambiguous")
    return Judgement(label, tuple(points), least(found), tuple(slips), tuple(rivals), remarks)


def _by_blank(lines: Sequence[Written], count: int, policy: Policy) -> dict[int, Written]:
    places = {roman(number): number - 1 for number in range(1, count + 1)}
    found: dict[int, Written] = {}
    pieces = [piece.strip() for written in lines for piece in written.text.split(";") if piece.strip()]
    for at, piece in enumerate(pieces):
        match = _BLANK_LABEL.match(piece)
        place = places.get(match[1].lower()) if match else None
        text = piece[match.end() :] if match and place is not None else piece
        found[at if place is None else place] = read_line(text, policy.decimal)
    return found


def _blank(solved: Solved, at: int, line: Written, own: Own, terms: Terms) -> tuple[PointJudged, LineState]:
    answers: tuple[Answer, ...] = solved.answer.value  # type: ignore[assignment]
    answer, target, code = answers[at], solved.targets[at], solved.points[at].code
    if answer.kind != "number":
        value = line.electron or line.config or line.groups or line.species
        right = agrees(answer.value, value, target)
        open_ = not right and value is None
        return PointJudged(code, int(right), "right" if right else "wrong", open_), LineState(sure=not open_)
    rounding = Rounding(places=len(answer.shown.partition(".")[2]))
    one = replace(solved, steps=tuple(step for step in solved.steps if step.target == target))
    if not one.steps:
        key = answer.value
        found = explained(target, line, own.values, key, rounding, answer.unit, terms)
        off = found.value != key and found.finding != "key"
        state = LineState(
            found.finding,
            True,
            False,
            found.finding == "slip",
            tuple(slip.name for slip in found.slips),
            tuple(" + ".join(slip.name for slip in each) for each in found.rivals),
            found.words,
            found.sure,
        )
        if found.value is not None:
            own.set(target, found.value, off)
    else:
        working = read_working(one, [replace(line, label=None, about="")], own, terms)
        state = working.states[-1]
    right = state.finding in ("right", "early", "key") and not state.spoiled
    reason = state.words or ("right" if right else "wrong")
    return PointJudged(code, int(right), reason, open=state.finding in ("open", "coarse")), state


# --- corrections ----------------------------------------------------------------------------------------


def _correction(
    label: str, solved: Solved, lines: list[Written], own: Own, terms: Terms, policy: Policy, remarks: tuple[str, ...]
) -> Judgement:
    """The number of the first wrong line, then the working from there on put right."""
    correction: tuple[int, object] = solved.answer.value  # type: ignore[assignment]
    wanted = correction[0]
    number, rest = _line_number(lines, policy)
    working = read_working(solved, [each for written in rest for each in statements_of(written)], own, terms)
    if number is None:
        choice = Chosen(False, "no line is named", given=False, open=not working_shows(working))
    else:
        choice = Chosen(number == wanted, f"line {number} named; the first wrong line is {wanted}")
    put_right = [state for state in working.states[1:] if state.stated and state.finding in ("right", "key", "early")]
    choice = replace(choice, reason=True if put_right else None)
    points, certainty = awarded(working, choice, policy.bare_values, any(each.kind == "words" for each in rest))
    return _judgement(label, working.states, choice, points, certainty, (*remarks, *working.remarks))


def working_shows(working: Working) -> bool:
    """Whether anything of the working was stated."""
    return any(state.stated for state in working.states)


def _line_number(lines: Sequence[Written], policy: Policy) -> tuple[int | None, list[Written]]:
    """The line named, and what is left of the lines without it."""
    number: int | None = None
    rest: list[Written] = []
    for written in lines:
        for piece in _statements(written.text) if number is None else [written.text]:
            match = _LINE_NUMBER.match(piece) if number is None else None
            named = match is not None and (
                match[0].strip(" :(;,.-)") != match[1] or not piece[match.end() :].strip() or _SET_APART.match(piece)
            )
            if match is not None and named:
                number = int(match[1])
                piece = piece[match.end() :].strip(" ;:,.")
            if piece.strip():
                rest.append(read_line(piece.strip(), policy.decimal))
    return number, [written for written in rest if written.kind != "blank"]


def _statements(text: str) -> list[str]:
    """A line cut after the number of a line that it begins with: `line 3; 19.70`."""
    head, semicolon, tail = text.partition(";")
    return [head, tail] if semicolon and _LINE_NUMBER.fullmatch(head) else [text]
