"""Stage 1, read: the small Markdown of item text becomes nodes of prose.

Paragraphs, emphasis, lists, inline code (chemistry) and `$…$` (formulas); everything else that Markdown or TeX or
HTML would take for markup is plain text.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache

from markdown_it import MarkdownIt
from markdown_it.rules_inline import StateInline
from markdown_it.token import Token

from authoring.faults import ContentError
from authoring.specs.chemistry import read_chemistry
from authoring.specs.formulas import MathFault, read_math
from authoring.specs.texts import unify_breaks
from authoring.working.nodes import Block, Emphasis, Inline, ListBlock, Math, Paragraph, Plain, Prose

_LONGEST = 50_000
_DEEPEST_LIST = 4
_DEEPEST_EMPHASIS = 4
_RULES = ("list", "emphasis", "escape", "newline", "balance_pairs", "text_join")


@dataclass(frozen=True, slots=True)
class ProseFault:
    """A mistake in a text, at its 1-based line and column."""

    line: int
    column: int
    message: str


def read_prose(text: str) -> tuple[Prose, tuple[ProseFault, ...]]:
    """The blocks of a text, and what is wrong with it (the faulty spots are left as plain text)."""
    if len(text) > _LONGEST:
        return (), (ProseFault(1, 1, f"a text has at most {_LONGEST:,} characters"),)
    text = unify_breaks(text)  # quoted YAML can hold breaks of other kinds, and Markdown counts them
    reader = _Reader(text.split("\n"))
    prose = reader.blocks(iter(_markdown().parse(text)), 0)
    return prose, tuple(sorted(set(reader.faults), key=lambda fault: (fault.line, fault.column)))


@lru_cache(maxsize=1)
def _markdown() -> MarkdownIt:
    markdown = MarkdownIt("zero").enable(list(_RULES))
    markdown.inline.ruler.before("escape", "chemistry", _code_rule)
    markdown.inline.ruler.before("escape", "formula", _formula_rule)
    return markdown


def _push(state: StateInline, kind: str, content: str, start: int, inside: int, end: int) -> None:
    token = state.push(kind, "", 0)
    token.content = content
    token.meta = {"at": start, "inside": inside}
    state.pos = end


def _code_rule(state: StateInline, silent: bool) -> bool:
    start = state.pos
    if state.src[start] != "`":
        return False
    run = re.compile("`+").match(state.src, start)
    ticks = run[0] if run else "`"
    inside = start + len(ticks)
    closing = re.compile(f"(?<!`){ticks}(?!`)").search(state.src, inside)
    if silent:
        state.pos = closing.end() if closing else inside
    elif closing is None:
        _push(state, "unclosed", ticks, start, start, inside)
    else:
        _push(state, "chemistry", state.src[inside : closing.start()], start, inside, closing.end())
    return True


def _formula_rule(state: StateInline, silent: bool) -> bool:
    start = state.pos
    if state.src[start] != "$":
        return False
    mark = "$$" if state.src.startswith("$$", start) else "$"
    inside = start + len(mark)
    closing = re.compile(r"(?:\\.|[^$\\]|\\(?=$))*", re.DOTALL).match(state.src, inside)
    end = closing.end() if closing else inside
    closed = state.src.startswith(mark, end)
    if silent:
        state.pos = end + len(mark) if closed else inside
    elif closed:
        kind = "display" if mark == "$$" else "formula"
        _push(state, kind, state.src[inside:end], start, inside, end + len(mark))
    else:
        _push(state, "unclosed", mark, start, start, inside)
    return True


class _Reader:
    """Turns Markdown tokens into nodes and gathers faults with their places in the text."""

    def __init__(self, lines: Sequence[str]) -> None:
        self._lines = lines
        self.faults: list[ProseFault] = []

    def blocks(self, tokens: Iterator[Token], depth: int) -> tuple[Block, ...]:
        """The blocks up to the end of the token that is open."""
        found: list[Block] = []
        for token in tokens:
            if token.type in ("bullet_list_open", "ordered_list_open"):
                if depth == _DEEPEST_LIST:
                    line = token.map[0] + 1 if token.map else 1
                    self.faults.append(ProseFault(line, 1, f"lists are nested deeper than {_DEEPEST_LIST} levels"))
                found.append(self._list(tokens, token.type == "ordered_list_open", depth + 1))
            elif token.type == "inline":
                children = self._inlines(token)
                if children:
                    found.append(Paragraph(children))
            elif token.type.endswith("_close") and token.type != "paragraph_close":
                break
        return tuple(found)

    def _list(self, tokens: Iterator[Token], ordered: bool, depth: int) -> ListBlock:
        entries: list[tuple[Block, ...]] = []
        for token in tokens:
            if token.type != "list_item_open":
                break
            entries.append(self.blocks(tokens, depth))
        return ListBlock(tuple(entries), ordered)

    def _inlines(self, token: Token) -> tuple[Inline, ...]:
        # Open emphases from the outside in: (strong, children so far).
        stack: list[tuple[bool, list[Inline]]] = [(False, [])]
        first = token.map[0] if token.map else 0
        for child in token.children or ():
            if child.type in ("em_open", "strong_open"):
                stack.append((child.type == "strong_open", []))
                if len(stack) == _DEEPEST_EMPHASIS + 2:
                    self.faults.append(ProseFault(first + 1, 1, "emphasis is nested too deeply here"))
            elif child.type in ("em_close", "strong_close"):
                strong, children = stack.pop()
                if len(stack) <= _DEEPEST_EMPHASIS:
                    stack[-1][1].append(Emphasis(tuple(children), strong))
                else:
                    stack[-1][1].extend(children)
            else:
                _append(stack[-1][1], self._leaf(child, token.content, first))
        return tuple(stack[0][1])

    def _leaf(self, token: Token, content: str, first: int) -> Inline:
        if token.type in ("softbreak", "hardbreak"):
            return Plain(" ")
        if token.type in ("chemistry", "formula", "display"):
            return self._math(token, content, first)
        if token.type == "unclosed":
            name = "backtick" if token.content[0] == "`" else "dollar sign"
            remedy = "" if token.content[0] == "`" else "; for the sign itself write \\$"
            self._complain(content, first, token.meta["at"], f"this {name} has no partner in its paragraph{remedy}")
        return Plain(token.content)

    def _math(self, token: Token, content: str, first: int) -> Inline:
        try:
            if token.type == "chemistry":
                # Values put between backticks come with Markdown's backslashes.
                return Math(read_chemistry(re.sub(r"\\([\\`*_$+.-])", r"\1", token.content)))
            return Math(read_math(token.content), display=token.type == "display")
        except MathFault as error:
            self._complain(content, first, token.meta["inside"] + error.offset, error.full_message)
        except ContentError as error:
            self._complain(content, first, token.meta["inside"], error.full_message)
        return Plain(token.content)

    def _complain(self, content: str, first: int, at: int, message: str) -> None:
        """Find the line and column of a paragraph's character `at`; its lines may have lost their indentation."""
        row = content.count("\n", 0, at)
        start = content.rfind("\n", 0, at) + 1
        end = content.find("\n", start)
        line = content[start : end if end >= 0 else len(content)]
        source = self._lines[first + row] if first + row < len(self._lines) else ""
        indent = max(source.rfind(line), 0)
        self.faults.append(ProseFault(first + row + 1, indent + at - start + 1, message))


def _append(children: list[Inline], leaf: Inline) -> None:
    """Add a leaf, joining neighbouring plain text."""
    if isinstance(leaf, Plain):
        if not leaf.text:
            return
        if children and isinstance(children[-1], Plain):
            children[-1] = Plain(children[-1].text + leaf.text)
            return
    children.append(leaf)
