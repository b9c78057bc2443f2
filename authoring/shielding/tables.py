"""Tables of quantities over species: values only, no lines of working, so that the whole table takes a moment."""

from __future__ import annotations

from collections.abc import Sequence
from decimal import Decimal

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantity import Quantity, Target, Value, quantity
from authoring.shielding.solve import evaluate_into, work

Row = tuple[int | str, ...]


def rows_of(
    names: Sequence[str], species: Sequence[Species], electrons: str, practice: Practice
) -> tuple[tuple[str, ...], list[Row], list[str]]:
    """Header (`Z, species, charge, electron`, then the quantities), rows, and what was left out and why.

    `electrons`: `all`, `outermost` or labels; the column is left out where no quantity is of an electron.
    """
    asked = [quantity(name) for name in dict.fromkeys(names)]
    of_electrons = any("electron" in what.takes for what in asked)
    wanted = None if electrons in ("all", "outermost") else [Subshell.parse(word) for word in electrons.split(",")]
    head = ("Z", "species", "charge", *(("electron",) if of_electrons else ()), *(what.name for what in asked))
    rows: list[Row] = []
    left_out: list[str] = []
    for each in species:
        known: dict[Target, Value] = {}
        try:
            chosen = _electrons(each, electrons, wanted, practice) if of_electrons else (None,)
            for electron in chosen:
                cells = [_cell(what, each, electron, practice, known) for what in asked]
                place: Row = (electron.label,) if electron is not None else ()
                rows.append((each.z, each.symbol, each.charge, *place, *cells))
        except ContentError as error:
            left_out.append(f"{each.label}: {error.message}")
    return head, rows, left_out


def _electrons(
    species: Species, electrons: str, wanted: list[Subshell] | None, practice: Practice
) -> tuple[Subshell, ...]:
    configuration = configuration_of(species, practice)
    if electrons == "outermost":
        return (configuration.outermost,)
    return tuple(each for each in configuration.occupied if wanted is None or each in wanted)


def _cell(
    what: Quantity, species: Species, electron: Subshell | None, practice: Practice, known: dict[Target, Value]
) -> str:
    target = Target(what.name, species, electron if "electron" in what.takes else None)
    value = evaluate_into(known, target, practice)
    if isinstance(value, Decimal):
        return format(what.rounding.apply(value), "f")
    return work(target, practice)[-1].line.shown
