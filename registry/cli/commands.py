"""The commands by name: each is imported and built only when it is asked for."""

from __future__ import annotations

from importlib import import_module
from typing import Any, NamedTuple

import typer
from typer.core import TyperCommand, TyperGroup
from typer.main import get_command

__all__ = ["COMMANDS", "CommandTable", "Home"]


class Home(NamedTuple):
    """Where a command lives.

    Attributes
    ----------
    module : str
        A module of `registry.cli`.
    function : str
        The command itself, or what returns a `typer.Typer` with subcommands.
    group : bool
        True if it has subcommands.
    """

    module: str
    function: str
    group: bool = False


COMMANDS: dict[str, Home] = {
    "lookup": Home("looking", "lookup"),
    "boil": Home("boiling", "boil"),
    "table": Home("tabling", "table"),
    "slope": Home("sloping", "slope"),
    "coverage": Home("browsing", "coverage"),
    "list": Home("browsing", "list_records"),
    "show": Home("browsing", "show"),
    "restate": Home("restating", "restate"),
    "forms": Home("vocabulary", "forms"),
    "record": Home("recording", "build_record_group", group=True),
    "revise": Home("revising", "revise"),
    "review": Home("judging", "review"),
    "withdraw": Home("judging", "withdraw"),
    "prefer": Home("judging", "prefer"),
    "queue": Home("judging", "queue"),
    "history": Home("past", "history"),
    "diff": Home("past", "diff"),
    "freeze": Home("freezing", "freeze"),
    "editions": Home("freezing", "editions"),
    "verify": Home("verifying", "verify"),
    "start": Home("keeping", "start"),
    "load": Home("keeping", "load"),
    "dump": Home("keeping", "dump"),
    "upgrade": Home("keeping", "upgrade"),
}
"""In the order in which the help lists them."""


class CommandTable(TyperGroup):
    """The commands of the table; one that is not asked for costs its name."""

    def __init__(self, **settings: Any) -> None:
        super().__init__(**settings)
        # names are enough to list and to suggest
        self.commands = {name: TyperCommand(name) for name in COMMANDS}

    def get_command(self, ctx: Any, cmd_name: str) -> Any:
        """The command of that name, built; None if there is none."""
        return _build(cmd_name, COMMANDS[cmd_name]) if cmd_name in COMMANDS else None


def _build(name: str, home: Home) -> Any:
    found = getattr(import_module(f"registry.cli.{home.module}"), home.function)
    if home.group:
        app = found()
    else:
        app = typer.Typer(rich_markup_mode=None, pretty_exceptions_enable=False, add_completion=False)
        app.command(name)(found)
    return get_command(app)
