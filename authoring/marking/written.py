"""Stage 8, mark: a line as a candidate wrote it becomes a structure. Nothing is ever run as code.

`read_line` takes any text and never raises; what cannot be read is kept as words, or as unreadable with a remark.
"""

from __future__ import annotations

import re
from dataclasses import replace
from functools import lru_cache

from authoring.marking.chains import read_chain, with_points
from authoring.marking.forms import DecimalMark, Kind, Member, Written
from authoring.marking.parse import Unreadable, check_bounds
from authoring.marking.quick import read_quick
from authoring.marking.statements import (
    read_configuration,
    read_groups,
    read_name,
    read_ordering,
    read_tally,
    split_about,
)
from authoring.marking.tidy import tidied, without_struck
from authoring.marking.wording import as_words, has_words, read_worded

__all__ = ["DecimalMark", "Kind", "Member", "Written", "read_line"]

# A handwritten line has some 80 characters; this leaves room for a paragraph of reasons.
MOST_CHARACTERS = 2000
_SHORT = 200
_REMEMBERED = 100_000

_OK = frozenset(("ok", "ok.", "okay", "✓", "✔"))
_BLANK = frozenset(("", "-", "--", "---", "...", "…"))
_APART = re.compile(r";|,\s+(?=[A-Za-zσχμ][A-Za-z_*]{0,5}(?:\([^()]{1,8}\))?\s*[=≈])|\band\b(?=[^=]{1,12}=)")
_MOST_STATEMENTS = 40
# It says nothing, not even a reason.
_LEADING_OVER = re.compile(r"^(?:∴|(?:so|thus|hence|therefore|then)\b,?)\s*(?=[SσEZ0-9-])", re.IGNORECASE)


def read_line(text: str, decimal: DecimalMark = "auto") -> Written:
    """What a line says. `decimal`: which decimal mark the set uses; `auto` takes either."""
    if len(text) > _SHORT:
        return _read(text, decimal)
    return _remembered(text, decimal)


@lru_cache(maxsize=_REMEMBERED)
def _remembered(text: str, decimal: DecimalMark) -> Written:
    return _read(text, decimal)


def _read(text: str, decimal: DecimalMark) -> Written:
    if decimal != "comma" and (found := read_quick(text)) is not None:
        return found
    if len(text) > MOST_CHARACTERS:
        shown = text[:80] + "…"
        return Written(shown, "unreadable", remark=f"the line is longer than {MOST_CHARACTERS} characters")
    kept, struck = without_struck(text)
    plain = tidied(kept)
    if plain in _BLANK:
        return Written(text, "blank", struck=struck)
    if plain.lower() in _OK:
        return Written(text, "ok", struck=struck)
    if (found := _quick_again(plain, text, decimal)) is not None:
        return replace(found, struck=struck) if struck else found
    about, rest = split_about(plain)
    found = _about(about, _read_plain(rest, decimal))
    return replace(found, text=text, words=kept.strip() if found.words else "", struck=struck)


def _about(name: str, found: Written) -> Written:
    """A line behind a name (`V 4s: …`): its statements are about that, up to the first that names something itself."""
    if not name:
        return found
    if not found.earlier:
        return replace(found, about=name)
    statements = [*found.earlier, replace(found, earlier=())]
    for at, each in enumerate(statements):
        if each.about:
            break
        statements[at] = replace(each, about=name)
    return replace(statements[-1], earlier=tuple(statements[:-1]))


def _quick_again(plain: str, text: str, decimal: DecimalMark) -> Written | None:
    """The plain forms once more, with one typography and decimal points, and without what leads over to them."""
    pointed, remark = with_points(_LEADING_OVER.sub("", plain, count=1), decimal)
    found = read_quick(pointed, text)
    return replace(found, remark=remark) if found is not None and remark else found


def _read_plain(plain: str, decimal: DecimalMark) -> Written:
    worded = has_words(plain)
    # These two have many raised figures, and bounds of their own.
    if found := read_groups(plain) or read_configuration(plain) or _several(plain, decimal):
        return found
    try:
        check_bounds(plain)
    except Unreadable as error:
        return replace(as_words(plain) if worded else Written(plain, "unreadable"), remark=str(error))

    def read(piece: str) -> Written | None:
        return _statement(piece, decimal) or read_chain(piece, decimal)

    found = _statement(plain, decimal) or (read_worded(plain, read) if worded else None) or read_chain(plain, decimal)
    if found is not None:
        return found
    return as_words(plain) if worded else Written(plain, "unreadable", remark="this could not be read")


def _statement(plain: str, decimal: DecimalMark) -> Written | None:
    """One statement that is no equation, without words around it."""
    return (
        read_name(plain)
        or read_groups(plain)
        or read_configuration(plain)
        or read_ordering(plain, decimal)
        or read_tally(plain, decimal)
    )


def _one_of_several(piece: str, decimal: DecimalMark) -> Written | None:
    """A configuration, groups, or an equation."""
    about, rest = split_about(piece)
    found = read_groups(rest) or read_configuration(rest)
    try:
        check_bounds("" if found else piece)
    except Unreadable:
        return None
    found = found or read_tally(rest, decimal)
    if found is None and has_words(rest):
        found = read_worded(rest, lambda core: read_chain(core, decimal))
    found = found or read_chain(rest, decimal)
    return replace(found, about=about or found.about) if found else None


def _several(plain: str, decimal: DecimalMark) -> Written | None:
    """Several equations on one line: the last, with the others before it."""
    pieces = [piece.strip() for piece in _APART.split(plain)]
    if not 2 <= len(pieces) <= _MOST_STATEMENTS:
        return None
    read = [_one_of_several(piece, decimal) for piece in pieces if piece]
    found = tuple(each for each in read if each is not None)
    if len(found) != len(read) or all(
        each.kind == "tally" or (each.kind == "chain" and not each.label) for each in found
    ):
        return None
    if sum(each.kind == "chain" and each.label is None for each in found) > 1:
        return None
    return replace(found[-1], earlier=found[:-1])
