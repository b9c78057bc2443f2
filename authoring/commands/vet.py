"""`vet`: everything wrong or weak about items and plans, before anyone sits them."""

from __future__ import annotations

import sys
from pathlib import Path

import click

from authoring.commands.common import json_option, print_json, progress_bar
from authoring.faults import Fault, ShieldwrightError, UsageError, render_faults
from authoring.papers.vet import Vetted, vetted_item, vetted_plan
from authoring.specs.shipped import located, shipped_names
from authoring.specs.yaml_tree import read_tree


@click.command("vet")
@click.argument("names", nargs=-1, required=True, metavar="ITEM-OR-PLAN...")
@json_option
def command(names: tuple[str, ...], as_json: bool) -> None:
    """Check items and plans: every variant of every item is solved.

    \b
    shieldwright vet my-item.yaml my-plan.yaml
    """
    results: list[Vetted] = []
    with progress_bar("vetting") as progress:
        for at, name in enumerate(names):
            results += vetted_file(name)
            progress(at + 1, len(names))
    findings = list(dict.fromkeys(finding for result in results for finding in result.findings))
    if as_json:
        print_json([result.data() for result in results])
    else:
        if findings:
            click.echo(render_faults(findings))
        for result in results:
            click.echo(result.words)
    sys.exit(1 if any(finding.severity == "fault" for finding in findings) else 0)


def vetted_file(name: str) -> list[Vetted]:
    """An item or a plan: its top key says which."""
    path = _located(name)
    try:
        data = read_tree(path).data
    except ShieldwrightError as error:
        return [Vetted(path.stem, 0, 0, tuple(getattr(error, "faults", (Fault("unreadable", error.message),))))]
    return vetted_plan(path) if isinstance(data, dict) and "plan" in data else [vetted_item(path)]


def _located(name: str) -> Path:
    if name in shipped_names("plans"):
        return located(name, "plans")
    try:
        return located(name, "items")
    except UsageError:
        return located(name, "plans")
