"""Stage 1, read: JSON Schemas (draft 2020-12) of items and plans, made from the models that read them."""

from __future__ import annotations

from typing import Any

from pydantic import BaseModel

from authoring.faults import ContentError
from authoring.specs.draws import TELLING, SpeciesDraw
from authoring.specs.item import ItemFields
from authoring.specs.plan import PlanFields, PlanItem
from authoring.tasks.task import tasks

DRAFT = "https://json-schema.org/draft/2020-12/schema"
KINDS = ("item", "plan")


def schema(kind: str) -> dict[str, Any]:
    """The schema of `item` or `plan` files; every scalar may be a string, as YAML text is read here."""
    if kind not in KINDS:
        raise ContentError(f"no schema {kind!r}", kind, KINDS)
    return _item_schema() if kind == "item" else _plan_schema()


class _Gathered:
    """Schemas of several models with their definitions put together."""

    def __init__(self) -> None:
        self.definitions: dict[str, Any] = {}

    def of(self, model: type[BaseModel]) -> dict[str, Any]:
        made = model.model_json_schema(by_alias=True, ref_template="#/$defs/{model}")
        self.definitions.update(made.pop("$defs", {}))
        return made

    def reference(self, model: type[BaseModel]) -> dict[str, str]:
        self.definitions[model.__name__] = self.of(model)
        return {"$ref": f"#/$defs/{model.__name__}"}


def _item_schema() -> dict[str, Any]:
    gathered = _Gathered()
    made = gathered.of(ItemFields)
    part = {"anyOf": [_with_task(gathered.reference(task.fields), name) for name, task in tasks().items()]}
    gathered.definitions["Part"] = part
    reference = {"$ref": "#/$defs/Part"}
    either = {
        "type": "object",
        "properties": {"either": {"type": "array", "minItems": 2, "items": reference}},
        "required": ["either"],
        "additionalProperties": False,
    }
    made["properties"]["parts"]["items"] = {"anyOf": [reference, either]}
    models = dict.fromkeys([SpeciesDraw, *TELLING.values()])
    listed = [{"type": "string"}, {"type": "array", "items": {"type": "string"}}]
    made["properties"]["draw"]["additionalProperties"] = {
        "anyOf": [*listed, *(gathered.reference(model) for model in models)]
    }
    return {"$schema": DRAFT, **made, "title": "A Shieldwright item", "$defs": gathered.definitions}


def _with_task(reference: dict[str, str], name: str) -> dict[str, Any]:
    return {"allOf": [reference, {"required": [name]}]}


def _plan_schema() -> dict[str, Any]:
    gathered = _Gathered()
    made = gathered.of(PlanFields)
    made["properties"]["items"]["items"] = {"anyOf": [{"type": "string"}, gathered.reference(PlanItem)]}
    return {"$schema": DRAFT, **made, "title": "A Shieldwright plan", "$defs": gathered.definitions}
