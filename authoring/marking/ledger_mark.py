"""Stage 8, mark: the marks of one part as the ledger keeps them: a judgement with the paper it belongs to."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, get_args

from authoring.faults import ContentError
from authoring.marking.judgement import Certainty, Judgement, PointJudged


@dataclass(frozen=True, slots=True)
class Mark:
    """A judgement of one part of one paper; `candidate` is an id, never a name."""

    paper: str
    judgement: Judgement
    candidate: str = ""

    @property
    def part(self) -> str:
        """The part's label."""
        return self.judgement.label


def judgement_data(judged: Judgement) -> dict[str, Any]:
    """What is kept of a judgement besides its part."""
    return {
        "awarded": judged.awarded,
        "certainty": judged.certainty,
        "out_of": judged.out_of,
        "points": [(point.code, point.awarded, point.reason, point.open) for point in judged.points],
        "remarks": judged.remarks,
        "rivals": judged.rivals,
        "slips": judged.slips,
    }


def mark_from(paper: str, part: str, payload: Mapping[str, Any]) -> Mark:
    """The mark that a payload keeps. Raises ContentError where it keeps none."""
    try:
        certainty: Certainty = payload["certainty"]
        points = tuple(_point(*each) for each in payload["points"])
        slips, rivals, remarks = (tuple(map(str, payload[name])) for name in ("slips", "rivals", "remarks"))
        mark = Mark(paper, Judgement(part, points, certainty, slips, rivals, remarks), str(payload["candidate"]))
        fits = (mark.judgement.awarded, mark.judgement.out_of) == (payload["awarded"], payload["out_of"])
    except (KeyError, TypeError, ValueError) as error:
        raise ContentError(f"a mark of {paper} {part} in the ledger cannot be read") from error
    if not fits or certainty not in get_args(Certainty):
        raise ContentError(f"a mark of {paper} {part} in the ledger contradicts itself")
    return mark


def _point(code: str, awarded: int, reason: str, unsettled: bool) -> PointJudged:
    if awarded not in (0, 1):
        raise ValueError("a mark point is awarded or not")
    return PointJudged(str(code), int(awarded), str(reason), bool(unsettled))
