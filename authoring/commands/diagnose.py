"""`diagnose`: which misunderstanding gives a value."""

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
from authoring.faults import UsageError
from authoring.marking.written import read_line
from authoring.papers.record import ascii_text
from authoring.shielding.quantity import Target, quantity
from authoring.shielding.solve import check_details, evaluate
from authoring.slips.arithmetic import plain_arithmetic
from authoring.slips.diagnose import explain, fits
from authoring.tasks.setting import must_have
from authoring.working.numbers import shown


@click.command("diagnose", context_settings={"ignore_unknown_options": True})
@click.argument("species")
@click.argument("electron")
@click.argument("value")
@click.option("--quantity", "name", default=None, help="The quantity; default: S or Z_eff, whichever is explained.")
@click.option("--with", "details", multiple=True, metavar="NAME=VALUE", help="What else the quantity takes.")
@convention_option
@json_option
def command(
    species: str,
    electron: str,
    value: str,
    name: str | None,
    details: tuple[str, ...],
    conventions: tuple[str, ...],
    as_json: bool,
) -> None:
    """Explain VALUE, as a candidate gave it for ELECTRON of SPECIES: every slip and pair of slips that leads to it.

    \b
    shieldwright diagnose V 4s 16.35
    """
    number = read_line(value).value
    if number is None:
        raise UsageError(f"{value[:40]!r} is not a number")
    practice = practice_under(conventions)
    names = [name] if name else ["screening constant", "effective nuclear charge"]
    found: list[tuple[str, str, str, tuple[str, ...], str]] = []
    for each in names:
        what = quantity(each)
        target = Target(
            what.name,
            Species.parse(species),
            electron_word(electron) if "electron" in what.takes else None,
            details_from(details),
        )
        check_details(target)
        must_have(target, practice)
        right = evaluate(target, practice)
        if fits(right, number, target):
            found.append((what.name, "right", shown(right), (), "the right value"))
        for one in explain(target, number, practice=practice):
            names_of = tuple(slip.name for slip in one.slips)
            found.append((what.name, "slip", one.shown, names_of, one.words))
        for other in plain_arithmetic(target, number, practice):
            found.append((what.name, "arithmetic", shown(number), (), other.words))
    found.sort(key=lambda row: ({"right": 0, "slip": 1, "arithmetic": 2}[row[1]], len(row[3])))
    _print(found, as_json)


def _print(found: list[tuple[str, str, str, tuple[str, ...], str]], as_json: bool) -> None:
    if as_json:
        print_json(
            [
                {"quantity": name, "slips": list(slips), "answer": ascii_text(answer), "explanation": words}
                for name, _, answer, slips, words in found
            ]
        )
        return
    if not found:
        click.echo("no slip, pair of slips or plain arithmetic explains this value; a person decides")
    for name, kind, answer, slips, words in found:
        title = " + ".join(slips) or kind
        click.echo(f"{title}  ({name} {answer})\n    {words}")
