"""Stage 1, read: where the shipped items, plans and templates are, in a checkout and in an installed wheel."""

from __future__ import annotations

import functools
from pathlib import Path

from authoring.faults import UsageError, suggestion

_ROOM = Path(__file__).resolve().parent.parent


@functools.cache
def shipped_folder(name: str) -> Path:
    """`templates` or `scenarios`: inside the installed package, or beside it in a checkout."""
    for folder in (_ROOM / "_shipped" / name, _ROOM.parent / name):
        if folder.is_dir():
            return folder
    raise UsageError(f"the installation lacks its folder of {name}; install shieldwright again")


def languages() -> tuple[str, ...]:
    """The languages of printed words, by their codes: each is a file under templates/languages."""
    return tuple(sorted(path.stem for path in (shipped_folder("templates") / "languages").glob("*.toml")))


def shipped_names(kind: str) -> tuple[str, ...]:
    """The names of the shipped `items` or `plans`, sorted."""
    return tuple(sorted(path.stem for path in (shipped_folder("scenarios") / kind).glob("*.yaml")))


def _is_file(path: Path) -> bool:
    """Whether a file is there; a name that no file can have, or a folder that is closed to us, has none."""
    try:
        return path.is_file()
    except (OSError, ValueError):
        return False


def located(word: str, kind: str, beside: Path | None = None) -> Path:
    """The file that a word means: a path (relative to `beside`, or to here), or a shipped name.

    Raises UsageError with the nearest shipped name.
    """
    base = beside if beside is not None else Path()
    for path in (base / word, base / f"{word}.yaml", base / kind / f"{word}.yaml"):
        if _is_file(path):
            return path
    names = shipped_names(kind)
    if word in names:
        return shipped_folder("scenarios") / kind / f"{word}.yaml"
    beside_names = tuple(path.name for path in sorted(base.glob("*.yaml"))) if base.is_dir() else ()
    noun = kind.removesuffix("s")
    hint = suggestion(word, (*beside_names, *names))
    article = "an" if noun[0] in "aeiou" else "a"
    raise UsageError(
        f"no {noun} {word[:80]!r}: neither {article} {noun} file nor a shipped name{hint}"
    )
