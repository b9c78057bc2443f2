"""Stage 9, the commands: what several of them share: JSON, progress, and reading words of the command line."""

from __future__ import annotations

import json
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from typing import Any

import click

from authoring.atoms.subshell import Subshell
from authoring.shielding.practice import Practice, published, with_convention

json_option = click.option("--json", "as_json", is_flag=True, help="Print JSON (`shieldwright guide json`).")
convention_option = click.option(
    "--convention", "conventions", multiple=True, metavar="WORDS=VALUE", help="A convention, such as '1s pair=0.35'."
)


def print_json(data: Any) -> None:
    """JSON for other programs: indented, Unicode as it is."""
    click.echo(json.dumps(data, ensure_ascii=False, indent=1))


def practice_under(conventions: tuple[str, ...]) -> Practice:
    """The published practice under conventions given as WORDS=VALUE."""
    practice = published()
    for text in conventions:
        words, equals, value = text.partition("=")
        if not equals:
            raise click.UsageError(f"--convention {text!r}: write WORDS=VALUE")
        practice = with_convention(practice, words.strip(), value.strip())
    return practice


def electron_word(word: str | None) -> Subshell | None:
    """An electron from the command line; nothing or `outermost` means the outermost."""
    return None if word in (None, "outermost") else Subshell.parse(word or "")


def details_from(pairs: tuple[str, ...]) -> tuple[tuple[str, str], ...]:
    """Details given as NAME=VALUE."""
    found = {}
    for text in pairs:
        name, equals, value = text.partition("=")
        if not equals:
            raise click.UsageError(f"--with {text!r}: write NAME=VALUE")
        found[name.strip()] = value.strip()
    return tuple(sorted(found.items()))


@contextmanager
def progress_bar(words: str) -> Iterator[Callable[[int, int], None]]:
    """A line of progress on a terminal; silence in a pipe."""
    if not sys.stderr.isatty():
        yield lambda done, total: None
        return
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task(words, total=None)
        yield lambda done, total: bar.update(task, completed=done, total=total)
