"""The fields of a part as an item writes them: what every task takes, and the types that read them.

Scalars arrive as text; each type here reads its own. A word that names something drawn is resolved later, when
the variant is known (`tasks/setting.py`).
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal, InvalidOperation
from typing import Annotated, Any, Literal

from pydantic import (
    BaseModel,
    BeforeValidator,
    ConfigDict,
    Field,
    GetCoreSchemaHandler,
    GetJsonSchemaHandler,
    WithJsonSchema,
)
from pydantic_core import CoreSchema, core_schema

_WHOLE = re.compile(r"[+-]?[0-9]{1,9}")


def read_whole(value: Any) -> int:
    """A whole number from its text; nothing else is a whole number."""
    if isinstance(value, int) and not isinstance(value, bool):
        return value
    if not isinstance(value, str) or not _WHOLE.fullmatch(value.strip()):
        raise ValueError("a whole number is needed")
    return int(value)


def read_decimal(value: Any) -> Decimal:
    """A number from its text, exactly as written."""
    if isinstance(value, Decimal):
        return value
    text = value.strip() if isinstance(value, str) else ""
    try:
        number = Decimal(text)
    except InvalidOperation:
        raise ValueError("a number is needed, such as 231 or 0.85") from None
    if not text.isascii() or not number.is_finite() or len(text) > 30 or abs(number.adjusted()) > 12 or "_" in text:
        raise ValueError("a plain number is needed, such as 231 or 0.85")
    return number


def read_yes_no(value: Any) -> bool:
    """yes or no."""
    if isinstance(value, bool):
        return value
    if value in ("yes", "true"):
        return True
    if value in ("no", "false"):
        return False
    raise ValueError("yes or no is needed")


def read_several(value: Any) -> Any:
    """One text or a list of texts, as a tuple."""
    if isinstance(value, str):
        return (value,)
    return tuple(value) if isinstance(value, list) else value


@dataclass(frozen=True, slots=True)
class Between:
    """Metadata of a whole number with its bounds, both included; it is written as text or as a number."""

    low: int
    high: int

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        number = core_schema.int_schema(ge=self.low, le=self.high)
        return core_schema.no_info_before_validator_function(read_whole, number)

    def __get_pydantic_json_schema__(self, schema: CoreSchema, handler: GetJsonSchemaHandler) -> dict[str, Any]:
        number = {"type": "integer", "minimum": self.low, "maximum": self.high}
        return {"anyOf": [number, {"type": "string", "pattern": "^[+-]?[0-9]+$"}]}


Number = Annotated[Decimal, BeforeValidator(read_decimal), WithJsonSchema({"type": ["number", "string"]})]
YesNo = Annotated[bool, BeforeValidator(read_yes_no), WithJsonSchema({"enum": ["yes", "no", True, False]})]
Text = Annotated[str, Field(max_length=20_000)]
Word = Annotated[str, Field(min_length=1, max_length=200)]
Several = Annotated[
    tuple[Text, ...],
    BeforeValidator(read_several),
    WithJsonSchema({"anyOf": [{"type": "string"}, {"type": "array", "items": {"type": "string"}}]}),
]
Words = Annotated[
    tuple[Word, ...],
    BeforeValidator(read_several),
    WithJsonSchema({"anyOf": [{"type": "string"}, {"type": "array", "items": {"type": "string"}}]}),
]


class Strict(BaseModel):
    """A frozen model that refuses keys it does not know."""

    model_config = ConfigDict(extra="forbid", frozen=True, populate_by_name=True)


class SchemeEntry(Strict):
    """One point of an item's own mark scheme."""

    mark: Literal["M", "A", "B"]
    line: Word = Field(alias="for", description="the quantity whose line earns the mark")
    what: Text = Field("", description="what earns it, for the marker")
    follow_through: YesNo | None = Field(None, alias="follow-through")


class PartFields(Strict):
    """What every part takes, whatever its task."""

    ask: Several = Field((), description="the wording, instead of the default; several: papers take turns with them")
    marks: Annotated[int, Between(1, 40)] | None = Field(
        None, description="marks of the part: one per step of the working, the weightiest steps first"
    )
    scheme: tuple[SchemeEntry, ...] = Field((), description="a mark scheme of the item's own")
    notes: Several = Field((), description="notes to markers")
    space: Annotated[int, Between(0, 60)] | None = Field(
        None, description="ruled lines for the answer, instead of the default"
    )


class TargetFields(PartFields):
    """A part about one quantity of one species (and electron)."""

    of: Word | None = Field(None, description="a drawn species, or a species; left out: as in the part before")
    electron: Word | None = Field(None, description="a drawn electron, a subshell, or `outermost`")
    details: dict[Word, Word] = Field(
        default_factory=dict, alias="with", description="what else the quantity takes: stage, distance, …"
    )
    unit: Word | None = Field(None, description="the unit of the answer, where the quantity has several")
    figures: Annotated[int, Between(1, 8)] | None = Field(None, description="significant figures of the answer")
    places: Annotated[int, Between(0, 6)] | None = Field(None, description="decimal places of the answer")
