"""`guide`: the reference, made from the program's own tables."""

from __future__ import annotations

import click

from authoring.commands.common import print_json
from authoring.commands.guide_topics import TOPICS, topic
from authoring.faults import UsageError, suggestion
from authoring.specs.schema import KINDS, schema


@click.command("guide")
@click.argument("words", nargs=-1, metavar="[TOPIC [NAME]]")
@click.option("--schema", "kind", metavar="KIND", help=f"Print the JSON Schema of: {', '.join(KINDS)}.")
@click.option("--json", "as_json", is_flag=True, help="The topic as JSON: {topic, text}.")
def command(words: tuple[str, ...], kind: str | None, as_json: bool) -> None:
    """Explain quantities, tasks, slips, the keys of items and plans, scripts and JSON.

    \b
    shieldwright guide
    shieldwright guide task select
    shieldwright guide --schema item
    """
    if kind is not None:
        print_json(schema(kind))
        return
    name, detail = (words[0] if words else ""), " ".join(words[1:])
    if not name:
        text = contents()
    elif name in TOPICS:
        text = topic(name, detail)
    else:
        raise UsageError(f"no topic {name[:40]!r}{suggestion(name, list(TOPICS))}")
    if as_json:
        print_json({"topic": name, "text": text})
    else:
        click.echo(text)


def contents() -> str:
    """The list of topics."""
    width = max(map(len, TOPICS))
    lines = [f"  {name.ljust(width)}  {entry.says}" for name, entry in TOPICS.items()]
    return "\n".join(["Topics (shieldwright guide TOPIC):", "", *lines])
