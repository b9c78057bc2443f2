"""`guide`: the topics that no table in the program can say."""

FIRST_ITEM = """\
An item is one question: a YAML file. A whole one:

  item: The evening tank at Marrowgate
  level: first-year
  topics: [transition metals, screening]
  draw:
    metal: {block: d, period: 4, except: [Zn]}
    outer: {electron of: metal, shell: outermost}
  keep:
    - metal.unpaired > 0
  story: |
    The Marrowgate plant keeps its evening power in two tanks of dissolved
    {{ metal.name }}.
  parts:
    - calculate: screening constant
      of: metal
      electron: outer
      marks: 3
    - calculate: effective nuclear charge
      marks: 1

Check it with `shieldwright vet FILE`: every variant is drawn and solved. A part
that leaves `of` and `electron` out goes on with those of the part before it,
and with what that part worked out. `marks` keeps the weightiest steps of the
working; `scheme` replaces them by your own. Everything is read as text: `No`
and `Y` are elements, `3.250` keeps its zero.
"""

ITEM_TEXT = """\
Text of stories, wordings, captions and notes is a small Markdown:

  a blank line         a new paragraph
  *so*  **so**         emphasis, strong emphasis
  - one                a list (1. for a numbered one)
  `Fe3+` `3d6` `4s`    chemistry: species, subshells, configurations, formulas
  `[Ar] 3d6 4s2`       (with their charges and counts raised)
  $Z_{eff} = Z - S$    a formula: letters, numbers, _ and ^, \\frac{}{}, \\sqrt{},
                       \\times, Greek letters, units
  \\*                   the character itself

Raw TeX and HTML are plain text. Folded text (`>`) is refused, because a fault
in it could not be placed; use `|`.

Drawn values stand in double braces:

  {{ metal }}                 the species as chemistry
  {{ metal.name }}            its element's name
  {{ metal.name | a }}        with its article: an iron, a vanadium
  {{ metal.name | capital }}  at the start of a sentence
  {{ n | count("electron") }} 1 electron, 3 electrons
  {{ n | words }} {{ n | ordinal }} {{ x | lower }} {{ list | join("or") }}
  {% if metal.charge > 0 %}…{% else %}…{% endif %}

They do in `story`, `caution`, `notes`, the texts of parts, of tables (`given`)
and of the `figure`. In the `ask` of calculate, correct and select,
{{ rounding }} is how the answer is to be given (to 4 significant figures); a
wording of your own replaces the default with its sentence on rounding, so put
it in: `Give your answer {{ rounding }}.`

Lines under `keep` are conditions in the same language, and every one must hold
for a variant to exist: `metal.unpaired > 0`, `one != other`,
`metal.z < other.z and metal.block == "d"`. What a drawn species or electron has
(`metal.unpaired`) is listed at the end of `shieldwright guide item`.
"""

SETTING = """\
A plan lists the items of a paper. A whole one:

  plan: Weekly sheet 3
  course: Inorganic chemistry 1
  time: 40 minutes
  items: [marrowgate-evening-tank, my-item.yaml]
  conventions: {1s pair: 0.30}
  layout: {paper: A4, type: 11, space: normal}
  attach: [constants, periodic table]

`shieldwright set PLAN --copies 30 --into FOLDER` (or `--candidates roster.csv`,
with a column `candidate` and, if you like, `name`, `needs`, `seat`) writes
sheets and key as PDF, TeX and HTML, `set.json` (the private record) and
`scripts.yaml` (a blank form for marking). No two papers are alike while the
pools allow. The same seed gives the same papers; leave `--seed` out for a real
exam: a short seed can be guessed, the 128 random bits of the default cannot.
"""

SCRIPTS = """\
A script is what one candidate wrote, transcribed into the blank form that `set`
leaves in the set's folder:

  - paper: K7QDM
    1a: 0.35 + 11*0.85 + 10 = 19.70     # a line, or a list of lines
    1b: 3.30
    1c: 4s, because its effective charge is lower
  - paper: M3TXC
    1a: ok                              # exactly as the key
    1b: 4.15

Write lines as the candidate did: × x * ·, − -, ^ or superscripts, fractions
with /, chains of =, ≈ and →, decimal point or comma, units, configurations
(`[Ar] 3d3 4s2`, `1s²2s²2p²`), groups (`(1s)2(2s,2p)8`), orderings (`Na > Mg`),
a letter for a choice, words. `~~…~~` is crossed out and does not count. A part
that is left out, or empty, was not answered. A line that cannot be read is
reported at its place and left to a person.

A CSV of final answers does as well: a column `paper`, then one for each part.
"""

MARKING = """\
`shieldwright mark FOLDER scripts.yaml` judges every line on the candidate's own
earlier values: right under the course's practice earns its points (marked ft
where an earlier value was wrong); right under a slip names the slip and loses
the points it spoils; wrong arithmetic is said to be that; anything else is
*unexplained* and left to a person. `shieldwright mark FOLDER` without a file
asks for one paper after the other at the terminal. Everything goes into the
ledger in the set's folder; nothing in it is ever overwritten.

Proposed marks are proposals: a person confirms them, and your institution's
assessment and data-protection rules apply. Names never enter the ledger.
"""

JSON = """\
With --json the commands print (keys are stable; numbers are strings as printed,
with an ASCII minus):

  work       {species, electron, quantity, answer, unit,
              lines: [{quantity, statement, value, unit, point}]}
  tabulate   [{Z, species, charge, electron, <quantity>…}]
             (--csv: the same columns; electron only for quantities of one)
  diagnose   [{quantity, slips: [names], answer, explanation}], likeliest first
  vet        [{item, possible, sound,
               findings: [{code, severity, message, source}]}]
  set        {into, papers, marks, files, codes}
  mark       [{paper, candidate, part, awarded, out_of, certainty, slips,
               points: [{code, awarded, reason}]}]
  guide      {topic, text}; --schema prints a JSON Schema

set.json: {format, tool_version, plan, title, seed, conventions,
  papers: [{code, candidate, items: [{item, variables,
    parts: [{label, task, quantity, of, electron, with, targets, given, answer,
             unit, marks, points: [{code, line, mark, what}],
             slips: [{names, answer}]}]}]}],
  texts: {plan, items, slips}}
"""

ERRORS = """\
Faults are gathered and shown together, each at path:line:column with its source
line and a caret, and the nearest word where one is misspelt.

  0  clean
  1  the content has faults (an item, plan, roster, script or value)
  2  wrong usage, or something unreadable
  3  an outside program (TeX) is missing, failed or took too long
  130  stopped by Ctrl-C

A set's folder appears whole or not at all.
"""
