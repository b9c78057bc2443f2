"""Working: prose as LaTeX; every piece of text is escaped, nothing the author wrote is a command."""

from __future__ import annotations

from collections.abc import Iterable

from authoring.working.latex import to_latex
from authoring.working.nodes import Block, Emphasis, Inline, ListBlock, Math, Paragraph, Plain, Prose, TableBlock
from authoring.working.prose_text import inline_text, is_numeric
from authoring.working.tex_escape import escape_tex

_PAGE_COLUMNS = 80  # characters of running text that a line certainly holds


def prose_latex(prose: Prose, *, decimal: str = ".", wide: bool = False) -> str:
    """Paragraphs, lists and ruled tables; needs amsmath, array and booktabs. Raises ContentError for what cannot print.

    `wide` is for LuaTeX with fallback fonts (see `escape_tex`).
    """
    return "\n\n".join(_block(block, decimal, wide) for block in prose)


def inline_latex(children: Iterable[Inline], *, decimal: str = ".", wide: bool = False, displays: bool = True) -> str:
    """Running text with emphasis and formulas; a display formula stands on a line of its own where it may."""
    parts: list[str] = []
    for child in children:
        match child:
            case Plain(text):
                parts.append(escape_tex(text, wide))
            case Emphasis(inner, strong):
                command = "textbf" if strong else "emph"
                inside = inline_latex(inner, decimal=decimal, wide=wide, displays=False)
                parts.append(rf"\{command}{{{inside}}}")
            case Math(node, display):
                source = to_latex(node, decimal=decimal, wide=wide)
                parts.append(f"\\[{source}\\]" if display and displays else f"${source}$")
    return "".join(parts)


def _block(block: Block, decimal: str, wide: bool) -> str:
    match block:
        case Paragraph(children):
            return inline_latex(children, decimal=decimal, wide=wide)
        case ListBlock(entries, ordered):
            name = "enumerate" if ordered else "itemize"
            items = "\n".join(rf"\item {prose_latex(entry, decimal=decimal, wide=wide)}" for entry in entries)
            return f"\\begin{{{name}}}\n{items}\n\\end{{{name}}}" if items else ""
        case TableBlock():
            return _table(block, decimal, wide)


def _table(table: TableBlock, decimal: str, wide: bool) -> str:
    def say(cell: tuple[Inline, ...]) -> str:
        return inline_latex(cell, decimal=decimal, wide=wide, displays=False)

    def row(cells: tuple[tuple[Inline, ...], ...]) -> str:
        # The empty group keeps TeX from reading a cell's first bracket or star as an argument of the row before.
        return "{}" + " & ".join(map(say, cells)) + r" \\"

    head = [row(table.header), r"\midrule"] if any(table.header) else []
    parts = [r"\begin{center}"]
    if table.caption:
        parts.append(rf"{say(table.caption)}\par\nopagebreak\smallskip")
    parts.append(rf"\begin{{tabular}}{{@{{}}{_layout(table)}@{{}}}}")
    parts += [r"\toprule", *head, *map(row, table.rows), r"\bottomrule", r"\end{tabular}"]
    if table.origin:
        parts.append(rf"\par\nopagebreak\smallskip{{\small {say(table.origin)}\par}}")
    parts.append(r"\end{center}")
    return "\n".join(parts)


def _layout(table: TableBlock) -> str:
    """Columns flush right for numbers, flush left for text, and wrapped where the table is wider than a page."""
    count = max([len(table.header), *(len(row) for row in table.rows), 1])
    columns = [[row[i] for row in (table.header, *table.rows) if i < len(row)] for i in range(count)]
    lengths = [max([len(inline_text(cell)) for cell in column], default=0) for column in columns]
    if sum(lengths) + 2 * count > _PAGE_COLUMNS:
        shares = [min(length, _PAGE_COLUMNS) ** 0.7 for length in lengths]
        return "".join(rf">{{\raggedright\arraybackslash}}p{{{_room(s, shares):.3f}\linewidth}}" for s in shares)
    bodies = [[inline_text(row[i]) for row in table.rows if i < len(row)] for i in range(count)]
    return "".join("r" if body and all(map(is_numeric, body)) else "l" for body in bodies)


def _room(share: float, shares: list[float]) -> float:
    return share / (sum(shares) or 1) * (1 - 0.03 * len(shares))
