"""Stage 8, mark: one statement for one line of the key: right, right but for a slip, wrong arithmetic, or open.

Only the candidate's own earlier values are needed: under the practice they give what the line should be, under a
practice with slips what a misunderstanding makes of it.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from decimal import Decimal
from functools import lru_cache
from typing import Literal

from authoring.faults import ContentError
from authoring.marking.expression import Term
from authoring.marking.forms import Member, Written
from authoring.marking.tallies import Key, keys_of_shares, keys_of_terms, looks_like_tally
from authoring.marking.trace import Known, Traced, frontier, traced
from authoring.marking.units import fewer_figures, in_key_unit, with_figures
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value, quantity
from authoring.shielding.solve import evaluate
from authoring.slips.arithmetic import plain_arithmetic
from authoring.slips.catalogue import Slip, Slips
from authoring.slips.diagnose import agrees, explain
from authoring.working.numbers import Rounding

Finding = Literal["right", "key", "early", "slip", "arithmetic", "coarse", "unit", "open"]
# From best to worst; a statement is taken to be about the line that it fits best.
RANK: dict[Finding, int] = {
    "right": 0, "key": 1, "early": 2, "slip": 3, "unit": 4, "arithmetic": 5, "coarse": 6, "open": 9,
}  # fmt: skip

# Values worked on with intermediates of three figures stay within this of the exact one.
EARLY = Decimal("0.005")
# A small difference of two of them is off by more than a part of itself: by so many per cent of what is compared.
EARLY_PERCENT = Decimal("0.2")
# A sum of rounded terms may be off by this much; less is no mistake of anybody's.
WORKED = Decimal("0.0005")
GOOD: tuple[Finding, ...] = ("right", "key", "early")
# A miscount that a slip explains is the slip, and so is a group left out: the misunderstanding says more.
_SLIPS_AS_WELL = ("miscount", "dropped term", "carry")
UNEXPLAINED = "no practice or slip in the catalogue explains this value"
# With this many figures a value says enough to be told from its neighbours (common practice, no source).
FEWEST_FIGURES = 3


@dataclass(frozen=True, slots=True)
class Explained:
    """What a statement is, for one target.

    `trace` holds the lines on the way that the statement does not show, the target last; `value` what the candidate
    goes on with; `rivals` other slips that give the same; `words` the reason for the marker.
    """

    finding: Finding
    value: Value
    trace: tuple[Traced, ...] = ()
    slips: tuple[Slip, ...] = ()
    rivals: tuple[tuple[Slip, ...], ...] = ()
    words: str = ""
    sure: bool = True

    @property
    def rank(self) -> tuple[int, int]:
        """Best first: the finding, then how many slips it takes."""
        return (RANK[self.finding], len(self.slips))


@dataclass(frozen=True, slots=True)
class Terms:
    """What a part is judged under."""

    practice: Practice
    slips: Slips


@dataclass(frozen=True, slots=True)
class Stated:
    """What a statement of a number says, whatever its words: many lines of a pile say the same.

    `figures` is the value as text, since 3.3 and 3.30 are equal but not given alike; `terms` a sum that could be a
    tally; `meant` what the first worked member comes to, with its unit.
    """

    value: Decimal
    figures: str
    unit: str
    terms: tuple[Term, ...]
    meant: Decimal | None
    meant_figures: str
    meant_unit: str


def explained(
    target: Target,
    written: Written,
    own: Mapping[Target, Value],
    key: Value,
    rounding: Rounding | None,
    unit: str,
    terms: Terms,
) -> Explained:
    """A statement of a number, for one numeric target. `key` is the key's value, `unit` the key's unit."""
    if written.value is None:
        return Explained("open", None, words="no value is stated")
    known = frontier(target, terms.practice, own)
    return _explained(target, stated(written), known, key, rounding, unit, terms)


def stated(written: Written) -> Stated:
    """What a line with a value says."""
    assert written.value is not None
    shown = tally_shown(written)
    worked = next((each for each in written.members if each.value is not None and not each.shown), None)
    return Stated(
        written.value,
        str(written.value),
        written.unit,
        shown.terms if shown else (),
        worked.value if worked else None,
        str(worked.value) if worked else "",
        (worked.unit or written.unit) if worked else "",
    )


@lru_cache(maxsize=16384)
def _explained(
    target: Target, said: Stated, known: Known, key: Value, rounding: Rounding | None, unit: str, terms: Terms
) -> Explained:
    value, trouble = in_key_unit(said.value, said.unit, unit)
    if not trouble and said.unit and value != said.value:
        rounding = Rounding(figures=len(value.as_tuple().digits))  # as many as it had in its own unit
    found = _by_terms(target, said.terms, known, terms)
    if found is None:
        found = _of_value(target, value, known, key, rounding, terms)
        if found.finding == "open" and unit:
            found, value = _of_fewer_figures(found, value, said.value, target, known, key, terms)
        if found.finding not in GOOD:

            def of_meant(meant: Decimal) -> Explained:
                return _of_value(target, meant, known, key, None, terms)

            found = _as_meant(found, said, value, unit, of_meant)
    elif not _comes_to(found.trace[-1].value, value):
        words = f"the arithmetic: the terms come to {_short(found.trace[-1].value)}, not {_short(value)}"
        return _miscalculated(found, value, words)
    if found.finding in ("right", "early") and trouble:
        return Explained("unit", value, found.trace, words=trouble)
    return replace(found, value=_kept(found, value))


def _of_fewer_figures(
    found: Explained, value: Decimal, given: Decimal, target: Target, known: Known, key: Value, terms: Terms
) -> tuple[Explained, Decimal]:
    """A whole number whose last zeros only fill places, if that explains it: `−99100 kJ/mol`."""
    for figures in fewer_figures(given):
        rounded = with_figures(value, figures)
        other = _of_value(target, rounded, known, key, Rounding(figures=figures), terms)
        if other.finding in (*GOOD, "slip"):
            return other, rounded
    return found, value


def _as_meant(
    found: Explained, said: Stated, value: Decimal, unit: str, explain_meant: Callable[[Decimal], Explained]
) -> Explained:
    """What the worked member of a chain comes to, where the value after it is not explained by itself."""
    meant = None if said.meant is None else in_key_unit(said.meant, said.meant_unit, unit)[0]
    if meant is None or _comes_to(meant, value):
        return found
    other = explain_meant(meant)
    if other.finding not in GOOD and (other.finding != "slip" or (found.finding == "slip" and found.sure)):
        return found
    return _miscalculated(other, value, f"the arithmetic: the line comes to {_short(meant)}, not {_short(value)}")


def _miscalculated(found: Explained, value: Decimal, words: str) -> Explained:
    if found.finding in GOOD:
        return Explained("arithmetic", value, found.trace, words=words)
    return replace(found, value=value, words=f"{found.words}; {words}", sure=False)


def _kept(found: Explained, value: Decimal) -> Value:
    """The exact value where the statement rounds it; the candidate's own figures otherwise."""
    if found.finding in ("right", "slip", "early") and found.trace:
        exact = found.trace[-1].value
        if isinstance(exact, Decimal) and _rounds_to(exact, value):
            return exact
    return value


def _comes_to(exact: Decimal, value: Decimal) -> bool:
    """Whether working that comes to one value may be rounded to the other, on the way or at the end."""
    return _rounds_to(exact, value) or (value != 0 and abs(exact - value) <= abs(value) * WORKED)


def _rounds_to(exact: Decimal, value: Decimal) -> bool:
    """Whether a value is the exact one at the precision it is given with, one unit in the last place allowed."""
    exponent = value.as_tuple().exponent
    if not isinstance(exponent, int) or abs(exact.adjusted() - value.adjusted()) > 3:
        return exact == value
    return abs(exact - value) <= Decimal(1).scaleb(exponent)


def _by_terms(target: Target, shown: tuple[Term, ...], known: Known, terms: Terms) -> Explained | None:
    """A screening constant by its terms: they show the tally, which says more than the sum."""
    if not shown or target.quantity != "screening constant" or any(each.quantity == "tally" for each, _ in known):
        return None
    counts, products = keys_of_terms(shown)
    fitting = [
        (slips, trace)
        for slips, trace, keys in tallies_under(target, terms, known)
        if counts == keys[0] or products == keys[1]
    ]
    if not fitting:
        return None
    slips, trace = fitting[0]
    if not slips:
        return Explained("right", trace[-1].value, trace)
    rivals = tuple(others for others, _ in fitting[1:])
    return Explained("slip", trace[-1].value, trace, slips, rivals, slips[0].did, sure=not rivals)


def tally_shown(written: Written) -> Member | None:
    """The member of a chain that is a sum of counts times coefficients."""
    for member in written.members:
        if looks_like_tally(member.terms):
            return member
    return None


@lru_cache(maxsize=8192)
def tallies_under(
    target: Target, terms: Terms, known: Known
) -> tuple[tuple[tuple[Slip, ...], tuple[Traced, ...], tuple[Key, Key]], ...]:
    """The way to a screening constant without a slip, then under each single slip that can touch its tally, likeliest
    first, with what tells its tally."""
    touching = sorted(terms.slips.touching(target.to("tally")), key=lambda slip: -slip.likelihood)
    found = []
    for slips in ((), *((slip,) for slip in touching)):
        try:
            trace = traced(target, terms.practice, known, slips)
        except ContentError:
            continue
        tally = next((each for each in trace if each.target.quantity == "tally"), None)
        if tally is not None:
            found.append((slips, trace, keys_of_shares(tally.value)))
    return tuple(found)


def _of_value(
    target: Target, value: Decimal, known: Known, key: Value, rounding: Rounding | None, terms: Terms
) -> Explained:
    """A value on its own: the practice, the key, slips, pairs of slips, plain arithmetic; else open."""
    try:
        right = evaluate(target, terms.practice, dict(known))
    except ContentError as error:
        right = None
        words = error.message
    else:
        words = ""
    if right is not None and agrees(right, value, target, rounding):
        coarse = isinstance(right, Decimal) and _coarse(right, value, rounding)
        trace = traced(target, terms.practice, known, ())
        if coarse:
            return Explained("coarse", value, trace, words="given to too few figures", sure=False)
        return Explained("right", right, trace)
    if isinstance(key, Decimal) and agrees(key, value, target, rounding) and not _coarse(key, value, rounding):
        return Explained("key", key, words="agrees with the key, though not with the line before")
    found = _by_slips(target, value, known, rounding, terms)
    early = isinstance(right, Decimal) and _early(right, value, target)
    if early and not (found and found.sure):
        return Explained("early", value, traced(target, terms.practice, known, ()), words="rounded early; accepted")
    if found is not None:
        return found
    slipped = plain_arithmetic(target, value, terms.practice, dict(known), rounding)
    if slipped:
        rivals = "; or ".join(each.words for each in slipped[:3])
        return Explained("arithmetic", value, (), words=rivals, sure=len(slipped) == 1)
    return Explained("open", value, words=words or UNEXPLAINED, sure=False)


def _by_slips(
    target: Target, value: Decimal, known: Known, rounding: Rounding | None, terms: Terms
) -> Explained | None:
    for most in (1, 2):
        several = explain(
            target, value, practice=terms.practice, known=dict(known), rounding=rounding, slips=terms.slips, most=most
        )
        if not several:
            continue
        first = several[0]
        rivals = tuple(each.slips for each in several[1:] if len(each.slips) == len(first.slips))
        by_pen = plain_arithmetic(target, value, terms.practice, dict(known), rounding)
        trace = traced(target, terms.practice, known, first.slips)
        by_pen = tuple(each for each in by_pen if each.kind not in _SLIPS_AS_WELL)
        sure = len(first.slips) == 1 and not rivals and not by_pen
        words = " ".join(slip.did for slip in first.slips)
        if by_pen:
            words += f" (or {by_pen[0].words})"
        return Explained("slip", first.answer, trace, first.slips, rivals, words, sure)
    return None


def _coarse(exact: Decimal, value: Decimal, rounding: Rounding | None) -> bool:
    """Whether a value is right only because it is given so roughly."""
    if exact == value:
        return False
    figures = len(value.as_tuple().digits)
    wanted = min(FEWEST_FIGURES, (rounding.figures or FEWEST_FIGURES) if rounding else FEWEST_FIGURES)
    exponent = value.as_tuple().exponent
    if rounding is not None and rounding.places is not None and isinstance(exponent, int):
        # One decimal fewer than the key's says as much where the key ends in 0 or 5.
        return figures < wanted and -exponent < rounding.places - 1
    return figures < wanted


def _early(right: Decimal, value: Decimal, target: Target) -> bool:
    """Whether a value is the right one worked on with rounded intermediates."""
    if quantity(target.quantity).rounding.places == 2 and not quantity(target.quantity).unit:
        return False  # S and Z_eff are exact: nothing is rounded on the way to them
    if quantity(target.quantity).unit == "%":
        return abs(value - right) <= EARLY_PERCENT
    return bool(right) and abs(value - right) <= abs(right) * EARLY


def _short(value: Decimal) -> str:
    text = format(value.normalize() if value else value, "f")
    return text if len(text) <= 10 else format(round(float(value), 4), "g")
