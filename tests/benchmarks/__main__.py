"""`python -m tests.benchmarks`: the same as `python tests/benchmarks/run.py`."""

from __future__ import annotations

import sys

from tests.benchmarks.run import main

sys.exit(main())
