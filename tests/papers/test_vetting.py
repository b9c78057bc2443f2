"""What vetting finds in items and plans, with how many variants each finding is about."""

from __future__ import annotations

import pytest
from papers_help import TANK, TERMS, read, write_item

from authoring.faults import render_faults
from authoring.papers.vet import Vetted, vetted, vetted_item, vetted_plan


def vet(text: str) -> Vetted:
    """An item, vetted under the published practice."""
    return vetted(read(text), TERMS, {})


def findings(result: Vetted) -> list[tuple[str, str, int]]:
    """Code, severity and number of variants of each finding."""
    return [(each["code"], each["severity"], each["variants"]) for each in result.data()["findings"]]


def test_a_sound_item_has_no_findings():
    result = vet(TANK)
    assert (result.possible, result.sound, result.findings) == (7, 7, ())
    assert result.words == f"tank: sound; 7 of 7 variants, {result.marks} marks"
    assert result.marks == vet(TANK).marks > 0


def test_faults_in_some_variants_are_counted_and_told_once():
    """Among Sc to Ni without Cr, only manganese, iron, cobalt and nickel have more than four 3d electrons."""
    text = TANK.replace(
        "  - calculate: effective",
        "  - calculate: screening constant\n    of: metal\n"
        "    electron: '{% if metal.z > 24 %}5s{% else %}3d{% endif %}'\n"
        "  - calculate: effective",
    )
    result = vet(text)
    assert (result.possible, result.sound) == (7, 3)
    assert findings(result) == [("unsolvable", "fault", 4)]
    assert "has no 5s electron" in result.findings[0].message
    assert result.findings[0].message.endswith("and 3 more variants")


@pytest.mark.parametrize(
    ("change", "code", "count"),
    [
        (("period: 4, except: [Cr, Cu, Zn]", "among: [V]"), "one-variant", 1),
        (("block: d, period: 4, except: [Cr, Cu, Zn]", "among: [V, Mn], charge: 1+"), "rule-differs", 2),
    ],
)
def test_weaknesses_of_the_whole(change, code, count):
    result = vet(TANK.replace(*change))
    assert (code, "weakness", count) in findings(result)
    assert result.sound == result.possible
    assert ": sound; " in result.words


def test_working_of_very_different_length_is_a_weakness():
    text = TANK.split("draw:")[0] + (
        "draw:\n  metal: {among: [He, V]}\nstory: A paper exercise.\n"
        "parts:\n  - calculate: total energy\n    of: metal\n    marks: 4\n"
    )
    assert findings(vet(text)) == [("unequal-working", "weakness", 2)]
    without = text.replace("    marks: 4\n", "")
    assert [code for code, _, _ in findings(vet(without))] == ["unequal-marks", "unequal-working"]


ENERGY = "  - calculate: orbital energy\n"


@pytest.mark.parametrize(
    ("ask", "codes"),
    [
        ("Find the energy.", ["no-rounding"]),
        ("Find the energy in $Z_{eff}^2$ rounds of work on {{ metal }}.", []),
        ("Find the energy, {{ rounding }}.", []),
        ("Find the energy to 4 s.f. in eV.", []),
        ("Give the energy to the nearest eV.", []),
        ("Find the energy of {species}, {rounding}.", ["single-braces", "single-braces"]),
    ],
)
def test_a_wording_that_says_nothing_about_rounding_is_weak(ask, codes):
    text = TANK + ENERGY + f"    ask:\n      - '{ask}'\n      - 'Find the energy to 3 figures.'\n"
    result = vet(text)
    assert sorted(findings(result)) == [(code, "weakness", 7) for code in codes]
    places = {"no-rounding": {"tank.yaml:15:9"}, "single-braces": {"tank.yaml:15:29", "tank.yaml:15:40"}}
    assert {str(each.source) for each in result.findings} == set().union(*(places[code] for code in codes))


@pytest.mark.parametrize(
    ("text", "columns"),
    [
        ("A paper exercise about {metal.name} in { outer }.", [26, 42]),
        ("A paper exercise about {{metal.name}}, $Z_{metal}$, {steel}{% if metal.z > 3 %}x{% endif %}.", []),
    ],
)
def test_a_drawn_value_in_single_braces_is_weak(text, columns):
    result = vet(TANK.replace("A paper exercise about dissolved {{ metal.name }}.", text))
    assert [str(each.source) for each in result.findings] == [f"tank.yaml:7:{column}" for column in columns]
    assert {each.code for each in result.findings} <= {"single-braces"}


def test_a_fault_of_every_variant_names_none():
    (finding,) = vet(TANK + "  - calculate: effective age\n").findings
    assert finding.message == "no quantity 'effective age'; did you mean 'effective nuclear charge'? (in every variant)"


def test_faults_and_weaknesses_are_counted_apart():
    found = vet(TANK + "  - calculate: effective age\n").findings
    weak = vet(TANK + "    ask: Find {species} or {electron}.\n").findings
    assert render_faults([*found, *weak]).splitlines()[-1] == "1 fault, 2 weaknesses"
    assert render_faults(weak).splitlines()[-1] == "2 weaknesses"


def test_rounding_need_not_be_said_where_nothing_is_rounded_or_the_default_says_it():
    assert findings(vet(TANK + "    ask: Find the charge.\n")) == []
    assert findings(vet(TANK + ENERGY)) == []


def test_alternatives_are_told_apart_in_what_they_leave_unsaid():
    text = TANK + (
        "  - either:\n      - calculate: orbital energy\n        marks: 1\n        ask: Find it to 3 figures.\n"
        "      - calculate: radius of maximum density\n        marks: 1\n        ask: Find the radius.\n"
    )
    assert [(each.code, str(each.source)) for each in vet(text).findings] == [("no-rounding", "tank.yaml:19:14")]


def test_every_wording_is_vetted_not_only_the_first():
    text = TANK + "    ask: ['Find it.', 'Find it for `Xq`.']\n"
    result = vet(text)
    assert (result.sound, findings(result)) == (0, [("text", "fault", 7)])


def test_an_unreadable_file_is_a_finding(tmp_path):
    result = vetted_item(tmp_path / "none.yaml")
    assert [code for code, _, _ in findings(result)] == ["unreadable"]
    (tmp_path / "plan.yaml").write_text("plan: P\nitems: [nowhere-to-be-found]\n", encoding="utf-8")
    (result,) = vetted_plan(tmp_path / "plan.yaml")
    assert [code for code, _, _ in findings(result)] == ["no-item"]


def test_a_plan_is_vetted_under_its_own_terms(tmp_path):
    """With 5s held as the only electron the item has no variants; with a fixed metal it has one."""
    write_item(tmp_path, TANK)
    plan = tmp_path / "plan.yaml"
    plan.write_text("plan: P\nitems:\n  - item: tank\n    fix: {metal: V}\n", encoding="utf-8")
    (result,) = vetted_plan(plan)
    assert (result.possible, [code for code, _, _ in findings(result)]) == (1, ["one-variant"])
