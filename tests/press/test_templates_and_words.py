"""Templates fail closed and say where; every language has every phrase."""

from __future__ import annotations

import re
import string
from pathlib import Path

import pytest
from jinja2 import FileSystemLoader
from markupsafe import Markup

from authoring.faults import ContentError, FaultsFound
from authoring.press.environment import Tex, html_environment, rendered, tex_environment
from authoring.press.language import Words, languages, phrases
from authoring.press.medium import TexMedium
from authoring.specs.shipped import shipped_folder
from authoring.working.tex_escape import needs_wide


def template(folder: Path, source: str, **values: object) -> str:
    """A LaTeX template of one's own, rendered."""
    folder.joinpath("own.tex").write_text(source, encoding="utf-8")
    environment = tex_environment().overlay()
    environment.loader = FileSystemLoader(folder)
    return rendered(environment, "own.tex", **values)


def test_ready_text_and_numbers_are_printed(tmp_path: Path) -> None:
    """Braces, per cents and hashes of TeX are plain text in a template."""
    source = "\\a{<< x >>} % {{ no }}\n<% for n in ns %><< n >>;<% endfor %><# gone #>"
    assert template(tmp_path, source, x=Tex(r"\&"), ns=[1, 2]) == "\\a{\\&} % {{ no }}\n1;2;"


@pytest.mark.parametrize(
    ("source", "line", "says"),
    [
        ("one\n<< name >>", 2, "which no printer has made ready"),
        ("one\ntwo\n<< 1.5 * half >>", 3, "no printer has made ready"),
        ("<< nothing >>", 1, "'nothing' is undefined"),
        ("a\n<< name.nosuch >>", 2, "has no attribute 'nosuch'"),
        ("a\n<< ready ~ ready >>", 2, "do not join with `~`"),
        ("a\nb\n<% if %>", 3, "Expected an expression"),
        ("a\n<< [name]|join >>", 2, "no printer has made ready"),
        ("<% macro m(x) %>\n<< x >>\n<% endmacro %>\n<< m(name) >>", 2, "no printer has made ready"),
    ],
)
def test_what_is_not_ready_stops_at_its_line(source: str, line: int, says: str, tmp_path: Path) -> None:
    """Plain text, undefined names and bad syntax are faults at the template's file and line."""
    with pytest.raises(FaultsFound) as caught:
        template(tmp_path, source, name="raw & text", half=2, ready=Tex("x"))
    (fault,) = caught.value.faults
    assert says in fault.message
    assert fault.source
    assert (Path(fault.source.path).name, fault.source.line) == ("own.tex", line)
    assert fault.source.text == source.splitlines()[line - 1]


def test_every_shipped_template_is_understood() -> None:
    """No template waits for its first use to fail."""
    for folder, environment in (("latex", tex_environment()), ("html", html_environment())):
        names = sorted(path.name for path in (shipped_folder("templates") / folder).glob("*") if path.suffix != ".css")
        assert len(names) > 5
        for name in names:
            if name != "macros.tex":  # put in as it is
                environment.get_template(name)


def test_every_language_has_the_same_phrases() -> None:
    """Same keys, same places to fill; and every one can be printed by the quick engine."""
    english = phrases("en")
    assert set(languages()) >= {"en", "de"}
    for language in languages():
        others = phrases(language)
        assert others.keys() == english.keys()
        for key, text in english.items():
            assert _places(others[key]) == _places(text), (language, key)
            assert not needs_wide(others[key]), (language, key)


def _places(text: str) -> list[str]:
    return sorted(name for _, name, _, _ in string.Formatter().parse(text) if name is not None)


def test_every_phrase_is_used() -> None:
    """A phrase that nothing prints would be translated for nothing."""
    files = [*(shipped_folder("templates")).glob("*/*.[th]*ml"), *(shipped_folder("templates")).glob("latex/*")]
    files += (shipped_folder("templates").parent / "authoring" / "press").glob("*.py")
    used = set(re.findall(r'"([a-z_]+)"', "".join(path.read_text("utf-8") for path in files if path.suffix != ".toml")))
    for key in phrases("en"):
        assert re.sub("_(one|many)$", "", key) in used or key in used, key


def test_phrases_are_escaped_and_filled() -> None:
    """The phrase is escaped for the medium, what is put in is ready."""
    words = Words("en", TexMedium().text)
    assert words("page_of", page=Tex(r"\number\a"), pages=7) == Markup(r"Page \number\a of 7")
    assert words.count("marks", 1) == "1 mark"
    assert words.count("marks", 3) == "3 marks"


def test_an_unknown_language_is_said_with_those_there_are() -> None:
    """The message offers the languages."""
    with pytest.raises(ContentError) as caught:
        phrases("xx")
    assert "no words for the language 'xx'; one of: de, en" in caught.value.full_message
