"""Stage 1, read: how values print in item text, and the filters that fit them into a sentence."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from decimal import Decimal

from authoring.faults import ContentError
from authoring.working.numbers import shown

_NUMBERS = ("zero", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve")
_ORDINALS = (
    *("zeroth", "first", "second", "third", "fourth", "fifth", "sixth", "seventh", "eighth", "ninth", "tenth"),
    *("eleventh", "twelfth"),
)

# What Markdown reads as markup in the part of it that item text uses; a list mark only at the start of a value.
_SPECIAL = re.compile(r"[\\`*_$]")
_LIST_MARK = re.compile(r"(?:[-+](?=\s|$)|[0-9]{1,9}(?=[.)](?:\s|$)))")


class NotPrintable(ContentError):
    """A value that has no place in a sentence."""


@dataclass(frozen=True, slots=True)
class _Trusted:
    """Markup made by a filter from parts that are already escaped."""

    markup: str


def escape_markdown(text: str) -> str:
    """`text` so that Markdown reads it back as it stands, on one line."""
    flat = " ".join(text.split()) if re.search(r"[\n\r\t]", text) else text
    escaped = _SPECIAL.sub(r"\\\g<0>", flat)
    mark = _LIST_MARK.match(escaped)
    if mark is None:
        return escaped
    at = mark.end() if escaped[0].isdigit() else 0
    return f"{escaped[:at]}\\{escaped[at:]}"


def printed(value: object) -> str:
    """The Markdown of a value: text escaped, numbers with U+2212, chemistry by its own `markup`."""
    if isinstance(value, str):
        return escape_markdown(value)
    if isinstance(value, bool) or value is None:
        raise NotPrintable(f"{'yes or no' if value is not None else 'nothing'} cannot be printed; use {{% if %}}")
    if isinstance(value, int):
        return str(value).replace("-", "−")
    if isinstance(value, Decimal):
        return shown(value)
    markup = getattr(value, "markup", None)
    if isinstance(markup, str):
        return markup
    if isinstance(value, list | tuple):
        raise NotPrintable("a list is printed with the filter join")
    raise NotPrintable(f"a {type(value).__name__.lower()} cannot be printed; name one of its attributes")


def _with_article(value: object) -> object:
    text = printed(value)
    article = "an" if _vowel_sound(text.replace("`", "").replace("\\", "").lstrip("*[($")) else "a"
    return _Trusted(f"{article} {text}")


def _vowel_sound(text: str) -> bool:
    """Whether English says `an` before it; symbols are spelt (an `Fe2+`), figures read out (an 11)."""
    figures = re.match(r"[0-9]+", text)
    if figures:
        digits = figures[0]
        return digits[0] == "8" or (digits[:2] in ("11", "18") and len(digits) % 3 == 2)
    word = re.match(r"[^\W\d_]*", text)[0] if text else ""  # type: ignore[index]  # the pattern matches nothing too
    if re.fullmatch(r"[A-Z][a-z]?|[A-Z]{2,}", word) or re.match(r"[A-Z][a-z]?[A-Z]", word):
        return word[0] in "AEFHILMNORSX"
    lower = word.lower()
    if re.match(r"eu|ewe|one\b|once\b|u(?:[brst][aei]|ni(?!n)|sual|topi)", lower):
        return False
    return lower[:1] in tuple("aeiouåäéöø") or lower.startswith(("hour", "honest", "honour", "honor", "heir"))


def _capital(value: object) -> object:
    text = printed(value)
    return _Trusted(text[:1].upper() + text[1:])


def _lower(value: object) -> object:
    if not isinstance(value, str):
        raise NotPrintable("only text has small letters")
    return value.lower()


def _whole(value: object) -> int:
    if isinstance(value, int) and not isinstance(value, bool):
        return value
    raise NotPrintable("this needs a whole number")


def _words(value: object) -> object:
    number = _whole(value)
    return _NUMBERS[number] if 0 <= number < len(_NUMBERS) else number


def _ordinal(value: object) -> object:
    number = _whole(value)
    if 0 <= number < len(_ORDINALS):
        return _ORDINALS[number]
    if number < 0:
        raise NotPrintable("a place in an order is not negative")
    tail = "th" if number % 100 in (11, 12, 13) else {1: "st", 2: "nd", 3: "rd"}.get(number % 10, "th")
    return f"{number}{tail}"


def _count(value: object, one: object, several: object = None) -> object:
    number = _whole(value)
    if not isinstance(one, str) or not isinstance(several, str | None):
        raise NotPrintable("what is counted is named by text")
    word = one if abs(number) == 1 else (several if several is not None else f"{one}s")
    return _Trusted(f"{printed(number)} {escape_markdown(word)}")


def _join(value: object, last: object = "and") -> object:
    if not isinstance(value, list | tuple) or not value:
        raise NotPrintable("only a list with entries can be joined")
    if not isinstance(last, str):
        raise NotPrintable("the word before the last entry is text")
    entries = [printed(entry) for entry in value]
    if len(entries) == 1:
        return _Trusted(entries[0])
    return _Trusted(f"{', '.join(entries[:-1])} {escape_markdown(last)} {entries[-1]}")


# name -> (function, fewest and most words it takes)
FILTERS: Mapping[str, tuple[Callable[..., object], int, int]] = {
    "a": (_with_article, 0, 0),
    "capital": (_capital, 0, 0),
    "count": (_count, 1, 2),
    "join": (_join, 0, 1),
    "lower": (_lower, 0, 0),
    "ordinal": (_ordinal, 0, 0),
    "words": (_words, 0, 0),
}
