"""A line of working: what it states, the value it reaches, and the mark points it carries."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from authoring.working.nodes import Chain, Prose

PointKind = Literal["M", "A", "B"]


@dataclass(frozen=True, slots=True)
class Line:
    """One line of working.

    `quantity` names what the line is about; `about` tells lines of one quantity apart (`V 4s`); `chain` is the
    arithmetic as written; `value` the exact value (Decimal, or the configuration, groups … that it states);
    `shown` the value as printed, without the unit, U+2212 for minus; `unit` may be empty; `rounded` says that
    `shown` rounds `value`.
    """

    quantity: str
    about: str
    chain: Chain
    value: object
    shown: str
    unit: str = ""
    rounded: bool = False
    note: str = ""

    @property
    def number(self) -> Decimal | None:
        """The exact value where the line states a number."""
        return self.value if isinstance(self.value, Decimal) else None


@dataclass(frozen=True, slots=True)
class Point:
    """One mark: M (method), A (accuracy) or B (independent), for one line of working.

    `code` is unique in its part (`M1`, `A1`, `M2`); `line` is the index of the line it belongs to; `what` says
    what earns it, for the marker; `follow_through`: it may be earned on the candidate's own earlier values;
    `aspect` is what the judge looks at (`value`, `method`, `statement`, `reason`, `choice`).
    """

    code: str
    kind: PointKind
    line: int
    what: str
    follow_through: bool = False
    aspect: str = "value"


@dataclass(frozen=True, slots=True)
class Noted:
    """A remark to markers, set apart on the key."""

    text: Prose
