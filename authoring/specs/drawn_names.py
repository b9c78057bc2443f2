"""Stage 1, read: what texts and conditions may ask of a drawn value, checked while the item is read."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from types import MappingProxyType

from authoring.faults import Fault, Source, suggestion
from authoring.specs.draws import Draw, ElectronDraw, NumberDraw, RelatedWordDraw, WordDraw
from authoring.specs.template import Condition, Template, Use
from authoring.specs.yaml_tree import Tree
from authoring.tasks.task import tasks

# What each kind of value has, and the kind of what that gives. `papers/views.py` gives the values.
HAS: Mapping[str, Mapping[str, str]] = MappingProxyType(
    {
        "species": {
            "name": "text",
            "symbol": "text",
            "label": "text",
            "z": "number",
            "charge": "number",
            "electrons": "number",
            "period": "number",
            "group": "number",
            "block": "text",
            "unpaired": "number",
            "outermost": "electron",
            "configuration": "configuration",
            "full_configuration": "configuration",
            "differs": "yes or no",
            "size_of_charge": "number",
            "mass_number": "number",
        },
        "electron": {"n": "number", "l": "number", "letter": "text", "label": "text"},
        "configuration": {},
        "number": {},
        "text": {},
        "yes or no": {},
    }
)
SPOKEN: Mapping[str, str] = MappingProxyType(
    {
        "species": "a species",
        "electron": "an electron",
        "configuration": "a configuration",
        "number": "a number",
        "text": "text",
        "yes or no": "yes or no",
    }
)

# How an answer is rounded, in the wording of a part: `Give your answer {{ rounding }}.`
ROUNDING = "rounding"

Steps = tuple[str | int, ...]


def kind_of(draw: Draw) -> str:
    """The kind of value that a draw gives: a key of HAS."""
    if isinstance(draw, ElectronDraw):
        return "electron"
    if isinstance(draw, NumberDraw):
        return "number"
    return "text" if isinstance(draw, WordDraw | RelatedWordDraw) else "species"


def rounding_hint() -> str:
    """Where ROUNDING may stand: the tail of a message."""
    rounding = [each.name for each in tasks().values() if each.rounds]
    return f"; {{{{ {ROUNDING} }}}} stands in the `ask` of {', '.join(rounding[:-1])} and {rounding[-1]}"


class Names:
    """The names that texts may use, and the faults of those that use others."""

    def __init__(self, draws: Mapping[str, Draw], broken: Iterable[str], tree: Tree, new: bool) -> None:
        """`broken`: draws with faults of their own. `new`: the item comes from no record of a set."""
        self._kinds = {name: kind_of(draw) for name, draw in draws.items()}
        self._broken = frozenset(broken)
        self._tree = tree
        self._new = new

    def faults(self, text: Template | Condition, steps: Steps, more: Iterable[str] = ()) -> list[Fault]:
        """What is wrong with the names in the text at `steps`; `more` are names of texts that it may use besides."""
        kinds = {**dict.fromkeys(more, "text"), **self._kinds}
        found: dict[tuple[str, tuple[str, ...]], Fault] = {}
        for use in text.uses:
            if use.root in self._broken or (use.root, use.chain) in found:
                continue
            fault = self._undrawn(use, steps, kinds) or self._lacking(use, steps, kinds, text)
            if fault is not None:
                found[use.root, use.chain] = fault
        return list(found.values())

    def _undrawn(self, use: Use, steps: Steps, kinds: Mapping[str, str]) -> Fault | None:
        if use.root in kinds or use.chain:
            return None
        tail = rounding_hint() if use.root == ROUNDING else suggestion(use.root, tuple(kinds))
        having = next((f"{name}.{use.root}" for name, kind in kinds.items() if use.root in HAS[kind]), "")
        if having:
            tail = f"; a drawn value's own is written after its name: {having}"
        return Fault("undefined", f"{use.root!r} is not drawn{tail}", self._place(use, steps))

    def _lacking(self, use: Use, steps: Steps, kinds: Mapping[str, str], text: Template | Condition) -> Fault | None:
        # What was never evaluated stands in old records as well, and they must be marked all the same.
        if not use.chain or use.root not in kinds or not self._new:
            return None
        kind = kinds[use.root]
        for name in use.chain[:-1]:
            if name not in HAS[kind]:
                return None  # the shorter chain is a use of its own
            kind = HAS[kind][name]
        name = use.chain[-1]
        if name in HAS[kind]:
            return None
        words = f"{SPOKEN[kind]} has nothing called {name!r}{suggestion(name, tuple(HAS[kind]))}"
        return Fault("condition" if isinstance(text, Condition) else "template", words, self._place(use, steps))

    def _place(self, use: Use, steps: Steps) -> Source:
        return self._tree.block_line(steps, use.line - 1, use.column)
