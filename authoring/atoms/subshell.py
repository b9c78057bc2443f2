"""Atoms: a subshell, its label and how many electrons it can hold."""

from __future__ import annotations

from dataclasses import dataclass

from authoring.faults import ContentError

LETTERS = "spdf"
HIGHEST_N = 8


@dataclass(frozen=True, slots=True, order=True)
class Subshell:
    """A subshell (n, l), ordered by n and then l. `ContentError` where no such subshell exists (n 1-8, s p d f)."""

    n: int
    l: int  # noqa: E741 - the quantum number's own name

    def __post_init__(self) -> None:
        if not (1 <= self.n <= HIGHEST_N and 0 <= self.l < min(self.n, len(LETTERS))):
            raise ContentError(f"there is no subshell with n = {self.n} and l = {self.l}")

    def __hash__(self) -> int:
        return self.n * 8 + self.l

    @property
    def letter(self) -> str:
        """s, p, d or f."""
        return LETTERS[self.l]

    @property
    def label(self) -> str:
        """As it is written: `4s`."""
        return f"{self.n}{LETTERS[self.l]}"

    @property
    def capacity(self) -> int:
        """The electrons it holds when full: 2(2l + 1)."""
        return 4 * self.l + 2

    def __str__(self) -> str:
        return self.label

    @staticmethod
    def parse(text: str) -> Subshell:
        """The subshell written `4s`; `ContentError` with the nearest label otherwise."""
        word = text.strip()
        found = _BY_LABEL.get(word)
        if found is None:
            raise ContentError(f"{quoted(word)} is not a subshell", word[:20], _BY_LABEL)
        return found


ALL_SUBSHELLS: tuple[Subshell, ...] = tuple(
    Subshell(n, l)
    for n in range(1, HIGHEST_N + 1)
    for l in range(min(n, len(LETTERS)))  # noqa: E741
)

_BY_LABEL: dict[str, Subshell] = {sub.label: sub for sub in ALL_SUBSHELLS}


def quoted(text: str, width: int = 40) -> str:
    """What somebody wrote, in quotes, shortened and with control characters escaped, for a message."""
    return repr(text if len(text) <= width else text[: width - 1] + "…")
