"""Stage 8, mark: work spread over the machine's cores: heaps dealt out in turn, their results in order.

Where the system can, the workers are copies of this process, and nothing that was read is read again.
"""

from __future__ import annotations

import gc
import itertools
import multiprocessing
import os
import signal
import sys
import threading
from collections import deque
from collections.abc import Callable, Iterable, Iterator
from concurrent.futures import Future, ProcessPoolExecutor
from contextlib import contextmanager
from typing import Any, Generic, TypeVar

Heap = TypeVar("Heap")
Result = TypeVar("Result")
Work = Callable[[Heap], Result]

# Heaps in hand for each worker: one is worked on while another waits, and no more are kept.
_AHEAD = 2
_MOST_WORKERS = 8
# Judging keeps what it finds and makes few cycles: with the usual 700 the collector takes a quarter of the time.
_COLLECTED_AFTER = 100_000


def cores() -> int:
    """How many cores this process may use."""
    usable = getattr(os, "sched_getaffinity", None)
    return len(usable(0)) if usable else os.cpu_count() or 1


def method() -> str:
    """How workers are started: copied where that is safe, begun anew elsewhere."""
    return "fork" if sys.platform == "linux" else "spawn"


@contextmanager
def seldom_collected() -> Iterator[None]:
    """What was read is left alone by the garbage collector, which comes seldom, until the block ends."""
    before = gc.get_threshold()
    _collect_seldom()
    try:
        yield
    finally:
        gc.set_threshold(*before)
        gc.unfreeze()


def _collect_seldom() -> None:
    gc.freeze()
    gc.set_threshold(_COLLECTED_AFTER)


@contextmanager
def spread(
    make: Callable[[], Work[Heap, Result]], heaps: Iterable[Heap], workers: int, by: str = ""
) -> Iterator[Iterator[Result]]:
    """The results of a work on each heap, in order, as an iterator; the work is made once in each worker.

    With one worker all is done here. With several, `make`, heaps and results go from process to process: they are
    small, and under `spawn` they can be pickled. The workers are running when the block is entered.
    """
    if workers < 2:
        yield map(make(), heaps)
        return
    context: Any = multiprocessing.get_context(by or method())
    pool = ProcessPoolExecutor(min(workers, _MOST_WORKERS), context, _begin, (make,))
    try:
        yield _Dealt(pool, iter(heaps), workers * _AHEAD)
    finally:
        pool.shutdown(cancel_futures=True)


class _Dealt(Generic[Heap, Result]):
    """Results in the order of their heaps; a heap is handed out when a result is taken."""

    def __init__(self, pool: ProcessPoolExecutor, heaps: Iterator[Heap], ahead: int) -> None:
        self._pool = pool
        self._heaps = heaps
        self._waiting: deque[Future[Result]] = deque()
        self._deal(ahead)

    def _deal(self, count: int) -> None:
        for heap in itertools.islice(self._heaps, count):
            self._waiting.append(self._pool.submit(_do, heap))

    def __iter__(self) -> Iterator[Result]:
        return self

    def __next__(self) -> Result:
        if not self._waiting:
            raise StopIteration
        result = self._waiting.popleft().result()
        self._deal(1)
        return result


# --- in a worker -------------------------------------------------------------------------------------------

_WORK: list[Work[Any, Any]] = []


def _begin(make: Callable[[], Work[Any, Any]]) -> None:
    # Ctrl-C is for the process that writes; the workers end with it, also where it was killed.
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    threading.Thread(target=_end_with_parent, daemon=True).start()
    _WORK[:] = [make()]
    _collect_seldom()


def _end_with_parent() -> None:
    parent = multiprocessing.parent_process()
    if parent is not None:
        parent.join()
        os._exit(1)


def _do(heap: Any) -> Any:
    return _WORK[0](heap)
