"""Stage 1, read: `{{ … }}` and `{% if … %}` in item text, and the conditions under `keep:`.

Jinja reads the text; what it read is checked against a short list of syntax nodes and turned into plain functions
of ours. Nothing of Jinja runs afterwards, so an item from a stranger reaches only the names that it is given and
the attributes that their class lists in `TEMPLATE_NAMES`.
"""

from __future__ import annotations

import re
import warnings
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import TypeVar

from jinja2 import StrictUndefined, TemplateError, TemplateSyntaxError, nodes
from jinja2.parser import Parser
from jinja2.sandbox import ImmutableSandboxedEnvironment

from authoring.specs.template_expressions import Evaluate, ExpressionCompiler, TemplateFault, Use, as_bool, refused
from authoring.specs.template_filters import NotPrintable, printed

__all__ = ["Condition", "Rendered", "Template", "TemplateFault", "Use", "compile_condition", "compile_text"]

_T = TypeVar("_T")
_LONGEST = 50_000
_MOST_IFS = 20
_BRACES = re.compile(r"\{[{%]")
_BLOCKS = re.compile(r"\{%[-+]?\s*(if|endif)\b")

# Appends to the pieces of a text: (text, line of the template that it comes from).
_Pieces = list[tuple[str, int]]
_Write = Callable[[Mapping[str, object], _Pieces], None]


@dataclass(frozen=True, slots=True)
class Rendered:
    """A text with its values in place; `lines[k]` is the template's line that line `k` (0-based) came from."""

    text: str
    lines: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class Template:
    """A compiled text, and the names that it needs."""

    uses: tuple[Use, ...]
    _write: _Write

    @property
    def names(self) -> frozenset[str]:
        """The free names."""
        return frozenset(use.root for use in self.uses)

    def render(self, bindings: Mapping[str, object]) -> str:
        """The text with its values in place, escaped as Markdown. Raises TemplateFault with the line."""
        pieces: _Pieces = []
        self._write(bindings, pieces)
        return "".join([text for text, _ in pieces])

    def render_lines(self, bindings: Mapping[str, object]) -> Rendered:
        """As `render`, with the line of the template that every line of the text came from."""
        pieces: _Pieces = []
        self._write(bindings, pieces)
        lines: list[int] = []
        begun = False  # whether the last line of the text so far has its entry
        for text, line in pieces:
            for row, part in enumerate(text.split("\n")):
                begun = begun and row == 0
                if not begun and part:
                    lines.append(line + row)
                    begun = True
                elif not begun and row < text.count("\n"):
                    lines.append(line + row)
        return Rendered("".join([text for text, _ in pieces]), tuple(lines) or (1,))


@dataclass(frozen=True, slots=True)
class Condition:
    """A compiled condition, and the names that it needs."""

    uses: tuple[Use, ...]
    text: str
    _evaluate: Evaluate

    def holds(self, bindings: Mapping[str, object]) -> bool:
        """Whether it is true of the values. Raises TemplateFault, also where the answer is not yes or no."""
        return as_bool(self._evaluate(bindings), 1)


@lru_cache(maxsize=1)
def _environment() -> ImmutableSandboxedEnvironment:
    return ImmutableSandboxedEnvironment(
        undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True, keep_trailing_newline=True
    )


def compile_text(text: str) -> Template:
    """The template of an item's text. Raises TemplateFault with its line."""
    _check_length(text)
    tree = _parsed(text, lambda: _environment().parse(text))
    compiler = ExpressionCompiler()
    try:
        write = _Writers(compiler).block(tree.body, 0)
    except TemplateFault as error:
        raise _at_its_word(error, text) from error
    return Template(_placed(compiler.uses, text), write)


def compile_condition(text: str) -> Condition:
    """A line of `keep:`. Raises TemplateFault with its line."""
    _check_length(text)
    if not text.strip():
        raise TemplateFault("a condition is missing", 1)
    expression = _parsed(text, lambda: _read_expression(text))
    compiler = ExpressionCompiler()
    try:
        evaluate = compiler.compile(expression)
    except TemplateFault as error:
        raise _at_its_word(error, text) from error
    return Condition(_placed(compiler.uses, text), text, evaluate)


def _at_its_word(error: TemplateFault, text: str) -> TemplateFault:
    """The fault with the column of its word, as far as the line has it."""
    lines = text.split("\n")
    at = lines[min(error.line, len(lines)) - 1].find(error.word) if error.word else -1
    return TemplateFault(error.message, error.line, max(at, 0) + 1, error.word, error.allowed)


def _placed(uses: Sequence[Use], text: str) -> tuple[Use, ...]:
    """The uses with their columns: Jinja keeps lines only, so the words are looked for in their line."""
    lines = text.split("\n")
    return tuple(replace(use, column=_column(use, lines[min(use.line, len(lines)) - 1])) for use in uses)


def _column(use: Use, line: str) -> int:
    # The first such word of the line, in braces if the line has any: prose may have the word as well.
    braces = _BRACES.search(line)
    start = braces.end() if braces else 0
    words = r"\s*\.\s*".join(map(re.escape, (use.root, *use.chain)))
    found = re.compile(rf"(?<![\w.]){words}(?!\w)").search(line, start)
    return (found.end() - len((use.root, *use.chain)[-1]) if found else 0) + 1


def _check_length(text: str) -> None:
    if len(text) > _LONGEST:
        raise TemplateFault(f"a text has at most {_LONGEST:,} characters", 1)


def _read_expression(text: str) -> nodes.Node:
    parser = Parser(_environment(), text, state="variable")
    expression = parser.parse_expression()
    if not parser.stream.eos:
        token = parser.stream.current
        raise TemplateSyntaxError(_too_much(str(token.value), text), token.lineno)
    return expression


def _too_much(word: str, text: str) -> str:
    if word == "=":
        return "to compare, write == (two signs)"
    unquoted = re.search(rf"[0-9]+{re.escape(word)}\w*", text) if word.isalnum() else None
    if unquoted:
        return f'text stands in quotes: "{unquoted[0]}"'
    return f"{word!r} is too much here"


def _parsed(text: str, parse: Callable[[], _T]) -> _T:
    """What Jinja's parser makes of the text; its complaints become ours."""
    try:
        with warnings.catch_warnings():
            # Jinja decodes backslashes in quoted text with Python's rules, which warn of some.
            warnings.simplefilter("ignore")
            return parse()
    except TemplateSyntaxError as error:
        raise _syntax_fault(text, error) from error
    except TemplateError as error:
        raise TemplateFault(str(error), 1) from error
    except RecursionError as error:
        raise TemplateFault("this is too deeply nested", 1) from error
    except (ValueError, OverflowError) as error:
        raise TemplateFault("a number or text in it cannot be read", 1) from error


def _syntax_fault(text: str, error: TemplateSyntaxError) -> TemplateFault:
    message = error.message or "this cannot be read"
    if "end of template" in message or "Jinja was looking for" in message:
        open_at = _open_ifs(text)
        if open_at:
            return TemplateFault("this {% if %} has no {% endif %}", open_at[-1])
    plain = message.replace("end of print statement", "}}").replace("end of statement block", "%}")
    plain = plain.removesuffix(".").replace("end of template", "end of the text")
    plain = re.sub(r"^[Ee]xpected token ('.*'), got ('.*')$", r"\1 is expected here, not \2", plain)
    return TemplateFault(plain[:1].lower() + plain[1:], error.lineno)


def _open_ifs(text: str) -> list[int]:
    """The lines of the `{% if %}` that are never closed."""
    opened: list[int] = []
    for found in _BLOCKS.finditer(text):
        if found[1] == "if":
            opened.append(text.count("\n", 0, found.start()) + 1)
        elif opened:
            opened.pop()
    return opened


class _Writers:
    """Turns the statements of a text into functions that write its pieces."""

    def __init__(self, compiler: ExpressionCompiler) -> None:
        self._compiler = compiler

    def block(self, body: Sequence[nodes.Node], depth: int) -> _Write:
        """One after the other."""
        if depth > _MOST_IFS:
            raise TemplateFault("{% if %} is too deeply nested", body[0].lineno if body else 1)
        writers = tuple(writer for node in body for writer in self._statement(node, depth))

        def write(bindings: Mapping[str, object], pieces: _Pieces) -> None:
            for writer in writers:
                writer(bindings, pieces)

        return write

    def _statement(self, node: nodes.Node, depth: int) -> list[_Write]:
        if isinstance(node, nodes.Output):
            return [self._output(child) for child in node.nodes]
        if isinstance(node, nodes.If):
            return [self._if(node, depth)]
        raise refused(node)

    def _output(self, node: nodes.Expr) -> _Write:
        line = node.lineno
        if isinstance(node, nodes.TemplateData):
            piece = (node.data, line)
            return lambda bindings, pieces: pieces.append(piece)
        evaluate = self._compiler.compile(node)

        def write(bindings: Mapping[str, object], pieces: _Pieces) -> None:
            try:
                pieces.append((printed(evaluate(bindings)), line))
            except NotPrintable as error:
                raise TemplateFault(error.message, line) from error

        return write

    def _if(self, node: nodes.If, depth: int) -> _Write:
        branches = tuple(
            (self._compiler.compile(one.test), self.block(one.body, depth + 1), one.lineno)
            for one in (node, *node.elif_)
        )
        otherwise = self.block(node.else_, depth + 1)

        def write(bindings: Mapping[str, object], pieces: _Pieces) -> None:
            for test, body, line in branches:
                if as_bool(test(bindings), line):
                    return body(bindings, pieces)
            return otherwise(bindings, pieces)

        return write
