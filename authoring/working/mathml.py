"""Working: a node as MathML Core, written element by element; no text reaches the markup unescaped."""

from __future__ import annotations

from authoring.working import shape
from authoring.working.nodes import (
    Bracket,
    Chain,
    Core,
    Formula,
    Fraction,
    Function,
    Listed,
    Measured,
    Negative,
    Node,
    Num,
    Occupied,
    Power,
    Product,
    Root,
    Row,
    Sum,
    Sym,
    Words,
)

NAMESPACE = "http://www.w3.org/1998/Math/MathML"
_INVISIBLE_TIMES = "\u2062"
_APPLY = "\u2061"
_NBSP = "\u00a0"


def math_element(node: Node, display: bool = False, *, decimal: str = ".") -> str:
    """The whole `<math>` element; `display` sets it on a line of its own, with full-size fractions."""
    style = ' display="block" displaystyle="true"' if display else ""
    return f'<math xmlns="{NAMESPACE}"{style}>{to_mathml(node, decimal=decimal)}</math>'


def to_mathml(node: Node, *, decimal: str = ".") -> str:
    """The inside of a `<math>` element: exactly one element."""

    def say(inner: Node) -> str:
        return to_mathml(inner, decimal=decimal)

    match node:
        case Num(text):
            sign, digits = shape.number_parts(text, decimal)
            return _row(_prefix(sign), f"<mn>{escape_xml(digits)}</mn>") if sign else f"<mn>{escape_xml(digits)}</mn>"
        case Sym():
            return _symbol(node, "")
        case Words(text):
            return f"<mtext>{escape_xml(text)}</mtext>"
        case Formula() | Occupied() | Core():
            return _species(node)
        case Row(items):
            return _row(*_spaced([say(item) for item in items]))
        case Listed(items):
            return _row(_mo(";").join(say(item) for item in items))
        case Sum():
            return _sum(shape.terms_of(node), decimal)
        case Product(juxtaposed=juxtaposed):
            cross = _mo(_INVISIBLE_TIMES if juxtaposed else "×")
            return _row(cross.join(say(factor) for factor in shape.factors_of(node)))
        case Fraction(top, bottom):
            return f"<mfrac>{say(top)}{say(bottom)}</mfrac>"
        case Power():
            return _power(node, decimal)
        case Root(inside):
            return f"<msqrt>{say(inside)}</msqrt>"
        case Negative():
            return _row(_prefix(shape.MINUS), say(shape.inside_of(node)))
        case Bracket(inside):
            return _fenced("(", say(inside), ")")
        case Function(name, argument):
            return _row(say(name), _mo(_APPLY), _fenced("(", say(argument), ")"))
        case Measured(unit=unit):
            value = say(shape.value_of(node))
            return _row(value, _unit(unit)) if unit else value
        case Chain(first, rest):
            return _row(say(first), *(_mo(relation) + say(item) for relation, item in rest))


def escape_xml(text: str) -> str:
    """Text for an element's content or a double-quoted attribute of XML or HTML; characters XML forbids go out as �."""
    safe = text if text.isprintable() else "".join(c if _is_xml(c) else "\N{REPLACEMENT CHARACTER}" for c in text)
    return safe.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;").replace('"', "&quot;")


def _is_xml(c: str) -> bool:
    if c < " ":
        return c in "\t\n"
    return not ("\x7f" <= c <= "\x9f" or "\ud800" <= c <= "\udfff" or ord(c) & 0xFFFE == 0xFFFE)


def _sum(terms: tuple[tuple[str, Node], ...], decimal: str) -> str:
    parts: list[str] = []
    for index, (sign, term) in enumerate(terms):
        mark = _mo(sign) if index else _prefix(sign)
        parts.append((mark if sign else "") + to_mathml(term, decimal=decimal))
    return _row(*parts)


def _power(node: Power, decimal: str) -> str:
    exponent = to_mathml(node.exponent, decimal=decimal)
    base = shape.base_of(node)
    if isinstance(base, Sym):
        return _symbol(base, exponent)
    return f"<msup>{to_mathml(base, decimal=decimal)}{exponent}</msup>"


def _symbol(node: Sym, exponent: str) -> str:
    base = _identifier(node.base, node.upright)
    sub = _script(node.sub)
    sup = _script(node.sup)
    if exponent:
        sup = _row(sup, exponent) if sup else exponent
    if sub and sup:
        return f"<msubsup>{base}{sub}{sup}</msubsup>"
    if sub:
        return f"<msub>{base}{sub}</msub>"
    return f"<msup>{base}{sup}</msup>" if sup else base


def _identifier(text: str, upright: bool = True) -> str:
    variant = ' mathvariant="normal"' if upright and len(text) == 1 else ""
    return f"<mi{variant}>{escape_xml(text)}</mi>"


def _script(text: str) -> str:
    """A subscript or superscript: digits, a mark, one italic letter, or an upright word."""
    if not text:
        return ""
    if text.isdigit():
        return f"<mn>{escape_xml(text)}</mn>"
    if text in shape.MARKS:
        return _tight(text)
    if len(text) == 1 and text.isalpha():
        return _identifier(text, upright=False)
    return _identifier(text) if text.isalpha() else _upright(text)


def _species(node: Formula | Occupied | Core) -> str:
    match node:
        case Core(symbol):
            return _row(_mo("[", 'stretchy="false"'), _identifier(symbol), _mo("]", 'stretchy="false"'))
        case Occupied(labels, count, grouped):
            label = _mo(",", 'lspace="0" rspace="0"').join(_upright(one) for one in labels)
            if grouped or len(labels) > 1:
                label = _fenced("(", label, ")")
            return label if count is None else f"<msup>{_row(label)}<mn>{count}</mn></msup>"
        case Formula(symbol, charge, mass):
            return _charged(_levels(shape.formula_pieces(symbol)), _upright(charge), _upright(mass))


def _charged(body: str, charge: str, mass: str) -> str:
    if mass:
        return f"<mmultiscripts>{_row(body)}<mrow/>{charge or '<mrow/>'}<mprescripts/><mrow/>{mass}</mmultiscripts>"
    return f"<msup>{_row(body)}{charge}</msup>" if charge else body


def _levels(pieces: tuple[shape.Piece, ...]) -> str:
    """Runs of characters, with each raised or lowered one attached to the run before it."""
    done: list[str] = []
    for piece in pieces:
        text = _upright(piece.text)
        if piece.level == "plain" or not done:
            done.append(text)
        else:
            tag = "msup" if piece.level == "sup" else "msub"
            done.append(f"<{tag}>{done.pop()}{text}</{tag}>")
    return done[0] if len(done) == 1 else _row(*done)


def _upright(text: str) -> str:
    """Upright letters, digits and signs: `4s`, `2+`, `Fe`."""
    if not text:
        return ""
    parts: list[str] = []
    for run in _runs(text):
        if run.isdigit():
            parts.append(f"<mn>{escape_xml(run)}</mn>")
        elif run.isalpha():
            parts.append(_identifier(run))
        elif run in ("+", "-", shape.MINUS, "*", "′"):
            parts.append(_tight(run.replace("-", shape.MINUS)))
        else:
            parts.append(f"<mtext>{escape_xml(run)}</mtext>")
    return parts[0] if len(parts) == 1 else _row(*parts)


def _runs(text: str) -> list[str]:
    """Split into runs of digits, runs of letters, single signs and the rest."""
    runs: list[str] = []
    last = ""
    for c in text:
        kind = "d" if c.isdigit() else "a" if c.isalpha() else "s" if c in "+-−*′" else "o"
        if kind == last != "s":
            runs[-1] += c
        else:
            runs.append(c)
        last = kind
    return runs


def _unit(unit: str) -> str:
    """A unit after its no-break space."""
    pieces = shape.unit_pieces(unit)
    texts = [f"<mtext>{_NBSP if index == 0 else ''}{escape_xml(p.text)}</mtext>" for index, p in enumerate(pieces)]
    done: list[str] = []
    for piece, text in zip(pieces, texts, strict=True):
        if piece.level == "plain" or not done:
            done.append(text)
        else:
            tag = "msup" if piece.level == "sup" else "msub"
            done.append(f"<{tag}>{done.pop()}{_upright(piece.text)}</{tag}>")
    return _row(*done)


def _spaced(items: list[str]) -> list[str]:
    return [item if index == 0 else f"<mtext>{_NBSP}</mtext>{item}" for index, item in enumerate(items)]


def _row(*items: str) -> str:
    inside = "".join(items)
    return f"<mrow>{inside}</mrow>"


def _fenced(left: str, inside: str, right: str) -> str:
    return _row(_mo(left), inside, _mo(right))


def _mo(text: str, attributes: str = "") -> str:
    return f"<mo{' ' if attributes else ''}{attributes}>{escape_xml(text)}</mo>"


def _prefix(sign: str) -> str:
    return _mo(sign, 'form="prefix" lspace="0" rspace="0"')


def _tight(sign: str) -> str:
    return _mo(sign, 'lspace="0" rspace="0"')
