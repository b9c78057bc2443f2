"""Stage 4, assemble: a folder that appears whole or not at all."""

from __future__ import annotations

import shutil
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from authoring.faults import UsageError
from authoring.papers.record_file import RECORD

LEDGER = "ledger.sqlite"


def checked_target(target: Path, replace: bool) -> None:
    """Raise UsageError where a set cannot be written: before any work is done."""
    try:
        _check(target, replace)
    except (OSError, ValueError) as error:
        raise _not_written(target, error) from error


def _not_written(target: Path, error: Exception) -> UsageError:
    return UsageError(f"{str(target)[:200]!r} cannot be written: {getattr(error, 'strerror', None) or error}")


def _check(target: Path, replace: bool) -> None:
    if target.is_symlink() or (target.exists() and not target.is_dir()):
        raise UsageError(f"{target} is not a folder; name another with --into")
    if target.is_dir() and any(target.iterdir()):
        if not (target / RECORD).is_file():
            raise UsageError(f"{target} holds other files; name a new folder with --into")
        if (target / LEDGER).exists():
            raise UsageError(f"{target} holds marks already; name a new folder with --into")
        if not replace:
            raise UsageError(f"{target} holds a set already; say --replace to write it anew, or name another folder")


@contextmanager
def whole_folder(target: Path, replace: bool) -> Iterator[Path]:
    """A scratch folder that takes the target's place at the end; on any exception nothing is left of it."""
    checked_target(target, replace)
    target = target.absolute()
    try:
        target.parent.mkdir(parents=True, exist_ok=True)
        scratch = Path(tempfile.mkdtemp(prefix=f".{target.name[:40]}-", dir=target.parent))
    except (OSError, ValueError) as error:
        raise _not_written(target, error) from error
    try:
        scratch.chmod(0o755)
        yield scratch
        _put(scratch, target)
    except OSError as error:
        raise _not_written(target, error) from error
    finally:
        shutil.rmtree(scratch, ignore_errors=True)


def _put(scratch: Path, target: Path) -> None:
    """Rename into place; a former set is moved aside first and removed only afterwards."""
    if target.is_dir() and any(target.iterdir()):
        aside = Path(tempfile.mkdtemp(prefix=f".{target.name[:40]}-", dir=target.parent))
        former = aside / "former"
        target.rename(former)
        try:
            scratch.rename(target)
        except OSError:
            former.rename(target)
            raise
        finally:
            shutil.rmtree(aside, ignore_errors=True)
        return
    if target.is_dir():
        target.rmdir()
    scratch.rename(target)
