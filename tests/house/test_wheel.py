"""A built wheel, installed into an environment of its own, works from any folder: nothing needs the checkout."""

from __future__ import annotations

import json
import os
import subprocess
import sys
import sysconfig
import venv
import zipfile
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[2]


@pytest.fixture(scope="module")
def wheel(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A wheel, built without a network: the build's own library is asked in this environment."""
    out = tmp_path_factory.mktemp("dist")
    code = "import os, sys; from hatchling.build import build_wheel; print(build_wheel(sys.argv[1]))"
    done = subprocess.run(
        [sys.executable, "-c", code, str(out)], cwd=CHECKOUT, capture_output=True, text=True, check=False, timeout=120
    )
    assert done.returncode == 0, done.stderr
    return out / done.stdout.split()[-1]


@pytest.fixture(scope="module")
def program(wheel: Path, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The installed program; its libraries are those of this environment, linked by a path file."""
    home = tmp_path_factory.mktemp("installed")
    venv.create(home / "env", with_pip=False)
    python = home / "env" / "bin" / "python"
    site = Path(
        subprocess.run(
            [python, "-c", "import sysconfig; print(sysconfig.get_paths()['purelib'])"],
            capture_output=True,
            text=True,
            check=True,
        ).stdout.strip()
    )
    subprocess.run(
        [
            sys.executable,
            "-m",
            "pip",
            "install",
            "--quiet",
            "--no-deps",
            "--no-index",
            "--target",
            str(site),
            str(wheel),
        ],
        check=True,
        capture_output=True,
        timeout=120,
    )
    # Only the folder's packages: path files inside it (that of the editable checkout) are not read this way.
    (site / "libraries.pth").write_text(sysconfig.get_paths()["purelib"] + "\n", encoding="utf-8")
    return python


def shieldwright(program: Path, folder: Path, *arguments: str) -> subprocess.CompletedProcess[str]:
    """Run the installed program from a folder that has nothing to do with the checkout."""
    environment = {name: value for name, value in os.environ.items() if not name.startswith("PYTHON")}
    code = "import authoring, sys; print(authoring.__file__, file=sys.stderr); from authoring.cli import main; main()"
    return subprocess.run(
        [program, "-c", code, *arguments],
        cwd=folder,
        env=environment,
        capture_output=True,
        text=True,
        timeout=120,
        check=False,
    )


def test_the_wheel_carries_templates_and_scenarios_and_no_tests(wheel):
    names = zipfile.ZipFile(wheel).namelist()
    for kind in ("templates/latex/", "templates/html/", "templates/languages/", "scenarios/items/", "scenarios/plans/"):
        assert any(name.startswith(f"authoring/_shipped/{kind}") for name in names), kind
    assert any(name.endswith("authoring/shielding/data") or "/data/" in name for name in names)
    assert not any(name.startswith(("tests/", "templates/", "scenarios/")) for name in names)
    assert not any(name.endswith((".pyc", ".yaml~")) for name in names)


def test_every_file_of_the_rooms_is_in_the_wheel(wheel):
    inside = {name for name in zipfile.ZipFile(wheel).namelist() if name.startswith("authoring/")}
    done = subprocess.run(
        ["git", "ls-files", "authoring", "templates", "scenarios"],
        cwd=CHECKOUT,
        capture_output=True,
        text=True,
        check=True,
    )
    for name in done.stdout.split():
        shipped = name if name.startswith("authoring/") else f"authoring/_shipped/{name}"
        if (CHECKOUT / name).is_file():
            assert shipped in inside


def test_the_installed_program_works_and_is_not_the_checkout(program, tmp_path):
    done = shieldwright(program, tmp_path, "work", "V", "4s")
    assert done.returncode == 0, done.stderr
    assert str(CHECKOUT) not in done.stderr.splitlines()[0]
    assert "23 − 19.70 = 3.30" in done.stdout


def test_the_installed_program_prints_its_first_set_from_any_folder(program, tmp_path):
    done = shieldwright(program, tmp_path, "set", "weekly-sheet", "--copies", "2", "--into", "first")
    assert done.returncode == 0, done.stderr
    data = json.loads((tmp_path / "first" / "set.json").read_text(encoding="utf-8"))
    assert len(data["papers"]) == 2
    assert (tmp_path / "first" / "sheets.pdf").read_bytes().startswith(b"%PDF")
    assert sorted(path.name for path in tmp_path.iterdir()) == ["first"]


def test_the_installed_program_vets_what_it_ships(program, tmp_path):
    done = shieldwright(program, tmp_path, "vet", "weekly-sheet")
    assert done.returncode == 0, done.stdout + done.stderr
