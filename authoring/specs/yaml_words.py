"""Stage 1, read: what the YAML parser complains about, in plain words and at the place that helps."""

from __future__ import annotations

from collections.abc import Sequence

import yaml

# What libyaml and the pure-Python parser say -> what the writer of the file can do about it. Searched in order.
_WORDS: tuple[tuple[str, str], ...] = (
    (
        "mapping values are not allowed",
        "a `: ` too many here: put text that contains a colon in quotes, or check the indentation",
    ),
    ("sequence entries are not allowed", "a list (`- `) cannot begin here; begin it on its own line"),
    (
        "node content",
        "a closing bracket or other mark stands where a value should be; text that begins with it needs quotes",
    ),
    ("did not find expected '-' indicator", "this line does not line up with the `- ` entries of its list"),
    ("expected <block end>, but found '<block mapping start>'", "the indentation does not match the lines above"),
    (
        "expected <block end>",
        "this does not fit the lines above: check the indentation, the quotes and the `- ` or `key:`",
    ),
    (
        "did not find expected key",
        "this does not fit the lines above: check the indentation, the quotes and the `key:`",
    ),
    ("could not find expected ':'", "a key without its colon, or text over several lines that needs `|` or quotes"),
    ("did not find expected ',' or", "a comma or the closing bracket is missing here"),
    ("expected ',' or", "a comma or the closing bracket is missing here"),
    ("unexpected end of stream", "the quotes opened here are never closed"),
    ("unexpected document separator", "the quotes opened here are not closed before the next document"),
    ("unknown escape character", r"a backslash in double quotes begins an escape; use single quotes or write \\"),
    ("escape sequence", r"a backslash in double quotes begins an escape; use single quotes or write \\"),
    ("hexdecimal number", r"a backslash in double quotes begins an escape; use single quotes or write \\"),
    ("invalid Unicode character escape", "this escape stands for no character"),
    ("maximum nesting depth", "lists and mappings are nested too deeply here"),
    ("tab character", "a tab stands in the indentation; use spaces"),
    ("leading empty lines", "a line without text is indented deeper than the text that follows"),
    ("indentation", "the indentation of this text block cannot be read"),
    ("undefined tag handle", "tags (!) are not used here; text that begins with ! needs quotes"),
    ("tag", "tags (!) are not used here; text that begins with ! needs quotes"),
    ("alphabetic or numeric character", "text that begins with & or * needs quotes"),
    ("document start", "this does not belong to the lines above: check the indentation"),
    ("comment", "nothing but a line break may follow the | of a text block, and text that begins with | needs quotes"),
    ("directive", "text that begins with % needs quotes"),
    ("chomping or indentation", "nothing but a line break may follow the | of a text block"),
)


def syntax_place_and_words(error: yaml.MarkedYAMLError, lines: Sequence[str]) -> tuple[int, int, str]:
    """The 0-based line and column of a syntax error, and a message in plain words."""
    problem = error.problem or ""
    mark = error.problem_mark or error.context_mark
    if "unexpected end of stream" in problem or "unexpected document separator" in problem:
        mark = error.context_mark or mark
    row = min(mark.line, max(len(lines) - 1, 0)) if mark else 0
    column = mark.column if mark else 0
    shown = lines[row] if lines else ""
    if "cannot start any token" in problem or "\t" in shown[: column + 1]:
        return row, column, _bad_start(shown[column : column + 1], shown[: column + 1])
    words = next((words for heard, words in _WORDS if heard in problem), f"this is not YAML: {problem}")
    if "\u00a0" in shown:
        words += " (the line contains a no-break space, U+00A0, which YAML does not take for a space)"
    return row, column, words


def _bad_start(character: str, before: str) -> str:
    if "\t" in before:
        return "a tab stands here; YAML is indented with spaces"
    return f"text that begins with {character} needs quotes"
