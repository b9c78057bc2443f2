"""The shipped items and plans: sound in every variant, valid by their schemas, printable, varied, and cautious."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ET
from collections import Counter
from pathlib import Path

import jsonschema
import pytest

from authoring.papers.assemble import assembled
from authoring.papers.questions import Question, Terms, question
from authoring.papers.record import record
from authoring.papers.variants import enumerated
from authoring.papers.vet import vetted_plan
from authoring.press.html_documents import write_key_html, write_sheets_html
from authoring.press.publish import publish
from authoring.shielding.practice import published
from authoring.shielding.quantity import quantities
from authoring.slips.catalogue import shipped
from authoring.specs.item import LEVELS, Item, read_item
from authoring.specs.plan import read_plan
from authoring.specs.schema import schema
from authoring.specs.shipped import shipped_folder, shipped_names
from authoring.specs.yaml_tree import read_tree
from authoring.tasks.solved import Options, ShownWorking, Solved
from authoring.tasks.task import tasks
from authoring.working.prose_text import prose_text

ITEMS = shipped_names("items")
PLANS = shipped_names("plans")
TERMS = Terms(published(), shipped())
FOLDER = shipped_folder("scenarios")
TURNS = 6  # options and wordings turn with the place in the set


def item(name: str) -> Item:
    return read_item(FOLDER / "items" / f"{name}.yaml")


@pytest.fixture(scope="session")
def solved_bank() -> dict[str, list[Question]]:
    """Every variant of every item, solved once."""
    bank: dict[str, list[Question]] = {}
    for name in ITEMS:
        read = item(name)
        variants = enumerated(read, TERMS.practice).variants
        bank[name] = [question(variant, TERMS, at % TURNS) for at, variant in enumerate(variants)]
    return bank


def parts_of(bank: dict[str, list[Question]], task: str | None = None) -> list[tuple[str, Solved]]:
    found = []
    for name, questions in bank.items():
        for one in questions:
            for part in one.parts:
                for solved in [choice.solved for choice in part.choices] or [part.solved]:
                    if task in (None, solved.task):
                        found.append((f"{name} {one.variant.variables}", solved))
    return found


def test_the_bank_is_large_enough() -> None:
    """At least 45 items on three levels, and 8 plans."""
    assert len(ITEMS) >= 45
    assert len(PLANS) >= 8
    assert {item(name).level for name in ITEMS} == set(LEVELS)


def test_every_variant_solves_with_equal_marks(solved_bank: dict[str, list[Question]]) -> None:
    """Candidates get different but equally heavy papers: all variants of an item have the same marks."""
    for name, questions in solved_bank.items():
        assert len(questions) >= 6, name
        assert len({one.marks for one in questions}) == 1, name


def test_every_quantity_and_task_is_in_the_bank(solved_bank: dict[str, list[Question]]) -> None:
    """Each is asked for, or worked on the way, by some item (tables to complete and charts count by what they show)."""
    solved = parts_of(solved_bank)
    assert {each.task for _, each in solved} == set(tasks())
    seen = {step.target.quantity for _, each in solved for step in each.steps}
    seen |= {target.quantity for _, each in solved for target in each.targets}
    given = {table.quantity for name in ITEMS for table in item(name).given if table.quantity}
    charted = {figure.chart for name in ITEMS if (figure := item(name).figure)}
    assert set(quantities()) <= seen | given | charted


@pytest.mark.parametrize("kind", ["items", "plans"])
def test_files_are_valid_by_the_json_schema(kind: str) -> None:
    """A general-purpose validator accepts every shipped file by the schema that `guide --schema` prints."""
    made = schema(kind.removesuffix("s"))
    jsonschema.Draft202012Validator.check_schema(made)
    validator = jsonschema.Draft202012Validator(made)
    for path in sorted((FOLDER / kind).glob("*.yaml")):
        errors = [error.message for error in validator.iter_errors(read_tree(path).data)]
        assert not errors, (path.name, errors)


def test_the_schema_refuses_what_the_reader_refuses() -> None:
    """The schema can fail: an unknown key, a missing one, a task that is not there."""
    validator = jsonschema.Draft202012Validator(schema("item"))
    good = {"item": "A", "level": "majors", "story": "B", "parts": [{"calculate": "screening constant", "of": "V"}]}
    assert validator.is_valid(good)
    assert not validator.is_valid({**good, "storey": "C"})
    assert not validator.is_valid({key: value for key, value in good.items() if key != "story"})
    assert not validator.is_valid({**good, "parts": [{"compute": "screening constant"}]})
    assert not validator.is_valid({**good, "parts": [{"calculate": "screening constant", "marks": 99}]})


def test_select_has_distinct_options_and_balanced_places(solved_bank: dict[str, list[Question]]) -> None:
    """No two options are alike, one is the key, and every other is a named slip's."""
    for where, solved in parts_of(solved_bank, "select"):
        options = next(each for each in solved.exhibits if isinstance(each, Options)).options
        assert len({option.shown for option in options}) == len(options), where
        right = [option for option in options if not option.slips]
        assert [option.letter for option in right] == [solved.answer.value], where
    for name in ITEMS:
        read = item(name)
        variant = enumerated(read, TERMS.practice).variants[0]
        for at, part in enumerate(read.parts):
            if getattr(part, "task", None) is tasks()["select"]:
                places = (question(variant, TERMS, turn).parts[at].solved.answer.value for turn in range(60))
                letters = Counter(map(str, places))
                assert len(set(letters.values())) == 1, (name, letters)


def test_correct_prints_a_working_whose_first_wrong_line_is_the_slips(solved_bank: dict[str, list[Question]]) -> None:
    """Before the named line everything agrees with the published practice; that line does not."""
    for where, solved in parts_of(solved_bank, "correct"):
        printed = next(each for each in solved.exhibits if isinstance(each, ShownWorking)).lines
        number = int(str(solved.answer.shown).split(";")[0].removeprefix("line "))
        assert 1 <= number <= len(printed), where
        right = {step.line.quantity: step.line.shown for step in solved.steps}
        assert printed[number - 1].shown != right.get(printed[number - 1].quantity), where


def test_identify_has_one_answer(solved_bank: dict[str, list[Question]]) -> None:
    """Among the candidates stated, only the answer has the value printed (they are exhausted at solving)."""
    found = parts_of(solved_bank, "identify")
    assert found
    for where, solved in found:
        assert solved.given and solved.answer.shown, where


def test_stories_read_well(solved_bank: dict[str, list[Question]]) -> None:
    """No doubled words or spaces, no article that cannot stand, sentences begin with capitals (common practice)."""
    doubled = re.compile(r"\b(\w{2,}) \1\b")
    bad_article = re.compile(r"\b[Aa] (?:[aeio]\w|u[^nrst]\w)|\b[Aa]n (?:[bcdfgjklmnpqrtvwxyz][a-z]{2})")
    for name, questions in solved_bank.items():
        for one in questions:
            texts = [prose_text(one.story), *(prose_text(part.ask) for part in one.parts if part.ask)]
            for text in texts:
                where = (name, one.variant.variables, text)
                assert "  " not in text.replace("\n", " ").strip(), where
                assert not doubled.search(text), where
                assert not bad_article.search(text), where
                assert "{" not in text and "}" not in text, where
                assert re.match(r"[A-Z‘“'\"(0-9]", text), where


def test_dangerous_settings_carry_a_caution() -> None:
    """A story with X-rays, acids, furnaces, high voltage … says that it is a paper exercise."""
    dangerous = re.compile(r"X-ray|acid|furnace|voltage|molten|melt|laser|battery|chlorine|cyanide|radioact|discharge")
    for name in ITEMS:
        read = item(name)
        data = read.tree.data
        assert isinstance(data, dict)
        if dangerous.search(str(data["story"])):
            assert "paper exercise" in str(data.get("caution", "")), name


@pytest.mark.parametrize("name", PLANS)
def test_every_plan_is_sound_and_prints(name: str, tmp_path: Path) -> None:
    """Each plan vets without a fault; three papers of it print as PDF, and HTML that parses; the record has them."""
    path = FOLDER / "plans" / f"{name}.yaml"
    assert not [one for each in vetted_plan(path) for one in each.findings if one.severity == "fault"]
    plan = read_plan(path)
    made = assembled(plan, Terms(plan.practice, plan.slips, plan.figures), "bank", [None] * 3)
    result = publish(made, tmp_path)
    assert not result.missing
    for file in ("sheets.pdf", "key.pdf"):
        assert (tmp_path / file).read_bytes().startswith(b"%PDF"), file
    for file in ("sheets.html", "key.html"):
        ET.fromstring((tmp_path / file).read_text(encoding="utf-8").replace("<!doctype html>", "", 1))
    assert len(record(made)["papers"]) == 3


def test_every_item_prints(tmp_path: Path) -> None:
    """Every item, in a few of its variants, on one paper: sheet and key, PDF and HTML."""
    items = "\n".join(f"  - {name}" for name in ITEMS)
    path = tmp_path / "everything.yaml"
    path.write_text(f"plan: Everything\nitems:\n{items}\nattach: [constants, periodic table]\n", encoding="utf-8")
    plan = read_plan(path)
    made = assembled(plan, Terms(plan.practice, plan.slips), "all", [None] * 4)
    target = tmp_path / "out"
    target.mkdir()
    assert not publish(made, target).missing
    write_sheets_html(made, target / "again.html", lambda *_: None)
    write_key_html(made, target / "again-key.html", lambda *_: None)
    assert (target / "again.html").read_bytes() == (target / "sheets.html").read_bytes()
