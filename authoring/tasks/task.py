"""What a task is, and the registry: one module per command word, each defining TASK."""

from __future__ import annotations

import functools
import importlib
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from authoring.faults import ContentError
from authoring.tasks.fields import PartFields
from authoring.tasks.setting import Setting
from authoring.tasks.solved import Solved


@dataclass(frozen=True, slots=True)
class Task:
    """A command word: the fields its parts take, and how a part is solved.

    `fields` is the pydantic model of a part; its field named like the task (with `_` for a space) holds what the
    part asks for. `turns`: what is printed depends on the place of the paper in the set. `rounds`: the default
    wording says how the answer is rounded, and `{{ rounding }}` says it in an item's own. `solve(part, setting)`
    raises ContentError where the variant cannot be asked this.
    """

    name: str
    says: str
    fields: type[PartFields]
    solve: Callable[[Any, Setting], Solved]
    example: str
    turns: bool = False
    rounds: bool = False


# One module each in authoring/tasks/, which defines TASK.
MODULES = ("calculate", "decide", "rank", "select", "correct", "identify", "complete", "explain", "read")


@functools.cache
def tasks() -> dict[str, Task]:
    """Every task by its command word."""
    found = [importlib.import_module(f"authoring.tasks.{module}").TASK for module in MODULES]
    return {task.name: task for task in found}


def task(name: str) -> Task:
    """A task by its command word. Raises ContentError with the nearest."""
    if name not in tasks():
        raise ContentError(f"no task {name[:60]!r}", name, tuple(tasks()))
    return tasks()[name]
