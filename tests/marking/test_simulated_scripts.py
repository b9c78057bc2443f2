"""Simulated scripts over the whole bank: how often the judge is right, with fixed seeds.

The scripts and what they deserve are worked out without the judge (marking_help.py, marking_truth.py). More papers:
`SIMULATED_PAPERS=10 pytest tests/marking/test_simulated_scripts.py`, or `python tests/marking/simulate.py --papers 10`.
"""

from __future__ import annotations

import importlib.util
import os
import sys
from pathlib import Path

import pytest

_SPEC = importlib.util.spec_from_file_location("simulate", Path(__file__).with_name("simulate.py"))
assert _SPEC is not None and _SPEC.loader is not None
simulate = importlib.util.module_from_spec(_SPEC)
sys.modules["simulate"] = simulate
_SPEC.loader.exec_module(simulate)

PAPERS = int(os.environ.get("SIMULATED_PAPERS", "3"))


def test_the_right_method_in_any_notation_earns_full_marks() -> None:
    rate = simulate.right_scripts(PAPERS)
    assert rate.cases > 100 * PAPERS
    assert rate.share == 1, rate.words()


@pytest.mark.parametrize("show", ["lines", "values", "final"])
def test_one_slip_is_named_and_costs_what_it_spoils(show: str) -> None:
    named, wrongly, exact = simulate.one_slip(PAPERS, show, show)
    assert named.cases > 60 * PAPERS
    assert named.share >= 0.97, named.words()
    assert wrongly.share >= 0.999, wrongly.words()
    # The rest differ in what counts as shown (another way to the same energy), which no scheme settles.
    assert exact.share >= 0.99, exact.words()


def test_two_slips_are_named_or_called_ambiguous() -> None:
    rate = simulate.two_slips(PAPERS)
    assert rate.cases > 50 * PAPERS
    assert rate.share >= 0.95, rate.words()


def test_errors_of_the_pen_are_no_misconceptions() -> None:
    told, kept = simulate.arithmetic(PAPERS)
    assert told.cases > 25 * PAPERS
    assert told.share == 1, told.words()
    assert kept.share == 1, kept.words()
