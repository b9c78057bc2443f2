"""The house has one direction: rooms import from below only, and the lower rooms know no formats."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import authoring

HOUSE = Path(authoring.__file__).parent
MODULES = sorted(HOUSE.rglob("*.py"))

# From the bottom up; `commands` and `cli` stand above everything.
ORDER = [
    "faults",
    "working",
    "atoms",
    "shielding",
    "slips",
    "tasks",
    "specs",
    "papers",
    "press",
    "marking",
    "commands",
    "cli",
]
FORMATS = {"yaml", "jinja2", "pylatex", "subprocess", "pydantic", "click", "rich"}
NEVER = {"eval", "exec", "compile", "__import__"}


def room(module: str) -> str:
    """The room of a module's dotted name; the package itself counts as the lowest."""
    parts = module.split(".")
    return parts[1] if len(parts) > 1 else "faults"


def dotted(path: Path) -> str:
    """The dotted name of a file."""
    parts = path.relative_to(HOUSE.parent).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


def imports(path: Path) -> list[tuple[int, str]]:
    """Every module that a file imports, wherever in it, with its line."""
    found: list[tuple[int, str]] = []
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found += [(node.lineno, alias.name) for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}:{node.lineno}: imports are absolute here"
            found.append((node.lineno, node.module or ""))
            if node.module == "authoring":
                found += [
                    (node.lineno, f"authoring.{alias.name}") for alias in node.names if alias.name != "__version__"
                ]
    return found


def test_every_room_is_in_the_order():
    rooms = {room(dotted(path)) for path in MODULES}
    assert rooms == set(ORDER)


def test_nothing_imports_upwards():
    wrong = [
        f"{path.relative_to(HOUSE)}:{line}: {name}"
        for path in MODULES
        for line, name in imports(path)
        if name.split(".")[0] == "authoring" and ORDER.index(room(name)) > ORDER.index(room(dotted(path)))
    ]
    assert wrong == []


def test_no_circle_of_modules():
    """Also inside a room no two modules need each other at import."""
    graph = {
        dotted(path): {
            name
            for node in ast.parse(path.read_text(encoding="utf-8")).body
            for name in ([node.module] if isinstance(node, ast.ImportFrom) and node.module else [])
            if name.startswith("authoring.")
        }
        for path in MODULES
    }
    done: set[str] = set()

    def visit(name: str, above: tuple[str, ...]) -> None:
        assert name not in above, " → ".join([*above, name])
        if name not in done:
            for other in sorted(graph.get(name, ())):
                visit(other, (*above, name))
            done.add(name)

    for name in graph:
        visit(name, ())


def test_the_lower_rooms_know_no_formats():
    wrong = [
        f"{path.relative_to(HOUSE)}:{line}: {name}"
        for path in MODULES
        if room(dotted(path)) in ("working", "atoms", "shielding", "slips")
        for line, name in imports(path)
        if name.split(".")[0] in FORMATS
    ]
    assert wrong == []


def test_the_lower_rooms_load_no_formats_either():
    """What they import does not import it for them: a fresh interpreter is asked."""
    lower = [dotted(path) for path in MODULES if room(dotted(path)) in ("working", "atoms", "shielding", "slips")]
    code = "import importlib, sys\n" + "".join(f"importlib.import_module({name!r})\n" for name in lower)
    code += f"print(sorted({FORMATS!r} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, timeout=60)
    assert done.stdout.strip() == "[]"


def test_nothing_written_is_run():
    """No `eval`, `exec` or `compile` by name: what people write is data."""
    wrong = [
        f"{path.relative_to(HOUSE)}:{node.lineno}"
        for path in MODULES
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8")))
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id in NEVER
    ]
    assert wrong == []


def test_every_room_says_which_stage_it_is():
    for path in sorted(HOUSE.glob("*/__init__.py")):
        words = ast.get_docstring(ast.parse(path.read_text(encoding="utf-8"))) or ""
        assert "stage" in words.split("\n")[0].lower() or "below every stage" in words, path
    unsaid = [path for path in MODULES if not ast.get_docstring(ast.parse(path.read_text(encoding="utf-8")))]
    assert unsaid == []
