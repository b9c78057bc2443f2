"""Help for the tests of the tasks: a part from its YAML, solved in a setting."""

from __future__ import annotations

from typing import Any

import yaml

from authoring.atoms.species import Species, parse_range
from authoring.atoms.subshell import Subshell
from authoring.shielding.practice import Practice, published
from authoring.tasks.setting import Setting
from authoring.tasks.solved import Solved
from authoring.tasks.task import Task, tasks

DRAWN = {"metal": Species.parse("V"), "outer": Subshell.parse("4s")}


def setting(**changes: Any) -> Setting:
    """The published practice, `metal` bound to V and `outer` to 4s, unless changed."""
    given: dict[str, Any] = {
        "practice": published(),
        "bindings": DRAWN,
        "pools": {"metal": parse_range("Sc-Zn")},
        **changes,
    }
    return Setting(**given)


def read_part(text: str) -> tuple[Task, Any]:
    """A part written as an item writes it, scalars as text."""
    (data,) = yaml.load(text, yaml.BaseLoader)
    (name,) = (key for key in data if key in tasks())
    task = tasks()[name]
    return task, task.fields.model_validate(data)


def solved(text: str, practice: Practice | None = None, **changes: Any) -> Solved:
    """A part, solved."""
    task, part = read_part(text)
    if practice is not None:
        changes["practice"] = practice
    return task.solve(part, setting(**changes))


def in_a_row(*texts: str) -> tuple[Solved, ...]:
    """Parts of one item, each knowing those before it."""
    made: tuple[Solved, ...] = ()
    for text in texts:
        made = (*made, solved(text, earlier=made))
    return made


def codes(part: Solved) -> list[str]:
    """The codes of the points."""
    return [point.code for point in part.points]


def wrongs(part: Solved) -> dict[str, str]:
    """The wrong answers by the (single) slip behind each."""
    return {each.slips[0]: each.shown for each in part.wrong}
