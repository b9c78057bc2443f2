"""Stage 1, read: inline code as chemistry.

`Fe3+`, `35Cl`, `3d6`, `[Ar] 3d6 4s2`, `(2s,2p)8`, `CuSO4`, `SO4^2-`, `Na -> Na+ + e-`.
"""

from __future__ import annotations

import re
from collections.abc import Iterable

from authoring.atoms.reference import elements
from authoring.atoms.subshell import Subshell, quoted
from authoring.faults import ContentError
from authoring.working.nodes import Chain, Core, Formula, Negative, Node, Num, Occupied, Row, Sum, Words

_LONGEST = 400
_RAISED_DIGITS = "⁰¹²³⁴⁵⁶⁷⁸⁹"
_TO_ASCII = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻₀₁₂₃₄₅₆₇₈₉−–", "0123456789+-0123456789--")
_RAISED_COUNT = re.compile(rf"(?<=[spdfg)])([{_RAISED_DIGITS}]+)(?=[0-9(])")
_ARROW = re.compile(r"\s*(?:->|→|⟶)\s*")

_LABEL = r"(?:[1-9n]|\(n-[12]\))[spdfg]"
_SUBSHELL = re.compile(rf"(?P<label>{_LABEL})(?P<count>[0-9]{{1,2}})?")
_GROUP = re.compile(rf"\((?P<labels>{_LABEL}(?:[ ,]*{_LABEL})*)\)(?P<count>[0-9]{{1,2}})?")
_CORE = re.compile(r"\[([A-Z][a-z]?)\]")
_STATE = re.compile(r"\((?:s|l|g|aq)\)$")
_CHARGED = re.compile(r"(?P<body>.*?)(?:\^(?P<raised>[0-9]*[+-])|(?P<size>[0-9]*)(?P<sign>[+-]))?")
_ATOM = re.compile(r"([A-Z][a-z]?)([0-9]*)")
_BODY = re.compile(r"(?P<lead>[0-9]{1,3})?(?P<rest>[A-Z(\[][A-Za-z0-9()\[\]·.]*)")


def read_chemistry(text: str) -> Node:
    """The node of a species, formula, subshell, configuration or equation. Raises ContentError for anything else."""
    plain = " ".join(text.split())
    if not plain:
        raise ContentError("chemistry is missing between the backticks")
    if len(plain) > _LONGEST:
        raise ContentError(f"chemistry between backticks has at most {_LONGEST} characters")
    plain = _RAISED_COUNT.sub(r"\1 ", plain).translate(_TO_ASCII)
    first, *rest = [_side(side) for side in _ARROW.split(plain)]
    return Chain(first, tuple(("→", side) for side in rest)) if rest else first


def _side(text: str) -> Node:
    if not text:
        raise ContentError("one side of the arrow is empty")
    terms = [_words(part) for part in re.split(r"\s\+\s", text)]
    return terms[0] if len(terms) == 1 else Sum(tuple(("+", term) for term in terms))


def _words(text: str) -> Node:
    # A group may hold a space after its comma; everything else is parted by spaces.
    items = [node for word in re.findall(r"\([^()]*\)\S*|\S+", _joined_species(text)) for node in _word(word)]
    if not items:
        raise ContentError("something is missing beside the plus sign")
    return items[0] if len(items) == 1 else Row(tuple(items))


def _joined_species(text: str) -> str:
    """Part a group that follows on without a space, `1s2(2s,2p)8`, from what stands before it."""
    return re.sub(rf"(?<=[0-9spdfg])(?=\({_LABEL}[ ,]*{_LABEL})", " ", text)


def _word(word: str) -> Iterable[Node]:
    if match := _CORE.fullmatch(word):
        return (Core(_element(match[1])),)
    if word.startswith("[") and (match := _CORE.match(word)) and _SUBSHELL.match(word, match.end()):
        return (Core(_element(match[1])), *_word(word[match.end() :]))
    if match := _SUBSHELL.fullmatch(word):
        return (Occupied((_label(match["label"]),), _count(match["count"])),)
    if match := _GROUP.fullmatch(word):
        labels = tuple(_label(label) for label in re.findall(_LABEL, match["labels"]))
        return (Occupied(labels, _count(match["count"]), grouped=True),)
    if re.fullmatch(r"[0-9]{1,3}", word):
        return (Num(word),)
    if re.fullmatch(r"-[0-9]{1,3}", word):
        return (Negative(Num(word[1:])),)
    if word in ("e-", "e^-"):
        return (Formula("e", "−"),)
    return _species(word)


def _label(label: str) -> str:
    if label[0].isdigit():
        return Subshell.parse(label).label
    return label.replace("-", "−")


def _count(digits: str | None) -> int | None:
    return int(digits) if digits else None


def _species(word: str) -> Iterable[Node]:
    state = _STATE.search(word)
    core = word[: state.start()] if state else word
    match = _CHARGED.fullmatch(core)
    body = match["body"] if match else ""
    parts = _BODY.fullmatch(body)
    if match is None or parts is None:
        raise _not_chemistry(word)
    charge = match["raised"] or ""
    if match["sign"]:
        body, size = _share_digits(body, match["size"], match["sign"])
        charge = size + match["sign"]
    if charge.startswith("0"):
        raise ContentError(f"{quoted(word)}: a neutral species is written without a charge")
    lead, rest = parts["lead"] or "", body.removeprefix(parts["lead"] or "")
    _check_elements(rest, word)
    mass = lead if lead and len(_ATOM.findall(rest)) == 1 else ""
    formula = Formula(rest, charge.replace("-", "−"), mass)
    after = (Words(state[0]),) if state else ()
    return (*((Num(lead),) if lead and not mass else ()), formula, *after)


def _share_digits(body: str, size: str, sign: str) -> tuple[str, str]:
    """Which digits before a sign count atoms and which the charge: `Fe3+`, `NH4+`, `SO42-`, `O22-`."""
    if body.endswith("]"):
        return body, size
    lone = re.fullmatch(r"[0-9]*([A-Z][a-z]?)", body)
    if lone and not (len(size) == 2 and (sign == "-" or lone[1] == "Hg")):
        return body, size
    if len(size) >= 2:
        return body + size[:-1], size[-1]
    return body + size, ""


def _check_elements(body: str, word: str) -> None:
    if body.count("(") != body.count(")") or body.count("[") != body.count("]"):
        raise ContentError(f"{quoted(word)} has a bracket without its partner")
    table = elements().by_symbol
    near = body[:2].capitalize()
    if body[1:2].isupper() and body[1] not in table and near in table:
        raise ContentError(f"{quoted(word)} is not chemistry; did you mean {near!r}?")
    position = 0
    for match in re.finditer(r"([A-Z][a-z]?)|[0-9()\[\]·.]", body):
        if match.start() != position:
            raise _not_chemistry(word)
        position = match.end()
        if match[1]:
            _element(match[1])
    if position != len(body):
        raise _not_chemistry(word)


def _element(symbol: str) -> str:
    table = elements().by_symbol
    if symbol not in table:
        raise ContentError(f"{quoted(symbol)} is not an element symbol", symbol, tuple(table))
    return symbol


def _not_chemistry(word: str) -> ContentError:
    return ContentError(f"{quoted(word)} is not chemistry (as `Fe3+`, `35Cl`, `3d6`, `[Ar] 3d6 4s2`, `CuSO4` are)")
