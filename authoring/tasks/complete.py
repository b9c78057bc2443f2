"""*complete*: fill the blanks of a table of several quantities for several species or electrons."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target, Value, quantity
from authoring.shielding.solve import Step, evaluate, work
from authoring.tasks.calculate import answer_of
from authoring.tasks.fields import TargetFields, Words
from authoring.tasks.points import Candidate, chosen, numbered
from authoring.tasks.setting import Setting
from authoring.tasks.several import Things, joined, scattered, things
from authoring.tasks.solved import Answer, BlankTable, Solved
from authoring.tasks.task import Task
from authoring.tasks.wording import electron_words, space_for, species_words, worded
from authoring.working.lines import PointKind
from authoring.working.nodes import Node, Num, Row
from authoring.working.nodes import Words as WordsNode
from authoring.working.numbers import Rounding

MOST_CELLS = 60
_ROMAN = ((50, "l"), (40, "xl"), (10, "x"), (9, "ix"), (5, "v"), (4, "iv"), (1, "i"))

Cell = tuple[int, int]


class Complete(TargetFields):
    """`complete: [screening constant, effective nuclear charge]`: the columns; `rows` are species or electrons."""

    complete: Words = Field(description="the quantities, one column each")
    rows: Words = Field(description="species, or electrons of the species under `of`: one row each")
    blanks: Words = Field(
        ("all",),
        description="`all`, how many, or which: a column, a row, or single cells such as `S of Na`",
    )


def roman(number: int) -> str:
    """1 → i, 4 → iv: the label of a blank."""
    text = ""
    for value, letters in _ROMAN:
        text += letters * (number // value)
        number %= value
    return text


def columns_of(part: Complete, setting: Setting) -> tuple[Things, ...]:
    """Each column: one quantity of every row. Details, unit and figures go to the columns that take them."""
    names = [quantity(name).name for name in part.complete]
    if len(set(names)) < len(names):
        raise ContentError("`complete` names the same quantity twice")
    _used_somewhere(part, names)
    columns = tuple(_column(name, part, setting) for name in names)
    if len(columns) * len(columns[0].targets) > MOST_CELLS:
        raise ContentError(f"a table to complete has at most {MOST_CELLS} cells")
    return columns


def _used_somewhere(part: Complete, names: Sequence[str]) -> None:
    taken = [quantity(name) for name in names]
    if part.electron is not None and not any("electron" in what.takes for what in taken):
        raise ContentError(f"{joined(names)}: not quantities of an electron; leave `electron` out")
    if part.unit is not None and not any(part.unit in what.units for what in taken):
        raise ContentError(f"no column is given in {part.unit!r}", part.unit, [u for what in taken for u in what.units])
    for name in part.details:
        if not any(name in what.details for what in taken):
            raise ContentError(f"no column takes {name!r}", name, [each for what in taken for each in what.details])


def _column(name: str, part: Complete, setting: Setting) -> Things:
    what = quantity(name)
    takes = "electron" in what.takes
    own = part.model_copy(
        update={
            "electron": part.electron if takes else None,
            "unit": part.unit if part.unit in what.units else None,
            "details": {key: text for key, text in part.details.items() if key in what.details},
            **({} if what.numeric else {"figures": None, "places": None}),
        }
    )
    if takes or part.of is None:
        return things(name, part.rows, own, setting, "rows")
    # Beside electrons of one species, a quantity of the species is the same in every row.
    raise ContentError(f"{what.name} is not a quantity of an electron; a table of electrons has no column for it")


def blanks_of(part: Complete, columns: Sequence[Things]) -> tuple[Cell, ...]:
    """The blank cells (row, column) in reading order."""
    height = len(columns[0].targets)
    cells = [(row, column) for row in range(height) for column in range(len(columns))]
    word = part.blanks[0] if len(part.blanks) == 1 else ""
    if word == "all":
        return tuple(cells)
    if word.isascii() and word.isdigit():
        count = int(word) if len(word) < 4 else len(cells) + 1
        if not 1 <= count <= len(cells):
            raise ContentError(f"blanks: {word[:10]}, but the table has {len(cells)} cells")
        order = sorted(cells, key=lambda cell: _scatter(columns[cell[1]].targets[cell[0]]))
        return tuple(sorted(order[:count]))
    found = {cell for each in part.blanks for cell in _named(each, cells, columns)}
    return tuple(cell for cell in cells if cell in found)


def _scatter(target: Target) -> int:
    return scattered(target.quantity, target.about)


def _named(word: str, cells: Sequence[Cell], columns: Sequence[Things]) -> list[Cell]:
    """The cells that a word names: `S of Na`, a whole column or a whole row."""
    rows = [columns[0].label(target) for target in columns[0].targets]
    head, _, tail = word.rpartition(" of ")
    column = _column_named(head or word, columns)
    row = rows.index(tail if head else word) if (tail if head else word) in rows else None
    if head and column is not None and row is not None:
        return [(row, column)]
    if not head and row is not None:
        return [cell for cell in cells if cell[0] == row]
    if not head and column is not None:
        return [cell for cell in cells if cell[1] == column]
    allowed = [f"{each.what.name} of {label}" for each in columns for label in rows]
    raise ContentError(f"{word[:60]!r} names no cell, row or column of the table", word, [*allowed, *rows])


def _column_named(word: str, columns: Sequence[Things]) -> int | None:
    try:
        name = quantity(word).name
    except ContentError:
        return None
    return next((at for at, each in enumerate(columns) if each.what.name == name), None)


def _filled(columns: Sequence[Things], setting: Setting) -> list[list[Answer]]:
    """The answer of every cell."""
    known = setting.known
    rows = []
    for row in range(len(columns[0].targets)):
        cells = []
        for column in columns:
            target = column.targets[row]
            others = {each: value for each, value in known.items() if each != target}
            step = work(target, setting.practice, others, column.rounding)[-1]
            cells.append(answer_of(step, column.what))
        rows.append(cells)
    return rows


def _worked(
    blanks: Sequence[Cell], columns: Sequence[Things], setting: Setting
) -> tuple[tuple[Step, ...], dict[Cell, int]]:
    """The working of the blanks from the cells that are printed, and the line that each blank is."""
    known: dict[Target, Value] = setting.known
    for row in range(len(columns[0].targets)):
        for at, column in enumerate(columns):
            if (row, at) not in blanks:
                known[column.targets[row]] = evaluate(column.targets[row], setting.practice, setting.known)
    for row, at in blanks:
        known.pop(columns[at].targets[row], None)
    roundings = {columns[at].targets[row]: columns[at].rounding for row, at in blanks}
    steps: list[Step] = []
    place: dict[Target, int] = {}
    for row, at in blanks:
        target = columns[at].targets[row]
        for step in _in_order(target, known, roundings, setting) if target not in place else ():
            place[step.target] = len(steps)
            known[step.target] = step.line.value
            steps.append(step)
    return tuple(steps), {(row, at): place[columns[at].targets[row]] for row, at in blanks}


def _in_order(
    target: Target, known: Mapping[Target, Value], roundings: Mapping[Target, Rounding], setting: Setting
) -> list[Step]:
    """The working of one blank; a blank that it passes on the way is rounded as that blank is."""
    steps: list[Step] = []
    for step in work(target, setting.practice, known, roundings[target]):
        if step.target != target and step.target in roundings:
            before = {**known, **{each.target: each.line.value for each in steps}}
            step = work(step.target, setting.practice, before, roundings[step.target])[-1]
        steps.append(step)
    return steps


def solve(part: Complete, setting: Setting) -> Solved:
    """The table, with a mark for each blank."""
    columns = columns_of(part, setting)
    blanks = blanks_of(part, columns)
    filled = _filled(columns, setting)
    steps, lines = _worked(blanks, columns, setting)
    if part.marks is not None and not part.scheme and part.marks != len(blanks):
        raise ContentError(f"marks: {part.marks}, but the table has {len(blanks)} blanks, one mark each")
    labels = {cell: roman(at) for at, cell in enumerate(blanks, 1)}
    answers = {cell: filled[cell[0]][cell[1]] for cell in blanks}
    candidates = [
        Candidate(lines[cell], _rule(labels[cell], columns[cell[1]].what.name, columns[cell[1]].label(target)))
        for cell in blanks
        for target in (columns[cell[1]].targets[cell[0]],)
    ]
    return Solved(
        task="complete",
        quantity=columns[-1].what.name,
        targets=tuple(columns[at].targets[row] for row, at in blanks),
        ask=worded(part, setting.turn, _wording(columns, len(blanks))),
        steps=steps,
        answer=_answer(answers, labels),
        points=chosen(candidates, steps, part.marks, part.scheme) if part.scheme else numbered(candidates),
        space=space_for(steps) if part.space is None else part.space,
        exhibits=(_table(columns, filled, blanks),),
        notes=part.notes,
    )


def _rule(label: str, name: str, row: str) -> PointRule:
    rules = quantity(name).points
    kind: PointKind = "A" if any(rule.kind == "A" for rule in rules) else "B"
    aspect = next((rule.aspect for rule in rules if rule.kind == kind), "value")
    follow = any(rule.follow_through for rule in rules if rule.kind == kind)
    return PointRule(kind, f"({label}) {name} of {row}", aspect, 100, follow)


def _answer(answers: Mapping[Cell, Answer], labels: Mapping[Cell, str]) -> Answer:
    texts, nodes = [], []
    for cell, answer in answers.items():
        texts.append(f"({labels[cell]}) {answer.shown}" + (f" {answer.unit}" if answer.unit else ""))
        nodes += [WordsNode(f"({labels[cell]})"), answer.node]
    return Answer("table", "; ".join(texts), Row(tuple(nodes)), tuple(answers.values()))


def _table(columns: Sequence[Things], filled: Sequence[Sequence[Answer]], blanks: Sequence[Cell]) -> BlankTable:
    first = columns[0]
    corner = WordsNode("electron" if first.by_electron else "species")
    rows: list[tuple[Node, ...]] = []
    for target, cells in zip(first.targets, filled, strict=True):
        # The unit stands in the head of the column.
        nodes = [Num(cell.shown) if cell.kind == "number" else cell.node for cell in cells]
        rows.append((first.node(target), *nodes))
    empty = {(row, column + 1) for row, column in blanks}
    return BlankTable(
        header=(corner, *(_head(column) for column in columns)),
        rows=tuple(
            tuple(None if (row, at) in empty else node for at, node in enumerate(cells))
            for row, cells in enumerate(rows)
        ),
        filled=tuple(rows),
    )


def _head(column: Things) -> Node:
    if not column.what.numeric:
        return WordsNode(column.what.name)
    return Row((column.what.symbol, WordsNode(f"/ {column.unit}"))) if column.unit else column.what.symbol


def _wording(columns: Sequence[Things], count: int) -> str:
    first = columns[0]
    names = joined([column.measure for column in columns])
    if first.by_electron:
        about = f"the electrons of {species_words(first.targets[0].species)}"
    else:
        about = "these species"
        if any("electron" in column.what.takes for column in columns):
            electron = next(column.targets[0].electron for column in columns if "electron" in column.what.takes)
            about = f"{electron_words(electron)} of each species"
    to = "and" if count == 2 else "to"
    which = "the blank (i)" if count == 1 else f"the blanks (i) {to} ({roman(count)})"
    return f"The table is about {about}: {names}. Complete {which}."


TASK = Task(
    name="complete",
    says="fill the blanks of a table: quantities for several species, or several electrons of one",
    fields=Complete,
    solve=solve,
    example=(
        "- complete: [screening constant, effective nuclear charge]\n  of: V\n  rows: [4s, 3d, 3p]\n  blanks: 4\n"
    ),
)
