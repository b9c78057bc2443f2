"""Shieldwright: sets and marks assessed work on electron shielding.

The stages, and the room of each; nothing imports upwards:

0. working    numbers, arithmetic and prose as nodes, and their printers
1. atoms      configurations, species and reference data in; what an element or ion is, out
2. shielding  a target and a practice in; exact values and lines of working out
3. slips      a practice and a misunderstanding in; the practice of the candidate who has it out
4. tasks      a part's fields and a variant's bindings in; a solved question with its mark points out
5. specs      YAML and CSV text in; items, plans and rosters out, each value knowing its place
6. papers     items and a seed in; vetted variants, papers and their record out
7. press      papers in; sheets and keys as LaTeX, PDF, HTML and text out
8. marking    scripts in; judgements, the ledger and reports out
9. cli        words typed by a person in; the call of one stage out
"""

__version__ = "0.1.0"
