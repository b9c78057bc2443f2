"""Every variant of an item, and the question that each becomes."""

from __future__ import annotations

import time

import pytest
from papers_help import TANK, TERMS, questions, read, variants

from authoring.faults import FaultsFound
from authoring.papers import variants as variants_room
from authoring.papers.questions import Kept, prose_of, question
from authoring.papers.variants import enumerated
from authoring.shielding.practice import published
from authoring.working.prose_text import prose_text


def faults(text: str, fixed: dict[str, str] | None = None) -> list[tuple[str, str, str]]:
    """Code, place and words of what is wrong with an item."""
    with pytest.raises(FaultsFound) as caught:
        item = read(text)
        for variant in enumerated(item, published(), fixed).variants:
            question(variant, TERMS)
    return [(fault.code, str(fault.source), fault.message) for fault in caught.value.faults]


def test_the_order_of_variants_is_the_order_of_the_pools():
    found = [variant.variables for variant in variants(TANK).variants]
    assert [each["metal"] for each in found] == ["Sc", "Ti", "V", "Mn", "Fe", "Co", "Ni"]
    assert {each["outer"] for each in found} == {"4s"}
    again = enumerated(read(TANK), published()).variants
    assert [variant.variables for variant in again] == found


def test_conditions_leave_some_and_the_rest_is_counted():
    pool = variants(TANK.replace("story:", "keep:\n  - metal.unpaired > 3\n  - metal.z < 26\nstory:"))
    assert [variant.variables["metal"] for variant in pool.variants] == ["Mn"]
    assert pool.possible == 7


def test_a_variable_can_be_held():
    pool = enumerated(read(TANK), published(), {"metal": "Fe"})
    assert [variant.variables["metal"] for variant in pool.variants] == ["Fe"]


def test_an_empty_pool_names_the_draw():
    text = TANK.replace("shell: outermost", "shell: inner f")
    assert faults(text) == [("empty-pool", "tank.yaml:5:3", "'outer' is drawn from an empty pool")]


def test_a_held_value_that_is_not_in_the_pool_is_said():
    ((code, _, words),) = faults(TANK, {"metal": "Zn"})
    assert code == "empty-pool"
    assert words == "'metal' is drawn from an empty pool; metal is held at 'Zn'"


def test_nothing_kept_stands_at_the_conditions():
    text = TANK.replace("story:", "keep:\n  - metal.unpaired > 9\nstory:")
    assert faults(text) == [
        ("nothing-kept", "tank.yaml:7:3", "none of the 7 combinations meets all conditions under `keep`")
    ]


def test_a_condition_that_cannot_be_answered_names_the_variant():
    text = TANK.replace("story:", "keep:\n  - metal.name > 3\nstory:")
    ((code, place, words),) = faults(text)
    assert (code, place) == ("condition", "tank.yaml:7:5")
    assert words.endswith("(metal = Sc, outer = 4s)")


def test_a_word_that_no_draw_can_use_stands_at_the_draw():
    text = TANK.replace("block: d", "block: x")
    ((code, place, words),) = faults(text)
    assert (code, place) == ("draw", "tank.yaml:4:10")
    assert "'x' is not a block" in words


HUGE = [
    "  a: {from: 1, to: 90000}\n  b: {from: 1, to: 90000}\n",
    # No combination is ever complete here, so only what was tried can be counted.
    "  a: {from: 1, to: 90000}\n  b: {from: 1, to: 90000}\n  c: {from: 5, to: 4}\n",
]


@pytest.mark.parametrize("rows", HUGE)
def test_pools_of_millions_are_refused_in_bounded_time(rows):
    """A safety net of 30 s, not a measurement: enumerating all of it would take hours."""
    begun = time.monotonic()
    ((code, place, words),) = faults(TANK.replace("draw:\n", f"draw:\n{rows}"))
    assert time.monotonic() - begun < 30
    assert (code, place) == ("pool-too-large", "tank.yaml:4:3")
    assert "more than 200,000 combinations" in words


def test_as_many_as_are_allowed_are_enumerated(monkeypatch):
    monkeypatch.setattr(variants_room, "MOST_VARIANTS", 7)
    assert len(variants(TANK).variants) == 7
    monkeypatch.setattr(variants_room, "MOST_VARIANTS", 6)
    with pytest.raises(FaultsFound):
        variants(TANK)


def test_the_second_part_goes_on_where_the_first_stopped():
    vanadium = questions(TANK)[2]
    first, second = vanadium.parts
    assert [step.line.quantity for step in first.solved.steps][-1] == "screening constant"
    assert [step.line.quantity for step in second.solved.steps] == ["effective nuclear charge"]
    assert second.solved.answer.shown == "3.30"  # 23 - (0.35 + 11*0.85 + 10*1.00), Slater's rules
    assert second.solved.targets[0].electron == first.solved.targets[0].electron


def test_asking_the_same_again_is_a_fault_at_the_part():
    text = TANK + "  - calculate: effective nuclear charge\n"
    found = faults(text)
    assert {(code, place) for code, place, _ in found} == {("unsolvable", "tank.yaml:13:5")}
    assert "an earlier part already gives" in found[0][2]
    assert "(in the variant metal = Sc, outer = 4s)" in found[0][2]


def test_the_story_prints_what_was_drawn():
    assert [prose_text(each.story) for each in questions(TANK)][2] == "A paper exercise about dissolved vanadium."


def test_what_is_wrong_in_prose_stands_at_its_line_of_the_item():
    text = TANK.replace(
        "  A paper exercise about dissolved {{ metal.name }}.\n",
        "  A paper exercise about {{ metal.name }}.\n\n  And of `Xy3+`, of course.\n",
    )
    found = faults(text)
    assert {(code, place) for code, place, _ in found} == {("text", "tank.yaml:9:11")}
    assert "Xy" in found[0][2]


def test_a_mistake_in_a_template_stands_at_its_line_of_the_item():
    text = TANK.replace("dissolved {{ metal.name }}", "{{ metal.name }}.\n  And {{ outer.colour }}")
    found = faults(text)
    assert {(code, place) for code, place, _ in found} == {("template", "tank.yaml:8:3")}


def test_alternatives_must_be_worth_the_same():
    text = TANK.split("parts:")[0] + (
        "parts:\n  - either:\n      - calculate: screening constant\n        of: metal\n        electron: outer\n"
        "        marks: 3\n      - calculate: first electron lost\n        of: metal\n        marks: 1\n"
    )
    assert {code for code, _, _ in faults(text)} == {"unequal"}


def test_texts_with_templates_in_parts_are_rendered_for_each_variant():
    text = TANK.replace("    electron: outer\n", "    electron: outer\n    ask: Of {{ metal.name }}, find $S$.\n")
    asks = [prose_text(each.parts[0].ask) for each in questions(text)]
    assert asks[:3] == ["Of scandium, find S.", "Of titanium, find S.", "Of vanadium, find S."]


def test_kept_parts_are_those_that_would_be_solved_anew():
    """Parts shared between variants are the same as parts solved alone, whatever the order of the variants."""
    text = TANK.replace("draw:\n", "draw:\n  number: {from: 1, to: 3}\n  label: {words: [metal, outer]}\n")
    text += "    ask: ['In tank {{ number }}, find it.', 'Find it in {{ label }}.']\n"
    pool = variants(text).variants
    kept = Kept()
    for turn in (0, 1):
        for variant in [*pool, *reversed(pool)]:
            alone = question(variant, TERMS, turn)
            assert question(variant, TERMS, turn, kept) == alone
    assert len(kept.parts) < 2 * len(pool) * 2


def test_texts_are_parsed_once():
    before = prose_of.cache_info().hits
    questions(TANK)
    questions(TANK)
    assert prose_of.cache_info().hits > before
