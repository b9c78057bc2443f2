"""Stage 8, mark: a transcribed line with its many typographies folded into one, before it is read."""

from __future__ import annotations

import re
import unicodedata

_SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻"
_TO_PLAIN = str.maketrans(_SUPERSCRIPTS, "0123456789+-")
_RAISED = re.compile(f"[{_SUPERSCRIPTS}]+")

_ONE_FOR_ONE: dict[int, str] = {
    **{code: chr(code - 0xFEE0) for code in range(0xFF01, 0xFF5F)},  # full-width forms
    **{ord(c): "-" for c in "−–—‐‑‒﹣"},
    **{ord(c): "*" for c in "×✕✖⨯⋅·∙•∗"},
    **{ord(c): "/" for c in "÷∕⁄"},
    **{ord(c): "≈" for c in "≃≅≐~∼"},
    **{ord(c): "→" for c in "⇒⟶➔➝⟹"},
    **{ord(c): " " for c in "\u00a0\u2007\u2008\u2009\u200a\u202f\t\r\n\f\v"},
    **{ord(c): "" for c in "\u200b\u200c\u200d\u2060\ufeff"},
    **{ord(c): "'" for c in "‘’′`"},
    **{ord(c): '"' for c in "“”„"},
    **{ord(low): digit for low, digit in zip("₀₁₂₃₄₅₆₇₈₉", "0123456789", strict=True)},
    ord("µ"): "μ",
    ord("ϰ"): "χ",
}
_SPACES = re.compile(r" {2,}")
_ARROW = re.compile(r"=>|-+>")
_STRUCK = re.compile(r"~~([^~]*)~~")
_BRACED = re.compile(r"([_^])\{([^{}]*)\}")


def without_struck(text: str) -> tuple[str, tuple[str, ...]]:
    """The text without what is crossed out (`~~…~~`), and what that was."""
    if "~~" not in text:
        return text, ()
    struck = tuple(found.strip() for found in _STRUCK.findall(text))
    return _STRUCK.sub(" ", text).strip(), struck


def tidied(text: str) -> str:
    """One typography: `*`, `/`, `-`, `≈`, `→`, `^{2}` for raised figures; spaces at the ends removed.

    Raised figures and letters of a word keep their order; nothing is computed.
    """
    if text.isascii():
        plain = text.translate(_ONE_FOR_ONE) if "~" in text or "\t" in text or "`" in text else text
    else:
        plain = unicodedata.normalize("NFC", text).translate(_ONE_FOR_ONE)
        plain = _RAISED.sub(lambda found: "^{" + found[0].translate(_TO_PLAIN) + "}", plain)
    if ">" in plain:
        plain = _ARROW.sub("→", plain)
    if "  " in plain:
        plain = _SPACES.sub(" ", plain)
    return plain.strip()


def lowered(text: str) -> str:
    """A tidied text with its raised figures on the line: `1s^{2}` and `1s^2` become `1s2 `, `Fe^{3+}` `Fe3+`."""
    if "^" not in text and "_" not in text:
        return text
    return _BRACED.sub(r"\1\2 ", text).replace("^", "").replace("_", "").strip()
