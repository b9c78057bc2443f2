"""Stage 1, read: the small math of item text, `$Z_{eff} = Z - S$`, by recursive descent into nodes of working."""

from __future__ import annotations

import re
from dataclasses import dataclass

from authoring.faults import ContentError
from authoring.specs.formula_words import COMMANDS, GREEK, MINUS, RELATIONS, SPACES, TIMES, UNITS
from authoring.working.nodes import (
    Bracket,
    Chain,
    Fraction,
    Function,
    Measured,
    Negative,
    Node,
    Num,
    Power,
    Product,
    Relation,
    Root,
    Row,
    Sum,
    Sym,
    Words,
)

_LONGEST = 2_000
_DEEPEST = 12

_TOKEN = re.compile(
    r"""(?P<space>[\s~]+) | (?P<number>[0-9]+(?:\.[0-9]+)?) | (?P<command>\\[A-Za-z]+) | (?P<escaped>\\.)
      | (?P<arrow>->) | (?P<word>[A-Za-zÅ]+) | (?P<mark>.)""",
    re.VERBOSE | re.DOTALL,
)


class MathFault(ContentError):
    """A mistake in a formula; `offset` counts its characters from 0."""

    def __init__(self, message: str, offset: int, word: str = "", allowed: tuple[str, ...] = ()) -> None:
        super().__init__(message, word, allowed)
        self.offset = offset


@dataclass(frozen=True, slots=True)
class _Token:
    kind: str
    text: str
    at: int
    spaced: bool  # a space stands before it


def read_math(text: str) -> Node:
    """The node of a formula between dollar signs. Raises MathFault with its offset."""
    if len(text) > _LONGEST:
        raise MathFault(f"a formula has at most {_LONGEST:,} characters", 0)
    reader = _Reader(text)
    if reader.peek() is None:
        raise MathFault("a formula is missing between the dollar signs", 0)
    node = reader.chain()
    left = reader.peek()
    if left is not None:
        raise _unexpected(left)
    return node


def _unexpected(token: _Token) -> MathFault:
    if token.kind == "command":
        return MathFault(f"{token.text} is not known in formulas", token.at, token.text, COMMANDS)
    return MathFault(f"{token.text!r} cannot stand here in a formula", token.at)


def _tokens(text: str) -> list[_Token]:
    tokens: list[_Token] = []
    spaced = False
    for match in _TOKEN.finditer(text):
        kind, word = str(match.lastgroup), match[0]
        if kind == "space" or word in SPACES:
            spaced = True
            continue
        if kind == "escaped":
            # Values put into a formula come with Markdown's backslashes.
            kind, word = "mark", word[1:]
        tokens.append(_Token(kind, word, match.start(), spaced))
        spaced = False
    return tokens


class _Reader:
    """One method for each level of the grammar: chain, sum, product, scripted, atom."""

    def __init__(self, text: str) -> None:
        self._text = text
        self._tokens = _tokens(text)
        self._at = 0
        self._depth = 0

    def peek(self, ahead: int = 0) -> _Token | None:
        at = self._at + ahead
        return self._tokens[at] if at < len(self._tokens) else None

    def _next(self) -> _Token:
        token = self.peek()
        if token is None:
            raise MathFault("the formula ends too early", max(len(self._text) - 1, 0))
        self._at += 1
        return token

    def _sees(self, *texts: str) -> bool:
        token = self.peek()
        return token is not None and token.text in texts

    def _expect(self, text: str) -> None:
        token = self.peek()
        if token is None or token.text != text:
            at = token.at if token else max(len(self._text) - 1, 0)
            raise MathFault(f"{text!r} is missing here in the formula", at)
        self._at += 1

    def chain(self) -> Node:
        self._depth += 1
        if self._depth > _DEEPEST:
            raise MathFault("the formula is too deeply nested", self._next().at)
        first = self._sum()
        rest: list[tuple[Relation, Node]] = []
        while (token := self.peek()) is not None and token.text in RELATIONS:
            self._at += 1
            rest.append((RELATIONS[token.text], self._sum()))
        self._depth -= 1
        return Chain(first, tuple(rest)) if rest else first

    def _sum(self) -> Node:
        terms: list[tuple[str, Node]] = []
        if self._sees("+"):
            self._at += 1
        elif self._sees(*MINUS):
            self._at += 1
            terms.append(("−", self._product()))
        if not terms:
            terms.append(("+", self._product()))
        while self._sees("+", *MINUS):
            sign = "+" if self._next().text == "+" else "−"
            terms.append((sign, self._product()))
        if len(terms) == 1:
            return terms[0][1] if terms[0][0] == "+" else Negative(terms[0][1])
        first = Negative(terms[0][1]) if terms[0][0] == "−" else terms[0][1]
        return Sum((("+", first), *(("+" if sign == "+" else "−", term) for sign, term in terms[1:])))

    def _product(self) -> Node:
        crossed: list[Node] = []
        beside: list[Node] = [self._signed()]
        while (token := self.peek()) is not None:
            if token.text in TIMES or token.text == "*":
                self._at += 1
                crossed.append(_beside(beside))
                beside = [self._signed()]
            elif token.text == "/":
                self._at += 1
                beside[-1] = Fraction(beside[-1], self._signed())
            elif self._begins_atom(token):
                beside.append(self._scripted())
            else:
                break
        crossed.append(_beside(beside))
        return crossed[0] if len(crossed) == 1 else Product(tuple(crossed))

    def _signed(self) -> Node:
        """A factor that may carry its own minus: `2 × −3`."""
        if self._sees(*MINUS):
            self._at += 1
            return Negative(self._scripted())
        return self._scripted()

    def _begins_atom(self, token: _Token) -> bool:
        if token.kind in ("number", "word"):
            return True
        if token.kind == "command":
            return token.text not in RELATIONS and token.text not in TIMES and token.text != "\\right"
        return token.text in ("(", "{", "…") or token.text in GREEK.values() or token.text in ("√", "∞")

    def _scripted(self) -> Node:
        token = self.peek()
        node = self._atom()
        sub = sup = ""
        while self._sees("_", "^", "'", "′") or self._is_star():
            mark = self._next()
            if mark.text == "_":
                if sub or not isinstance(node, Sym | Words):
                    raise MathFault("a subscript cannot stand here", mark.at)
                sub = self._subscript()
            elif mark.text != "^":
                sup += "*" if mark.text == "*" else "′"
            elif (star := self._raised_mark()) != "":
                sup += star
            else:
                sup += self._leading_star()
                return self._measured(Power(_marked(node, sub, sup, mark.at), self._exponent()))
        node = _marked(node, sub, sup, token.at if token else 0)
        if isinstance(node, Sym) and self._sees("(", "\\left") and not self._spaced():
            return self._applied(node)
        return self._measured(node) if isinstance(node, Num) else node

    def _applied(self, symbol: Sym) -> Node:
        """`E(n)` is E of n; `R(Z/n)^2` and `n(n + 2)` are products."""
        before = self._at
        inside = self._bracketed()
        if isinstance(inside, Sym | Words | Num) and not self._sees("^", "_"):
            return Function(symbol, inside)
        self._at = before
        return symbol

    def _spaced(self) -> bool:
        token = self.peek()
        return token is not None and token.spaced

    def _is_star(self) -> bool:
        """Whether a star belongs to the symbol before it (`n*`) and does not multiply (`2*3`, `Z * 2`)."""
        token, before, after = self.peek(), self.peek(-1), self.peek(1)
        if token is None or token.text != "*" or token.spaced or before is None or before.kind == "number":
            return False
        return after is None or after.spaced or not (self._begins_atom(after) or after.text in MINUS)

    def _raised_mark(self) -> str:
        """`*` or `′` after ^, alone or in braces."""
        for shape in (("*",), ("{", "*", "}"), ("\\ast",), ("{", "\\ast", "}"), ("\\prime",), ("{", "\\prime", "}")):
            tokens = [self.peek(k) for k in range(len(shape))]
            if all(t is not None and t.text == want for t, want in zip(tokens, shape, strict=True)):
                self._at += len(shape)
                return "′" if "\\prime" in shape else "*"
        return ""

    def _leading_star(self) -> str:
        """The star of `n^{*2}`, which belongs to the symbol and not to its exponent."""
        brace, star = self.peek(), self.peek(1)
        if brace is None or star is None or brace.text != "{" or star.text != "*":
            return ""
        self._tokens[self._at + 1 : self._at + 2] = []
        return "*"

    def _subscript(self) -> str:
        if not self._sees("{"):
            token = self._next()
            return self._script_text(token)
        self._at += 1
        pieces: list[str] = []
        while not self._sees("}"):
            token = self._next()
            pieces.append((" " if token.spaced and pieces else "") + self._script_text(token))
        self._at += 1
        if not pieces:
            raise MathFault("the subscript is empty", self._tokens[self._at - 1].at)
        return "".join(pieces)

    def _script_text(self, token: _Token) -> str:
        if token.text in ("\\mathrm", "\\text"):
            return self._upright_text()
        if token.kind in ("number", "word") or token.text in (*",+*()", *GREEK.values()):
            return token.text
        if token.text in MINUS:
            return "−"
        if token.kind == "command" and token.text[1:] in GREEK:
            return GREEK[token.text[1:]]
        if token.text == "∞" or token.text == "\\infty":
            return "∞"
        raise _unexpected(token)

    def _exponent(self) -> Node:
        if self._sees("{"):
            self._at += 1
            node = self.chain()
            self._expect("}")
            return node
        if self._sees(*MINUS):
            self._at += 1
            return Negative(self._atom())
        return self._atom()

    def _atom(self) -> Node:
        token = self._next()
        if token.kind == "number":
            return Num(token.text)
        if token.kind == "word":
            return self._word(token)
        if token.kind == "command":
            return self._command(token)
        if token.text in GREEK.values():
            return Sym(token.text)
        if token.text == "(":
            self._at -= 1
            return Bracket(self._bracketed())
        if token.text == "{":
            node = self.chain()
            self._expect("}")
            return node
        if token.text in ("∞", "…"):
            return Words(token.text)
        if token.text == "√":
            return Root(self._atom())
        raise _unexpected(token)

    def _word(self, token: _Token) -> Node:
        if len(token.text) > 1:
            known = re.fullmatch(r"([A-Z])(eff|max|min)", token.text)
            better = f"{known[1]}_{{{known[2]}}}" if known else rf"\mathrm{{{token.text}}}"
            raise MathFault(f"{token.text!r} is more than one symbol in a formula; write {better}", token.at)
        return Sym(token.text)

    def _command(self, token: _Token) -> Node:
        name = token.text[1:]
        if name in GREEK:
            return Sym(GREEK[name])
        if name in ("mathrm", "text"):
            return Words(self._upright_text())
        if name == "frac":
            return Fraction(self._group(), self._group())
        if name == "sqrt":
            return Root(self._group())
        if name == "left":
            self._at -= 1
            return Bracket(self._bracketed())
        if name == "infty":
            return Words("∞")
        raise _unexpected(token)

    def _group(self) -> Node:
        self._expect("{")
        node = self.chain()
        self._expect("}")
        return node

    def _bracketed(self) -> Node:
        sized = self._sees("\\left")
        if sized:
            self._at += 1
        self._expect("(")
        node = self.chain()
        if sized:
            self._expect("\\right")
        self._expect(")")
        return node

    def _upright_text(self) -> str:
        r"""The words of `\mathrm{…}`, as they stand in the text."""
        self._expect("{")
        start = self._tokens[self._at - 1].at + 1
        while not self._sees("}"):
            token = self._next()
            if token.kind == "command" or token.text == "{":
                raise MathFault(f"only words may stand in upright text, not {token.text}", token.at)
        end = self._next().at
        words = " ".join(re.sub(r"\\(.)|~", lambda m: m[1] or " ", self._text[start:end]).split())
        if not words:
            raise MathFault("the upright text is empty", start)
        return words

    def _measured(self, number: Num | Power) -> Node:
        token = self.peek()
        if token is None or (isinstance(number, Power) and not isinstance(number.base, Num)):
            return number
        if token.text in ("\\mathrm", "\\text"):
            mark = self._at
            self._at += 1
            unit = self._upright_text()
            if unit in UNITS and not self._sees("_", "^"):
                return Measured(number, UNITS[unit])
            self._at = mark
            return number
        if token.kind != "word" or token.text not in UNITS or (len(token.text) == 1 and token.text not in ("Å", "J")):
            return number
        for unit in sorted(UNITS, key=len, reverse=True):
            if unit.startswith(token.text) and self._text.startswith(unit, token.at):
                end = token.at + len(unit)
                while (token := self.peek()) is not None and token.at < end:
                    self._at += 1
                return Measured(number, UNITS[unit])
        return number


def _beside(items: list[Node]) -> Node:
    if len(items) == 1:
        return items[0]
    if any(isinstance(item, Words) for item in items):
        return Row(tuple(items))
    return Product(tuple(items), juxtaposed=True)


def _marked(node: Node, sub: str, sup: str, at: int) -> Node:
    if not sub and not sup:
        return node
    if isinstance(node, Words):
        return Sym(node.text, sub, sup, upright=True)
    if isinstance(node, Sym):
        return Sym(node.base, sub, sup)
    raise MathFault("only a symbol can carry this mark", at)
