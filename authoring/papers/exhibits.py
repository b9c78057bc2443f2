"""Stage 3, solve: the tables and the chart that an item prints with its story."""

from __future__ import annotations

import re

from authoring.faults import ContentError
from authoring.shielding.quantity import Target, quantity
from authoring.shielding.solve import work
from authoring.specs.item import FigureFields, GivenTable
from authoring.specs.prose import read_prose
from authoring.tasks.read import chart_of
from authoring.tasks.setting import Setting, electron_named
from authoring.tasks.several import species_listed
from authoring.tasks.solved import Chart
from authoring.working.nodes import Inline, Math, Num, Paragraph, Plain, TableBlock

_NUMBER = re.compile(r"[-−]?[0-9]+(?:\.[0-9]+)?")


def table_of(table: GivenTable, setting: Setting) -> TableBlock:
    """A table of an item. Raises ContentError where a species lacks the quantity."""
    return _computed(table, setting) if table.quantity else _typed(table)


def inlines(text: str) -> tuple[Inline, ...]:
    """Item text of one paragraph as inlines. Raises ContentError, with the text as its word, for faults in it."""
    prose, faults = read_prose(text)
    if faults:
        raise ContentError(faults[0].message, text)
    children: tuple[Inline, ...] = ()
    for block in prose:
        if not isinstance(block, Paragraph):
            raise ContentError("a cell or caption is one paragraph", text)
        children += block.children
    return children


def _typed(table: GivenTable) -> TableBlock:
    return TableBlock(
        tuple(inlines(cell) for cell in table.header),
        tuple(tuple(_cell(cell) for cell in row) for row in table.rows),
        inlines(table.caption),
        inlines(table.source),
    )


def _cell(text: str) -> tuple[Inline, ...]:
    """A typed cell; a number is one, so that it prints with the plan's decimal mark."""
    if _NUMBER.fullmatch(text.strip()):
        return (Math(Num(text.strip().replace("-", "−"))),)
    return inlines(text)


def _computed(table: GivenTable, setting: Setting) -> TableBlock:
    what = quantity(table.quantity or "")
    electron = electron_named(table.electron, setting) if table.electron else None
    rows = []
    for species in species_listed(table.of, setting):
        line = work(Target(what.name, species, electron), setting.practice)[-1].line
        rows.append(((Math(species.node()),), (Math(Num(line.shown)),)))
    if not rows:
        raise ContentError("this table has no rows; say which species under `of`")
    head = f"{what.name} / {what.unit}" if what.unit else what.name
    return TableBlock(
        ((Plain("species"),), (Plain(head),)),
        tuple(rows),
        inlines(table.caption),
        (Plain(table.source or what.source),),
    )


def chart_shown(figure: FigureFields, setting: Setting) -> Chart:
    """The chart of an item. Raises ContentError where a species lacks the quantity."""
    if figure.electrons:
        if len(figure.of) != 1:
            raise ContentError("a chart of electrons is of one species: name one under `of`")
        return chart_of(figure.chart, figure.electrons, setting, of=figure.of[0], style=figure.style)
    return chart_of(figure.chart, figure.of, setting, electron=figure.electron, style=figure.style)
