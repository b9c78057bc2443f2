"""Stage 8, mark: words around an answer: set aside where they add nothing, kept as words where they might."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace

from authoring.marking.forms import Written
from authoring.marking.statements import ELECTRON, SPECIES, electron_of, species_of
from authoring.marking.tidy import lowered

Reader = Callable[[str], "Written | None"]

# Words that say nothing about which answer is meant. Comparatives and negations are not among them: "4s is lower"
# and "not 4s" are for a person (or a judge who knows the question) to understand.
_FILLERS = frozenset(
    re.split(
        r"\s+",
        "a an the it is it's its this that are was so thus hence therefore then and answer ans i we think get gives "
        "obtain have choose chose option choice electron electrons orbital subshell shell lost first removed leaves "
        "goes be will would must should from ionised ionized away value of to order ∴ = → : -",
    )
)
_PHRASES = (
    (re.compile(r"\b(?:the )?effective nuclear charge\b", re.I), "Zeff"),
    (re.compile(r"\b(?:the )?(?:screening|shielding)(?: constant)?\b", re.I), "S"),
    (re.compile(r"\b(?:the )?(?:first )?ioni[sz]ation energy\b", re.I), "IE"),
    (re.compile(r"\b(?:the )?(?:orbital |total )?energy\b", re.I), "E"),
    (re.compile(r"\b(?:the )?(?:atomic |ionic )?radius\b", re.I), "r"),
    (re.compile(r"\b(?:the )?electronegativity\b", re.I), "χ"),
    (re.compile(r"\b(?:the )?(?:magnetic )?moment\b", re.I), "μ"),
)
# After a comma only words are a reason: `4s, 3d` is a list, and `4s, or 3d` is undecided.
_REASON = re.compile(
    r",\s+(?=[a-z]{2})(?!or\b|no\b|and\b|but\b|then\b|maybe\b|perhaps\b)|"
    r"\bbecause\b|\bsince\b|\bas (?=it|its|the)|\bdue to\b|\bbecuase\b|\bb/c\b|∵"
)
_EQUALS = re.compile(r"\s+(?:is|are|was|equals|comes to|is equal to|of|gives|:)\s+(?=[-+]?[0-9.(])")
_VALUED = re.compile(r"^(Zeff|S|IE|E|r|χ|μ)\s+(?=[-+]?[0-9.])")
_LETTERS = re.compile(r"[^\W\d_]{2,}")
_SYMBOLS = frozenset(("Zeff", "eff", "eV", "kJ", "mol", "pm", "nm", "nstar", "IE", "SCF", "max"))
_MENTION = re.compile(rf"\b{ELECTRON}\b|(?<![A-Za-z0-9])(?:{SPECIES})(?![A-Za-z0-9])|[0-9]+(?:\.[0-9]+)?")
_ENGLISH = frozenset(("I", "As", "In", "He", "At", "No", "Be", "A", "So", "If", "It"))
_MOST_MENTIONS = 40


def has_words(text: str) -> bool:
    """Whether letters stand together that are no symbol."""
    return any(word not in _SYMBOLS for word in _LETTERS.findall(text))


def read_worded(text: str, read: Reader) -> Written | None:
    """The answer at the head of a worded line, where what surrounds it says nothing else; otherwise None."""
    head = _REASON.split(text, maxsplit=1)[0]
    for phrase, symbol in _PHRASES:
        head = phrase.sub(symbol, head)
    core = _core(_EQUALS.sub(" = ", head))
    found = read(_VALUED.sub(r"\1 = ", core)) if core and core != text else None
    return None if found is None else replace(found, words=text)


def as_words(text: str) -> Written:
    """A line that only a person can understand."""
    return Written(text, "words", words=text, mentions=mentions(text))


def _core(head: str) -> str:
    words = head.split()
    while words and words[0].lower().rstrip(",:") in _FILLERS:
        words.pop(0)
    while words and words[-1].lower().rstrip(".,:") in _FILLERS:
        words.pop()
    return " ".join(words).rstrip(".,")


def mentions(text: str) -> tuple[str, ...]:
    """Electrons, species and numbers named in a text, each once, in order."""
    found: dict[str, None] = {}
    for match in _MENTION.finditer(lowered(text)):
        word = match[0]
        if word[0].isdigit():
            electron = electron_of(word) if word[-1].isalpha() else None
            if electron or word[-1].isdigit():
                found[word] = None
        elif word not in _ENGLISH and (species := species_of(word)):
            found[species.label] = None
        if len(found) == _MOST_MENTIONS:
            break
    return tuple(found)
