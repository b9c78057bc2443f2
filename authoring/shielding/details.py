"""Solve: what quantities read besides their inputs: numbers among a target's details, and the data files."""

from __future__ import annotations

import functools
import tomllib
from decimal import Decimal
from pathlib import Path
from typing import Any

from authoring.faults import ContentError
from authoring.shielding.practice import read_decimal
from authoring.shielding.quantity import Target


def positive(target: Target, name: str) -> Decimal:
    """A detail that is a positive number. Raises ContentError where it is missing or no such number."""
    text = target.get(name)
    if not text:
        raise ContentError(f"{target.quantity} needs {name!r}")
    number = read_decimal(text, name)
    if number <= 0:
        raise ContentError(f"{name}: a positive number is needed, not {text[:20]}")
    return number


@functools.cache
def data(name: str) -> dict[str, Any]:
    """A data file of this room, `data/NAME.toml`."""
    with Path(__file__).with_name("data").joinpath(f"{name}.toml").open("rb") as file:
        return tomllib.load(file)
