"""Press: what the data page of a sheet says: constants, effective quantum numbers, the periodic table."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import Markup

from authoring.atoms.constants import constant
from authoring.press.language import Words
from authoring.press.medium import Medium
from authoring.shielding.quantities.orbital_energy import rydberg_node
from authoring.specs.plan import Plan
from authoring.working.nodes import Chain, Measured, Num, Sym
from authoring.working.numbers import shown, to_figures

_FIGURES = 5  # of the Bohr radius and the conversion


@dataclass(frozen=True, slots=True)
class DataView:
    """The data page: (words, formula) of each constant, (n, n*) of each shell; empty where not attached."""

    constants: tuple[tuple[Markup, Markup], ...]
    numbers: tuple[tuple[Markup, Markup], ...]
    periodic: bool


def data_view(plan: Plan, medium: Medium, words: Words) -> DataView | None:
    """The data page that a plan attaches, or None."""
    if not plan.attach:
        return None
    wanted = "constants" in plan.attach
    return DataView(
        constants=_constants(plan, medium, words) if wanted else (),
        numbers=tuple(
            (medium.text(str(n)), medium.number(shown(number)))
            for n, number in enumerate(plan.practice.n_star, start=1)
        )
        if wanted
        else (),
        periodic="periodic table" in plan.attach,
    )


def _constants(plan: Plan, medium: Medium, words: Words) -> tuple[tuple[Markup, Markup], ...]:
    def value(name: str, unit: str) -> Measured:
        return Measured(Num(shown(to_figures(constant(name).value, _FIGURES))), unit)

    return (
        (words("rydberg"), medium.node(Chain(Sym("R"), (("=", rydberg_node(plan.practice)),)))),
        (words("bohr"), medium.node(Chain(Sym("a", "0"), (("=", value("bohr_radius", "pm")),)))),
        (
            words("per_mole"),
            medium.node(
                Chain(Measured(Num("1"), "eV"), (("=", value("kilojoules_per_mole_of_electronvolts", "kJ/mol")),))
            ),
        ),
    )
