"""The setting of a part: the variant's bindings, the practice, and what the parts before it worked out."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal

from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantity import Quantity, Target, Value, quantities, quantity
from authoring.shielding.solve import Step
from authoring.slips.catalogue import Slips, shipped
from authoring.tasks.fields import TargetFields
from authoring.tasks.solved import Solved
from authoring.working.numbers import Rounding


@dataclass(frozen=True, slots=True)
class Setting:
    """What a task knows besides its own fields.

    `bindings`: drawn variables by name. `earlier`: the parts before this one, solved. `turn` is the place of the
    paper in the set (0, 1, …): what is balanced over papers turns with it. `figures` is the plan's choice of
    significant figures, or None. `pools`: what each variable was drawn from. `new`: the part is written now and not
    made again from a record, so that what older records may hold is refused.
    """

    practice: Practice
    bindings: Mapping[str, object]
    earlier: tuple[Solved, ...] = ()
    turn: int = 0
    figures: int | None = None
    slips: Slips = field(default_factory=shipped)
    pools: Mapping[str, tuple[object, ...]] = field(default_factory=dict)
    new: bool = False

    @property
    def known(self) -> dict[Target, Value]:
        """The values that earlier parts have worked out: not worked again. Closing lines state no quantity."""
        steps = (step for part in self.earlier for step in part.steps)
        return {step.target: step.line.value for step in steps if step.target.quantity in quantities()}

    @property
    def had(self) -> tuple[Step, ...]:
        """The lines of the earlier parts."""
        return tuple(step for part in self.earlier for step in part.steps)


def species_named(word: str, setting: Setting) -> Species:
    """A drawn species by its variable, or a species by its label."""
    bound = setting.bindings.get(word)
    if isinstance(bound, Species):
        return bound
    if bound is not None:
        raise ContentError(f"{word!r} is not a species; it is {bound}")
    try:
        return Species.parse(word)
    except ContentError as error:
        drawn = [name for name, value in setting.bindings.items() if isinstance(value, Species)]
        raise ContentError(f"{word!r} is neither drawn nor a species", word, drawn or error.allowed) from error


def electron_named(word: str, setting: Setting) -> Subshell | None:
    """A drawn electron by its variable, a subshell by its label, or None for `outermost`."""
    if word == "outermost":
        return None
    bound = setting.bindings.get(word)
    if isinstance(bound, Subshell):
        return bound
    if bound is not None:
        raise ContentError(f"{word!r} is not an electron; it is {bound}")
    try:
        return Subshell.parse(word)
    except ContentError as error:
        drawn = [name for name, value in setting.bindings.items() if isinstance(value, Subshell)]
        allowed = [*drawn, "outermost"]
        raise ContentError(f"{word!r} is neither a drawn electron nor a subshell", word, allowed) from error


def text_named(word: str, setting: Setting) -> str:
    """The text of a drawn number or word, or the word itself."""
    bound = setting.bindings.get(word)
    if bound is None:
        return word
    if isinstance(bound, Species):
        return bound.label
    return format(bound, "f") if isinstance(bound, Decimal) else str(getattr(bound, "label", bound))


def target_of(name: str, part: TargetFields, setting: Setting) -> Target:
    """The target of a part; what it leaves out is taken from the part before.

    Raises ContentError where neither says, where a detail is not taken, or where the species lacks the electron.
    """
    what = quantity(name)
    before = next((each.targets[0] for each in reversed(setting.earlier) if each.targets), None)
    if part.of is None and before is None:
        raise ContentError(f"{what.name} needs a species: say `of: …`")
    species = species_named(part.of, setting) if part.of is not None else before.species  # type: ignore[union-attr]
    electron = None
    if "electron" in what.takes:
        if part.electron is not None:
            electron = electron_named(part.electron, setting)
        elif before is not None and before.species == species:
            electron = before.electron
    elif part.electron is not None:
        raise ContentError(f"{what.name} is not a quantity of an electron; leave `electron` out")
    target = Target(what.name, species, electron, details_of(what, part, setting))
    must_have(target, setting.practice)
    return target


def must_have(target: Target, practice: Practice) -> None:
    """Raise ContentError where the species has no electron in the subshell that the target names."""
    if target.electron is None:
        return
    configuration = configuration_of(target.species, practice)
    if not configuration.count(target.electron):
        raise ContentError(
            f"{target.species.label} has no {target.electron.label} electron ({configuration.short()})",
            target.electron.label,
            [each.label for each in configuration.occupied],
        )


def details_of(what: Quantity, part: TargetFields, setting: Setting) -> tuple[tuple[str, str], ...]:
    """The details of a target, sorted; drawn names are replaced by their text."""
    found = {name: text_named(word, setting) for name, word in part.details.items()}
    if part.unit is not None:
        if part.unit not in what.units:
            raise ContentError(f"{what.name} is not given in {part.unit!r}", part.unit, what.units or (what.unit,))
        if part.unit != what.unit:
            found["unit"] = part.unit
    for name in found:
        if name not in what.details:
            raise ContentError(f"{what.name} takes no {name!r}", name, what.details)
    return tuple(sorted(found.items()))


def rounding_of(what: Quantity, part: TargetFields, setting: Setting) -> Rounding:
    """How the answer is rounded: the part's word, else the plan's, else the quantity's own."""
    if part.figures is not None and part.places is not None:
        raise ContentError("give `figures` or `places`, not both")
    if part.places is not None:
        return Rounding(places=part.places)
    figures = part.figures or (setting.figures if what.rounding.figures else None)
    return Rounding(figures=figures) if figures else what.rounding


def rounding_said(name: str, part: TargetFields, setting: Setting) -> str:
    """How the part's quantity is rounded, for a wording. Raises ContentError where its answer is no number."""
    what = quantity(name)
    if not what.numeric:
        raise ContentError(f"{what.name} is not a number: leave {{{{ rounding }}}} out")
    return rounding_words(rounding_of(what, part, setting))


def rounding_words(rounding: Rounding) -> str:
    """`to 4 significant figures`, `to 2 decimal places`."""
    if rounding.figures is not None:
        return f"to {rounding.figures} significant figure{'s' if rounding.figures != 1 else ''}"
    return f"to {rounding.places} decimal place{'s' if rounding.places != 1 else ''}"
