"""Press: the two media, LaTeX and HTML, with one interface: what views are made of, ready to print."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import Protocol

from markupsafe import Markup

from authoring.faults import ContentError
from authoring.press.chart import drawing
from authoring.press.chart_latex import chart_latex
from authoring.press.chart_svg import chart_svg
from authoring.press.decimals import prose_with_decimal, symbols, with_decimal
from authoring.press.environment import Tex
from authoring.tasks.solved import Chart
from authoring.working.latex import to_latex
from authoring.working.mathml import NAMESPACE, escape_xml, math_element
from authoring.working.nodes import Chain, Inline, Node, Prose, Words
from authoring.working.prose_html import inline_html, prose_html
from authoring.working.prose_latex import inline_latex, prose_latex
from authoring.working.tex_escape import escape_tex, needs_wide

# Left out of MathML inside HTML, which needs none; a class of a thousand has a hundred thousand formulas.
_XMLNS = f' xmlns="{NAMESPACE}"'


class NeedsWide(ContentError):
    """A text that pdfTeX's fonts cannot print: the document is made again for LuaTeX."""

    def __init__(self, text: str) -> None:
        super().__init__("this text needs LuaTeX to be printed", text)


class Medium(Protocol):
    """What a page is made of."""

    @property
    def decimal(self) -> str:
        """The decimal mark."""

    def text(self, text: str) -> Markup:
        """Plain text."""

    def number(self, text: str) -> Markup:
        """A number, or a text with numbers, with the decimal mark of the plan."""

    def words(self, text: str) -> Markup:
        """Words of our own with symbols in them, such as `Z_eff` and `n*`, numbers as in `number`."""

    def prose(self, prose: Prose) -> Markup:
        """Paragraphs, lists and tables."""

    def inline(self, children: Iterable[Inline]) -> Markup:
        """Running text without paragraphs."""

    def node(self, node: Node) -> Markup:
        """A formula in running text, fractions at full size."""

    def relations(self, chain: Chain) -> tuple[Markup, Markup]:
        """A chain in two pieces: what stands before the first relation, and the rest, which may be broken."""

    def chart(self, chart: Chart) -> Markup:
        """A chart."""


NOTHING = Words("")


def parted(chain: Chain) -> tuple[Node | None, Node]:
    """What stands before the first relation (with a colon that follows it), and the rest."""
    if not chain.rest:
        return None, chain.first
    relation, after = chain.rest[0]
    if relation == ":":
        return Chain(chain.first, ((":", NOTHING),)), Chain(after, chain.rest[1:])
    return chain.first, Chain(NOTHING, chain.rest)


@dataclass(frozen=True, slots=True)
class TexMedium:
    """LaTeX; `wide` for LuaTeX."""

    decimal: str = "."
    wide: bool = False

    def text(self, text: str) -> Markup:
        """Plain text, escaped."""
        if not self.wide and not text.isascii() and needs_wide(text):
            raise NeedsWide(text)
        return Tex(escape_tex(text, self.wide))

    def number(self, text: str) -> Markup:
        """A text with numbers, with the decimal mark of the plan."""
        return self.text(with_decimal(text, self.decimal))

    def words(self, text: str) -> Markup:
        """Words of our own with symbols in them."""
        return self.inline(symbols(text, self.decimal))

    def prose(self, prose: Prose) -> Markup:
        """Paragraphs, lists and tables."""
        text = prose_with_decimal(prose, self.decimal)
        return self._printed(lambda: prose_latex(text, decimal=self.decimal, wide=self.wide))

    def inline(self, children: Iterable[Inline]) -> Markup:
        """Running text without paragraphs."""
        return self._printed(lambda: inline_latex(children, decimal=self.decimal, wide=self.wide, displays=False))

    def node(self, node: Node) -> Markup:
        """`$\\displaystyle …$`."""
        return self._printed(
            lambda: rf"$\displaystyle {to_latex(node, decimal=self.decimal, wide=self.wide)}$"
        )

    def relations(self, chain: Chain) -> tuple[Markup, Markup]:
        """`E` and `= -R … = -4.81 eV`, which TeX breaks after a relation where it must."""
        first, rest = parted(chain)
        return self.node(first) if first else Tex(""), self.node(rest)

    def chart(self, chart: Chart) -> Markup:
        """A picture."""
        return self._printed(lambda: chart_latex(drawing(chart, self.decimal), self.wide))

    def _printed(self, make: Callable[[], str]) -> Tex:
        try:
            return Tex(make())
        except ContentError as error:
            if self.wide:
                raise
            raise NeedsWide(error.word) from error


@dataclass(frozen=True, slots=True)
class HtmlMedium:
    """HTML with MathML and SVG."""

    decimal: str = "."

    def text(self, text: str) -> Markup:
        """Plain text, escaped."""
        return Markup(escape_xml(text))

    def number(self, text: str) -> Markup:
        """A text with numbers, with the decimal mark of the plan."""
        return self.text(with_decimal(text, self.decimal))

    def words(self, text: str) -> Markup:
        """Words of our own with symbols in them."""
        return self.inline(symbols(text, self.decimal))

    def prose(self, prose: Prose) -> Markup:
        """Paragraphs, lists and tables."""
        text = prose_with_decimal(prose, self.decimal)
        return Markup(prose_html(text, decimal=self.decimal).replace(_XMLNS, ""))

    def inline(self, children: Iterable[Inline]) -> Markup:
        """Running text without paragraphs."""
        return Markup(inline_html(children, decimal=self.decimal).replace(_XMLNS, ""))

    def node(self, node: Node) -> Markup:
        """A `<math>` element."""
        source = math_element(node, decimal=self.decimal).replace(_XMLNS, "")
        return Markup(source.replace("<math>", '<math displaystyle="true">', 1))

    def relations(self, chain: Chain) -> tuple[Markup, Markup]:
        """One element for what stands before the first relation, and one for each relation after it."""
        first, rest = parted(chain)
        if not first or not isinstance(rest, Chain):
            return self.node(first) if first else Markup(""), self.node(rest)
        steps = [] if rest.first == NOTHING else [self.node(rest.first)]
        steps += [self.node(Chain(NOTHING, (pair,))) for pair in rest.rest]
        return self.node(first), Markup(" ").join(steps)

    def chart(self, chart: Chart) -> Markup:
        """An inline `<svg>`."""
        return Markup(chart_svg(drawing(chart, self.decimal), with_decimal(chart.description, self.decimal)))
