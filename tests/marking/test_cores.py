"""Work on several cores: the same results in the same order, errors as they were, and nobody left behind."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time
from collections.abc import Callable, Iterator
from functools import partial
from pathlib import Path

import pytest

from authoring.faults import UsageError
from authoring.marking.cores import cores, spread


def powers(of: int) -> Callable[[int], tuple[int, int]]:
    """A work that says where it was done."""
    return partial(_power, of)


def _power(of: int, heap: int) -> tuple[int, int]:
    if heap == 13:
        raise UsageError("thirteen is too many")
    return of**heap, os.getpid()


@pytest.mark.parametrize("method", ["fork", "spawn"])
def test_results_come_in_order_from_other_processes(method: str) -> None:
    """Whatever way the workers are begun."""
    if sys.platform == "win32" and method == "fork":
        pytest.skip("Windows cannot copy a process")
    with spread(partial(powers, 3), range(12), 2, by=method) as results:
        found = list(results)
    assert [value for value, _ in found] == [3**heap for heap in range(12)]
    assert os.getpid() not in {process for _, process in found}


def test_one_worker_is_this_process() -> None:
    """Where there is one core, or little to do."""
    with spread(partial(powers, 2), range(5), 1) as results:
        assert list(results) == [(2**heap, os.getpid()) for heap in range(5)]


@pytest.mark.parametrize("workers", [1, 2])
def test_an_error_in_a_worker_is_the_error_here(workers: int) -> None:
    """After the results before it."""
    with spread(partial(powers, 2), range(10, 30), workers) as results:
        assert [next(results)[0] for _ in range(3)] == [2**10, 2**11, 2**12]
        with pytest.raises(UsageError, match="thirteen"):
            next(results)


def test_heaps_are_handed_out_as_results_are_taken() -> None:
    """So that a long pile is never in memory as a whole."""
    handed: list[int] = []

    def heaps() -> Iterator[int]:
        for heap in range(14, 1000):
            handed.append(heap)
            yield heap

    with spread(partial(powers, 1), heaps(), 2) as results:
        for taken in range(1, 50):
            next(results)
            assert len(handed) <= taken + 4


def test_there_is_a_core() -> None:
    """At least the one that this runs on."""
    assert 1 <= cores() <= (os.cpu_count() or 1)


KILLED = """
import sys, time
sys.path.insert(0, {root!r})
from authoring.marking.cores import spread
import os
def work(heap):
    time.sleep(0.05)
    return os.getpid()
with spread(lambda: work, range(100000), 2) as results:
    print(*{{next(results) for _ in range(8)}}, flush=True)
    time.sleep(60)
"""


@pytest.mark.skipif(sys.platform != "linux", reason="looks processes up in /proc")
def test_no_worker_outlives_a_killed_program() -> None:
    """Neither one that works nor one that waits."""
    script = KILLED.format(root=str(Path(__file__).parents[2]))
    with subprocess.Popen([sys.executable, "-c", script], stdout=subprocess.PIPE, text=True) as program:
        assert program.stdout is not None
        workers = [int(word) for word in program.stdout.readline().split()]
        program.send_signal(signal.SIGKILL)
    assert workers
    deadline = time.monotonic() + 10
    while any(Path(f"/proc/{worker}").exists() for worker in workers) and time.monotonic() < deadline:
        time.sleep(0.05)
    assert not [worker for worker in workers if Path(f"/proc/{worker}").exists()]
