"""Stage 8, mark: what is added to a ledger, as the text it is kept as: scripts, judgements, changes, decisions."""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping
from typing import TypeAlias

from authoring.faults import ContentError
from authoring.marking.judgement import Judgement
from authoring.marking.ledger_events import LONGEST_PAYLOAD, EventKind
from authoring.marking.ledger_mark import Mark, judgement_data

# (kind, paper, part, payload): a plain tuple, since a pile hands over tens of thousands of them between processes.
Entry: TypeAlias = "tuple[EventKind, str, str, str]"

_NOBODYS = ',"candidate":""}'
_encode = json.JSONEncoder(ensure_ascii=False, separators=(",", ":")).encode


def script_entry(paper: str, answers: Mapping[str, Iterable[str]], candidate: str) -> Entry:
    """A script as it was transcribed: part label → lines."""
    content = {"answers": {part: tuple(lines) for part, lines in answers.items()}, "candidate": candidate}
    return "script", paper, "", _kept(paper, _encode(content))


def judgement_entry(mark: Mark) -> Entry:
    """A judgement."""
    return entry_of(judgement_text(mark.judgement), mark.paper, mark.part, mark.candidate)


def judgement_text(judged: Judgement) -> str:
    """What a judgement says, as text: the same for all who wrote the same."""
    return _encode(judgement_data(judged))


def entry_of(text: str, paper: str, part: str, candidate: str) -> Entry:
    """The entry of a judgement that is text already (`judgement_text`)."""
    return "judgement", paper, part, _kept(paper, _with(text, candidate, {}))


def reasoned_entry(kind: EventKind, mark: Mark, reason: str, by: str = "") -> Entry:
    """A mark that a person gives, with the reason; `by` says who, where the mark is somebody else's."""
    if not reason.strip():
        raise ContentError("a changed mark needs its reason")
    text = _with(judgement_text(mark.judgement), mark.candidate, {"reason": reason.strip(), "by": by})
    return kind, mark.paper, mark.part, _kept(mark.paper, text)


def _with(text: str, candidate: str, more: Mapping[str, str]) -> str:
    """The payload of a mark: its judgement, then whose it is and the rest."""
    if not candidate and not more:
        return text[:-1] + _NOBODYS
    return f"{text[:-1]},{_encode({'candidate': candidate, **more})[1:]}"


def _kept(paper: str, text: str) -> str:
    if len(text) > LONGEST_PAYLOAD:
        raise ContentError(f"what is written about paper {paper[:40]} is too long to be kept")
    # Half a character (a lone surrogate) cannot be kept as UTF-8.
    return text if text.isascii() else text.encode("utf-8", "replace").decode("utf-8")
