"""*read*: take values, extremes or jumps off a chart."""

from __future__ import annotations

import itertools
from collections.abc import Mapping, Sequence
from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal
from typing import Literal

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target
from authoring.tasks.fields import Number, TargetFields, Word, Words
from authoring.tasks.points import Candidate, chosen
from authoring.tasks.setting import Setting, electron_named, species_named
from authoring.tasks.several import READING, Things, closing, measured, things, values_of
from authoring.tasks.solved import Answer, Chart, Series, Solved
from authoring.tasks.task import Task
from authoring.tasks.wording import electron_words, species_words, worded
from authoring.working.nodes import Chain, Node
from authoring.working.numbers import EXACT, shown, to_places
from authoring.working.text import to_text

FEWEST, MOST = 2, 40
# A chart some 80 mm high can be read to about 2 mm.
READABLE_PARTS = 40
_NICE = (Decimal(1), Decimal(2), Decimal(5), Decimal(10))

Find = Literal["largest", "smallest", "value", "fall", "rise"]


class Read(TargetFields):
    """`read: effective nuclear charge`: a chart of it for the things under `among`, and what to find on it."""

    read: Word = Field(description="the quantity on the chart")
    among: Words = Field(description="species or ranges of them, or electrons of the species under `of`: the points")
    find: Find = Field("value", description="what to read off; a fall or rise is the largest between neighbours")
    at: Word | None = Field(None, description="for a value: the species or electron to read it at")
    tolerance: Number | None = Field(None, description="how far off a reading may be; left out: what the chart allows")
    style: Literal["points", "levels"] = Field("points", description="points joined by lines, or energy levels")


def reading_tolerance(values: Sequence[Decimal]) -> Decimal:
    """How closely a chart of these values can be read: 1, 2 or 5 times a power of ten. ContentError if all equal."""
    span = max(values) - min(values)
    if not span:
        raise ContentError("all values on the chart are equal: there is nothing to read off")
    fine = EXACT.divide(span, Decimal(READABLE_PARTS))
    power = Decimal(1).scaleb(fine.adjusted())
    return next(nice * power for nice in _NICE if nice * power >= fine)


def solve(part: Read, setting: Setting) -> Solved:
    """The chart, and the reading that it must give."""
    shown_things = things(part.read, part.among, part, setting)
    if not FEWEST <= len(shown_things.targets) <= MOST:
        raise ContentError(f"a chart has {FEWEST} to {MOST} points, not {len(shown_things.targets)}")
    if part.at is not None and part.find != "value":
        raise ContentError(f"`at` belongs to `find: value`, not to `find: {part.find}`")
    values = values_of(shown_things, setting)
    allowed = reading_tolerance(list(values.values()))
    if part.tolerance is not None:
        if part.tolerance <= 0:
            raise ContentError("a tolerance is larger than nothing")
        allowed = part.tolerance
    chart = _Charted(shown_things, values, allowed, part.style)
    if part.find == "value":
        return _value(part, setting, chart)
    if part.find in ("largest", "smallest"):
        return _extreme(part, setting, chart)
    return _jump(part, setting, chart)


def chart_of(
    name: str,
    words: Sequence[str],
    setting: Setting,
    *,
    of: str | None = None,
    electron: str | None = None,
    style: Literal["points", "levels"] = "points",
) -> Chart:
    """A chart of a quantity over species (or electrons of one): the item's own figure, with nothing asked of it."""
    part = TargetFields.model_validate({"of": of, "electron": electron})
    compared = things(name, words, part, setting, key="of")
    if not FEWEST <= len(compared.targets) <= MOST:
        raise ContentError(f"a chart has {FEWEST} to {MOST} points, not {len(compared.targets)}")
    values = values_of(compared, setting)
    return _Charted(compared, values, reading_tolerance(list(values.values())), style).exhibit()


class _Charted:
    """What is on the chart, and how closely it can be read."""

    __slots__ = ("allowed", "style", "things", "values")

    def __init__(
        self, compared: Things, values: Mapping[Target, Decimal], allowed: Decimal, style: Literal["points", "levels"]
    ) -> None:
        self.things = compared
        self.values = values
        self.allowed = allowed
        self.style = style

    def read(self, target: Target) -> str:
        """A value to the places that the chart can be read to."""
        return shown(self.near(self.values[target]))

    def near(self, value: Decimal) -> Decimal:
        """A number to the places of the tolerance."""
        return to_places(value, max(0, -int(self.allowed.normalize().as_tuple().exponent)))

    def around(self, value: Decimal) -> tuple[Decimal, Decimal]:
        """The readings that will do, to the places of the tolerance, never narrower than it."""
        place = self.near(value)
        low, high = value - self.allowed, value + self.allowed
        return low.quantize(place, ROUND_FLOOR, EXACT), high.quantize(place, ROUND_CEILING, EXACT)

    def stated(self, target: Target) -> tuple[Node, Node]:
        """`Z_eff(V)` and what it reads."""
        return self.things.named(target), measured(self.read(target), self.things.unit)

    def exhibit(self) -> Chart:
        """The chart."""
        compared = self.things
        unit = compared.unit
        about = compared.measure
        if compared.by_electron:
            about += compared.of_each()
        elif "electron" in compared.what.takes:
            about += f" for {electron_words(compared.targets[0].electron)}"
        axis = f"{about.replace('`', '')}, {to_text(compared.what.symbol)}" + (f" / {unit}" if unit else "")
        points = [(compared.label(target), float(self.values[target])) for target in compared.targets]
        listed = ", ".join(f"{compared.label(target)} {self.read(target)}" for target in compared.targets)
        kind = "Energy levels" if self.style == "levels" else "Points joined by lines"
        return Chart(
            style=self.style,
            x_words="electron" if compared.by_electron else "species",
            y_words=axis,
            series=(Series(compared.what.name, tuple(points)),),
            description=f"{kind}: {axis}. In order: {listed}.",
        )


def _value(part: Read, setting: Setting, chart: _Charted) -> Solved:
    compared = chart.things
    if part.at is None:
        raise ContentError("`at` says where the value is read", "", [compared.label(each) for each in compared.targets])
    wanted: object = electron_named(part.at, setting) if compared.by_electron else species_named(part.at, setting)
    found = [target for target in compared.targets if compared.value(target) == wanted]
    if not found:
        raise ContentError(
            f"{part.at!r} is not on the chart", part.at, [compared.label(each) for each in compared.targets]
        )
    target = found[0]
    exact = chart.values[target]
    low, high = chart.around(exact)
    name, node = chart.stated(target)
    unit = compared.unit
    answer = Answer("number", chart.read(target), node, exact, unit, accepted=(low, high))
    note = f"Accept from {shown(low)} to {shown(high)}" + (f" {unit}." if unit else ".")
    wording = f"Read the {compared.measure} of {_thing(compared, target)} off the chart."
    return _solved(part, setting, chart, target, Chain(name, (("≈", node),)), answer, wording, note)


def _extreme(part: Read, setting: Setting, chart: _Charted) -> Solved:
    compared, values = chart.things, chart.values
    order = sorted(compared.targets, key=lambda each: values[each], reverse=part.find == "largest")
    if abs(values[order[0]] - values[order[1]]) < chart.allowed:
        raise ContentError(
            f"{compared.label(order[0])} and {compared.label(order[1])} cannot be told apart on the chart: "
            f"{chart.read(order[0])} and {chart.read(order[1])}"
        )
    target = order[0]
    name, node = chart.stated(target)
    chain = Chain(name, (("≈", node), ("→", compared.node(target))))
    kind: Literal["electron", "species"] = "electron" if compared.by_electron else "species"
    answer = Answer(kind, compared.label(target), compared.node(target), compared.value(target))
    if compared.by_electron:
        wording = f"Which electron on the chart has the {part.find} {compared.measure}?"
    else:
        wording = f"Which species on the chart has the {part.find} {compared.measure}?"
    return _solved(part, setting, chart, target, chain, answer, wording)


def _jump(part: Read, setting: Setting, chart: _Charted) -> Solved:
    compared, values = chart.things, chart.values
    sign = -1 if part.find == "fall" else 1
    steps = [
        (sign * (values[after] - values[before]), before, after)
        for before, after in itertools.pairwise(compared.targets)
    ]
    steps.sort(key=lambda each: each[0], reverse=True)
    size, before, after = steps[0]
    if size < chart.allowed:
        raise ContentError(f"no {part.find} on this chart is large enough to be read")
    if len(steps) > 1 and size - steps[1][0] < chart.allowed:
        rival = f"{compared.label(steps[1][1])} to {compared.label(steps[1][2])}"
        raise ContentError(
            f"the {part.find}s from {compared.label(before)} to {compared.label(after)} and from {rival} "
            "cannot be told apart on the chart"
        )
    relation: Literal["<", ">"] = ">" if sign < 0 else "<"
    pair = Chain(compared.node(before), ((relation, compared.node(after)),))
    (name, node), (name_after, node_after) = chart.stated(before), chart.stated(after)
    chain = Chain(name, (("≈", node), (relation, name_after), ("≈", node_after)))
    text = f"{compared.label(before)} {relation} {compared.label(after)}"
    answer = Answer("order", text, pair, (compared.value(before), compared.value(after)))
    what = "electrons" if compared.by_electron else "species"
    verb = "fall" if sign < 0 else "rise"
    wording = f"Between which two neighbouring {what} on the chart does the {compared.measure} {verb} most?"
    return _solved(part, setting, chart, after, chain, answer, wording)


def _thing(compared: Things, target: Target) -> str:
    if compared.by_electron:
        return f"{electron_words(target.electron)} of {species_words(target.species)}"
    return compared.words(target)


def _solved(
    part: Read,
    setting: Setting,
    chart: _Charted,
    target: Target,
    chain: Chain,
    answer: Answer,
    wording: str,
    note: str = "",
) -> Solved:
    steps = (closing(READING, target, chain, answer.value, answer.shown),)
    aspect = "value" if answer.kind == "number" else "choice"
    extra = [
        Candidate(0, PointRule("B", "the right reading", aspect, 120)),
        Candidate(0, PointRule("M", "the evidence on the chart is stated", "reason", 60)),
    ]
    marks = 1 if part.marks is None and not part.scheme else part.marks
    return Solved(
        task="read",
        quantity=chart.things.what.name,
        targets=(target,),
        ask=worded(part, setting.turn, wording),
        steps=steps,
        answer=answer,
        points=chosen(extra, steps, marks, part.scheme, extra),
        space=1 if part.space is None else part.space,
        exhibits=(chart.exhibit(),),
        notes=(*part.notes, note) if note else part.notes,
    )


TASK = Task(
    name="read",
    says="read a value, an extreme, or the largest fall or rise off a chart",
    fields=Read,
    solve=solve,
    example=(
        "- read: effective nuclear charge\n  among: Na-Ar\n  electron: outermost\n  find: value\n  at: P\n  marks: 1\n"
    ),
)
