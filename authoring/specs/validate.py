"""Stage 1, read: a tree is held against a model of its fields; what does not fit becomes faults at their places."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, TypeVar

from pydantic import BaseModel, ValidationError

from authoring.faults import Fault, suggestion
from authoring.specs.yaml_tree import Tree

Model = TypeVar("Model", bound=BaseModel)
Steps = tuple[str | int, ...]


def validated(model: type[Model], data: Any, tree: Tree, at: Steps = ()) -> tuple[Model | None, tuple[Fault, ...]]:
    """The model filled from `data`, which stands at `at` in the tree; or None and every fault in it."""
    try:
        return model.model_validate(data), ()
    except ValidationError as error:
        return None, tuple(_fault(model, detail, tree, at) for detail in error.errors(include_url=False))


def _fault(model: type[BaseModel], detail: Any, tree: Tree, at: Steps) -> Fault:
    steps = _resolvable(tree, at, detail["loc"])
    kind, context = detail["type"], detail.get("ctx", {})
    if kind == "extra_forbidden":
        key = str(detail["loc"][-1])
        names = keys_of(_model_at(model, detail["loc"][:-1]))
        return Fault("unknown-key", f"no key {key!r} here{suggestion(key, names)}", tree.key_at(steps))
    if kind == "missing":
        return Fault("missing-key", f"`{detail['loc'][-1]}` is missing", tree.at(steps))
    place = tree.at(steps)
    if kind == "literal_error":
        word = detail["input"] if isinstance(detail["input"], str) else ""
        names = [name.strip().strip("'") for name in str(context.get("expected", "")).replace(" or ", ", ").split(", ")]
        return Fault("wrong-word", f"{word[:40]!r} does not do here{suggestion(word, names)}", place)
    return Fault("wrong-value", _words(kind, detail, context), place)


def _words(kind: str, detail: Any, context: Any) -> str:
    if kind == "value_error":
        return str(context["error"])
    if kind in ("string_type", "string_sub_type"):
        return "text is needed here"
    if kind in ("dict_type", "model_type", "model_attributes_type"):
        return "keys with values are needed here"
    if kind in ("tuple_type", "list_type"):
        return "a list is needed here"
    if kind == "string_too_long":
        return f"this text is longer than {context['max_length']} characters"
    if kind == "string_too_short":
        return "nothing is written here"
    if kind == "greater_than_equal":
        return f"at least {context['ge']} is needed"
    if kind == "less_than_equal":
        return f"at most {context['le']} is possible"
    return str(detail["msg"])


def _resolvable(tree: Tree, at: Steps, loc: Sequence[str | int]) -> Steps:
    """The longest part of a location that the file has: models add names of their own to it."""
    steps = at
    for step in loc:
        if tree.has((*steps, step)):
            steps = (*steps, step)
    return steps


def keys_of(model: type[BaseModel] | None) -> list[str]:
    """The keys that a model takes, as they are written in YAML."""
    if model is None:
        return []
    return [field.alias or name for name, field in model.model_fields.items()]


def _model_at(model: type[BaseModel], loc: Sequence[str | int]) -> type[BaseModel] | None:
    """The nested model that a location leads to, where it leads to one."""
    current: type[BaseModel] | None = model
    for step in loc:
        if isinstance(step, int) or current is None:
            continue
        fields = {field.alias or name: field for name, field in current.model_fields.items()}
        current = _inner_model(fields[step].annotation) if step in fields else None
    return current


def _inner_model(annotation: Any) -> type[BaseModel] | None:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        return annotation
    for inner in getattr(annotation, "__args__", ()):
        found = _inner_model(inner)
        if found is not None:
            return found
    return None
