"""A practice: one way of carrying out the method, every rule, coefficient and habit as a field.

The defaults are the published practice: J. C. Slater, Phys. Rev. 36, 57 (1930). A course's convention and a
misunderstanding are the same thing to the engine: a practice with some fields changed (`changed`).
Each field's metadata holds the words by which plans, slips and the guide know it.
"""
# ruff: noqa: RUF009 - `_coefficient`, `_habit` and `_switch` are `field` with metadata

from __future__ import annotations

import dataclasses
import functools
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal, InvalidOperation
from typing import Any

from authoring.atoms.constants import constant
from authoring.faults import ContentError

# n* for n = 1 … 6; the paper gives none beyond.
N_STAR = ("1", "2", "3", "3.7", "4.0", "4.2")


def _coefficient(default: str, words: str, says: str) -> Any:
    return field(default=Decimal(default), metadata={"words": words, "says": says})


def _habit(default: str, choices: tuple[str, ...], words: str, says: str) -> Any:
    return field(default=default, metadata={"words": words, "says": says, "choices": choices})


def _switch(words: str, says: str) -> Any:
    return field(default=False, metadata={"words": words, "says": says})


@dataclass(frozen=True, slots=True)
class Practice:
    """One way of carrying out the method. Coefficients are dimensionless, per electron."""

    # which electrons there are
    neutral: str = _habit(
        "measured", ("measured", "regular filling", "shell by shell"), "neutral configuration",
        "configuration of a neutral atom: as measured, by the n + l filling order, or shell by shell",
    )
    ion: str = _habit(
        "measured", ("measured", "taught rule", "inner d first", "as the neutral atom", "charge reversed"),
        "ion configuration", "configuration of an ion: as measured, or derived from the neutral atom's",
    )
    # which charge the nucleus has
    protons: str = _habit(
        "atomic number", ("atomic number", "electron count", "mass number"), "nuclear charge",
        "the number taken as Z",
    )
    # who is in whose group
    sp_split: str = _habit(
        "together", ("together", "partner ignored", "s inside p"), "s and p",
        "s and p of one shell: one group, or split",
    )
    d_with_sp: bool = _switch("d with s,p", "nd electrons are put into the group of ns and np")
    next_s_inside_d: bool = _switch("next s inside d", "(n+1)s counts as inside nd, since it was filled first")
    d_outside_next_s: bool = _switch("d outside next s", "nd counts as outside (n+1)s, so it does not screen it")
    f_inside_d: bool = _switch("f inside d", "nf counts as inside nd")
    # how much each counts
    same_group: Decimal = _coefficient("0.35", "same group", "each other electron of the same group")
    same_group_1s: Decimal = _coefficient("0.30", "1s pair", "the other electron of 1s")
    one_in: Decimal = _coefficient("0.85", "one shell in", "for s,p: each s,p electron one shell in")
    one_in_beside_d: Decimal = _coefficient(
        "0.85", "one shell in beside d", "for s,p: each s,p electron one shell in, where that shell also holds d or f"
    )
    one_in_d: Decimal = _coefficient("0.85", "d one shell in", "for s,p: each d or f electron one shell in")
    deeper: Decimal = _coefficient("1.00", "deeper", "for s,p: each electron two or more shells in")
    inside_d: Decimal = _coefficient("1.00", "inside d or f", "for d,f: each electron of a deeper shell")
    inside_d_same_shell: Decimal = _coefficient(
        "1.00", "same shell inside d or f", "for d,f: each electron of the same shell with smaller l"
    )
    d_one_in: Decimal = _coefficient("1.00", "one shell in from d or f", "for d,f: each electron one shell in")
    outside: Decimal = _coefficient("0.00", "outside", "each electron of a group further out")
    self_counted: bool = _switch("self counted", "the electron itself is counted in its group")
    # what is made of S
    charge_added: bool = _switch("charge added", "the ionic charge is added to Z_eff")
    reported: str = _habit(
        "Z minus S", ("Z minus S", "S"), "reported charge", "what is reported as the effective nuclear charge"
    )
    # energies
    rydberg: Decimal = field(
        default_factory=lambda: constant("rydberg_energy").value,
        metadata={"words": "Rydberg energy", "says": "the Rydberg energy, eV"},
    )
    n_star: tuple[Decimal, ...] = field(
        default=tuple(Decimal(text) for text in N_STAR),
        metadata={"words": "n*", "says": "effective quantum numbers for n = 1, 2, 3 …"},
    )
    quantum_number: str = _habit("n*", ("n*", "n"), "quantum number", "what divides Z_eff in the energy")
    energy_form: str = _habit(
        "squared", ("squared", "not squared", "charge squared"), "energy form", "what is squared in the energy"
    )
    energy_charge: str = _habit("Z_eff", ("Z_eff", "Z"), "energy charge", "the charge that enters the energy")
    relaxation: str = _habit(
        "others change", ("others change", "one electron only"), "ionization",
        "ionization energy: difference of total energies, or one electron's energy",
    )
    ionised: str = _habit(
        "taught rule", ("taught rule", "measured"), "ion in an ionization energy",
        "the ion's configuration in an ionization energy: one electron fewer by the taught rule, or as measured "
        "(V+, Co+, Ni+ … also move another electron); only where the ion configuration is the published one",
    )
    core: str = _habit(
        "inner shells", ("inner shells", "noble gas"), "core",
        "the core of the valence count: every shell below the outermost, or the noble-gas core",
    )
    # sizes and electronegativity
    radius_form: str = _habit("squared", ("squared", "not squared"), "radius form", "n* squared or not in n*²a₀/Z_eff")
    negativity_charge: str = _habit(
        "self counted", ("self counted", "Z_eff"), "Allred-Rochow charge", "whether the electron itself is counted"
    )
    negativity_radius: str = _habit("squared", ("squared", "not squared"), "Allred-Rochow radius", "r squared or not")
    negativity_offset: Decimal = _coefficient("0.744", "Allred-Rochow offset", "the constant added")
    # X-ray lines
    moseley_screening: Decimal = _coefficient("1", "Moseley screening", "what is subtracted from Z for Kα")
    moseley_factor: str = _habit(
        "1 − 1/4", ("1 − 1/4", "1", "1 − 1/2"), "Moseley factor", "the term difference of Kα"
    )

    def changed(self, changes: Mapping[str, object]) -> Practice:
        """This practice with fields set by name; texts are read by the field's type.

        Raises ContentError for an unknown field or a value the field cannot take.
        """
        known = {item.name: item for item in dataclasses.fields(self)}
        values = {}
        for name, value in changes.items():
            if name not in known:
                raise ContentError(f"a practice has no field {name!r}", name, known)
            values[name] = read_field(known[name], value)
        return dataclasses.replace(self, **values)  # type: ignore[arg-type]

    def effective_number(self, n: int) -> Decimal:
        """n* of a shell. Raises ContentError for a shell that the practice gives none for."""
        if 1 <= n <= len(self.n_star):
            return self.n_star[n - 1]
        raise ContentError(
            f"no effective quantum number n* is published for n = {n} (Slater's table ends at n = 6); "
            f"give one in the plan under conventions: `n* for {n}: …`"
        )


def read_field(item: dataclasses.Field[Any], value: object) -> object:
    """A convention's or slip's value in the type of its practice field."""
    kind = str(item.type)
    words = item.metadata["words"]
    if kind == "Decimal":
        return read_decimal(value, words)
    if kind == "bool":
        if value in (True, "yes", "true"):
            return True
        if value in (False, "no", "false"):
            return False
        raise ContentError(f"{words}: yes or no, not {value!r}", str(value), ("yes", "no"))
    if kind == "str":
        choices = item.metadata["choices"]
        if value not in choices:
            raise ContentError(f"{words}: {value!r} is not a choice", str(value), choices)
        return value
    texts = value.split() if isinstance(value, str) else value
    if not isinstance(texts, (list, tuple)) or not texts:
        raise ContentError(f"{words}: a list of numbers is needed")
    return tuple(read_decimal(text, words) for text in texts)


def read_decimal(value: object, words: str) -> Decimal:
    """A number as a person writes it, of ordinary size. Raises ContentError otherwise, naming `words`."""
    text = str(value).strip()
    try:
        number = Decimal(text)
    except InvalidOperation:
        number = Decimal("NaN")
    if not number.is_finite() or len(text) > 20 or abs(number.adjusted()) > 6:
        raise ContentError(f"{words}: {text[:40]!r} is not a number this field can take")
    return number


@functools.cache
def published() -> Practice:
    """The published practice (Slater 1930), built once."""
    return Practice()


@functools.cache
def convention_fields() -> dict[str, dataclasses.Field[Any]]:
    """The practice's fields by the words that plans and the guide use."""
    return {item.metadata["words"]: item for item in dataclasses.fields(Practice)}


def with_conventions(practice: Practice, conventions: Mapping[str, str]) -> Practice:
    """A practice under a plan's conventions (words → value). `n* for 7: 4.3` extends the table of n*.

    Raises ContentError for unknown words or values.
    """
    for words, value in conventions.items():
        practice = with_convention(practice, words, value)
    return practice


def with_convention(practice: Practice, words: str, value: str) -> Practice:
    """A practice with one convention, by its words."""
    if words.startswith("n* for "):
        return _extended(practice, words.removeprefix("n* for "), value)
    return practice.changed(convention_changes(words, value))


def convention_changes(words: str, value: object) -> dict[str, object]:
    """The practice fields that a convention sets, by its words. Raises ContentError for unknown words."""
    fields = convention_fields()
    if words not in fields:
        raise ContentError(f"no convention {words!r}", words, [*fields, "n* for 7"])
    if words == "one shell in":
        # A course that changes the coefficient means all electrons of that shell, as the rule says.
        return dict.fromkeys(("one_in", "one_in_beside_d", "one_in_d"), value)
    return {fields[words].name: value}


def _extended(practice: Practice, shell: str, value: str) -> Practice:
    n = int(shell) if shell.isascii() and shell.isdigit() and len(shell) == 1 else 0
    if not 1 <= n <= len(practice.n_star) + 1:
        known = len(practice.n_star)
        raise ContentError(f"n* for {shell[:20]!r}: the table has n = 1 to {known}; the next may be added")
    table = list(practice.n_star)
    number = read_decimal(value, f"n* for {n}")
    if number <= 0:
        raise ContentError(f"n* for {n}: a positive number is needed")
    table[n - 1 : n] = [number]
    return dataclasses.replace(practice, n_star=tuple(table))
