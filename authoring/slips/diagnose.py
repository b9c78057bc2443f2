"""Stage: solve. The diagnosis: which slips explain a value, and which slips a target cannot tell from the right way.

Nothing is guessed: every slip and every pair is worked out, and all that give the value are returned, likeliest
first. What remains open between them is for a person to decide.
"""

from __future__ import annotations

import functools
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType

from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value, quantity
from authoring.slips.catalogue import Slip, Slips, applied, shipped
from authoring.slips.outcomes import Combination, Known, as_known, by_answer, likelihood, outcomes, printed, right_value
from authoring.working.numbers import Rounding, to_places

PAIRS = 2
# A given value with more digits than this is no answer of anybody's; it also keeps `quantize` within its digits.
_MOST_DIGITS = 20
# One unit in the last place is a narrow margin only when the place is at least the third.
_FIGURES_FOR_MARGIN = 3


@dataclass(frozen=True, slots=True)
class Explanation:
    """Slips that give a value: the exact answer under them, and as printed.

    `exact`: the value is the answer itself, not only its rounding. `certain`: nothing else with as few slips
    gives the value.
    """

    slips: Combination
    answer: Value
    shown: str
    exact: bool
    certain: bool

    @property
    def words(self) -> str:
        """What the candidate did, in sentences."""
        return " ".join(slip.did for slip in self.slips)


def fits(answer: Decimal, value: Decimal, target: Target, rounding: Rounding | None = None) -> bool:
    """Whether an exact answer agrees with a value at the precision the value is given with, or as it is printed.

    Quantities printed to significant figures may be one unit off in the last place: intermediates were rounded.
    """
    exponent = value.as_tuple().exponent
    if not isinstance(exponent, int) or exponent < -_MOST_DIGITS or abs(value.adjusted()) > _MOST_DIGITS:
        return False
    if answer.adjusted() - min(exponent, 0) > _MOST_DIGITS:
        return False
    # `10670` may be meant to four figures: digits alone do not tell, so the printed form is tried as well.
    printing = rounding or quantity(target.quantity).rounding
    forms = (to_places(answer, max(0, -exponent)), printing.apply(answer))
    if value in forms:
        return True
    if printing.figures is None or len(value.as_tuple().digits) < _FIGURES_FOR_MARGIN:
        return False
    return any(abs(form - value) <= Decimal(1).scaleb(int(form.as_tuple().exponent)) for form in forms)


def agrees(answer: Value, value: Value, target: Target, rounding: Rounding | None = None) -> bool:
    """Whether a value is an answer: numbers at the precision given, configurations and the like as they are."""
    if isinstance(answer, Decimal) and isinstance(value, Decimal):
        return fits(answer, value, target, rounding)
    return type(answer) is type(value) and bool(answer == value)


def explain(
    target: Target,
    value: Value,
    *,
    practice: Practice,
    known: Mapping[Target, Value] | None = None,
    rounding: Rounding | None = None,
    slips: Slips | None = None,
    most: int = PAIRS,
) -> tuple[Explanation, ...]:
    """The slips, and pairs of slips, that lead to a value, likeliest first; empty where none does.

    `value` is a Decimal as given (`4.20` claims two places), or a configuration, subshell … for other quantities.
    `known` holds values the candidate had already; they are used as they stand. Never raises for a value.
    """
    given = as_known(known)
    table = by_answer(target, practice, given, slips or shipped(), most)
    right = _right_shown(target, practice, given, rounding)
    found = []
    for answer, several in table.items():
        if not agrees(answer, value, target, rounding):
            continue
        text = printed(target, answer, applied(several[0], practice), given, rounding)
        if text != right:
            found += [(each, answer, text) for each in several]
    fewest = min((len(each) for each, _, _ in found), default=0)
    alone = sum(len(each) == fewest for each, _, _ in found) == 1
    made = [
        Explanation(each, answer, text, answer == value, alone and len(each) == fewest) for each, answer, text in found
    ]
    return tuple(sorted(made, key=_likeliest))


def _likeliest(explanation: Explanation) -> tuple[int, bool, int, tuple[str, ...]]:
    names = tuple(slip.name for slip in explanation.slips)
    return (len(explanation.slips), not explanation.exact, -likelihood(explanation.slips), names)


def _right_shown(target: Target, practice: Practice, known: Known, rounding: Rounding | None) -> str | None:
    right = right_value(target, practice, known)
    return None if right is None else printed(target, right, practice, known, rounding)


@functools.lru_cache(maxsize=8192)
def slip_values(
    target: Target,
    practice: Practice,
    known: Known = (),
    slips: Slips | None = None,
    most: int = PAIRS,
    rounding: Rounding | None = None,
) -> Mapping[str, tuple[Combination, ...]]:
    """The combinations by the value that they print, each likeliest first; the right value is not among them."""
    right = _right_shown(target, practice, known, rounding)
    found: dict[str, list[Combination]] = {}
    for outcome in outcomes(target, practice, known, slips or shipped(), most):
        text = printed(target, outcome.answer, applied(outcome.slips, practice), known, rounding)
        if text != right:
            found.setdefault(text, []).append(outcome.slips)
    return MappingProxyType({text: tuple(several) for text, several in found.items()})


def blind(
    target: Target,
    practice: Practice,
    known: Mapping[Target, Value] | None = None,
    slips: Slips | None = None,
    rounding: Rounding | None = None,
) -> tuple[Slip, ...]:
    """The slips that could touch this target but leave its printed value right: it cannot show them."""
    chosen = slips or shipped()
    several = slip_values(target, practice, as_known(known), chosen, 1, rounding).values()
    seen = {slip.name for combinations in several for (slip,) in combinations}
    return tuple(slip for slip in chosen.touching(target) if slip.name not in seen)


def collisions(
    target: Target,
    practice: Practice,
    known: Mapping[Target, Value] | None = None,
    slips: Slips | None = None,
    rounding: Rounding | None = None,
) -> tuple[tuple[Slip, ...], ...]:
    """Single slips that give one and the same printed value for this target: it cannot tell them apart."""
    table = slip_values(target, practice, as_known(known), slips or shipped(), 1, rounding)
    groups = (tuple(slip for (slip,) in several) for several in table.values())
    return tuple(group for group in groups if len(group) > 1)
