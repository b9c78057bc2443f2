"""Stage 1, read: the fields of a drawn variable. Which keys it has says what kind of thing is drawn."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Annotated, Literal

from pydantic import Field

from authoring.faults import ContentError
from authoring.tasks.fields import Number, Strict, Word, Words


class SpeciesDraw(Strict):
    """A pool of species: by place in the table or by list, with a charge, less some."""

    among: Words = Field((), description="species, or ranges such as `Na-Ar`")
    block: Words = Field((), description="s, p, d or f")
    period: Words = Field((), description="periods")
    group: Words = Field((), description="groups 1 to 18")
    except_: Words = Field((), alias="except", description="species left out")
    charge: Words = Field((), description="charges of the ions: `2+`, `3+`, `1-`; left out: neutral atoms")


class IonDraw(Strict):
    """An ion of a species drawn before."""

    ion_of: Word = Field(alias="ion of", description="a drawn species")
    charge: Words = Field(description="charges: `2+`, `3+`, `1-`")


class NeighbourDraw(Strict):
    """The element a number of places further on in the table (or back), or the next in the group."""

    near: Word = Field(description="a drawn species")
    steps: Words = Field(("1",), description="places further on in Z; negative: back")
    along: Literal["period", "group"] = Field("period", description="in which direction of the table")


class SameElectronsDraw(Strict):
    """A species with as many electrons as one drawn before."""

    isoelectronic: Word = Field(alias="isoelectronic with", description="a drawn species")
    among: Words = Field(description="the species to choose from")


class ElectronDraw(Strict):
    """An electron of a species drawn before."""

    electron_of: Word = Field(alias="electron of", description="a drawn species")
    shell: Literal["outermost", "inner d", "inner f", "next in", "any"] = Field(
        "outermost", description="which electron"
    )
    among: Words = Field((), description="only these subshells, where the species has them")


class NumberDraw(Strict):
    """A number from an even row, ends included, or from a list."""

    from_: Number | None = Field(None, alias="from", description="the first number")
    to: Number | None = Field(None, description="the last number")
    step: Number = Field("1", validate_default=True, description="the distance between numbers")
    numbers: Annotated[tuple[Number, ...], Field(description="the numbers to choose from")] = ()


class WordDraw(Strict):
    """A word or phrase for the story."""

    words: tuple[Word, ...] = Field(min_length=1, description="words or phrases to choose from")


class RelatedWordDraw(Strict):
    """A word that goes with another drawn value."""

    for_: Word = Field(alias="for", description="a drawn variable")
    say: dict[Word, Word] = Field(description="its value → the word")


Draw = (
    SpeciesDraw | IonDraw | NeighbourDraw | SameElectronsDraw | ElectronDraw | NumberDraw | WordDraw | RelatedWordDraw
)

# The key that tells each kind; a draw without any of them is a pool of species.
TELLING: Mapping[str, type[Draw]] = {
    "ion of": IonDraw,
    "near": NeighbourDraw,
    "isoelectronic with": SameElectronsDraw,
    "electron of": ElectronDraw,
    "from": NumberDraw,
    "numbers": NumberDraw,
    "words": WordDraw,
    "say": RelatedWordDraw,
}


def draw_model(data: object) -> type[Draw]:
    """The model of a draw, from its keys. A plain list is a pool of species (`among`)."""
    if isinstance(data, dict):
        for key, model in TELLING.items():
            if key in data:
                return model
    return SpeciesDraw


def rests_on(draw: Draw) -> tuple[str, ...]:
    """The drawn variables that a draw refers to."""
    if isinstance(draw, IonDraw):
        return (draw.ion_of,)
    if isinstance(draw, NeighbourDraw):
        return (draw.near,)
    if isinstance(draw, SameElectronsDraw):
        return (draw.isoelectronic,)
    if isinstance(draw, ElectronDraw):
        return (draw.electron_of,)
    if isinstance(draw, RelatedWordDraw):
        return (draw.for_,)
    return ()


def charge_of(text: str) -> int:
    """`2+`, `+2`, `1-`, `-1`, `+`, `0` as a charge. Raises ContentError otherwise."""
    compact = text.strip().replace("−", "-")
    sign = {"+": 1, "-": -1}
    for head, tail in ((compact[:1], compact[1:]), (compact[-1:], compact[:-1])):
        if head in sign and ((tail.isascii() and tail.isdigit()) or not tail) and len(tail) < 4:
            return sign[head] * int(tail or 1)
    if compact == "0":
        return 0
    raise ContentError(f"{text[:20]!r} is not a charge; write 2+ or 1-")


def whole(text: str, what: str) -> int:
    """A whole number of a draw. Raises ContentError otherwise."""
    compact = text.strip().replace("−", "-")
    if not compact.lstrip("+-").isascii() or not compact.lstrip("+-").isdigit() or len(compact) > 4:
        raise ContentError(f"{what}: {text[:20]!r} is not a whole number")
    return int(compact)
