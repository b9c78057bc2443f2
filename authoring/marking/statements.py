"""Stage 8, mark: lines that are no equations: configurations, groups, tallies, orderings, choices, names."""

from __future__ import annotations

import re
from dataclasses import replace
from decimal import Decimal

from authoring.atoms.configuration import Configuration
from authoring.atoms.species import Species
from authoring.atoms.subshell import Subshell
from authoring.faults import ContentError
from authoring.marking.chains import label_of, member_of, read_chain, with_points, with_signs
from authoring.marking.expression import Term
from authoring.marking.forms import DecimalMark, Member, Written
from authoring.marking.parse import symbol_node
from authoring.marking.tidy import lowered
from authoring.shielding.screening import Group
from authoring.working.nodes import Num, Product, Words

SPECIES = r"[A-Z][a-z]?(?: ?\(?[0-9]{0,2}[+-]\)?)?"
ELECTRON = r"[1-8][spdf]"
_CHOICE = re.compile(r"(?:[Oo]ption |[Aa]nswer )?(?:\(([A-Ha-h])\)|([A-H])[.)]?|([a-h])[.)]?)")
_ELECTRON = re.compile(rf"\(?({ELECTRON})\)?(?: ?(?:electrons?|orbital|subshell))?\.?")
_SPECIES = re.compile(rf"({SPECIES})\.?")
_PREFIX = re.compile(
    rf"([A-Z][a-z]?(?: ?[\^{{(]{{0,2}}[0-9]{{0,2}}[+-][}})]{{0,2}})?|{ELECTRON})\s*(?:[:=]\s*|\s(?=\[|\(?1s))"
)
_SUFFIX = re.compile(rf"(?<=[0-9A-Za-z])\s*(?:\(({ELECTRON}|{SPECIES})\)|\bfor (?:the )?({ELECTRON}|{SPECIES}))$")
_CONFIGURATION = re.compile(r"(?:\[\s*[A-Za-z]{1,2}\s*\]|[1-8][spdf])[\[\]0-9spdf\s.,;*]*")
_COUNTED = re.compile(r"[1-8][spdf][0-9]|\[[A-Za-z ]+\]")
_GROUP = re.compile(r"[(\[]([0-9spdf,\s/+.;]{2,60})[)\]]\s*([0-9]{1,2})?[\s,;.*]*")
_MEMBERS = re.compile(r"([1-8])([spdf](?:\s?,?\s?[spdf](?![a-z]))*)")
_BARE_GROUP = re.compile(rf"(?:{ELECTRON}|[spdf]|[\s,/+.;])+")
_NUMBER = r"([0-9]{1,15}(?:\.[0-9]{1,15})?)"
_TALLIED = re.compile(rf"{_NUMBER}\s*(?:electrons?|e-?)?\s*(?:\*|at|@)\s*(?:each\s*)?{_NUMBER}(?:\s*=\s*{_NUMBER})?")
_REGION = re.compile(r"[A-Za-z][^*:=+]*\s(?=[0-9])")
_WORD = re.compile(r"[a-z]{2}")
_BARE = re.compile(_NUMBER)
_ITEM_END = re.compile(r";|,(?![0-9])|,(?=\s)|\band\b")
_COMPARED = re.compile(r"\s*([<>])\s*")
_SUBJECT = re.compile(rf"([A-Za-zσχμ][A-Za-z_]{{0,7}})\s?\(\s*({SPECIES}|{ELECTRON})\s*\)")
_MOST_COMPARED = 40


def split_about(text: str) -> tuple[str, str]:
    """What a line names first (`V : …`, `4s: …`, `V [Ar] …`) or last (`… = 3.30 (4s)`), and the rest of it."""
    found = _PREFIX.match(text)
    if found is not None:
        rest = text[found.end() :]
        # `S` and `I` are quantities before they are elements, and so is any letter before an equals sign.
        is_name = bool(_CONFIGURATION.match(rest) or _GROUP.match(rest))
        if is_name or ("=" not in found[0] and found[1] not in ("S", "I")):
            name = _name(lowered(found[1]))
            return (name, rest) if name and rest else ("", text)
    if "=" in text and (found := _SUFFIX.search(text)):
        name = _name(found[1] or found[2])
        if name:
            return name, text[: found.start()]
    return "", text


def species_of(text: str) -> Species | None:
    """The species written, or None."""
    try:
        return Species.parse(text.replace("(", "").replace(")", "").replace(" ", ""))
    except ContentError:
        return None


def electron_of(text: str) -> Subshell | None:
    """The electron (its subshell) written, or None."""
    try:
        return Subshell.parse(text)
    except ContentError:
        return None


def read_name(text: str) -> Written | None:
    """A choice, an electron or a species standing alone. A letter may be both: then both are given."""
    if len(text) > 30:
        return None
    plain = lowered(text)
    named = _SPECIES.fullmatch(plain)
    species = species_of(named[1]) if named else None
    if found := _CHOICE.fullmatch(plain):
        letter = next(group for group in found.groups() if group)
        return Written(text, "choice", choice=letter.upper(), species=species)
    if (found := _ELECTRON.fullmatch(plain)) and (electron := electron_of(found[1])):
        return Written(text, "electron", electron=electron)
    if species is not None:
        return Written(text, "species", species=species)
    return None


def read_configuration(text: str) -> Written | None:
    """A configuration; one that cannot exist keeps the reason as its remark."""
    plain = lowered(text)
    if len(plain) > 300 or not _CONFIGURATION.fullmatch(plain) or not _COUNTED.search(plain):
        return None
    try:
        found = Configuration.parse(re.sub(r"[\s,;.*]+", " ", plain).strip())
    except ContentError as error:
        return Written(text, "configuration", remark=error.message)
    return Written(text, "configuration", config=found)


def read_groups(text: str) -> Written | None:
    """Groups with their electrons: `(1s)2(2s2p)8`, `(1s²)(2s²2p⁶)`, `(2s,p)⁸`."""
    plain = lowered(text)
    if plain[:1] not in ("(", "[") or len(plain) > 300:
        return None
    groups: list[Group] = []
    at = 0
    remark = ""
    while at < len(plain):
        found = _GROUP.match(plain, at)
        group = _group(found[1], found[2]) if found else None
        if found is None or group is None:
            return None
        if not group.electrons:
            remark = "a group without its number of electrons"
        groups.append(group)
        at = found.end()
    if len(groups) == 1 and remark:
        return None
    return Written(text, "groups", groups=tuple(groups), remark=remark)


def _group(inside: str, count: str | None) -> Group | None:
    try:
        if _BARE_GROUP.fullmatch(inside):
            labels = [n + letter for n, letters in _MEMBERS.findall(inside) for letter in letters if letter in "spdf"]
            subshells = tuple(Subshell.parse(label) for label in labels)
            return Group(subshells, int(count or 0)) if subshells else None
        if count is not None:
            return None
        held = Configuration.parse(re.sub(r"[\s,/+.;]+", " ", inside).strip())
    except ContentError:
        return None
    return Group(held.occupied, held.electrons)


def read_tally(text: str, decimal: DecimalMark) -> Written | None:
    """Counts with their coefficients: `1 x 0.35, 11 x 0.85`, `0.35: 1; 0.85: 11`, `same group: 1 × 0.35`."""
    if not any(mark in text for mark in ",;:@") and not _WORD.search(text):
        return None
    plain, remark = with_points(text, decimal)
    items = [item.strip() for item in _ITEM_END.split(with_signs(plain)) if item.strip()]
    if len(items) > 60 or (len(items) == 1 and ":" not in items[0] and not _WORD.search(items[0])):
        return None
    members = [_tallied(item) for item in items]
    if not members or None in members:
        return None
    kept = tuple(member for member in members if member)
    terms = tuple(term for member in kept for term in member.terms)
    return Written(text, "tally", members=kept, terms=terms, remark=remark)


def _tallied(item: str) -> Member | None:
    head, _, body = item.rpartition(":")
    body = body.strip()
    if body[:1].isalpha() and (region := _REGION.match(body)):
        body = body[region.end() :]
    if found := _TALLIED.fullmatch(body):
        count, coefficient, stated = found.groups()
        member = member_of(Product((Num(count), Num(coefficient))))
        return replace(member, shown=stated or "")
    if head and (left := _BARE.fullmatch(head.strip())) and (right := _BARE.fullmatch(body)):
        coefficient, count = left[1], right[1]
        if "." in count and "." not in coefficient:
            coefficient, count = count, coefficient
        term = Term(Decimal(count), Decimal(coefficient))
        return Member(Product((Num(count), Num(coefficient))), term.product, (term,))
    return None


def read_ordering(text: str, decimal: DecimalMark) -> Written | None:
    """Things compared (`Na > Mg > Al`, `Z_eff(4s) = 3.30 < Z_eff(3d) = 4.30 → 4s`) or listed (`Na, Mg, Al`)."""
    if "<" not in text and ">" not in text:
        return _listed(text)
    body, _, conclusion = text.partition("→")
    plain, remark = with_points(body, decimal)
    pieces = _COMPARED.split(with_signs(plain).strip())
    if len(pieces) > 2 * _MOST_COMPARED or not all(pieces):
        return None
    items = [_compared(piece) for piece in pieces[::2]]
    if any(item is None for item in items):
        return None
    kept = [item for item in items if item]
    signs = set(pieces[1::2])
    found = Written(
        text,
        "ordering",
        label=next((label for label, _, _ in kept if label), None),
        members=tuple(member for _, _, member in kept),
        order=tuple(name for _, name, _ in kept) if len(signs) == 1 else (),
        direction=signs.pop() if len(signs) == 1 else "",
        remark=remark,
    )
    if not found.direction:
        found = replace(found, remark="the comparison runs both ways")
    return _concluded(found, conclusion) if conclusion.strip() else found


def _concluded(found: Written, conclusion: str) -> Written:
    """The ordering with the choice that is drawn from it."""
    name = read_name(conclusion.rpartition(":")[2].strip())
    if name is None:
        return replace(found, words=conclusion.strip())
    return replace(found, electron=name.electron, species=name.species, choice=name.choice)


def _compared(piece: str) -> tuple[str | None, str, Member] | None:
    """Label, name and member of one thing that is compared."""
    subject, equals, value = piece.partition("=")
    plain = lowered(subject).strip()
    label = None
    if found := _SUBJECT.fullmatch(plain):
        label = label_of(symbol_node(found[1]))
        plain = found[2]
    name = _name(plain)
    if name is not None:
        chain = read_chain(value.strip(), "auto") if equals else None
        member = Member(Words(name)) if chain is None or chain.value is None else chain.members[-1]
        return label, name, member
    chain = read_chain(piece, "auto")
    if chain is None or chain.value is None:
        return None
    return chain.label, chain.shown or str(chain.value), chain.members[-1]


def _name(text: str) -> str | None:
    read = read_name(text)
    if read is None:
        return None
    if read.electron:
        return read.electron.label
    return read.species.label if read.species else None


def _listed(text: str) -> Written | None:
    if "," not in text and " " not in text:
        return None
    pieces = [piece.strip() for piece in re.split(r",|\s(?=\S*[a-zA-Z+])", lowered(text)) if piece.strip()]
    names = [_name(piece) for piece in pieces[: _MOST_COMPARED + 1]]
    if not 2 <= len(names) <= _MOST_COMPARED or None in names:
        return None
    order = tuple(name for name in names if name)
    if len({name[0].isdigit() for name in order}) > 1:
        return None
    return Written(text, "ordering", members=tuple(Member(Words(name)) for name in order), order=order, direction=",")
