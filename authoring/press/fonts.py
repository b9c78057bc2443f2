"""Press: which font prints which script, so that a name in any of them comes out whole."""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Fallback:
    """A font file, the shaping features it needs, and the code points (inclusive ranges) it is taken for."""

    file: str
    features: str
    ranges: tuple[tuple[int, int], ...]


def _noto(name: str, features: str, *ranges: tuple[int, int]) -> Fallback:
    return Fallback(f"Noto{name}-Regular.ttf", features, ranges)


# Order matters: the first font with a glyph is taken, and the script must be named for letters to join.
FALLBACKS = (
    _noto("NaskhArabic", "mode=harf;script=arab;", (0x600, 0x77F), (0x8A0, 0x8FF), (0xFB50, 0xFDFF), (0xFE70, 0xFEFE)),
    _noto("SerifHebrew", "mode=harf;script=hebr;", (0x590, 0x5FF), (0xFB1D, 0xFB4F)),
    _noto("SerifDevanagari", "mode=harf;script=dev2;", (0x900, 0x97F)),
    _noto("SerifBengali", "mode=harf;script=bng2;", (0x980, 0x9FF)),
    _noto("SerifGurmukhi", "mode=harf;script=gur2;", (0xA00, 0xA7F)),
    _noto("SerifGujarati", "mode=harf;script=gjr2;", (0xA80, 0xAFF)),
    _noto("SerifTamil", "mode=harf;script=tml2;", (0xB80, 0xBFF)),
    _noto("SerifTelugu", "mode=harf;script=tel2;", (0xC00, 0xC7F)),
    _noto("SerifKannada", "mode=harf;script=knd2;", (0xC80, 0xCFF)),
    _noto("SerifMalayalam", "mode=harf;script=mlm2;", (0xD00, 0xD7F)),
    _noto("SerifSinhala", "mode=harf;script=sinh;", (0xD80, 0xDFF)),
    _noto("SerifThai", "mode=harf;script=thai;", (0xE00, 0xE7F)),
    _noto("SerifLao", "mode=harf;script=lao;", (0xE80, 0xEFF)),
    _noto("SerifMyanmar", "mode=harf;script=mym2;", (0x1000, 0x109F)),
    _noto("SerifGeorgian", "mode=harf;script=geor;", (0x10A0, 0x10FF)),
    _noto("SerifEthiopic", "mode=harf;script=ethi;", (0x1200, 0x139F)),
    _noto("SerifKhmer", "mode=harf;script=khmr;", (0x1780, 0x17FF)),
    _noto("SerifArmenian", "mode=harf;script=armn;", (0x530, 0x58F)),
    Fallback(
        "wqy-microhei.ttc",
        "mode=harf;script=hani;",
        ((0x1100, 0x11FF), (0x2E80, 0x9FFF), (0xAC00, 0xD7AF), (0xF900, 0xFAFF), (0xFF00, 0xFFEF), (0x20000, 0x3FFFF)),
    ),
    _noto("SansMath", "mode=harf;", (0x2100, 0x23FF), (0x27C0, 0x27EF), (0x2900, 0x2AFF)),
    _noto("SansSymbols2", "mode=harf;", (0x2400, 0x27BF), (0x2B00, 0x2BFF)),
)
# Latin, Greek and Cyrillic beyond the main font: last, since it has a few letters of other scripts too.
LAST = (_noto("Serif", "mode=harf;"),)


def fonts_for(text: str) -> tuple[Fallback, ...]:
    """The fallback fonts that a text needs; each one costs loading time."""
    codes = {ord(c) for c in unicodedata.normalize("NFC", re.sub("[\x00-~]+", "", text))}
    needed = [font for font in FALLBACKS if any(low <= code <= high for code in codes for low, high in font.ranges)]
    return (*needed, *LAST)
