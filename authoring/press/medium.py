"""Press: the two media, LaTeX and HTML, with one interface: what views are made of, ready to print."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal, Protocol

from markupsafe import Markup

from authoring.press.chart import drawing
from authoring.press.chart_latex import chart_latex
from authoring.press.chart_svg import chart_svg
from authoring.press.environment import Tex
from authoring.tasks.solved import Chart
from authoring.working.latex import to_latex
from authoring.working.mathml import NAMESPACE, escape_xml, math_element
from authoring.working.nodes import Chain, Inline, Node, Prose, Relation
from authoring.working.prose_html import inline_html, prose_html
from authoring.working.prose_latex import inline_latex, prose_latex
from authoring.working.tex_escape import escape_tex

Decimal = Literal[".", ","]
# A formula may break after a relation; TeX does so by itself, HTML needs to be told.
_XMLNS = f' xmlns="{NAMESPACE}"'


class Medium(Protocol):
    """What a page is made of."""

    @property
    def decimal(self) -> str:
        """The decimal mark."""

    def text(self, text: str) -> Markup:
        """Plain text."""

    def number(self, text: str) -> Markup:
        """A number, or a text with numbers, with the decimal mark of the plan."""

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


_DIGIT_POINT = re.compile(r"(?<=\d)\.(?=\d)")


def with_decimal(text: str, decimal: str) -> str:
    """A text in which the points between digits are the decimal mark."""
    return text if decimal == "." else _DIGIT_POINT.sub(decimal, text)


@dataclass(frozen=True, slots=True)
class TexMedium:
    """LaTeX; `wide` for LuaTeX."""

    decimal: str = "."
    wide: bool = False

    def text(self, text: str) -> Markup:
        """Plain text, escaped."""
        return Tex(escape_tex(text, self.wide))

    def number(self, text: str) -> Markup:
        """A text with numbers, with the decimal mark of the plan."""
        return self.text(with_decimal(text, self.decimal))

    def prose(self, prose: Prose) -> Markup:
        """Paragraphs, lists and tables."""
        return Tex(prose_latex(prose, decimal=self.decimal, wide=self.wide))

    def inline(self, children: Iterable[Inline]) -> Markup:
        """Running text without paragraphs."""
        return Tex(inline_latex(children, decimal=self.decimal, wide=self.wide, displays=False))

    def node(self, node: Node) -> Markup:
        """`$\\displaystyle …$`."""
        return Tex(rf"$\displaystyle {self._math(node)}$")

    def relations(self, chain: Chain) -> tuple[Markup, Markup]:
        """`E` and `= -R … = -4.81 eV`."""
        first, rest = _parted(chain)
        if rest is None:
            return Tex(""), self.node(first)
        relation, after = rest
        body = self._math(after)
        sign = self._math(Chain(_NOTHING, ((relation, _NOTHING),))).strip()
        return self.node(first), Tex(rf"$\displaystyle {sign} {body}$")

    def chart(self, chart: Chart) -> Markup:
        """A picture."""
        return Tex(chart_latex(drawing(chart, self.decimal), self.wide))

    def _math(self, node: Node) -> str:
        return to_latex(node, decimal=self.decimal, wide=self.wide)


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

    def prose(self, prose: Prose) -> Markup:
        """Paragraphs, lists and tables."""
        return Markup(prose_html(prose, decimal=self.decimal).replace(_XMLNS, ""))

    def inline(self, children: Iterable[Inline]) -> Markup:
        """Running text without paragraphs."""
        return Markup(inline_html(children, decimal=self.decimal).replace(_XMLNS, ""))

    def node(self, node: Node) -> Markup:
        """A `<math>` element."""
        source = math_element(node, decimal=self.decimal).replace(_XMLNS, "")
        return Markup(source.replace("<math>", '<math displaystyle="true">', 1))

    def relations(self, chain: Chain) -> tuple[Markup, Markup]:
        """One element for what stands before the first relation, and one for each relation after it."""
        if not chain.rest:
            return Markup(""), self.node(chain.first)
        steps = [self.node(Chain(_NOTHING, (pair,))) for pair in chain.rest]
        return self.node(chain.first), Markup(" ").join(steps)

    def chart(self, chart: Chart) -> Markup:
        """An inline `<svg>`."""
        return Markup(chart_svg(drawing(chart, self.decimal), chart.description))
