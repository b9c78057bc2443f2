"""Stage 2, draw: chance that is the same on every Python and machine: SHA-256 in counter mode over a seed."""

from __future__ import annotations

import hashlib
import secrets
from collections.abc import Sequence
from typing import TypeVar

from authoring.faults import UsageError

T = TypeVar("T")

# No vowels (no words by accident), no 0/O, 1/I/L, 2/Z, 5/S, 8/B: read aloud and typed without a slip.
CODE_LETTERS = "CDFGHJKMNPQRTVWX34679"
CODE_LENGTH = 5


def new_seed() -> str:
    """128 random bits, as 32 hexadecimal digits."""
    return secrets.token_hex(16)


def checked_seed(text: str) -> str:
    """A seed given by a person: any short printable text. Raises UsageError otherwise."""
    if not text or len(text) > 200 or not text.isprintable():
        raise UsageError("a seed is 1 to 200 printable characters")
    return text


class Chance:
    """A stream of numbers that depends on a seed and a purpose, and on nothing else."""

    def __init__(self, seed: str, *purpose: str | int) -> None:
        self._key = hashlib.sha256("\x1f".join(["shieldwright", seed, *map(str, purpose)]).encode()).digest()
        self._count = 0
        self._left = b""

    def below(self, limit: int) -> int:
        """An evenly distributed whole number from 0 to limit − 1."""
        bound = (1 << 64) // limit * limit
        while True:
            number = int.from_bytes(self._take(8), "big")
            if number < bound:
                return number % limit

    def shuffled(self, things: Sequence[T]) -> list[T]:
        """The things in a random order (Fisher and Yates)."""
        result = list(things)
        for at in range(len(result) - 1, 0, -1):
            other = self.below(at + 1)
            result[at], result[other] = result[other], result[at]
        return result

    def code(self) -> str:
        """A paper code."""
        return "".join(CODE_LETTERS[self.below(len(CODE_LETTERS))] for _ in range(CODE_LENGTH))

    def _take(self, size: int) -> bytes:
        while len(self._left) < size:
            self._left += hashlib.sha256(self._key + self._count.to_bytes(8, "big")).digest()
            self._count += 1
        taken, self._left = self._left[:size], self._left[size:]
        return taken


def codes(seed: str, count: int) -> list[str]:
    """Distinct paper codes, opaque without the seed."""
    chance = Chance(seed, "codes")
    found: dict[str, None] = {}
    while len(found) < count:
        found[chance.code()] = None
    return list(found)
