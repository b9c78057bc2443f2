"""*explain*: a short answer in words, marked by a rubric."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import Field, GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic_core import CoreSchema, core_schema

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule
from authoring.tasks.fields import PartFields, Several, Strict, Text
from authoring.tasks.points import Candidate, numbered
from authoring.tasks.setting import Setting
from authoring.tasks.solved import Answer, Solved
from authoring.tasks.task import Task
from authoring.tasks.wording import worded
from authoring.working.nodes import Words

NOT = "not"
# Words that a sentence may begin with, and that go on after the word Explain in small letters.
_OPENING = ("why", "how", "what", "which", "when", "where", "whether")
_MARKUP = str.maketrans("", "", "`*$")


class RubricPoint(Strict):
    """What earns one mark."""

    point: Annotated[str, Field(min_length=1, max_length=2_000)] = Field(description="what earns the mark")
    mark: Literal["M", "A", "B"] = Field("B", description="the kind of mark")


def _as_point(value: Any) -> Any:
    return {"point": value} if isinstance(value, str) else value


class _OrText:
    """Metadata of a rubric's entry: a text alone is a point."""

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.no_info_before_validator_function(_as_point, handler(source))

    def __get_pydantic_json_schema__(self, schema: CoreSchema, handler: GetJsonSchemaHandler) -> dict[str, Any]:
        return {"anyOf": [handler(schema), {"type": "string"}]}


class Explain(PartFields):
    """`explain: why …`, with what earns each mark under `rubric`, and what does not under `not`."""

    explain: Annotated[str, Field(min_length=1, max_length=2_000)] = Field(
        description="what is to be explained, as it goes on after the word Explain; or a whole question that ends in ?"
    )
    rubric: Annotated[tuple[Annotated[RubricPoint, _OrText()], ...], Field(min_length=1, max_length=20)] = Field(
        description="one entry a mark: a text, or `point` and `mark`"
    )
    not_: Several = Field((), alias="not", description="what earns no mark, though it may be met")
    model: Text = Field("", description="a model answer; left out: the points of the rubric")


def sentence(text: str) -> str:
    """What is printed: a whole question as it stands; `why …` and `Why …` as `Explain why ….`"""
    what = text.strip()
    if what.endswith("?") or "? " in what:
        return what[:1].upper() + what[1:]
    what = what.rstrip(".")
    first, _, rest = what.partition(" ")
    if first.lower() == "explain":
        what = rest
    elif first.lower() in _OPENING:
        what = first.lower() + what[len(first) :]
    return f"Explain {what}."


def solve(part: Explain, setting: Setting) -> Solved:
    """The question and its rubric; there is no working, and the points belong to the rubric's entries in order."""
    if part.scheme:
        raise ContentError("an explanation is marked by its `rubric`; leave `scheme` out")
    if part.marks is not None and part.marks != len(part.rubric):
        raise ContentError(f"marks: {part.marks}, but the rubric has {len(part.rubric)} points, one mark each")
    points = numbered(
        Candidate(at, PointRule(entry.mark, entry.point, "reason", 100)) for at, entry in enumerate(part.rubric)
    )
    model = part.model or "; ".join(entry.point.rstrip(".;") for entry in part.rubric)
    plain = " ".join(model.translate(_MARKUP).split())
    rubric = [(point.code, point.what) for point in points] + [(NOT, text) for text in part.not_]
    return Solved(
        task="explain",
        quantity="",
        targets=(),
        ask=worded(part, setting.turn, sentence(part.explain)),
        steps=(),
        answer=Answer("text", model, Words(plain), model),
        points=points,
        space=1 + 2 * len(points) if part.space is None else part.space,
        notes=part.notes,
        rubric=tuple(rubric),
    )


TASK = Task(
    name="explain",
    says="explain in words, marked by a rubric of points",
    fields=Explain,
    solve=solve,
    example=(
        "- explain: why vanadium loses its `4s` electrons before its `3d` electrons\n"
        "  rubric:\n"
        "    - the `4s` electrons feel the smaller effective nuclear charge\n"
        "    - point: they lie in a shell further out\n"
        "      mark: B\n"
        "  not: that `4s` is filled first\n"
    ),
)
