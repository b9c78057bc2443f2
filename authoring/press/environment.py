"""Press: Jinja for LaTeX and for HTML; a text that nobody escaped cannot reach a page.

LaTeX templates use `<% %>`, `<< >>` and `<# #>`. What a template prints must be `Tex` or a whole number: a plain
text is an error, so is joining with `~`, which would escape for HTML. Undefined names are errors, and every error of
a template is reported at its file and line.
"""

from __future__ import annotations

import functools
from collections.abc import Iterable
from pathlib import Path
from types import TracebackType
from typing import TYPE_CHECKING, Any

from markupsafe import Markup

from authoring.faults import Fault, FaultsFound, Source
from authoring.specs.shipped import shipped_folder

if TYPE_CHECKING:
    from jinja2 import Environment, Template

# What a template may be given wrongly by a hand that changes it; anything else is our own bug and stays a traceback.
_TEMPLATE_ERRORS = (TypeError, ValueError, AttributeError, KeyError, ZeroDivisionError)


class Tex(Markup):
    """LaTeX source that is ready to print."""

    __slots__ = ()


class NotReady(TypeError):
    """A template printed something that no printer has made ready."""


def ready(value: Any) -> Any:
    """What a template may print: markup and whole numbers; nothing else."""
    if isinstance(value, Markup) or (isinstance(value, int) and not isinstance(value, bool)):
        return value
    raise NotReady(f"a template printed {type(value).__name__} {str(value)[:40]!r}, which no printer has made ready")


def joined(pieces: Iterable[Any], between: str = "") -> Markup:
    """Ready pieces one after the other; takes the place of Jinja's `join`, which escapes for HTML."""
    return Markup(between.join(str(ready(piece)) for piece in pieces))


@functools.cache
def tex_environment() -> Environment:
    """The environment of `templates/latex`."""
    return _environment("latex", ("<%", "%>"), ("<<", ">>"), ("<#", "#>"))


@functools.cache
def html_environment() -> Environment:
    """The environment of `templates/html`."""
    return _environment("html", ("{%", "%}"), ("{{", "}}"), ("{#", "#}"))


_Pair = tuple[str, str]


def _environment(folder: str, block: _Pair, variable: _Pair, comment: _Pair) -> Environment:
    from jinja2 import Environment, FileSystemLoader, StrictUndefined, TemplateSyntaxError, nodes

    class Strict(Environment):
        """An environment that refuses `~`."""

        def _parse(self, source: str, name: str | None, filename: str | None) -> nodes.Template:
            tree = super()._parse(source, name, filename)
            for found in tree.find_all(nodes.Concat):
                raise TemplateSyntaxError("do not join with `~`; write the pieces side by side", found.lineno, name)
            return tree

    made = Strict(
        loader=FileSystemLoader(shipped_folder("templates") / folder),
        autoescape=True,
        undefined=StrictUndefined,
        finalize=ready,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
        auto_reload=False,
        block_start_string=block[0],
        block_end_string=block[1],
        variable_start_string=variable[0],
        variable_end_string=variable[1],
        comment_start_string=comment[0],
        comment_end_string=comment[1],
    )
    made.filters["join"] = joined
    return made


def rendered(environment: Environment, name: str, /, **values: Any) -> str:
    """A template with its values. Raises FaultsFound with a fault at the template's file and line."""
    from jinja2 import TemplateError, TemplateSyntaxError

    try:
        return _template(environment, name).render(values)
    except TemplateSyntaxError as error:
        place = Path(error.filename) if error.filename else _folder(environment) / name
        raise _found(error.message or "not understood", place, error.lineno) from error
    except (TemplateError, *_TEMPLATE_ERRORS) as error:
        place, line = _place(environment, error.__traceback__)
        if not line:
            raise
        raise _found(str(error), place, line) from error


@functools.lru_cache(maxsize=64)
def _template(environment: Environment, name: str) -> Template:
    return environment.get_template(name)


def _folder(environment: Environment) -> Path:
    return Path(environment.loader.searchpath[0])  # type: ignore[union-attr]


def _place(environment: Environment, trace: TracebackType | None) -> tuple[Path, int]:
    """The innermost line of a template in a traceback; line 0 where there is none."""
    folder = str(_folder(environment))
    found = (Path(folder), 0)
    while trace is not None:
        name = trace.tb_frame.f_code.co_filename
        if name.startswith(folder):
            found = (Path(name), trace.tb_lineno)
        trace = trace.tb_next
    return found


def _found(message: str, path: Path, line: int) -> FaultsFound:
    text = ""
    if path.is_file():
        lines = path.read_text(encoding="utf-8").splitlines()
        text = lines[line - 1] if 0 < line <= len(lines) else ""
    place = Source(str(path), line, 1, text)
    return FaultsFound([Fault("template", f"this template cannot be used: {message}", place)])
