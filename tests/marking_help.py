"""Candidates made by machine: scripts written under a practice in many notations, and what they deserve.

Nothing of the judge is used here, only the engine (what a practice makes of a target) and the bank's parts: what is
found here is worked out independently of `authoring/marking`.
"""

from __future__ import annotations

import random
import re
from dataclasses import dataclass, field
from decimal import Decimal

from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value, quantities, quantity
from authoring.shielding.solve import Step, evaluate, work
from authoring.tasks.solved import Options, Solved
from authoring.working.numbers import EXACT, Rounding, shown, to_figures, to_places
from authoring.working.text import to_text

_RAISED = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-")
_SUPERSCRIPTS = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻]+")
S, Z_EFF, LOST = "screening constant", "effective nuclear charge", "first electron lost"
STATED = ("configuration", "groups", "tally", LOST)
# 1 eV per particle in kJ/mol, CODATA 2018: 96.48533212.
PER_MOLE = Decimal("96.48533212")


# --- how a candidate writes ---------------------------------------------------------------------------


@dataclass(frozen=True)
class Style:
    """The habits of one candidate's hand."""

    cross: str = "×"
    minus: str = "−"
    raised: str = "⁺"
    decimal: str = "."
    s: str = "S"
    z: str = "Z_eff"
    spaces: bool = True
    formula: bool = True
    units: str = "key"
    sum_as: str = "terms"
    configuration: str = "full"
    show: str = "lines"
    one_line: bool = False
    words: str = ""
    rounding: str = "key"
    sign: str = "="


def styled(rng: random.Random, show: str | None = None) -> Style:
    """A style drawn at random."""
    return Style(
        cross=rng.choice(["×", "x", "*", "·"]),
        minus=rng.choice(["−", "-", "–"]),
        raised=rng.choice(["⁺", "^"]),
        decimal=rng.choice([".", ".", ","]),
        s=rng.choice(["S", "S", "σ"]),
        z=rng.choice(["Z_eff", "Zeff", "Z*", "Z_{eff}"]),
        spaces=rng.random() < 0.7,
        formula=rng.random() < 0.5,
        units=rng.choice(["key", "key", "none", "kJ/mol"]),
        sum_as=rng.choice(["terms", "split", "shuffled", "products", "short", "worked"]),
        configuration=rng.choice(["full", "core", "raised", "tight"]),
        show=show or rng.choice(["lines", "lines", "values", "final"]),
        one_line=rng.random() < 0.25,
        words=rng.choice(["", "", "", "so ", "thus ", "therefore "]),
        rounding=rng.choice(["key", "key", "more", "three", "early"]),
        sign=rng.choice(["=", "=", "="]),
    )


def typeset(text: str, style: Style) -> str:
    """A key's text in the candidate's typography."""
    text = text.replace("Z_eff", "\0").replace("\0", style.z)
    if style.raised == "^":
        text = _SUPERSCRIPTS.sub(lambda found: "^" + found[0].translate(_RAISED), text)
    text = text.replace("×", style.cross).replace("−", style.minus)
    if not style.spaces:
        text = re.sub(r"(?<=[0-9)]) ([×x*·+]) (?=[0-9(])", r"\1", text)
    return text.replace(".", ",") if style.decimal == "," else text


@dataclass
class Written:
    """A part as a candidate wrote it: the lines, and which targets they show (`counts` where the tally shows)."""

    lines: list[str] = field(default_factory=list)
    shows: dict[Target, str] = field(default_factory=dict)


class Candidate:
    """One candidate: a practice, a style, and what was worked out so far."""

    def __init__(self, practice: Practice, style: Style, rng: random.Random, key: Practice) -> None:
        self.practice = practice
        self.key = key
        self.style = style
        self.rng = rng
        self.own: dict[Target, Value] = {}

    # what is worked out

    def chain(self, solved: Solved) -> list[Step]:
        """The lines that this candidate needs for a part. Raises ContentError where the practice has none."""
        values = dict(self.own)
        steps: list[Step] = []
        for target in solved.targets:
            if target in self.own and len(solved.targets) == 1:
                continue
            new = work(target, self.practice, values, self._rounding(target, solved))
            values.update({step.target: step.line.value for step in new})
            steps += new
        return steps

    def _rounding(self, target: Target, solved: Solved) -> Rounding | None:
        places = len(solved.answer.shown.partition(".")[2])
        if solved.answer.kind == "number" and quantity(target.quantity).rounding.places is not None:
            return Rounding(places=places)
        return None

    # what is written

    def write(self, solved: Solved) -> Written:
        """A part in this candidate's hand; what was worked out is kept for the parts after it."""
        written = Written()
        if solved.task == "explain":
            return written
        if solved.task in ("read", "identify", "correct"):
            return self._write_as_key(solved)
        if solved.task == "select":
            return self._select(solved)
        steps = self.chain(solved)
        self.own.update({step.target: step.line.value for step in steps})
        if solved.task == "complete":
            return self._complete(solved)
        several = len(solved.targets) > 1 or solved.task in ("rank", "decide")
        final = set(solved.targets)
        for step in steps:
            if self.style.show == "final" and step.target not in final:
                continue
            text = self._line(step, steps, several, step.target in final, written)
            if text:
                written.lines.append(text)
        if solved.task in ("rank", "decide"):
            written.lines += self._choice(solved)
        elif self.style.one_line and self.style.decimal == "." and self.style.show == "lines":
            written.lines = ["; ".join(written.lines)]
        return written

    def _line(self, step: Step, steps: list[Step], several: bool, final: bool, written: Written) -> str:
        target, name = step.target, step.target.quantity
        if name == "tally" and not final:
            return ""
        if name == LOST:
            return ""
        if name in STATED:
            if not final and (self.style.show != "lines" or several):
                return ""
            written.shows[target] = "statement"
            return self._statement(step, final)
        written.shows[target] = "value"
        label = self._label(step, several)
        if self.style.show == "final":
            return self._value(step, several, label)
        if self.style.show == "values":
            return f"{self.style.words}{label} = {self._result(step)}"
        if name == S:
            return self._sum(step, label, written)
        if name == Z_EFF:
            return self._difference(step, label)
        return self._chain(step, label)

    def _value(self, step: Step, several: bool, label: str) -> str:
        return f"{label} = {self._result(step)}" if several else self._result(step)

    def _label(self, step: Step, several: bool) -> str:
        names = {S: self.style.s, Z_EFF: self.style.z, "unpaired electrons": "n"}
        label = names.get(step.target.quantity) or to_text(step.line.chain.first)
        if several:
            electrons = step.target.electron is not None
            label += (
                f"({(step.target.electron or step.target.species).label if electrons else step.target.species.label})"
            )
        return label

    def _statement(self, step: Step, final: bool) -> str:
        name, value, how = step.target.quantity, step.line.value, self.style.configuration
        if name == "configuration":
            raised = how == "raised"
            text = value.short() if how == "core" else str(value) if how != "raised" else self._superscripts(str(value))
            if how == "tight" and not raised:
                text = "".join(text.split()) if "[" not in text else text
            return text if self.rng.random() < 0.5 or how == "tight" else f"{step.target.species.label}: {text}"
        if name == "groups":
            text = " ".join(f"({each.label})^{each.electrons}" for each in value)
            if how == "tight":
                return text.replace(",", "").replace("^", "").replace(" ", "")
            return text if how != "raised" else to_text(step.line.chain).partition(": ")[2]
        cross = self.style.cross
        return ", ".join(
            f"{each.count} {cross} {each.coefficient}" for each in value if each.count and each.coefficient
        )

    def _superscripts(self, text: str) -> str:
        up = str.maketrans("0123456789", "⁰¹²³⁴⁵⁶⁷⁸⁹")
        return " ".join(word[:2] + word[2:].translate(up) for word in text.split())

    def _sum(self, step: Step, label: str, written: Written) -> str:
        shares = self._shares(step)
        terms = [(each.count, each.coefficient) for each in shares if each.count and each.coefficient]
        how = self.style.sum_as if terms else "none"
        if how == "none":
            return typeset(f"{label} = {self._result(step)}", self.style)
        if how == "split":
            terms = [piece for count, weight in terms for piece in self._pieces(count, weight)]
        if how == "shuffled":
            self.rng.shuffle(terms)
        products = " + ".join(shown(count * weight) for count, weight in terms)
        body = " + ".join(self._term(count, weight, how) for count, weight in terms)
        members = {"products": [products], "worked": [body, products]}.get(how, [body])
        # A sum of one product, worked out, is a value like any other.
        if how != "products" or len(terms) > 1:
            written.shows[step.target] = "products" if how == "products" else "counts"
        return typeset(f"{self.style.words}{label} = " + " = ".join(members), self.style) + f" = {self._result(step)}"

    def _shares(self, step: Step) -> tuple[object, ...]:
        return self.own[step.target.to("tally")]  # type: ignore[no-any-return]

    def _pieces(self, count: int, weight: Decimal) -> list[tuple[int, Decimal]]:
        first = self.rng.randint(1, count)
        return [(first, weight), *([(count - first, weight)] if count > first else [])]

    def _term(self, count: int, weight: Decimal, how: str) -> str:
        if how == "short" and weight == 1:
            return str(count)
        if how == "short" and count == 1:
            return shown(weight)
        return f"{count} × {shown(weight)}" if how != "shuffled" else f"{shown(weight)} × {count}"

    def _difference(self, step: Step, label: str) -> str:
        screening = self.own.get(step.target.to(S))
        chain = to_text(step.line.chain)
        if screening is None or " − " not in chain:
            return self._chain(step, label)
        members = [typeset(piece, self.style) for piece in chain.split(" = ")[1:-1]]
        if not self.style.formula and len(members) > 1:
            members = members[1:]
        return " = ".join([f"{self.style.words}{label}", *members, self._result(step)])

    def _chain(self, step: Step, label: str) -> str:
        pieces = re.split(r" = | ≈ ", to_text(step.line.chain))
        if len(pieces) < 3 or "→" in pieces[-1]:
            return f"{label} = {self._result(step)}"
        members = pieces[1:-1] if self.style.formula else pieces[2:-1] or pieces[1:-1]
        if self.style.units != "key":
            members = [re.sub(r" (eV|keV|pm|Å|μ_B)(?![A-Za-z])", "", each) for each in members]
        return " = ".join([label, *(typeset(each, self.style) for each in members), self._result(step)])

    def _result(self, step: Step) -> str:
        """The value as this candidate rounds and writes it."""
        line, value = step.line, step.line.value
        unit = line.unit
        number = self._rounded(step)
        if self.style.units == "kJ/mol" and unit == "eV":
            # As many figures as the key's: whoever takes differences later needs them.
            figures = max(4, len(number.as_tuple().digits))
            number, unit = to_figures(EXACT.multiply(value, PER_MOLE), figures), "kJ/mol"
        if self.style.units == "none":
            unit = ""
        text = typeset(shown(number), self.style)
        return f"{text} {unit}".strip()

    def _rounded(self, step: Step) -> Decimal:
        line, value, how = step.line, step.line.value, self.style.rounding
        printed = Decimal(line.shown.replace("−", "-"))
        figures = quantity(step.target.quantity).rounding.figures
        if figures is None or not value:
            tenths = to_places(value, 1)
            return tenths if how == "three" and tenths == value and line.unit == "" else printed
        if how == "more":
            return to_figures(value, figures + 2)
        if how == "three":
            return to_figures(value, 3)
        if how == "early" and step.target.quantity == "orbital energy" and self.style.show != "final":
            return self._early(step, printed)
        return printed

    def _early(self, step: Step, printed: Decimal) -> Decimal:
        """The energy from a ratio that was rounded to three decimals, and R = 13.6 eV."""
        inside = re.search(r"\(([0-9.]+)/([0-9.]+)\)²", to_text(step.line.chain))
        if inside is None:
            return printed
        ratio = to_places(Decimal(inside[1]) / Decimal(inside[2]), 3)
        return to_figures(-Decimal("13.6") * ratio * ratio, 4)

    # choices

    def _choice(self, solved: Solved) -> list[str]:
        if solved.targets[0].quantity == LOST:
            return self._lost(solved)
        return self._compared(solved)

    def _lost(self, solved: Solved) -> list[str]:
        (target,) = solved.targets
        needs = [each for each in quantity(LOST).needs(target, self.practice) if each.quantity == Z_EFF]
        pairs = sorted((self.value(each), each.electron) for each in needs)
        label = self.value(target).label
        text = " < ".join(f"{self.style.z}({electron.label}) = {shown(value)}" for value, electron in pairs)
        return [f"{typeset(text, self.style)} → {label}" if len(pairs) > 1 else label]

    def value(self, target: Target) -> Value:
        """A value that this candidate has, or works out."""
        return self.own[target] if target in self.own else evaluate(target, self.practice, self.own)

    def _compared(self, solved: Solved) -> list[str]:
        pairs = [(self.value(each), thing(each, solved)) for each in solved.targets]
        answer = self.answer(solved)
        pairs.sort()
        unit = solved.steps[-2].line.unit if len(solved.steps) > 1 else ""
        label = to_text(quantity(solved.quantity).symbol)
        label = self.style.z if label == "Z_eff" else label
        rounding = quantity(solved.quantity).rounding
        text = " < ".join(f"{label}({name}) = {shown(rounding.apply(value))} {unit}".rstrip() for value, name in pairs)
        joined = answer if isinstance(answer, str) else f" {'<' if '<' in solved.answer.shown else '>'} ".join(answer)
        if self.style.one_line and solved.task == "decide":
            return [f"{typeset(text, self.style)} → {joined}"]
        return [typeset(text, self.style), joined]

    def answer(self, solved: Solved) -> str | tuple[str, ...]:
        """The choice that this candidate's values lead to."""
        values = sorted((self.value(each), thing(each, solved)) for each in solved.targets)
        names = tuple(name for _, name in values)
        if solved.task == "rank":
            return names if "<" in solved.answer.shown else names[::-1]
        key = sorted((evaluate(each, self.key), thing(each, solved)) for each in solved.targets)
        return names[-1] if key[-1][1] == solved.answer.shown else names[0]

    def _select(self, solved: Solved) -> Written:
        options = [option for each in solved.exhibits if isinstance(each, Options) for option in each.options]
        (target,) = solved.targets
        line = work(target, self.practice, {k: v for k, v in self.own.items() if k != target})[-1].line
        wanted = f"{line.shown} {line.unit}".strip()
        hits = [option.letter for option in options if option.shown == wanted]
        if hits:  # a letter shows this value, and nothing of the way there
            self.own[target] = line.value
        form = self.rng.choice(["{}", "({})", "{})", "option {}"])
        return Written([form.format(hits[0])] if hits else [], {target: "value"} if hits else {})

    def _complete(self, solved: Solved) -> Written:
        values = [self.value(target) for target in solved.targets]
        texts = []
        for number, (target, value, key) in enumerate(zip(solved.targets, values, solved.answer.value, strict=True), 1):
            if key.kind != "number":
                texts.append((number, str(getattr(value, "label", value))))
                continue
            line = work(target, self.practice, {k: v for k, v in self.own.items() if k != target})[-1].line
            places = len(key.shown.partition(".")[2])
            fixed = quantity(target.quantity).rounding.places is not None
            number_text = shown(to_places(value, places)) if fixed else line.shown
            texts.append((number, typeset(f"{number_text} {key.unit}".strip(), self.style)))
        romans = ("i", "ii", "iii", "iv", "v", "vi", "vii", "viii", "ix", "x", "xi", "xii")
        lines = [f"({romans[number - 1]}) {text}" for number, text in texts]
        return Written(lines if self.rng.random() < 0.5 else ["; ".join(lines)], dict.fromkeys(solved.targets, "value"))

    def _write_as_key(self, solved: Solved) -> Written:
        """Parts that this simulator answers as the key does, in its own typography."""
        if solved.task == "read":
            return Written([typeset(f"{solved.answer.shown} {solved.answer.unit}".strip(), self.style)])
        keep = {step.target: step.line.value for step in solved.steps if step.target.quantity in quantities()}
        self.own.update(keep)
        if solved.task == "identify":
            lines = [step for step in solved.steps if step.target.quantity in (S, Z_EFF)]
            texts = [typeset(to_text(step.line.chain), self.style) for step in lines]
            texts += [typeset(to_text(solved.steps[-1].line.chain), self.style)]
            return Written([*texts, solved.answer.shown])
        texts = [typeset(to_text(step.line.chain), self.style) for step in solved.steps[1:]]
        return Written([f"line {solved.answer.value[0]}", *texts])


def thing(target: Target, solved: Solved) -> str:
    """The name of one thing that is compared."""
    by_electron = len({each.species for each in solved.targets}) == 1 and target.electron is not None
    return target.electron.label if by_electron else target.species.label  # type: ignore[union-attr]
