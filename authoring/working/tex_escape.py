"""Working: running text as LaTeX source; what it cannot print it refuses, and nothing in it is ever a command."""

from __future__ import annotations

import re
import unicodedata
from functools import lru_cache

from authoring.faults import ContentError

# Code points above ASCII that the T1-encoded Latin Modern fonts print under pdfTeX *and* that come back unchanged
# when the text is extracted from the PDF. Made by compiling every declared character and reading the page back
# (TeX Live 2022); combining forms, commas below and the like print, but do not come back, so they are not in the list.
T1_CLEAN = frozenset(
    "¡¢£¤¥¦§¨©ª«¬®¯°±´µ¶·¸º»¼½¾¿ÀÁÂÃÄÅÆÇÈÉÊËÌÍÎÏÐÑÒÓÔÕÖ×ØÙÚÛÜÝÞßàáâãäåæçèéêëìíîïðñòóôõö÷øùúûüýþÿ"
    "ĂăĄąĆćČčĎďđĘęĚěĞğİıĲĳĹĺĽľŁłŃńŇňŊŋŐőŒœŔŕŘřŚśŞşŠšŢţŤťŮůŰűŸŹźŻżŽžƒȷ"
    "–—‖‘’‚“”„†‡•‰‹›※‽⁄₡₤₩₫€℃№™℮←↑→↓"
)

_GREEK_NAMES = {
    "α": "alpha", "β": "beta", "γ": "gamma", "δ": "delta", "ε": "varepsilon", "ζ": "zeta", "η": "eta", "θ": "theta",
    "ι": "iota", "κ": "kappa", "λ": "lambda", "μ": "mu", "ν": "nu", "ξ": "xi", "π": "pi", "ρ": "rho", "ς": "varsigma",
    "σ": "sigma", "τ": "tau", "υ": "upsilon", "φ": "varphi", "χ": "chi", "ψ": "psi", "ω": "omega", "Γ": "Gamma",
    "Δ": "Delta", "Θ": "Theta", "Λ": "Lambda", "Ξ": "Xi", "Π": "Pi", "Σ": "Sigma", "Υ": "Upsilon", "Φ": "Phi",
    "Ψ": "Psi", "Ω": "Omega", "ϵ": "epsilon", "ϑ": "vartheta", "ϕ": "phi", "ϖ": "varpi", "ϱ": "varrho",
}  # fmt: skip
MATH_GREEK = {
    **{letter: "\\" + name for letter, name in _GREEK_NAMES.items()},
    **{greek: rf"\mathrm{{{latin}}}" for greek, latin in zip("ΑΒΕΖΗΙΚΜΝΟΡΤΧο", "ABEZHIKMNOPTXo", strict=True)},
}

_SYMBOLS = {
    "−": "-", "≤": r"\leq", "≥": r"\geq", "≈": r"\approx", "≠": r"\neq", "≡": r"\equiv", "∞": r"\infty", "√": r"\surd",
    "∝": r"\propto", "∼": r"\sim", "≃": r"\simeq", "∑": r"\sum", "∏": r"\prod", "∫": r"\int", "∂": r"\partial",
    "∆": r"\Delta", "∇": r"\nabla", "⋅": r"\cdot", "∙": r"\cdot", "∗": r"\ast", "↔": r"\leftrightarrow",
    "⇌": r"\rightleftharpoons", "⇒": r"\Rightarrow", "⇔": r"\Leftrightarrow", "⟶": r"\longrightarrow", "≪": r"\ll",
    "≫": r"\gg", "∈": r"\in", "∉": r"\notin", "∓": r"\mp", "ℓ": r"\ell", "ℏ": r"\hbar", "′": r"{}^{\prime}",
    "″": r"{}^{\prime\prime}", "⟨": r"\langle", "⟩": r"\rangle",
}  # fmt: skip

_SPACES = {
    "\t": " ", "\n": " ", "\u00a0": "~", "\u2007": "~", "\u202f": r"\,", "\u2009": r"\,", "\u200a": r"\,",
    "\u2002": r"\enspace{}", "\u2003": r"\quad{}", "\u2004": r"\:", "\u2005": r"\:", "\u2006": r"\,", "\u2008": r"\,",
    "\u2028": " ", "\u2029": " ", "\u3000": r"\quad{}", "\u00ad": r"\-",
}  # fmt: skip

_SPECIALS = {
    "\\": r"\textbackslash{}", "{": r"\{", "}": r"\}", "$": r"\$", "&": r"\&", "#": r"\#", "%": r"\%", "_": r"\_",
    "^": r"\textasciicircum{}", "~": r"\textasciitilde{}", "<": r"\textless{}", ">": r"\textgreater{}",
    "|": r"\textbar{}", '"': r"\textquotedbl{}", "`": r"\textasciigrave{}", "[": "{[}", "]": "{]}",
}  # fmt: skip

_LOWERED = {
    **{raised: rf"\textsuperscript{{{plain}}}" for raised, plain in zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺ⁿ", "0123456789+n", strict=True)},
    **{low: rf"\textsubscript{{{plain}}}" for low, plain in zip("₀₁₂₃₄₅₆₇₈₉₊", "0123456789+", strict=True)},
    "⁻": r"\textsuperscript{\ensuremath{-}}",
    "₋": r"\textsubscript{\ensuremath{-}}",
}

_TEXT = {"…": r"\dots{}", "‐": "-", "‑": r"\mbox{-}", "‒": "–", "―": "—"}

_JOINERS = "\u200c\u200d"  # they shape words of some scripts; only LuaTeX has those
# Invisible characters that direct or hold text together; a printed page needs none, and a direction override could make
# a key read differently from what it says.
_DROPPED = "\u200b\u200e\u200f\u2060\ufeff\u061c" + "".join(map(chr, (*range(0x202A, 0x202F), *range(0x2066, 0x206A))))

_WIDE = str.maketrans({**_SPECIALS, **_SPACES, **dict.fromkeys(_DROPPED, "")})
_NARROW_MAP: dict[str, str] = {
    **{c: rf"\ensuremath{{{macro}}}" for c, macro in (MATH_GREEK | _SYMBOLS).items()},
    **_SPECIALS,
    **_SPACES,
    **_LOWERED,
    **_TEXT,
    **dict.fromkeys(_DROPPED + _JOINERS, ""),
}
_NARROW = str.maketrans(_NARROW_MAP)
_PRINTABLE = re.compile("[ -~" + re.escape("".join(sorted(T1_CLEAN | {c for c in _NARROW_MAP if c > "~"}))) + r"\t\n]*")
_GREEK_WORD = re.compile("[\u0370-\u03ff]{2}")
_LIGATURE = re.compile(r"([-',<>`])(?=\1)|[!?](?=`)")
_REFUSED = {"Cc": "a control character", "Cs": "half of a surrogate pair", "Co": "a private-use character"}


@lru_cache(maxsize=4096)
def escape_tex(text: str, wide: bool = False) -> str:
    r"""`text` as LaTeX source that prints it; a line end is a space.

    For pdfTeX (the default) each character is plain, or in `T1_CLEAN`, or written with a macro; `wide` is for LuaTeX
    with fallback fonts: only what TeX itself reads is escaped. Raises ContentError for control characters,
    surrogates, private and unassigned characters, and, unless `wide`, for what pdfTeX's fonts do not have.
    """
    clean = _checked(text)
    if not wide and not _PRINTABLE.fullmatch(clean):
        missing = next(c for c in clean if not _PRINTABLE.fullmatch(c))
        raise ContentError(f"{named(missing)} needs LuaTeX to be printed", missing)
    # An empty group would not part a ligature under LuaTeX: nothing of it stays in the line.
    parted = _LIGATURE.sub(lambda match: match[0] + "\0", clean)
    source = parted.translate(_WIDE if wide else _NARROW).replace("\0", r"\kern0pt{}")
    return "{*}" + source[1:] if source.startswith("*") else source


def needs_wide(text: str) -> bool:
    """Whether some character (or a word in Greek) is beyond pdfTeX's fonts, so that the document needs LuaTeX."""
    clean = unicodedata.normalize("NFC", text)
    return not _PRINTABLE.fullmatch(clean) or _GREEK_WORD.search(clean) is not None


def named(character: str) -> str:
    """`'Ж' (U+0416)`: a character as an error message shows it."""
    shown = f"{character!r} " if character.isprintable() else ""
    return f"the character {shown}(U+{ord(character):04X})"


def _checked(text: str) -> str:
    """The text in composed form, or ContentError for what no page can hold."""
    if text.isascii() and text.isprintable():
        return text
    for c in text:
        kind = unicodedata.category(c)
        if kind == "Cn":
            raise ContentError(f"{named(c)} cannot be printed: it is not assigned", c)
        if kind in _REFUSED and c not in "\t\n":
            raise ContentError(f"{named(c)} cannot be printed: it is {_REFUSED[kind]}", c)
    return unicodedata.normalize("NFC", text)
