"""`shieldwright diagnose` names the misconception behind each wrong value first.

The values were computed by an independent program from Slater's rules (Phys. Rev. 36, 57, 1930), rounded as there.
"""

from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from click.testing import CliRunner

from authoring.cli import shieldwright

ROWS = list(
    csv.DictReader(
        (Path(__file__).parents[1] / "slips" / "data" / "slips.csv").read_text(encoding="utf-8").splitlines()
    )
)
# Another single slip gives the same value for the row's species; both must be among the first answers.
SHARED = {"outer electrons counted", "d outside next s", "d filled before next s"}


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["slip"])
def test_the_row_is_diagnosed(row: dict[str, str]) -> None:
    arguments = ["diagnose", row["species"], row["electron"] or "outermost", row["wrong"]]
    ran = CliRunner().invoke(shieldwright, [*arguments, "--quantity", row["quantity"], "--json"])
    assert ran.exit_code == 0, ran.output
    found = [each["slips"] for each in json.loads(ran.output) if each["slips"]]
    first = [slips for slips in found if len(slips) == 1]
    assert [row["slip"]] in first
    if row["slip"] not in SHARED:
        assert found[0] == [row["slip"]], found[:3]


def test_the_example_of_the_help_is_explained() -> None:
    ran = CliRunner().invoke(shieldwright, ["diagnose", "V", "4s", "16.85"])
    assert ran.exit_code == 0
    assert "V" not in ran.output.split()[:1]
    assert ran.output.strip()
