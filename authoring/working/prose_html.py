"""Working: prose as HTML with MathML; every piece of text is escaped, no markup of the author's passes through."""

from __future__ import annotations

from collections.abc import Iterable

from authoring.working.mathml import escape_xml, math_element
from authoring.working.nodes import Block, Emphasis, Inline, ListBlock, Math, Paragraph, Plain, Prose, TableBlock
from authoring.working.prose_text import inline_text, is_numeric


def prose_html(prose: Prose, *, decimal: str = ".") -> str:
    """The blocks as HTML elements, one after the other; well-formed as XML too."""
    return "\n".join(_block(block, decimal) for block in prose)


def inline_html(children: Iterable[Inline], *, decimal: str = ".") -> str:
    """Running text: text, `<em>`, `<strong>` and `<math>`."""
    parts: list[str] = []
    for child in children:
        match child:
            case Plain(text):
                parts.append(escape_xml(text))
            case Emphasis(inner, strong):
                tag = "strong" if strong else "em"
                parts.append(f"<{tag}>{inline_html(inner, decimal=decimal)}</{tag}>")
            case Math(node, display):
                parts.append(math_element(node, display, decimal=decimal))
    return "".join(parts)


def _block(block: Block, decimal: str) -> str:
    match block:
        case Paragraph(children):
            return f"<p>{inline_html(children, decimal=decimal)}</p>"
        case ListBlock(entries, ordered):
            tag = "ol" if ordered else "ul"
            items = "\n".join(f"<li>{_entry(entry, decimal)}</li>" for entry in entries)
            return f"<{tag}>\n{items}\n</{tag}>"
        case TableBlock():
            return _table(block, decimal)


def _entry(blocks: tuple[Block, ...], decimal: str) -> str:
    if len(blocks) == 1 and isinstance(blocks[0], Paragraph):
        return inline_html(blocks[0].children, decimal=decimal)
    return prose_html(blocks, decimal=decimal)


def _table(table: TableBlock, decimal: str) -> str:
    parts = ["<table>"]
    if table.caption:
        parts.append(f"<caption>{inline_html(table.caption, decimal=decimal)}</caption>")
    if any(table.header):
        cells = "".join(f'<th scope="col">{inline_html(cell, decimal=decimal)}</th>' for cell in table.header)
        parts.append(f"<thead><tr>{cells}</tr></thead>")
    parts.append("<tbody>")
    parts.extend(f"<tr>{''.join(_cell(cell, i, decimal) for i, cell in enumerate(row))}</tr>" for row in table.rows)
    parts.append("</tbody>")
    if table.origin:
        span = max([len(table.header), *(len(row) for row in table.rows), 1])
        origin = inline_html(table.origin, decimal=decimal)
        parts.append(f'<tfoot><tr><td class="origin" colspan="{span}">{origin}</td></tr></tfoot>')
    parts.append("</table>")
    return "\n".join(parts)


def _cell(cell: tuple[Inline, ...], column: int, decimal: str) -> str:
    """The first cell of a row names it, unless it is a number itself."""
    inside = inline_html(cell, decimal=decimal)
    number = is_numeric(inline_text(cell))
    if column == 0 and not number:
        return f'<th scope="row">{inside}</th>'
    return f'<td class="number">{inside}</td>' if number else f"<td>{inside}</td>"
