"""*identify*: find the species from a value."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import Decimal

from pydantic import Field

from authoring.atoms.species import Species
from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target, Value, quantity
from authoring.shielding.solve import Step, evaluate, work
from authoring.tasks.calculate import answer_of, final_node
from authoring.tasks.fields import TargetFields, Word, Words
from authoring.tasks.points import MAIN, Candidate, pointed
from authoring.tasks.setting import Setting, must_have, rounding_of, target_of
from authoring.tasks.several import COMPARISON, Things, closing, comparison, joined, listed, printed, species_listed
from authoring.tasks.slipped import values_under
from authoring.tasks.solved import Answer, Solved, Wrong
from authoring.tasks.task import Task
from authoring.tasks.wording import electron_words, space_for, worded
from authoring.working.nodes import Chain

MOST = 120
# Values beside the one in question that the key shows: two on either side.
BESIDE = 2


class Identify(TargetFields):
    """`identify: effective nuclear charge`: the value of the species under `of` is given, the species asked for."""

    identify: Word = Field(description="the quantity whose value is given")
    among: Words = Field((), description="the species to choose from; left out: what the one under `of` is drawn from")


def possible(part: Identify, target: Target, setting: Setting) -> tuple[Target, ...]:
    """The species stated to be possible, as targets. Raises ContentError where nothing says which they are."""
    if part.among:
        found = tuple(dict.fromkeys(species_listed(part.among, setting)))
    else:
        pool = setting.pools.get(part.of or "", ())
        found = tuple(dict.fromkeys(each for each in pool if isinstance(each, Species)))
    if len(found) < 2:
        raise ContentError("`among` says which species are possible, at least two: a list, or a range such as Sc-Zn")
    if len(found) > MOST:
        raise ContentError(f"`among` has {len(found)} species; {MOST} at most")
    if target.species not in found:
        raise ContentError(
            f"{target.species.label} is not among the species stated to be possible",
            target.species.label,
            [each.label for each in found],
        )
    return tuple(target.to(target.quantity, species=each) for each in found)


def values_found(targets: tuple[Target, ...], setting: Setting) -> dict[Target, Value]:
    """The value of every candidate that has one: a species without such an electron cannot be the one."""
    found = {}
    for target in targets:
        try:
            must_have(target, setting.practice)
            found[target] = evaluate(target, setting.practice)
        except ContentError:
            continue
    return found


def unique(values: Mapping[Target, Value], target: Target, write: Callable[[Value], str]) -> None:
    """Raise ContentError, with the rivals' names, where others have the same value as it is printed."""
    given = write(values[target])
    rivals = [each.species.label for each, value in values.items() if each != target and write(value) == given]
    if rivals:
        raise ContentError(
            f"{quantity(target.quantity).name} {given} does not tell {target.species.label} from {joined(rivals)}"
        )


def solve(part: Identify, setting: Setting) -> Solved:
    """The species, unique among the possible ones: every one of them has been worked out."""
    if part.of is None:
        raise ContentError("`of` says which species the value is taken from")
    target = target_of(part.identify, part, setting)
    what = quantity(target.quantity)
    rounding = rounding_of(what, part, setting)
    targets = possible(part, target, setting)
    compared = Things(what, targets, by_electron=False, rounding=rounding)
    values = values_found(targets, setting)
    # From the start: what the value came from belongs to the reasoning.
    steps = work(target, setting.practice, None, rounding)
    answer = answer_of(steps[-1], what)

    def write(value: Value) -> str:
        return printed(value, rounding)

    unique(values, target, write)
    closed = _closing(compared, target, values, steps)
    steps = (*steps, closed)
    last = len(steps) - 1
    extra = [
        Candidate(last, PointRule("A", "the species, in line with the values", "choice", 2 * MAIN, True)),
        Candidate(last, PointRule("M", "values tried, or the rule turned round", "reason", 2 * MAIN - 1)),
    ]
    species = target.species
    value = f"{answer.shown} {answer.unit}".strip()
    shown = f"`{value}`" if answer.kind in ("configuration", "groups", "electron") else value
    return Solved(
        task="identify",
        quantity=what.name,
        targets=(target,),
        ask=worded(part, setting.turn, _wording(compared, target, shown)),
        steps=steps,
        answer=Answer("species", species.label, species.node(), species),
        points=pointed(steps, part.marks, part.scheme, extra, default=2, main=(target,)),
        space=space_for(steps) if part.space is None else part.space,
        wrong=_wrong(targets, target, values, write, setting),
        notes=(*part.notes, f"Of the {len(values)} possible species only {compared.words(target)} has this value."),
        given=((what.name, value),),
    )


def _closing(compared: Things, target: Target, values: Mapping[Target, Value], steps: tuple[Step, ...]) -> Step:
    """The value between its neighbours, or (where it has no size) alone, and the species it belongs to."""
    species = target.species
    if not isinstance(values[target], Decimal):
        chain = Chain(final_node(steps[-1].line), (("→", species.node()),))
    else:
        order = sorted(values, key=lambda each: values[each])
        at = order.index(target)
        near = order[max(0, at - BESIDE) : at + BESIDE + 1]
        chain = comparison(compared, near, dict(values), species.node())
    return closing(COMPARISON, target, chain, species, species.label)


def _wording(compared: Things, target: Target, value: str) -> str:
    where = f" for {electron_words(target.electron)}" if "electron" in compared.what.takes else ""
    return f"One of {listed(compared)} has the {compared.measure} {value}{where}. Identify it, and show how you know."


def _wrong(
    targets: tuple[Target, ...],
    target: Target,
    values: Mapping[Target, Value],
    write: Callable[[Value], str],
    setting: Setting,
) -> tuple[Wrong, ...]:
    """The species that a slip fits to the value, where it fits exactly one other."""
    given = write(values[target])
    found = []
    tables = {each: values_under(each, setting.practice, setting.slips) for each in targets}
    for name in tables[target]:
        fits = [each for each, table in tables.items() if name in table and write(table[name]) == given]
        if len(fits) == 1 and fits[0] != target:
            found.append(Wrong((name,), fits[0].species.label))
    return tuple(found)


TASK = Task(
    name="identify",
    says="find the one species, among those stated, that a value belongs to",
    fields=Identify,
    solve=solve,
    example="- identify: effective nuclear charge\n  of: V\n  electron: 3d\n  among: Sc-Zn\n  marks: 2\n",
)
