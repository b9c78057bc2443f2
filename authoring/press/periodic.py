"""Press: the periodic table for a data page, drawn from the reference data; black on white, one page wide."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal
from functools import cache

from authoring.atoms.reference import elements
from authoring.press.tex import Engine
from authoring.working.mathml import escape_xml
from authoring.working.numbers import shown, to_figures

CAPTION = "Periodic table of the elements"
NOTE = "Relative atomic masses to four significant figures; a mass number in brackets where no standard value exists."
GROUPS = 18
_PERIODS = 7
_F_ROWS = {6: 9, 7: 10}  # the row, below the main table, of each period's f block
_F_COLUMN = 4  # where its first element stands, so that both blocks keep the order of the groups
_FIGURES = 4
# Elements without a characteristic terrestrial isotopic composition have no standard atomic weight (IUPAC, Commission
# on Isotopic Abundances and Atomic Weights; from memory): Tc, Pm, Po to Ac, and Np onwards.
_NO_STANDARD_WEIGHT = frozenset({43, 61, *range(84, 90), *range(93, 119)})


@dataclass(frozen=True, slots=True)
class Cell:
    """One element in the table: rows 1 to 7 are periods, 9 and 10 the f block; columns 1 to 18."""

    z: int
    symbol: str
    name: str
    weight: str
    row: int
    column: int


@cache
def cells() -> tuple[Cell, ...]:
    """All elements at their places, in the order of the atomic number."""
    placed: list[Cell] = []
    behind: dict[int, int] = {}
    for z, element in sorted(elements().by_z.items()):
        if element.group is None:
            behind[element.period] = behind.get(element.period, 0) + 1
            row, column = _F_ROWS[element.period], _F_COLUMN + behind[element.period] - 1
        else:
            row, column = element.period, element.group
        placed.append(Cell(z, element.symbol, element.name, weight_text(z, element.weight), row, column))
    return tuple(placed)


def weight_text(z: int, weight: Decimal) -> str:
    """A relative atomic mass with four figures at most; the mass number in brackets where there is no standard one."""
    if z in _NO_STANDARD_WEIGHT:
        return f"[{weight.to_integral_value()}]"
    return shown(to_figures(weight, _FIGURES) if len(weight.as_tuple().digits) > _FIGURES else weight)


def periodic_latex(*, decimal: str = ".") -> str:
    """A picture as wide as the text, for either engine; needs no package and scales with the paper."""
    lines = [r"\begingroup\setlength{\unitlength}{0.0533\textwidth}\linethickness{0.3pt}\setlength{\fboxsep}{0pt}%"]
    lines.append(r"\begin{picture}(18.75,13.8)(-0.7,1.3)")
    lines += [_put(column - 0.5, 14.63, 0.42, str(column)) for column in range(1, GROUPS + 1)]
    lines += [_put(-0.4, _base(period) + 0.55, 0.42, str(period)) for period in range(1, _PERIODS + 1)]
    for cell in cells():
        lines += _cell_latex(cell.column - 1, _base(cell.row), cell, decimal)
    for period, row in _F_ROWS.items():
        first = next(cell for cell in cells() if cell.row == row)
        before = cells()[first.z - 2]
        lines.append(_put(1.6, _base(row) + 0.55, 0.36, f"{period}: after {before.symbol}"))
    lines += _legend(decimal)
    lines.append(r"\end{picture}\endgroup")
    return "\n".join(lines)


def periodic_definition(engine: Engine, *, decimal: str = ".") -> str:
    r"""Defines `\periodictable`: the picture set once and only referred to on every page that shows it.

    To stand between `\begin{document}` and the first page; a class of a thousand papers then grows by one table.
    """
    save, use, last = {
        "pdflatex": (r"\immediate\pdfxform", r"\pdfrefxform", r"\pdflastxform"),
        "lualatex": (r"\immediate\saveboxresource", r"\useboxresource", r"\lastsavedboxresourceindex"),
    }[engine]
    return (
        f"\\setbox0\\hbox{{{periodic_latex(decimal=decimal)}}}%\n"
        f"{save} 0 \\edef\\periodictable{{\\noexpand\\leavevmode\\noexpand{use} \\the{last}\\space}}%\n"
    )


def periodic_html(*, decimal: str = ".") -> str:
    """A table with groups and periods as its heads; empty places are joined."""
    heads = "".join(f'<th scope="col">{group}</th>' for group in range(1, GROUPS + 1))
    parts = [f'<table class="periodic">\n<caption>{CAPTION}. {NOTE}</caption>']
    parts.append(f'<thead><tr><th scope="col">Period</th>{heads}</tr></thead>\n<tbody>')
    parts += [_row_html(period, period, decimal) for period in range(1, _PERIODS + 1)]
    parts.append('</tbody>\n<tbody class="f-block">')
    parts += [_row_html(row, period, decimal) for period, row in _F_ROWS.items()]
    parts.append("</tbody>\n</table>")
    return "\n".join(parts)


def _row_html(row: int, period: int, decimal: str) -> str:
    parts: list[str] = []
    column = 1
    for cell in (one for one in cells() if one.row == row):
        parts += _gap(cell.column - column)
        parts.append(
            f'<td title="{escape_xml(cell.name)}"><small>{cell.z}</small><br/><b>{escape_xml(cell.symbol)}</b><br/>'
            f"<small>{escape_xml(cell.weight.replace('.', decimal))}</small></td>"
        )
        column = cell.column + 1
    parts += _gap(GROUPS + 1 - column)
    return f'<tr><th scope="row">{period}</th>{"".join(parts)}</tr>'


def _gap(columns: int) -> list[str]:
    return [f'<td class="gap" colspan="{columns}"></td>'] if columns > 0 else []


def _base(row: int) -> float:
    """The lower edge of a row, in widths of a cell; the f block is set off by less than a row."""
    height = 1.4
    return 14.5 - height * row + (0.9 if row > _PERIODS else 0)


def _cell_latex(x: float, y: float, cell: Cell, decimal: str) -> list[str]:
    return [
        rf"\put({x:g},{y:.2f}){{\framebox(1,1.4){{}}}}",
        _put(x + 0.5, y + 1.1, 0.3, str(cell.z)),
        _put(x + 0.5, y + 0.54, 0.48, rf"\textbf{{{cell.symbol}}}"),
        _put(x + 0.5, y + 0.13, 0.3, cell.weight.replace(".", decimal)),
    ]


def _legend(decimal: str) -> list[str]:
    """One cell explained, in the empty place above the d block."""
    x, y = 4.0, 11.2
    lines = _cell_latex(x, y, cells()[25], decimal)
    for height, text in ((1.1, "atomic number"), (0.58, "symbol"), (0.13, "relative atomic mass")):
        lines.append(_put(x + 1.2, y + height, 0.36, text, "l"))
    return lines


def _put(x: float, y: float, size: float, text: str, align: str = "") -> str:
    """Text standing on a point, centred (or beginning there); `size` in widths of a cell."""
    return (
        rf"\put({x:g},{y:.2f}){{\makebox(0,0)[{align}b]{{\fontsize{{{size:g}\unitlength}}{{0pt}}\selectfont"
        rf"\smash{{{text}}}}}}}"
    )
