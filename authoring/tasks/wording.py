"""How targets are spoken of in item Markdown: `a \\`4s\\` electron of vanadium`."""

from __future__ import annotations

from collections.abc import Mapping

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.shielding.quantity import Target, quantity
from authoring.shielding.solve import Step
from authoring.tasks.fields import PartFields


def species_words(species: Species) -> str:
    """`vanadium`, `` `V2+` ``, `` `Cr` in the configuration `[Ar] 3d4 4s2` ``."""
    if species.stated is not None:
        return f"`{species.label}` in the configuration `{species.stated.short()}`"
    return species.name if species.charge == 0 and species.mass is None else f"`{species.label}`"


def electron_words(electron: Subshell | None) -> str:
    """`a `4s` electron`, or `an outermost electron`."""
    return "an outermost electron" if electron is None else f"a `{electron.label}` electron"


def asked(template: str, target: Target, extra: Mapping[str, str] | None = None) -> str:
    """A wording with its braces filled from the target (and its details)."""
    words = {
        "species": species_words(target.species),
        "electron": electron_words(target.electron),
        **dict(quantity(target.quantity).defaults),
        **dict(target.detail),
        **(extra or {}),
    }
    for name, text in words.items():
        template = template.replace("{" + name + "}", text)
    return template


def worded(part: PartFields, turn: int, wording: str) -> str:
    """The part's own wording, one of several by the place of the paper in the set, or else the default."""
    return part.ask[turn % len(part.ask)] if part.ask else wording


def measure_words(target: Target) -> str:
    """A quantity as it stands in a sentence: `ionization energy (stage 2)`, `number of unpaired electrons`."""
    name = quantity(target.quantity).name
    if name.endswith(" electrons"):
        name = f"number of {name}"
    # The unit and the form of an answer show in the answer.
    details = ", ".join(f"{key} {text}" for key, text in target.detail if key not in ("unit", "form"))
    return f"{name} ({details})" if details else name


def noun(target: Target) -> str:
    """`the effective nuclear charge for a `4s` electron of vanadium`."""
    what = quantity(target.quantity)
    where = f"of {species_words(target.species)}"
    if "electron" in what.takes:
        where = f"for {electron_words(target.electron)} {where}"
    return f"the {measure_words(target)} {where}"


def space_for(steps: tuple[Step, ...]) -> int:
    """Ruled lines that the working takes by hand: one a line, more for long arithmetic, and one to breathe."""
    return 1 + sum(1 + len(step.line.chain.rest) // 4 for step in steps)
