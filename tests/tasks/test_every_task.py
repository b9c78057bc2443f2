"""What holds of every task: its example runs, its points lie in its working, its words can be printed."""

from __future__ import annotations

import re

import pytest
from tasks_help import in_a_row, read_part, solved

from authoring.faults import ContentError
from authoring.specs.prose import read_prose
from authoring.tasks.task import MODULES, task, tasks
from authoring.working.latex import to_latex
from authoring.working.text import to_text

EXAMPLES = {name: each.example for name, each in tasks().items()}


def test_the_registry_names_each_task_by_its_command_word() -> None:
    assert set(tasks()) == set(MODULES)
    for name, each in tasks().items():
        assert each.name == name
        assert name in each.fields.model_fields
        assert each.says and not each.says.endswith(".")
        assert each.fields.model_fields[name].description


def test_an_unknown_command_word_is_refused_with_the_nearest() -> None:
    with pytest.raises(ContentError) as caught:
        task("calculat")
    assert "'calculate'" in caught.value.full_message


@pytest.mark.parametrize("name", EXAMPLES)
def test_the_example_is_solved(name: str) -> None:
    part = solved(EXAMPLES[name])
    assert part.task == name
    assert part.marks == len(part.points) >= 1
    assert part.space >= 1
    entries = len(part.steps) or len([code for code, _ in part.rubric if code != "not"])
    assert all(0 <= point.line < entries and point.what for point in part.points)
    assert len({point.code for point in part.points}) == len(part.points)


@pytest.mark.parametrize("name", EXAMPLES)
def test_what_is_printed_can_be_printed(name: str) -> None:
    part = solved(EXAMPLES[name])
    for text in (part.ask, *part.notes, *(words for _, words in part.rubric)):
        prose, faults = read_prose(text)
        assert prose and not faults, text
        assert not re.search(r"[{}]|None|\(\)", text.replace("$Z_{eff}$", "")), text
    for node in (part.answer.node, *(step.line.chain for step in part.steps)):
        assert to_text(node).strip() and to_latex(node).strip()


@pytest.mark.parametrize("name", EXAMPLES)
def test_the_wording_the_notes_and_the_space_may_be_ones_own(name: str) -> None:
    own = EXAMPLES[name] + "  ask: [First words., Other words.]\n  notes: Mind this.\n  space: 7\n"
    parts = [solved(own, turn=turn) for turn in range(3)]
    assert [part.ask for part in parts] == ["First words.", "Other words.", "First words."]
    assert "Mind this." in parts[0].notes
    assert parts[0].space == 7


@pytest.mark.parametrize("name", EXAMPLES)
def test_a_key_that_is_not_known_is_refused(name: str) -> None:
    with pytest.raises(ValueError, match="colour"):
        read_part(EXAMPLES[name] + "  colour: red\n")


@pytest.mark.parametrize("name", [each for each in EXAMPLES if each != "explain"])
def test_an_unknown_quantity_is_refused(name: str) -> None:
    text = EXAMPLES[name].splitlines()
    text[0] = f"- {name}: effective nuclear chrage"
    with pytest.raises(ContentError) as caught:
        solved("\n".join(text))
    assert "'effective nuclear charge'" in caught.value.full_message


@pytest.mark.parametrize("name", EXAMPLES)
def test_more_marks_than_points_are_refused(name: str) -> None:
    text = re.sub(r"  marks: .*\n", "", EXAMPLES[name])
    with pytest.raises(ContentError, match="marks: 39"):
        solved(text + "  marks: 39\n")


@pytest.mark.parametrize("name", EXAMPLES)
def test_the_same_part_is_solved_alike_twice(name: str) -> None:
    assert solved(EXAMPLES[name]) == solved(EXAMPLES[name])


def test_a_part_continues_the_chain_over_an_explanation() -> None:
    first, _, third = in_a_row(
        "- calculate: S\n  of: V\n  electron: 4s\n",
        "- explain: why 3d screens 4s\n  rubric: [it lies further in]\n",
        "- calculate: effective nuclear charge\n",
    )
    assert first.answer.shown == "19.70"
    # 23 − 19.70, by hand
    assert [step.line.shown for step in third.steps] == ["3.30"]
