"""A class's whole set, made through the command line, with every number recomputed from the variables alone.

The calculator below is written anew from J. C. Slater, Phys. Rev. 36, 57 (1930): his groups, coefficients and n*.
It takes nothing from the program but the names of the variables. Constants: CODATA 2022 (Rydberg energy
13.605 693 122 990 eV, Bohr radius 52.917 721 054 4 pm). Configurations: filling by n + l, with chromium and copper as
measured (NIST Atomic Spectra Database); a 2+ ion of the first long row has lost both 4s electrons, or 4s and 3d.
"""

from __future__ import annotations

import ast
import itertools
import json
import operator
import os
import re
import subprocess
import sys
from decimal import ROUND_HALF_UP, Decimal
from pathlib import Path

import pytest

COPIES = 60
ITEMS = {
    "neutral": """item: Card of a metal
level: first-year
draw:
  metal: {block: d, period: 4}
  which: {electron of: metal, shell: any}
  tray: {words: [upper, lower]}
story: |
  A paper exercise: the {{ tray }} card is about {{ metal.name }}.
parts:
  - calculate: configuration
    of: metal
  - calculate: groups
  - calculate: screening constant
    electron: which
  - calculate: effective nuclear charge
""",
    "ion": """item: Card of an ion
level: majors
draw:
  ion: {block: d, period: 4, except: [Sc2+], charge: 2+}
  shell: {electron of: ion, shell: any, among: [3d, 3p, 2p]}
story: |
  A paper exercise about {{ ion }}.
parts:
  - calculate: effective nuclear charge
    of: ion
    electron: shell
  - calculate: orbital energy
    marks: 1
  - calculate: radius of maximum density
    marks: 1
""",
    "atom": """item: Card of an atom
level: majors
draw:
  atom: {among: [Li-Ar]}
story: |
  A paper exercise about {{ atom.name }}.
parts:
  - calculate: total energy
    of: atom
    marks: 4
  - calculate: unpaired electrons
    marks: 1
""",
    "pair": """item: Two cards
level: first-year
draw:
  left: {among: [Na-Cl]}
  right: {near: left, steps: [1, 2]}
keep:
  - right.z < 19
story: |
  A paper exercise about {{ left.name }} and {{ right.name }}.
parts:
  - calculate: effective nuclear charge
    of: left
    electron: outermost
  - calculate: effective nuclear charge
    of: right
    electron: outermost
""",
}
PLAN = "plan: Whole set\ncourse: Cards\nitems: [neutral, ion, atom, pair]\nfigures: 4\n"


# --- the little calculator ------------------------------------------------------------------------------

SYMBOLS = [
    *("H", "He", "Li", "Be", "B", "C", "N", "O", "F", "Ne", "Na", "Mg", "Al", "Si", "P", "S", "Cl", "Ar", "K", "Ca"),
    *("Sc", "Ti", "V", "Cr", "Mn", "Fe", "Co", "Ni", "Cu", "Zn", "Ga", "Ge", "As", "Se", "Br", "Kr"),
]
FILLING = [("1s", 2), ("2s", 2), ("2p", 6), ("3s", 2), ("3p", 6), ("4s", 2), ("3d", 10), ("4p", 6)]
IN_ORDER = ["1s", "2s", "2p", "3s", "3p", "3d", "4s", "4p"]
GROUPS = [["1s"], ["2s", "2p"], ["3s", "3p"], ["3d"], ["4s", "4p"]]
N_STAR = {1: Decimal(1), 2: Decimal(2), 3: Decimal(3), 4: Decimal("3.7")}
RYDBERG, BOHR = Decimal("13.605693122990"), Decimal("52.9177210544")


def electrons_of(label: str) -> tuple[int, dict[str, int]]:
    """Atomic number and occupation of a species such as `V` or `Co2+`."""
    found = re.fullmatch(r"([A-Z][a-z]?)(?:(\d*)\+)?", label)
    assert found is not None
    z = SYMBOLS.index(found[1]) + 1
    left, taken = z, {}
    for name, most in FILLING:
        taken[name] = min(left, most)
        left -= taken[name]
    if found[1] in ("Cr", "Cu"):
        taken["4s"], taken["3d"] = 1, taken["3d"] + 1
    if label.endswith("+"):
        charge = int(found[2] or 1)
        from_s = min(charge, taken["4s"])
        taken["4s"], taken["3d"] = taken["4s"] - from_s, taken["3d"] - (charge - from_s)
    return z, {name: taken[name] for name in IN_ORDER if taken[name]}


def screening(label: str, electron: str) -> Decimal:
    """S of one electron by Slater's rules."""
    _, taken = electrons_of(label)
    home = next(at for at, group in enumerate(GROUPS) if electron in group)
    total = Decimal(0)
    for at, group in enumerate(GROUPS[: home + 1]):
        count = sum(taken.get(name, 0) for name in group)
        if at == home:
            total += (count - 1) * (Decimal("0.30") if electron == "1s" else Decimal("0.35"))
        elif electron[1] == "d" or int(group[0][0]) < int(electron[0]) - 1:
            total += count
        else:
            total += count * Decimal("0.85")
    return total


def charge_on(label: str, electron: str) -> Decimal:
    """Z_eff of one electron."""
    return electrons_of(label)[0] - screening(label, electron)


def energy(label: str, electron: str) -> Decimal:
    """The orbital energy in eV."""
    return -RYDBERG * (charge_on(label, electron) / N_STAR[int(electron[0])]) ** 2


def total_energy(label: str) -> Decimal:
    """The sum over all electrons in eV."""
    return sum((count * energy(label, name) for name, count in electrons_of(label)[1].items()), Decimal(0))


def radius(label: str, electron: str) -> Decimal:
    """The radius of maximum density in pm."""
    return N_STAR[int(electron[0])] ** 2 * BOHR / charge_on(label, electron)


def unpaired(label: str) -> int:
    """Unpaired electrons by Hund's rule."""
    rooms = {"s": 1, "p": 3, "d": 5}
    return sum(min(count, 2 * rooms[name[1]] - count) for name, count in electrons_of(label)[1].items())


def outermost(label: str) -> str:
    """The subshell of highest n, then highest l."""
    return max(electrons_of(label)[1], key=lambda name: (name[0], "spd".index(name[1])))


def figures(value: Decimal, count: int) -> str:
    """A value to significant figures, half up, written out."""
    step = Decimal(1).scaleb(value.adjusted() - count + 1)
    return format(value.quantize(step, ROUND_HALF_UP), "f")


def places(value: Decimal, step: str = "0.01") -> str:
    """A value to two places, or as many as the step has."""
    return format(value.quantize(Decimal(step), ROUND_HALF_UP), "f")


def expected(item: str, drawn: dict[str, str]) -> list[tuple[str, str]]:
    """Answer and unit of every part of an item, from its variables."""
    if item == "neutral":
        metal, which = drawn["metal"], drawn["which"]
        taken = electrons_of(metal)[1]
        groups = [(group, sum(taken.get(name, 0) for name in group)) for group in GROUPS]
        return [
            (" ".join(f"{name}{count}" for name, count in taken.items()), ""),
            (" ".join(f"({','.join(group)}){count}" for group, count in groups if count), ""),
            (places(screening(metal, which)), ""),
            (places(charge_on(metal, which)), ""),
        ]
    if item == "ion":
        ion, shell = drawn["ion"], drawn["shell"]
        return [
            (places(charge_on(ion, shell)), ""),
            (figures(energy(ion, shell), 4), "eV"),
            (figures(radius(ion, shell), 4), "pm"),
        ]
    if item == "atom":
        return [(places(total_energy(drawn["atom"]), "0.001"), "eV"), (str(unpaired(drawn["atom"])), "")]
    return [(places(charge_on(drawn[side], outermost(drawn[side]))), "") for side in ("left", "right")]


def test_the_little_calculator_gives_published_values():
    """Slater (1930), p. 59: iron's screening for each group; p. 60: carbon's 2s and 2p, Z_eff 3.25."""
    assert [charge_on("Fe", name) for name in ("1s", "2s", "3s", "3d", "4s")] == [
        Decimal(text) for text in ("25.70", "21.85", "14.75", "6.25", "3.75")
    ]
    assert charge_on("C", "2p") == Decimal("3.25")


# --- the sets -------------------------------------------------------------------------------------------


def make(folder: Path, seed: str, hash_seed: str) -> Path:
    """Set 60 papers in a folder of its own, in an interpreter of its own."""
    folder.mkdir()
    for name, text in ITEMS.items():
        (folder / f"{name}.yaml").write_text(text, encoding="utf-8")
    (folder / "cards.yaml").write_text(PLAN, encoding="utf-8")
    code = "from authoring.cli import main; main()"
    arguments = ["set", "cards.yaml", "--copies", str(COPIES), "--seed", seed, "--into", "made"]
    done = subprocess.run(
        [sys.executable, "-c", code, *arguments],
        cwd=folder,
        env={**os.environ, "PYTHONHASHSEED": hash_seed},
        capture_output=True,
        text=True,
        timeout=300,
        check=False,
    )
    assert done.returncode == 0, done.stderr
    return folder / "made"


@pytest.fixture(scope="module")
def sets(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, Path, Path]:
    """The same seed twice, under different folders and hash seeds, and another seed."""
    base = tmp_path_factory.mktemp("sets")
    return (
        make(base / "one", "cards", "1"),
        make(base / "a second folder", "cards", "2"),
        make(base / "x", "other", "1"),
    )


@pytest.fixture(scope="module")
def papers(sets: tuple[Path, Path, Path]) -> list[dict]:
    """The papers of the first set's record."""
    return json.loads((sets[0] / "set.json").read_text(encoding="utf-8"))["papers"]


def drawn_in(folder: Path) -> list[str]:
    """What each paper draws, as text."""
    data = json.loads((folder / "set.json").read_text(encoding="utf-8"))
    return [json.dumps([item["variables"] for item in paper["items"]]) for paper in data["papers"]]


def test_sixty_different_papers(sets, papers):
    assert len(papers) == len({paper["code"] for paper in papers}) == COPIES
    assert len(set(drawn_in(sets[0]))) == COPIES


def test_every_answer_is_what_the_rules_give(papers):
    seen = set()
    for paper in papers:
        for item in paper["items"]:
            parts = [(part["answer"], part["unit"]) for part in item["parts"]]
            assert parts == expected(item["item"], item["variables"]), item["variables"]
            seen.add((item["item"], json.dumps(item["variables"])))
    assert len(seen) > 100


OPERATORS = {ast.Add: operator.add, ast.Sub: operator.sub, ast.Mult: operator.mul, ast.Div: operator.truediv}


def arithmetic(text: str) -> Decimal | None:
    """The value of plain arithmetic; None where letters, superscripts or lists make it something else."""
    plain = text.replace("×", "*").replace("−", "-").replace("²", "**2").strip()
    if not re.fullmatch(r"[0-9.+\-*/() ]+", plain):
        return None

    def value(node: ast.expr) -> Decimal:
        if isinstance(node, ast.BinOp):
            if isinstance(node.op, ast.Pow):
                return value(node.left) ** value(node.right)
            return OPERATORS[type(node.op)](value(node.left), value(node.right))
        if isinstance(node, ast.UnaryOp):
            return -value(node.operand)
        assert isinstance(node, ast.Constant)
        return Decimal(str(node.value))

    return value(ast.parse(plain, mode="eval").body)


def test_every_line_of_the_marking_adds_up(papers):
    """Members of a chain are equal: S and Z_eff exactly, energies and sizes (of four figures) to 1 in 1,000."""
    checked = 0
    for part in (part for paper in papers for item in paper["items"] for part in item["parts"]):
        for point in part["points"]:
            chain = re.split(r"\s[=≈]\s", re.sub(r" (?:eV|pm)\b", "", point["line"]))
            numbers = [number for text in chain if (number := arithmetic(text)) is not None]
            for one, other in itertools.pairwise(numbers):
                exact = not part["unit"]
                assert one == other if exact else abs(one - other) <= abs(one) / 1000, point["line"]
                checked += 1
    assert checked > 300


def test_marks_are_the_points(papers):
    for part in (part for paper in papers for item in paper["items"] for part in item["parts"]):
        assert part["marks"] == len(part["points"]) > 0
    assert len({sum(part["marks"] for item in paper["items"] for part in item["parts"]) for paper in papers}) == 1


def test_wrong_answers_are_wrong_and_named(papers):
    """And those of three slips are recomputed: their rules are one word different from Slater's."""
    met = set()
    for part in (part for paper in papers for item in paper["items"] for part in item["parts"]):
        for wrong in part["slips"]:
            assert wrong["answer"] != part["answer"]
            assert wrong["names"]
            if part["quantity"] != "screening constant":
                continue
            right = screening(part["of"], part["electron"])
            own = Decimal("0.30") if part["electron"] == "1s" else Decimal("0.35")
            mates = sum(
                electrons_of(part["of"])[1].get(name, 0) for name in next(g for g in GROUPS if part["electron"] in g)
            )
            others = {"self counted": right + own, "own group ignored": right - (mates - 1) * own}
            if wrong["names"][0] in others:
                assert wrong["answer"] == places(others[wrong["names"][0]])
                met.add(wrong["names"][0])
    assert met == {"self counted", "own group ignored"}


# --- the same again, and nothing given away ---------------------------------------------------------------


def test_the_same_seed_gives_the_same_bytes(sets):
    first, second, _ = sets
    names = sorted(path.name for path in first.iterdir())
    assert names == sorted(path.name for path in second.iterdir())
    assert {"set.json", "sheets.tex", "key.tex", "sheets.html", "key.html", "sheets.pdf", "key.pdf"} <= set(names)
    assert [name for name in names if (first / name).read_bytes() != (second / name).read_bytes()] == []


def test_another_seed_gives_other_papers_and_codes(sets):
    first, _, other = sets
    assert drawn_in(first) != drawn_in(other)
    codes = [
        {paper["code"] for paper in json.loads((folder / "set.json").read_text(encoding="utf-8"))["papers"]}
        for folder in (first, other)
    ]
    assert len(codes[0] & codes[1]) < 5


def sheet_texts(folder: Path) -> dict[str, str]:
    """Everything in the sheets that can be read: PDF text and metadata, HTML and TeX sources."""
    from pypdf import PdfReader

    reader = PdfReader(folder / "sheets.pdf")
    return {
        "pdf text": "\n".join(page.extract_text() for page in reader.pages),
        "pdf metadata": str(dict(reader.metadata or {})) + str(reader.xmp_metadata),
        "html": (folder / "sheets.html").read_text(encoding="utf-8"),
        "tex": (folder / "sheets.tex").read_text(encoding="utf-8"),
    }


def test_sheets_give_nothing_away(sets, papers):
    texts = sheet_texts(sets[0])
    answers = {
        part["answer"]
        for paper in papers
        for item in paper["items"]
        for part in item["parts"]
        if re.fullmatch(r"-?\d+\.\d+", part["answer"])
    }
    slips = {
        name
        for paper in papers
        for i in paper["items"]
        for part in i["parts"]
        for s in part["slips"]
        for name in s["names"]
    }
    assert len(answers) > 100
    for place, text in texts.items():
        plain = text.replace("\u2212", "-")
        # Lengths of boxes in TeX and CSS are written with units; an answer stands by itself.
        shown = {answer for answer in answers if re.search(rf"(?<![\d.]){re.escape(answer)}(?![\d.a-z\\%])", plain)}
        assert shown == set() or place in ("html", "tex"), (place, shown)
        assert "seed" not in plain.lower(), place
        assert not {name for name in slips if name in plain}, place
        assert not re.search(r"\b(metal|which|tray)\b *[=:]", plain), place
        assert not [name for name in ITEMS if f"{name}.yaml" in plain], place


def test_what_a_sheet_says_of_numbers_is_only_what_prints(sets, papers):
    """HTML and TeX hold no answer in comments, attributes or data either."""
    html = sheet_texts(sets[0])["html"]
    assert "<!--" not in html
    assert not re.search(r"\bdata-[a-z]+=", html)
    assert "<script" not in html
    tex = sheet_texts(sets[0])["tex"]
    comments = [line for line in tex.splitlines() if re.match(r"\s*%\s*\S", line)]
    assert [line for line in comments if re.search(r"\d\.\d", line)] == []


def test_file_names_give_nothing_away(sets):
    assert sorted(path.name for path in sets[0].iterdir()) == [
        *("key.html", "key.pdf", "key.tex", "scripts.yaml", "set.json", "sheets.html", "sheets.pdf", "sheets.tex")
    ]
