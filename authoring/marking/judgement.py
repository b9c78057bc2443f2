"""Stage 8, mark: what a judgement says: marks per mark point with the reason, slips with their evidence, certainty."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from typing import Any, Literal

from authoring.shielding.quantity import Target, Value

Certainty = Literal["certain", "ambiguous", "unexplained"]
_ORDER: tuple[Certainty, ...] = ("certain", "ambiguous", "unexplained")


@dataclass(frozen=True, slots=True)
class PointJudged:
    """One mark point: 1 or 0, and why; `open` says that a person has to decide it."""

    code: str
    awarded: int
    reason: str
    open: bool = False


@dataclass(frozen=True, slots=True)
class Judgement:
    """What the judge proposes for one part of one script.

    `slips` names the misunderstandings found, likeliest first; where `certainty` is ambiguous, `rivals` lists the
    explanations that the lines cannot tell apart. `remarks` are for the marker.
    """

    label: str
    points: tuple[PointJudged, ...]
    certainty: Certainty
    slips: tuple[str, ...] = ()
    rivals: tuple[str, ...] = ()
    remarks: tuple[str, ...] = ()

    @property
    def awarded(self) -> int:
        """The marks proposed."""
        return sum(point.awarded for point in self.points)

    @property
    def out_of(self) -> int:
        """The marks of the part."""
        return len(self.points)

    @property
    def needs_person(self) -> bool:
        """Whether a person has to look: not certain, or a point left open."""
        return self.certainty != "certain" or any(point.open for point in self.points)

    def data(self, paper: str, candidate: str | None) -> dict[str, Any]:
        """As JSON for other programs."""
        return {
            "paper": paper,
            "candidate": candidate,
            "part": self.label,
            "awarded": self.awarded,
            "out_of": self.out_of,
            "certainty": self.certainty,
            "slips": list(self.slips),
            "points": [{"code": each.code, "awarded": each.awarded, "reason": each.reason} for each in self.points],
        }


def least(certainties: Iterable[Certainty]) -> Certainty:
    """The least sure of several; `certain` of none."""
    return _ORDER[max((_ORDER.index(each) for each in certainties), default=0)]


@dataclass(slots=True)
class Own:
    """What the candidate has so far: values by target, and whether each is the key's.

    It grows while a script is read; later parts are judged on it.
    """

    values: dict[Target, Value] = field(default_factory=dict)
    off: set[Target] = field(default_factory=set)

    def set(self, target: Target, value: Value, off: bool) -> None:
        """Note a value of the candidate's."""
        self.values[target] = value
        if off:
            self.off.add(target)
        else:
            self.off.discard(target)

    def drop(self, target: Target) -> None:
        """Forget a value that was only implied by what the candidate has put right since."""
        self.values.pop(target, None)
        self.off.discard(target)

    def copy(self) -> Own:
        """An independent copy."""
        return Own(dict(self.values), set(self.off))

    def update(self, values: Mapping[Target, Value], off: Iterable[Target]) -> None:
        """Add what a part has added."""
        self.values.update(values)
        self.off.difference_update(values)
        self.off.update(off)
