"""A ledger whose writer is killed a hundred times: nothing acknowledged is missing, nothing stands twice."""

from __future__ import annotations

import random
import signal
import subprocess
import sys
import time
from collections import Counter
from pathlib import Path

import pytest

from authoring.marking.ledger import Ledger

KILLS = 100

WRITER = """
import sys
from pathlib import Path
from authoring.marking.judgement import Judgement, PointJudged
from authoring.marking.ledger import Ledger
from authoring.marking.ledger_mark import Mark

folder, run = Path(sys.argv[1]), sys.argv[2]
points = (PointJudged("M1", 1, "because"),)
ledger = Ledger.open(folder, "set-1", wait=10)
print("open", flush=True)
for n in range(100000):
    one = Mark(f"R{run}-{n}", Judgement("1a", points, "certain"))
    two = Mark(f"R{run}-{n}", Judgement("1b", points, "certain"))
    ids = ledger.add_judgements([one, two], "AB")
    print(*ids, flush=True)
"""


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no SIGKILL")
def test_nothing_acknowledged_is_lost_and_nothing_stands_twice(tmp_path: Path) -> None:
    """Killed at random moments, some of them before the ledger is open."""
    chance = random.Random(20260801)
    root = Path(__file__).parents[2]
    acknowledged: list[str] = []
    for run in range(KILLS):
        with subprocess.Popen(
            [sys.executable, "-c", WRITER, str(tmp_path), str(run)], cwd=root, stdout=subprocess.PIPE, text=True
        ) as writer:
            assert writer.stdout is not None
            lines = [writer.stdout.readline()] if chance.random() < 0.9 else []
            time.sleep(chance.random() * 0.03)
            writer.send_signal(signal.SIGKILL)
            lines += writer.stdout.read().splitlines(keepends=True)
        assert writer.returncode == -signal.SIGKILL
        acknowledged += [word for line in lines if line.endswith("\n") for word in line.split() if word != "open"]
    assert len(acknowledged) > KILLS
    with Ledger.open(tmp_path, "set-1") as ledger:
        events = ledger.history()
    assert set(acknowledged) <= {event.id for event in events}
    assert len({event.id for event in events}) == len(events)
    # Each call kept two parts of a paper: both are there or neither, and once.
    assert set(Counter((event.paper, event.part) for event in events).values()) == {1}
    assert set(Counter(event.paper for event in events).values()) == {2}
