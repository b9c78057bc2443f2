"""Stage 9, the commands: words typed by a person in, the call of one stage out. Nothing heavy is imported here."""

from __future__ import annotations

import importlib
import os
import sys
from collections.abc import Sequence

import click

from authoring import __version__
from authoring.faults import FaultsFound, ShieldwrightError, UsageError, render_faults, suggestion

# name → (module in authoring/commands/ that defines `command`, what --help says of it)
COMMANDS = {
    "work": ("work", "The full working of one quantity."),
    "tabulate": ("tabulate", "A table of quantities over species."),
    "diagnose": ("diagnose", "Which misunderstanding gives a value."),
    "vet": ("vet", "Everything wrong or weak about items and plans."),
    "set": ("set_", "Sheets, key and record for a class."),
    "mark": ("mark", "Judge scripts; keep the ledger."),
    "guide": ("guide", "The reference, made from the program's own tables."),
}

FIRST_WORDS = """Three things worth trying:

  shieldwright work V 4s
  shieldwright set weekly-sheet --copies 4 --into first-set
  shieldwright guide
"""


class Commands(click.Group):
    """The group of commands; each is imported only when it is called."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """The names in working order."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """Import one command."""
        if cmd_name not in COMMANDS:
            return None
        module = importlib.import_module(f"authoring.commands.{COMMANDS[cmd_name][0]}")
        found: click.Command = module.command
        return found

    def resolve_command(
        self, ctx: click.Context, args: list[str]
    ) -> tuple[str | None, click.Command | None, list[str]]:
        """Offer the nearest name for an unknown one."""
        name = args[0]
        if name not in COMMANDS:
            raise UsageError(f"no command {name[:40]!r}{suggestion(name, list(COMMANDS))}")
        return super().resolve_command(ctx, args)

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """List the commands without importing them."""
        with formatter.section("Commands"):
            formatter.write_dl([(name, says) for name, (_, says) in COMMANDS.items()])


@click.group(
    cls=Commands,
    invoke_without_command=True,
    context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 80},
)
@click.version_option(__version__, message="%(prog)s %(version)s")
@click.pass_context
def shieldwright(ctx: click.Context) -> None:
    """Set and mark assessed work on electron shielding."""
    if ctx.invoked_subcommand is None:
        click.echo(FIRST_WORDS, nl=False)


def main(arguments: Sequence[str] | None = None) -> None:
    """Run the program and leave with its exit code: 0 clean, 1 content at fault, 2 usage, 3 an outside program."""
    try:
        code = shieldwright.main(args=arguments, prog_name="shieldwright", standalone_mode=False)
    except click.exceptions.Abort:
        _leave("stopped; nothing was left half-written", 130)
    except KeyboardInterrupt:
        _leave("stopped; nothing was left half-written", 130)
    except click.ClickException as error:
        _leave(error.format_message(), 2)
    except FaultsFound as error:
        _leave(render_faults(error.faults), error.exit_code)
    except ShieldwrightError as error:
        _leave(getattr(error, "full_message", error.message), error.exit_code)
    except BrokenPipeError:
        # The reader of a pipe went away (`| head`): no complaint; the interpreter must not flush again.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        sys.exit(0)
    sys.exit(code if isinstance(code, int) else 0)


def _leave(message: str, code: int) -> None:
    click.echo(message, err=True)
    sys.exit(code)
