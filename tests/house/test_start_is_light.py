"""`--help` and the plain commands start without the libraries that only some work needs."""

from __future__ import annotations

import re
import subprocess
import sys

import pytest

HEAVY = {
    *("yaml", "jinja2", "pydantic", "pylatex", "mendeleev", "matplotlib", "lark", "markdown_it", "rich", "numpy"),
    *("pandas", "sqlalchemy", "scipy", "pypdf", "sqlite3", "importlib.metadata"),
}


def loaded(*arguments: str) -> set[str]:
    """Every module that a fresh interpreter loads for a command."""
    done = subprocess.run(
        [sys.executable, "-X", "importtime", "-c", "from authoring.cli import main; main()", *arguments],
        capture_output=True,
        text=True,
        timeout=60,
    )
    assert done.returncode == 0, done.stderr
    return {line.rsplit("|", 1)[1].strip() for line in done.stderr.splitlines() if line.startswith("import time:")}


@pytest.mark.parametrize("arguments", [("--help",), ("--version",), ()])
def test_the_first_words_load_nothing_heavy(arguments):
    modules = loaded(*arguments)
    assert "click" in modules
    assert modules & HEAVY == set()
    assert not {name for name in modules if name.startswith("authoring.commands.")}


def test_the_reference_library_is_read_but_never_imported():
    """`tabulate` and `work` read the reference library's data file; importing the library takes half a second."""
    for arguments in (("work", "V", "4s"), ("tabulate", "effective nuclear charge", "--species", "H-Kr")):
        assert loaded(*arguments) & {"mendeleev", "pandas", "numpy", "sqlalchemy", "scipy", "matplotlib"} == set()


def test_help_lists_every_command_within_80_columns():
    done = subprocess.run(
        [sys.executable, "-c", "from authoring.cli import main; main(['--help'])"],
        capture_output=True,
        text=True,
        timeout=60,
        check=True,
    )
    from authoring.cli import COMMANDS

    assert re.findall(r"^  ([a-z]+)  ", done.stdout, re.MULTILINE) == list(COMMANDS)
    assert max(map(len, done.stdout.splitlines())) <= 80
