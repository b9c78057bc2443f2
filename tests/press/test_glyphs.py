"""A character that no font has: the place where it was written is named."""

from __future__ import annotations

from pathlib import Path

import pytest
from press_help import PLAN, TANK, small_set

from authoring.faults import OutsideError
from authoring.press.glyphs import place_of
from authoring.press.publish import publish
from authoring.specs.roster import read_roster

TURTLE = "\N{TURTLE}"


def column(text: str, line: int) -> int:
    """Where the turtle stands in a line."""
    return text.split("\n")[line - 1].index(TURTLE) + 1


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("keeps its power", f"keeps {TURTLE} its power"),
        ("first-year\n", f"first-year  # a {TURTLE} in a comment is not printed\ntopics: [a {TURTLE}]\n"),
        ("A total of 19.70", f"A {TURTLE} total of 19.70"),
    ],
)
def test_in_an_item(old: str, new: str, tmp_path: Path) -> None:
    """File, line and column, in a story, a list or the notes; comments are passed over."""
    text = TANK.replace(old, new, 1)
    assert TURTLE in text
    place = place_of(TURTLE, small_set(tmp_path, items={"tank": text}))
    lines = text.split("\n")
    line = next(at for at, shown in enumerate(lines, 1) if TURTLE in shown.partition("#")[0] or "  notes" in shown)
    assert place is not None
    assert (place.path, place.line) == (str(tmp_path / "tank.yaml"), line)
    assert lines[line - 1][place.column - 1] == TURTLE


def test_in_the_plan(tmp_path: Path) -> None:
    """The plan's own words."""
    head = PLAN.replace("all*", f"all* {TURTLE}")
    place = place_of(TURTLE, small_set(tmp_path, head=head))
    assert str(place) == f"{tmp_path / 'plan.yaml'}:7:{column(head, 7)}"


def test_as_an_escape(tmp_path: Path) -> None:
    """Written by its number, the place of the text is given."""
    text = TANK.replace("item: The evening tank, 50% & $ _full_", 'item: "The evening \\U0001F422 tank"')
    assert str(place_of(TURTLE, small_set(tmp_path, items={"tank": text}))) == f"{tmp_path / 'tank.yaml'}:2:7"


def test_in_a_name(tmp_path: Path) -> None:
    """The roster's line."""
    roster = tmp_path / "class.csv"
    roster.write_text(f"candidate,name\nc1,Ann\nc2,Bo {TURTLE} Berg\n", encoding="utf-8")
    made = small_set(tmp_path, read_roster(roster).candidates)
    assert str(place_of(TURTLE, made)) == f"{roster}:3:7"


def test_nowhere(tmp_path: Path) -> None:
    """What nobody wrote has no place."""
    assert place_of(TURTLE, small_set(tmp_path)) is None


def test_the_error_of_a_set_names_the_place(tmp_path: Path) -> None:
    """One line: place, character, what to install."""
    made = small_set(tmp_path, items={"tank": TANK.replace("keeps its power", f"keeps {TURTLE} its power")})
    with pytest.raises(OutsideError) as caught:
        publish(made, tmp_path)
    place = place_of(TURTLE, made)
    assert caught.value.message.startswith(f"{place}: no installed font has the character '{TURTLE}' (U+1F422); ")
