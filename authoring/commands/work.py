"""`work`: the full working of one quantity at the terminal."""

from __future__ import annotations

import click

from authoring.atoms.species import Species
from authoring.commands.common import (
    convention_option,
    details_from,
    electron_word,
    json_option,
    practice_under,
    print_json,
)
from authoring.faults import ContentError
from authoring.papers.record import ascii_text
from authoring.press.plain import working_text
from authoring.shielding.quantity import Quantity, Target, quantity
from authoring.shielding.solve import Step, check_details, work
from authoring.tasks.apart import told_apart
from authoring.tasks.points import pointed
from authoring.tasks.setting import must_have
from authoring.working.lines import Point
from authoring.working.numbers import Rounding
from authoring.working.text import to_text


@click.command("work")
@click.argument("species")
@click.argument("electron", required=False)
@click.option("--quantity", "name", default=None, help="The quantity; default: the effective nuclear charge.")
@click.option("--with", "details", multiple=True, metavar="NAME=VALUE", help="What else the quantity takes.")
@click.option("--figures", type=click.IntRange(1, 12), help="Significant figures of the answer.")
@convention_option
@json_option
def command(
    species: str,
    electron: str | None,
    name: str | None,
    details: tuple[str, ...],
    figures: int | None,
    conventions: tuple[str, ...],
    as_json: bool,
) -> None:
    """Work out a quantity of SPECIES (and ELECTRON), with every step.

    \b
    shieldwright work V 4s
    shieldwright work Fe2+ 3d --quantity "orbital energy"
    """
    what = quantity(name or "effective nuclear charge")
    if electron is not None and "electron" not in what.takes:
        raise ContentError(f"{what.name} is not a quantity of an electron; leave {electron!r} out")
    target = Target(what.name, Species.parse(species), electron_word(electron), details_from(details))
    practice = practice_under(conventions)
    check_details(target)
    must_have(target, practice)
    steps = work(target, practice, rounding=Rounding(figures=figures) if figures else None)
    points = pointed(steps, None)
    if as_json:
        print_json(working_data(target, what, steps, points))
    else:
        click.echo(working_text(told_apart(steps), points))


def working_data(target: Target, what: Quantity, steps: tuple[Step, ...], points: tuple[Point, ...]) -> object:
    """`{species, electron, quantity, answer, unit, lines}`."""
    last = steps[-1].line
    return {
        "species": target.species.label,
        "electron": target.electron.label if target.electron else None,
        "quantity": what.name,
        "answer": ascii_text(last.shown),
        "unit": last.unit,
        "lines": [
            {
                "quantity": step.line.quantity,
                "statement": to_text(step.line.chain),
                "value": ascii_text(step.line.shown),
                "unit": step.line.unit,
                "point": " ".join(point.code for point in points if point.line == at),
            }
            for at, step in enumerate(steps)
        ],
    }
