"""An item or plan damaged at random gives papers, faults or a word about usage; never a traceback."""

from __future__ import annotations

import re
import tempfile
from pathlib import Path

from commands_help import run
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from papers_help import TANK

from authoring.specs.shipped import shipped_folder

PLAN = """plan: A test
course: Chemistry
items:
  - tank
  - item: tank
    fix: {metal: V}
conventions:
  1s pair: 0.30
figures: 3
layout: {paper: A4, type: 11, space: normal}
attach: [constants]
"""
FOLDER = shipped_folder("scenarios") / "items"
ITEMS = [TANK, *(path.read_text(encoding="utf-8") for path in sorted(FOLDER.glob("*.yaml")))]

# What people put into such files by accident, and what strangers put in on purpose.
TOKENS = [
    *(
        "",
        "-",
        ":",
        "{",
        "}",
        "[",
        "]",
        "|",
        ">",
        "'",
        '"',
        "#",
        "%",
        "&a",
        "*a",
        "!!str",
        "<<",
        "---",
        "...",
        "\t",
        "?",
    ),
    *("{{", "}}", "{{ metal.name }}", "{% if %}", "{{ 9**9**9 }}", "{{ metal.__class__ }}", "$", "`", "`Vx`", "\\"),
    *(
        "No",
        "1e999999999",
        "-1",
        "0",
        "99999999999999999999",
        "3.",
        "٣",
        "NaN",
        "∞",
        "\u2212",
        "\u202e",
        "\ufeff",
        "\x00",
    ),
    *(
        "metal",
        "outer",
        "4s",
        "9z",
        "V2+",
        "V99+",
        "Xx",
        "H-Og",
        "Og-H",
        "outermost",
        "calculate",
        "rank",
        "item",
        "parts",
    ),
    *("of", "electron", "marks", "draw", "keep", "ask", "either", "x" * 3000, "[" * 60, "{a: " * 60),
]


@st.composite
def damaged(draw: st.DrawFn, texts: list[str]) -> str:
    """One of the texts with up to four lines or words deleted, doubled, swapped or replaced."""
    text = draw(st.sampled_from(texts))
    for _ in range(draw(st.integers(1, 4))):
        by_line = draw(st.booleans())
        pieces = text.split("\n") if by_line else re.split(r"([\s:,\[\]{}]+)", text)
        at = draw(st.integers(0, len(pieces) - 1))
        other = draw(st.integers(0, len(pieces) - 1))
        kind = draw(st.sampled_from(["delete", "double", "swap", "replace", "insert", "indent"]))
        if kind == "delete":
            del pieces[at]
        elif kind == "double":
            pieces.insert(at, pieces[at])
        elif kind == "swap":
            pieces[at], pieces[other] = pieces[other], pieces[at]
        elif kind == "indent":
            pieces[at] = " " * draw(st.integers(1, 5)) + pieces[at]
        else:
            token = draw(st.sampled_from(TOKENS) | st.text(max_size=8))
            pieces[at : at + (kind == "replace")] = [token]
        text = ("\n" if by_line else "").join(pieces)
    return text


def vet(item: str, plan: str | None = None) -> None:
    """Vet damaged files: an exit code of ours, and words of ours."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder, "tank.yaml")
        path.write_text(item, encoding="utf-8", errors="surrogatepass")
        if plan is not None:
            path = Path(folder, "plan.yaml")
            path.write_text(plan, encoding="utf-8", errors="surrogatepass")
        ran = run("vet", path)
    assert ran.code in (0, 1, 2)
    assert "Traceback" not in ran.said
    assert "pydantic" not in ran.said
    assert ran.said.strip()
    assert all(len(line) < 4000 for line in ran.said.splitlines())


@settings(max_examples=250, deadline=None, suppress_health_check=list(HealthCheck))
@given(damaged(ITEMS))
def test_a_damaged_item_never_crashes(text):
    vet(text)


@settings(max_examples=100, deadline=None, suppress_health_check=list(HealthCheck))
@given(damaged([PLAN]))
def test_a_damaged_plan_never_crashes(text):
    vet(TANK, text)
