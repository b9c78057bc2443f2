"""The SCF charge: Z − σ with the screening constants of Clementi and Raimondi, where the table can be trusted."""

from __future__ import annotations

from decimal import Decimal
from typing import Literal

from authoring.atoms.reference import SOURCES, screening_constants
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.details import data
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.effective_charge import Z
from authoring.shielding.quantity import PointRule, Quantity, Target, Value
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Num, Sym, difference
from authoring.working.numbers import Rounding, shown

_SIGMA = Sym("σ")


def trust(z: int, electron: Subshell) -> tuple[Literal["", "remark", "refused"], str]:
    """What is held against an entry of the table: nothing, a remark, or enough to refuse it; and the reason."""
    for rule in data("scf_trust")["rules"]:
        if z in rule["z"] and electron.label in rule.get("subshells", (electron.label,)):
            return rule["verdict"], rule["reason"]
    return "", ""


def _electron(target: Target) -> Subshell:
    return target.electron or target.species.measured.outermost


def sigma(target: Target) -> Decimal:
    """The tabulated screening constant. Raises ContentError where there is none, or it cannot be trusted."""
    species, electron = target.species, _electron(target)
    if species.charge or species.stated is not None:
        raise ContentError(f"the SCF charges are tabulated for ground-state atoms only, not for {species.label}")
    verdict, reason = trust(species.z, electron)
    if verdict == "refused":
        raise ContentError(f"no SCF charge for {species.label} {electron.label}: {reason}")
    table = screening_constants()
    found = table.get((species.z, electron.n, electron.l))
    if found is None:
        known = [Subshell(*key[1:]).label for key in table if key[0] == species.z]
        what = f"no {electron.label} value" if known else "no values; the table ends at Z = 86"
        raise ContentError(f"the SCF table has for {species.label} {what}", electron.label if known else "", known)
    return found


def _line(target: Target, practice: Practice, inputs: tuple[Value, ...], value: Value, rounding: Rounding) -> Line:
    numbers = difference(Num(str(target.species.z)), Num(shown(sigma(target))))
    final = rounding.apply(value)
    chain = Chain(
        QUANTITY.symbol,
        (("=", difference(Z, _SIGMA)), ("=", numbers), ("=" if final == value else "≈", Num(shown(final)))),
    )
    _, reason = trust(target.species.z, _electron(target))
    return Line(QUANTITY.name, target.about, chain, value, shown(final), rounded=final != value, note=reason)


QUANTITY = Quantity(
    name="SCF charge",
    symbol=Sym("Z", sub="SCF"),
    unit="",
    source=SOURCES["screening_constants"],
    needs=lambda target, practice: (),
    value=lambda target, practice, inputs: target.species.z - sigma(target),
    line=_line,
    points=(PointRule("B", "the charge from the tabulated screening constant", "value", 80),),
    ask="Use the tabulated screening constant to state the SCF effective charge felt by {electron} of {species}.",
    rounding=Rounding(places=4),
    takes=frozenset({"electron"}),
    aliases=("Clementi-Raimondi charge", "self-consistent charge"),
    says="the charge that self-consistent field calculations give",
)
