"""Every variant of an item, and the question that each becomes."""

from __future__ import annotations

import time
from dataclasses import replace

import pytest
from papers_help import TANK, TERMS, questions, read, variants

from authoring.atoms.species import Species
from authoring.faults import FaultsFound
from authoring.papers import variants as variants_room
from authoring.papers.questions import Kept, prose_of, question
from authoring.papers.variants import enumerated
from authoring.papers.views import view
from authoring.shielding.practice import published
from authoring.specs.drawn_names import HAS
from authoring.specs.item import item_from
from authoring.specs.yaml_tree import parse_tree
from authoring.working.nodes import Paragraph
from authoring.working.prose_text import prose_text
from authoring.working.text import to_text


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


def test_what_is_wrong_in_a_parts_own_wording_stands_in_it():
    text = TANK + "    ask:\n      - Find it.\n      - |\n        Find it\n        for `Xq`.\n"
    item = read(text)
    with pytest.raises(FaultsFound) as caught:
        question(enumerated(item, published()).variants[0], TERMS, 1)
    assert [(fault.code, str(fault.source)) for fault in caught.value.faults] == [("text", "tank.yaml:17:14")]


@pytest.mark.parametrize(
    ("draw", "place", "words"),
    [
        ("{electron: metal, shell: outermost}", "tank.yaml:5:11", "did you mean 'electron of'?"),
        ("{ion: metal, charge: 2+}", "tank.yaml:5:11", "did you mean 'ion of'?"),
        ("{blck: d}", "tank.yaml:5:11", "did you mean 'block'?"),
    ],
)
def test_a_draw_with_half_of_its_key_is_told_the_whole(draw, place, words):
    """What rests on the draw is not complained about as well."""
    ((code, where, said),) = faults(TANK.replace("{electron of: metal, shell: outermost}", draw))
    assert (code, where) == ("unknown-key", place)
    assert words in said


def test_what_is_wrong_in_prose_stands_at_its_line_of_the_item():
    text = TANK.replace(
        "  A paper exercise about dissolved {{ metal.name }}.\n",
        "  A paper exercise about {{ metal.name }}.\n\n  And of `Xy3+`, of course.\n",
    )
    found = faults(text)
    assert {(code, place) for code, place, _ in found} == {("text", "tank.yaml:9:11")}
    assert "Xy" in found[0][2]


def test_a_mistake_in_a_template_stands_at_its_line_of_the_item():
    text = TANK.replace("dissolved {{ metal.name }}", "{{ metal.name }}.\n  And {{ outer.n > 3 }}")
    found = faults(text)
    assert {(code, place) for code, place, _ in found} == {("template", "tank.yaml:8:3")}


TABLE = TANK + """given:
  - caption: Of {{ metal.name }}
    header: [species, "charge of {{ metal }}"]
    rows:
      - ["{{ metal }}", "{{ metal.z }}"]
      - [Zn, "30"]
    source: a card about {{ metal.name }}
  - quantity: effective nuclear charge
    of: ["{{ metal.symbol }}", Zn]
figure:
  chart: effective nuclear charge
  of: [Na-Cl]
  caption: "For {{ metal.name }}: `3p` of {{ metal | a }} atom{% if metal.z > 22 %}, heavy{% endif %}"
"""


def test_tables_and_charts_are_templates():
    vanadium = questions(TABLE)[2]
    typed, computed = vanadium.tables
    assert [prose_text((Paragraph(cell),)) for cell in typed.header] == ["species", "charge of V"]
    assert [[prose_text((Paragraph(cell),)) for cell in row] for row in typed.rows] == [["V", "23"], ["Zn", "30"]]
    assert prose_text((Paragraph(typed.caption),)) == "Of vanadium"
    assert prose_text((Paragraph(typed.origin),)) == "a card about vanadium"
    assert [to_text(row[0][0].node) for row in computed.rows] == ["V", "Zn"]
    assert prose_text(vanadium.figure_caption) == "For vanadium: 3p of a V atom, heavy"
    assert prose_text(questions(TABLE)[0].figure_caption) == "For scandium: 3p of an Sc atom"


@pytest.mark.parametrize(
    ("old", "new", "expected"),
    [
        ("Of {{ metal.name }}", "Of {{ meta.name }}", ("undefined", "tank.yaml:14:20")),
        ("card about {{ metal.name }}", "card about {{ metal.nmae }}", ("template", "tank.yaml:19:35")),
        ('"{{ metal.z }}"]', '"{{ metal.z "]', ("template", "tank.yaml:17:26")),
        ("[Zn, \"30\"]", "[Zn]", ("given", "tank.yaml:18:9")),
        ("[Zn, \"30\"]", "[Zn, \"`Qq` {{ metal }}\"]", ("unsolvable", "tank.yaml:18:14")),
        ("symbol }}\", Zn]", "symbol }}\", Vx]", ("unsolvable", "tank.yaml:21:32")),
        ("[Na-Cl]", "Na to Cl", ("unsolvable", "tank.yaml:24:7")),
        ("For {{ metal.name }}", "For {{ metal.name | shout }}", ("template", "tank.yaml:25:33")),
        ("Of {{ metal.name }}", "Of {{ metal.z > 3 }}", ("template", "tank.yaml:14:5")),
    ],
)
def test_mistakes_in_tables_and_charts_stand_at_their_places(old, new, expected):
    assert old in TABLE
    assert {(code, place) for code, place, _ in faults(TABLE.replace(old, new))} == {expected}


def test_braces_that_an_older_record_printed_as_they_stand_do_not_stop_it():
    text = TABLE.replace("Of {{ metal.name }}", "Of {{ steel }}").replace('"{{ metal.z }}"', '"{{ metal.z "')
    item = item_from(parse_tree(text, "tank.yaml"), "tank")
    first = next(iter(enumerated(item, published()).variants))
    (typed, _) = question(first, TERMS).tables
    assert prose_text((Paragraph(typed.caption),)) == "Of {{ steel }}"
    assert prose_text((Paragraph(typed.rows[0][1]),)) == "{{ metal.z"
    with pytest.raises(FaultsFound):
        read(text)


ENERGY = "  - calculate: orbital energy\n    ask: 'The energy, {{ rounding }}, of {{ metal }}.'\n"


@pytest.mark.parametrize(
    ("more", "figures", "words"),
    [
        ("", None, "to 4 significant figures"),
        ("", 3, "to 3 significant figures"),
        ("    places: 1\n", 3, "to 1 decimal place"),
        ("    figures: 2\n", None, "to 2 significant figures"),
    ],
)
def test_a_wording_says_how_to_round(more, figures, words):
    """The words are those of the default wording, whoever settles the rounding: the part, the plan or the quantity."""
    variant = variants(TANK + ENERGY + more).variants[0]
    terms = replace(TERMS, figures=figures)
    assert prose_text(question(variant, terms).parts[-1].ask) == f"The energy, {words}, of Sc."
    default = TANK + ENERGY.split("    ask:")[0] + more
    assert words in prose_text(question(variants(default).variants[0], terms).parts[-1].ask)


@pytest.mark.parametrize(
    ("part", "expected", "words"),
    [
        ("decide: first electron lost\n    ask: 'Which, {{ rounding }}?'", ("undefined", "tank.yaml:14:21"), "`ask`"),
        ("calculate: orbital energy\n    notes: '{{ rounding }}'", ("undefined", "tank.yaml:14:16"), "`ask`"),
        (
            "calculate: configuration\n    ask: 'Write it {{ rounding }}.'",
            ("unsolvable", "tank.yaml:13:5"),
            "configuration is not a number",
        ),
    ],
)
def test_rounding_stands_where_something_is_rounded(part, expected, words):
    found = faults(f"{TANK}  - {part}\n")
    assert {(code, place) for code, place, _ in found} == {expected}
    assert words in found[0][2]


def test_a_variable_called_rounding_is_the_authors_own():
    text = TANK.replace("draw:\n", "draw:\n  rounding: {words: [twice]}\n") + ENERGY
    assert prose_text(questions(text)[0].parts[-1].ask) == "The energy, twice, of Sc."


@pytest.mark.parametrize(
    ("condition", "expected", "words"),
    [
        ('metal.blok == "d"', ("condition", "tank.yaml:7:11"), "a species has nothing called 'blok'; did you mean 'bl"),
        ("metal.z > 20 or metal.zz > 2", ("condition", "tank.yaml:7:27"), "nothing called 'zz'"),
        ("metal.outermost.lable == '4s'", ("condition", "tank.yaml:7:21"), "an electron has nothing called 'lable'"),
        ("outer.z > 2", ("condition", "tank.yaml:7:11"), "one of: n, l, letter, label"),
        ("metal.name.size > 2", ("condition", "tank.yaml:7:16"), "text has nothing called 'size'"),
        ("metal.configuration.core == 'Ar'", ("condition", "tank.yaml:7:25"), "a configuration has nothing called"),
        ("meta.z > 3", ("undefined", "tank.yaml:7:5"), "'meta' is not drawn; did you mean 'metal'?"),
        ("unpaired > 3", ("undefined", "tank.yaml:7:5"), "is written after its name: metal.unpaired"),
        ("metal.unpaired = 3", ("condition", "tank.yaml:7:5"), "to compare, write == (two signs)"),
        ("metal.outermost.label == 4s", ("condition", "tank.yaml:7:5"), 'text stands in quotes: "4s"'),
        ("metal.z > 3 metal.z", ("condition", "tank.yaml:7:5"), "'metal' is too much here"),
        ("metal.name | shout == 'a'", ("condition", "tank.yaml:7:18"), "no filter 'shout'"),
    ],
)
def test_what_a_drawn_value_does_not_have_is_found_at_reading(condition, expected, words):
    with pytest.raises(FaultsFound) as caught:
        read(TANK.replace("story:", f"keep:\n  - {condition}\nstory:"))
    ((code, place, said),) = [(each.code, str(each.source), each.message) for each in caught.value.faults]
    assert (code, place) == expected
    assert words in said


@pytest.mark.parametrize("value", ["V2+", "Co", "Ce"])
def test_drawn_values_have_what_reading_allows_and_nothing_else(value):
    """The table of names agrees with the values themselves, and with the kinds that they are said to be."""
    kinds = {str: "text", int: "number", bool: "yes or no"}
    species = view(Species.parse(value), published())
    for kind, thing in zip(HAS, (species, species.outermost, species.configuration), strict=False):
        assert type(thing).TEMPLATE_KIND == kind  # noqa: SIM300 - what is found is compared with what is said
        for name, gives in HAS[kind].items():
            got = type(getattr(thing, name))
            assert (kinds.get(got) or got.TEMPLATE_KIND) == gives


@pytest.mark.parametrize("condition", ["metal.z > 3 or metal.blok == 'd'"])
def test_an_older_record_with_a_name_never_asked_for_is_read(condition):
    text = TANK.replace("story:", f"keep:\n  - {condition}\nstory:")
    item = item_from(parse_tree(text, "tank.yaml"), "tank")
    assert len(enumerated(item, published()).variants) == 7


@pytest.mark.parametrize(
    ("part", "place"),
    [
        ("calculate: effective age", "tank.yaml:13:16"),
        ("calculate: screening constant\n    of: Vx", "tank.yaml:14:9"),
        ("calculate: screening constant\n    electron: 7s", "tank.yaml:14:15"),
        ("calculate: screening constant\n    electron: outre", "tank.yaml:14:15"),
        ("correct: orbital energy\n    slip: self cuonted", "tank.yaml:14:11"),
        ("correct: screening constant\n    slip: '{{ slip }}'\n    electron: 4s\n    of: Ti", "tank.yaml:15:11"),
    ],
)
def test_a_word_that_a_part_cannot_use_stands_at_its_place(part, place):
    text = f"{TANK}  - {part}\n"
    if "slip }}" in part:
        text = text.replace("draw:\n", "draw:\n  slip: {words: [d filled before next s]}\n")
    assert {(code, where) for code, where, _ in faults(text)} == {("unsolvable", place)}


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
