"""Press: the decimal mark of the plan in running text, and symbols such as `Z_eff` in words of our own."""

from __future__ import annotations

import re

from authoring.working.nodes import Block, Emphasis, Inline, ListBlock, Math, Paragraph, Plain, Prose, Sym, TableBlock

_SYMBOL = re.compile(r"\b([A-Za-z])_([a-z]+)\b|\bn\*")
# A number with one point in it; dates such as 14.3.2026 and numbers of sections have more.
_NUMBER = re.compile(r"(?<![\d.,])(\d+)\.(\d+)(?!\.?\d)")


def with_decimal(text: str, decimal: str) -> str:
    """A text in which numbers have the decimal mark."""
    return text if decimal == "." else _NUMBER.sub(rf"\1{decimal}\2", text)


def symbols(text: str, decimal: str) -> tuple[Inline, ...]:
    """Words with `Z_eff` and `n*` set as formulas."""
    found: list[Inline] = []
    end = 0
    for match in _SYMBOL.finditer(text):
        found.append(Plain(with_decimal(text[end : match.start()], decimal)))
        found.append(Math(Sym(match[1], match[2]) if match[1] else Sym("n", sup="*")))
        end = match.end()
    return (*found, Plain(with_decimal(text[end:], decimal)))


def prose_with_decimal(prose: Prose, decimal: str) -> Prose:
    """Prose whose plain text has the decimal mark; formulas get it from their printers."""
    return prose if decimal == "." else tuple(_block(block, decimal) for block in prose)


def _block(block: Block, decimal: str) -> Block:
    match block:
        case Paragraph(children):
            return Paragraph(inlines_with_decimal(children, decimal))
        case ListBlock(entries, ordered):
            return ListBlock(tuple(prose_with_decimal(entry, decimal) for entry in entries), ordered)
        case TableBlock(header, rows, caption, origin):
            return TableBlock(
                tuple(inlines_with_decimal(cell, decimal) for cell in header),
                tuple(tuple(inlines_with_decimal(cell, decimal) for cell in row) for row in rows),
                inlines_with_decimal(caption, decimal),
                inlines_with_decimal(origin, decimal),
            )


def inlines_with_decimal(children: tuple[Inline, ...], decimal: str) -> tuple[Inline, ...]:
    """Running text in which numbers have the decimal mark."""
    return tuple(_inline(child, decimal) for child in children)


def _inline(child: Inline, decimal: str) -> Inline:
    match child:
        case Plain(text):
            return Plain(with_decimal(text, decimal))
        case Emphasis(inner, strong):
            return Emphasis(inlines_with_decimal(inner, decimal), strong)
        case Math():
            return child
