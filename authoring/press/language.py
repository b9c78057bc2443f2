"""Press: the words that the templates print, in one language each: `templates/languages/*.toml`."""

from __future__ import annotations

import functools
import string
import tomllib
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

from markupsafe import Markup

from authoring.faults import ContentError
from authoring.specs.shipped import languages, shipped_folder


@functools.cache
def phrases(language: str) -> Mapping[str, str]:
    """Every phrase of a language by its key; `{name}` stands for what is put in. ContentError if it is unknown."""
    if language not in languages():
        raise ContentError(f"no words for the language {language[:40]!r}", language, languages())
    path = shipped_folder("templates") / "languages" / f"{language}.toml"
    with path.open("rb") as file:
        found: dict[str, str] = tomllib.load(file)
    return found


@dataclass(frozen=True, slots=True)
class Words:
    """A language for one medium: phrases come escaped, what is put into them is ready to print."""

    language: str
    escape: Callable[[str], Markup]
    _plain: dict[str, Markup] = field(default_factory=dict, init=False, repr=False, compare=False)

    def __call__(self, key: str, **values: Markup | int) -> Markup:
        """The phrase of a key; a text put in must be ready (see `Medium.text`)."""
        if values:
            return self._filled(key, values)
        if key not in self._plain:
            self._plain[key] = self._filled(key, values)
        return self._plain[key]

    def _filled(self, key: str, values: Mapping[str, Markup | int]) -> Markup:
        pieces: list[str] = []
        for literal, name, _, _ in string.Formatter().parse(phrases(self.language)[key]):
            pieces.append(str(self.escape(literal)))
            if name is not None:
                pieces.append(str(values[name]))
        return Markup("".join(pieces))

    def count(self, key: str, number: int) -> Markup:
        """`1 mark`, `3 marks`: the phrase `key_one` or `key_many`."""
        return self(f"{key}_{'one' if number == 1 else 'many'}", number=number)
