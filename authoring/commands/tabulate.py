"""`tabulate`: quantities over species (and their electrons), as text, CSV or JSON."""

from __future__ import annotations

import click

from authoring.atoms.species import parse_range
from authoring.commands.common import convention_option, json_option, practice_under, print_json
from authoring.faults import UsageError
from authoring.shielding.tables import Row, rows_of


@click.command("tabulate")
@click.argument("quantities", nargs=-1, required=True)
@click.option("--species", required=True, help="Species and ranges: H-Kr, 1-118, 'Na+,Mg2+'.")
@click.option("--electrons", default="all", help="all, outermost, or subshells: '3d,4s'.")
@click.option("--csv", "as_csv", is_flag=True, help="Print CSV.")
@convention_option
@json_option
def command(
    quantities: tuple[str, ...],
    species: str,
    electrons: str,
    as_csv: bool,
    conventions: tuple[str, ...],
    as_json: bool,
) -> None:
    """Tabulate QUANTITIES over species, one row for each electron where they are quantities of an electron.

    \b
    shieldwright tabulate "effective nuclear charge" --species H-Kr --electrons outermost
    """
    if as_csv and as_json:
        raise UsageError("say --csv or --json, not both")
    head, rows, left_out = rows_of(quantities, parse_range(species), electrons, practice_under(conventions))
    if as_json:
        print_json([dict(zip(head, row, strict=True)) for row in rows])
    elif as_csv:
        click.echo(csv_text(head, rows), nl=False)
    else:
        click.echo(aligned(head, rows))
    for words in left_out[:10]:
        click.echo(f"left out: {words}", err=True)
    if len(left_out) > 10:
        click.echo(f"left out: {len(left_out) - 10} more", err=True)


def csv_text(head: tuple[str, ...], rows: list[Row]) -> str:
    """CSV with a header; our cells hold no commas, quotes or line breaks, unless a quantity is text."""
    import csv
    import io

    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(head)
    writer.writerows(rows)
    return out.getvalue()


def aligned(head: tuple[str, ...], rows: list[Row]) -> str:
    """Columns with two spaces between them, the quantities at the right."""
    table = [head, *[tuple(str(cell) for cell in row) for row in rows]]
    widths = [max(len(row[at]) for row in table) for at in range(len(head))]
    left = {"species", "electron"}
    return "\n".join(
        "  ".join(
            cell.ljust(width) if name in left else cell.rjust(width)
            for cell, width, name in zip(row, widths, head, strict=True)
        ).rstrip()
        for row in table
    )
