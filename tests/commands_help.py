"""Help for the tests of the commands: run one as a person would, and read what it left behind."""

from __future__ import annotations

import contextlib
import io
import re
from dataclasses import dataclass
from pathlib import Path

from authoring.cli import main

PLACE = re.compile(r"^\S.*?:\d+:\d+: ", re.MULTILINE)


@dataclass(frozen=True, slots=True)
class Ran:
    """What a command printed, and its exit code."""

    code: int
    out: str
    err: str

    @property
    def said(self) -> str:
        """Everything it printed."""
        return self.out + self.err


def run(*arguments: str | Path) -> Ran:
    """Run `shieldwright` in this process. An exception that is not an exit is a failure of the program."""
    out, err = io.StringIO(), io.StringIO()
    code: object = 0
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
        try:
            main([str(argument) for argument in arguments])
        except SystemExit as leaving:
            code = leaving.code
    assert isinstance(code, int)
    return Ran(code, out.getvalue(), err.getvalue())


def places(ran: Ran, path: Path) -> list[tuple[int, int]]:
    """The lines and columns of a file that a command complained about."""
    found = re.findall(rf"^{re.escape(str(path))}:(\d+):(\d+): ", ran.said, re.MULTILINE)
    return [(int(line), int(column)) for line, column in found]
