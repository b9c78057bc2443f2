"""Stage 1, read: the bytes of a file become clean text, or a clear refusal with its place."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Sequence
from pathlib import Path

from authoring.faults import Fault, FaultsFound, Source, UsageError

MOST_BYTES = 5_000_000

# C0 without tab and newline, DEL, C1, the separators that look like nothing but end a line in YAML and CSV readers,
# surrogates, and what no interchange allows.
_CONTROL = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\u2028\u2029\ud800-\udfff\ufeff\ufffe\uffff]")
_MOST_CONTROL_FAULTS = 20


def read_text(path: Path, most_bytes: int = MOST_BYTES) -> str:
    """The text of a UTF-8 file, without a byte order mark.

    Raises UsageError where the file cannot be read or is larger than `most_bytes`; FaultsFound where it is not UTF-8.
    """
    try:
        with path.open("rb") as file:
            raw = file.read(most_bytes + 1)
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise UsageError(f"cannot read {path}: {reason}") from error
    if len(raw) > most_bytes:
        raise UsageError(f"{path} is larger than {most_bytes / 1_000_000:g} MB; split it")
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise FaultsFound([_not_utf8(raw, str(path), error.start)]) from error


def _not_utf8(raw: bytes, path: str, at: int) -> Fault:
    if raw[:2] in (b"\xff\xfe", b"\xfe\xff"):
        return Fault("not-utf8", "the file is saved as UTF-16; save it as UTF-8", Source(path, 1, 1))
    before = raw[:at].removeprefix(b"\xef\xbb\xbf").decode("utf-8", "replace")
    lines = unify_breaks(before).split("\n")
    rest = raw[at:].split(b"\n", 1)[0].decode("utf-8", "replace")
    source = Source(path, len(lines), len(lines[-1]) + 1, lines[-1] + rest.rstrip("\r"))
    return Fault("not-utf8", f"byte {raw[at]:#04x} is not UTF-8; save the file as UTF-8", source)


def unify_breaks(text: str) -> str:
    """`text` with a plain newline at the end of every line."""
    return text.replace("\r\n", "\n").replace("\r", "\n") if "\r" in text else text


def find_control(text: str) -> str:
    """The name of the first control character in `text`, or nothing."""
    found = _CONTROL.search(text)
    return character_name(found[0]) if found else ""


def control_faults(text: str, path: str) -> Sequence[Fault]:
    """A fault for every control character (the first twenty) of a text with plain newlines."""
    faults: list[Fault] = []
    for found in _CONTROL.finditer(text):
        at = found.start()
        start = text.rfind("\n", 0, at) + 1
        end = text.find("\n", at)
        line = text[start : end if end >= 0 else len(text)]
        source = Source(path, text.count("\n", 0, at) + 1, at - start + 1, line)
        faults.append(
            Fault(
                "control-character",
                f"the invisible character {character_name(found[0])} stands here; delete it",
                source,
            )
        )
        if len(faults) == _MOST_CONTROL_FAULTS:
            break
    return faults


def character_name(character: str) -> str:
    """`U+2028 LINE SEPARATOR`; control characters have no name and give their number alone."""
    name = unicodedata.name(character, "")
    return f"U+{ord(character):04X} {name}".rstrip()
