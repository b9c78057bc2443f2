"""Templates and conditions of item text: what they print, what they refuse, and where they say so."""

from dataclasses import dataclass
from decimal import Decimal
from typing import ClassVar

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from authoring.faults import ContentError
from authoring.specs.prose import read_prose
from authoring.specs.template import TemplateFault, compile_condition, compile_text
from authoring.specs.template_filters import escape_markdown
from authoring.working.nodes import Paragraph, Plain


@dataclass(frozen=True)
class Metal:
    """Stands for a drawn species."""

    TEMPLATE_NAMES: ClassVar[tuple[str, ...]] = ("name", "unpaired", "z", "radius", "broken", "twice")
    name: str = "iron"
    unpaired: int = 4
    z: int = 26
    secret: int = 1
    radius: Decimal = Decimal("1.20")
    markup: str = "`Fe2+`"

    @property
    def broken(self):
        raise ContentError("no electrons are left")

    def twice(self):
        return 2

    def __str__(self):
        return "Fe2+"


BOUND = {"metal": Metal(), "n": 3, "word": "4s", "trio": ("Na", "Mg", "Al"), "yes": True, "odd": "*a* `b` $c$ \\"}


@pytest.mark.parametrize(
    ("text", "printed"),
    [
        ("{{ metal }} is {{ metal.name }}, {{ metal.radius }}", "`Fe2+` is iron, 1.20"),
        ("{{ n - 5 }} {{ n + 1 }}", "−2 4"),
        (
            "{{ n|count('electron') }} {{ 1|count('electron') }} {{ 2|count('shell', 'shells') }}",
            "3 electrons 1 electron 2 shells",
        ),
        (
            "{{ n|words|capital }}, {{ 13|words }}, {{ 2|ordinal }}, {{ 23|ordinal }}, {{ 112|ordinal }}",
            "Three, 13, second, 23rd, 112th",
        ),
        ("{{ trio|join }}; {{ trio|join('or') }}; {{ ['Na']|join }}", "Na, Mg and Al; Na, Mg or Al; Na"),
        ("{{ metal.name|a|capital }}; {{ metal|a }}", "An iron; an `Fe2+`"),
        ("{{ 'yes' if yes else 'no' }}{% if not yes %}x{% elif n == 3 %}three{% else %}y{% endif %}", "yesthree"),
        ("{{ trio[1] }}{# a remark #}", "Mg"),
        ("a\n{% if yes %}\nb\n{% endif %}\nc\n", "a\nb\nc\n"),
    ],
)
def test_what_a_text_prints(text, printed):
    assert compile_text(text).render(BOUND) == printed


@pytest.mark.parametrize(
    ("word", "article"),
    [
        *(
            (w, "a")
            for w in (
                "vanadium",
                "europium",
                "uranium",
                "one",
                "unit",
                "2",
                "10",
                "100",
                "Cl",
                "`Cu2+`",
                "U",
                "4s",
                "helium",
            )
        ),
        *(
            (w, "an")
            for w in ("iron", "actinium", "indium", "oxygen", "hour", "8", "11", "18", "80", "11000", "Fe", "`Ni2+`")
        ),
    ],
)
def test_the_article_follows_the_sound(word, article):
    """Symbols are spelt out: an F-e. Common practice, no source."""
    value = type("Chemistry", (), {"markup": word})() if word.startswith("`") else word
    assert compile_text("{{ x|a }}").render({"x": value}).split()[0] == article


def test_free_names_are_listed():
    assert compile_text("{{ a.b }}{% if c and 1 in [d] %}{{ e|count('x') }}{% endif %}").names == set("acde")


def test_names_and_what_is_asked_of_them_have_their_places():
    text = "Of a:\n{{ a.b.c }} and {{ a . d }}{% if e.f > g %}{{ a|count('x') }}{% endif %}"
    found: dict[tuple[str, tuple[str, ...]], tuple[int, int]] = {}
    for use in compile_text(text).uses:
        found.setdefault((use.root, use.chain), (use.line, use.column))
    assert found == {
        ("a", ("b", "c")): (2, 8),
        ("a", ("b",)): (2, 6),
        ("a", ("d",)): (2, 24),
        ("e", ("f",)): (2, 36),
        ("a", ()): (2, 4),
        ("e", ()): (2, 34),
        ("g", ()): (2, 40),
    }
    assert [(use.root, use.chain, use.column) for use in compile_condition("x.y == 1").uses] == [
        ("x", (), 1),
        ("x", ("y",), 3),
    ]


def test_lines_of_the_rendered_text_know_their_lines_in_the_template():
    text = "a\n{% if yes %}\nhigh {{ n }}\nand\n{% else %}\nlow\n{% endif %}\nend\n\nlast"
    rendered = compile_text(text).render_lines(BOUND)
    assert rendered.text.split("\n") == ["a", "high 3", "and", "end", "", "last"]
    assert rendered.lines == (1, 3, 4, 8, 9, 10)


@pytest.mark.parametrize(
    ("text", "line", "words"),
    [
        ("\n{{ metl.name }}", 2, "did you mean 'metal'?"),
        ("\n\n{{ metal.nam }}", 3, "did you mean 'name'?"),
        ("{{ metal.secret }}", 1, "nothing called 'secret'"),
        ("{{ word.upper }}", 1, "nothing called 'upper'"),
        ("{{ metal.twice }}", 1, "cannot be printed"),
        ("{{ metal.broken }}", 1, "no electrons are left"),
        ("{{ yes }}", 1, "use {% if %}"),
        ("{{ trio }}", 1, "filter join"),
        ("{{ trio[7] }}", 1, "no entry 7"),
        ("{% if n %}{% endif %}", 1, "compare it"),
        ("{{ word + 1 }}", 1, "only numbers"),
        ("{{ word|words }}", 1, "filter 'words'"),
    ],
)
def test_a_mistake_in_the_values_is_named_with_its_line(text, line, words):
    with pytest.raises(TemplateFault) as found:
        compile_text(text).render(BOUND)
    assert found.value.line == line and words in found.value.full_message


@pytest.mark.parametrize(
    ("text", "line", "words"),
    [
        ("a\n{% for x in y %}{% endfor %}", 2, "{% for %} cannot"),
        ("a\n{% if x %}\nb\n", 2, "has no {% endif %}"),
        ("{{ x.__class__ }}", 1, "private"),
        ("{{ x['__class__'] }}", 1, "private"),
        ("{{ x|attr('y') }}", 1, "no filter 'attr'"),
        ("{{ x() }}", 1, "calls"),
        ("{{ 'a' * 9 }}", 1, "multiplication"),
        ("{{ 9 ** 9 }}", 1, "powers"),
        ("{{ a ~ b }}", 1, "~"),
        ("{{ a is defined }}", 1, "tests"),
        ("{{ a[1:2] }}", 1, "whole number"),
        ("{{ a if b }}", 1, "else"),
        ("{% set a = 1 %}", 1, "{% set %}"),
        ("{% include 'x' %}", 1, "{% include %}"),
        ("{{ n|count }}", 1, "takes 1 to 2"),
        ("{{ 1e999 }}", 1, "too large"),
        ("{{ '\\x00' }}", 1, "invisible"),
        ("{{ " + "9" * 5000 + " }}", 1, "cannot be read"),
        ("{{ " + "(" * 5000 + " }}", 1, "nested"),
        ("{{ " + "1+" * 5000 + "1 }}", 1, "nested"),
        ("{% if x %}" * 50 + "{% endif %}" * 50, 1, "nested"),
        ("{{ x", 1, "}}"),
        ("x" * 60_000, 1, "at most"),
    ],
)
def test_what_is_not_on_the_list_is_refused_before_anything_runs(text, line, words):
    with pytest.raises(TemplateFault) as found:
        compile_text(text)
    assert found.value.line == line and words in found.value.full_message


@pytest.mark.parametrize(
    ("text", "holds"),
    [
        ("metal.unpaired > 0 and metal.z in [25, 26]", True),
        ("metal.radius == 1.2", True),
        ("metal.radius >= 1.21 or not yes", False),
        ("metal == 'Fe2+'", True),
        ("metal in ['Fe2+', 'V']", True),
        ("'Na' not in trio", False),
        ("1 < n <= 3", True),
        ("n != -3", True),
    ],
)
def test_conditions(text, holds):
    assert compile_condition(text).holds(BOUND) is holds


@pytest.mark.parametrize("text", ["n", "n > 'a'", "n == 'a'", "n in 3", "yes and n", "metal.nme > 1", "word < 'a'"])
def test_a_condition_without_a_clear_answer_is_a_fault(text):
    with pytest.raises(TemplateFault):
        compile_condition(text).holds(BOUND)


@pytest.mark.parametrize("text", ["", " ", "n > 1 }} {{ n", "n >", "n > 1 n", "{{ n > 1 }}", "{% if n %}"])
def test_a_condition_is_one_expression(text):
    with pytest.raises(TemplateFault):
        compile_condition(text)


@given(st.text(st.characters(codec="utf-8", exclude_categories=["Cc"]), min_size=1, max_size=40))
@example("- a")
@example("1. a")
@example("12) ")
@example("*a* _b_ `c` $d$ \\ \\*")
@example("<b>&amp;</b> [a](b) # x")
def test_values_never_become_markup(value):
    prose, faults = read_prose(escape_markdown(value))
    text = " ".join(value.split()) if not value.strip() else value.strip()
    shown = "".join(leaf.text for block in prose for leaf in block.children) if prose else ""
    assert not faults and all(isinstance(b, Paragraph) and all(isinstance(c, Plain) for c in b.children) for b in prose)
    assert shown.split() == text.split()


JINJAISH = st.text(st.sampled_from("{}%#|.()[]'\"abn 0123+-*~=<>!\\\n_if endif else not in and or"), max_size=60)


@given(st.one_of(st.text(max_size=60), JINJAISH, JINJAISH.map(lambda t: "{{ " + t + " }}")))
@example("{{ '\\d' }}")
@example("{{ '\\N{x' }}")
@example("{{ " + "not " * 5000 + "a }}")
@example("{{ " + "-" * 5000 + "1 }}")
def test_any_text_renders_or_gives_our_fault(text):
    for compiled in (compile_text, compile_condition):
        try:
            made = compiled(text)
            made.render({"a": Metal(), "b": 1, "n": "x"}) if compiled is compile_text else made.holds({"a": True})
        except TemplateFault as fault:
            assert fault.line >= 1
