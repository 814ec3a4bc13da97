"""Fields of a record as options of a command: one option for each field, made from the record itself."""

from __future__ import annotations

import dataclasses
import inspect
from collections.abc import Callable, Mapping
from typing import Annotated, Any

import typer

from registry.cells import Cell, complain
from registry.cli.options import AuthorOption, JsonOption, LibraryOption
from registry.errors import BadInput, InvalidRecord, Problem
from registry.exchange.coefficients import COEFFICIENTS, join_coefficients, parse_coefficients
from registry.exchange.sheet_fields import tell_allowed
from registry.forms.catalogue import FORMS
from registry.naming import join_names, word_kind
from registry.records import Record

__all__ = [
    "SHARED",
    "Field",
    "build_record_command",
    "find_missing",
    "list_fields",
    "name_option",
    "read_coefficients",
    "refuse_bad",
    "refuse_missing",
]

Run = Callable[[type[Record], dict[str, Any], dict[str, Any]], None]

SHARED: dict[str, tuple[Any, Any]] = {
    "author": (AuthorOption, None),
    "library": (LibraryOption, None),
    "as_json": (JsonOption, False),
}
"""Options beside the fields: name to annotation and default."""


@dataclasses.dataclass(frozen=True)
class Field:
    """A field that a person can fill in one line.

    Attributes
    ----------
    name : str
        As in the record.
    cell : Cell
        What it may hold.
    required : bool
        True if it must be filled.
    """

    name: str
    cell: Cell
    required: bool

    @property
    def told(self) -> str:
        """What it may hold, in few words."""
        allowed = tell_allowed(self.name, self.cell.allowed)
        return allowed if self.required else f"optional; {allowed}"


def list_fields(cls: type[Record]) -> tuple[Field, ...]:
    """The fields of a record in order; points of a dataset are left to sheets and packages."""
    found = []
    for field in dataclasses.fields(cls):
        if field.name == "coefficients":
            found.append(Field(field.name, COEFFICIENTS, required=True))
        elif "cell" in field.metadata:
            found.append(Field(field.name, field.metadata["cell"], field.metadata["required"]))
    return tuple(found)


def name_option(field: str) -> str:
    """The option of a field.

    Examples
    --------
    >>> name_option("window_min")
    '--window-min'
    """
    return f"--{field.replace('_', '-')}"


def build_record_command(
    cls: type[Record], run: Run, text: str, shared: Mapping[str, tuple[Any, Any]] = SHARED
) -> Callable[..., None]:
    """A command with one option for each field of a record.

    Parameters
    ----------
    cls : type
        The record.
    run : callable
        ``run(cls, values, shared)``: `values` holds the fields that were
        given, an empty text too, as texts; coefficients as a dict of texts.
        `shared` holds all other options.
    text : str
        The help of the command.
    shared : mapping of str to (annotation, default)
        Options and arguments beside the fields; ``inspect.Parameter.empty``
        as the default of what must be given.

    Returns
    -------
    callable
        To be registered with Typer.
    """
    fields = list_fields(cls)
    both = {field.name for field in fields} & set(shared)
    if both:
        raise ValueError(f"{join_names(sorted(both), 'and')} would be a field and a shared option")
    taken = {field.name: (_annotate(field), None) for field in fields} | dict(shared)

    def command(**given: Any) -> None:
        others = {name: given[name] for name in shared}
        values = {field.name: given[field.name] for field in fields if given[field.name] is not None}
        if "coefficients" in values:
            values["coefficients"] = read_coefficients(values["coefficients"])
        run(cls, values, others)

    parameters = [
        inspect.Parameter(name, inspect.Parameter.KEYWORD_ONLY, default=default, annotation=annotation)
        for name, (annotation, default) in taken.items()
    ]
    command.__name__ = cls.kind.replace("-", "_")
    command.__doc__ = text
    command.__annotations__ = {name: annotation for name, (annotation, _) in taken.items()}
    command.__signature__ = inspect.Signature(parameters)  # type: ignore[attr-defined]
    return command


def _annotate(field: Field) -> Any:
    option = typer.Option(name_option(field.name), metavar="TEXT", help=field.told, show_default=False)
    return Annotated[str | None, option]


def read_coefficients(text: str) -> dict[str, str]:
    """Coefficients as an option has them; none for an empty text.

    Raises
    ------
    BadInput
        If they cannot be read.
    """
    try:
        return parse_coefficients(text) if text else {}
    except ValueError as error:
        raise BadInput(f"{Problem(name_option('coefficients'), text, str(error))}") from None


def find_missing(cls: type[Record], values: Mapping[str, Any]) -> list[str]:
    """Fields that must be filled and are not."""
    return [field.name for field in list_fields(cls) if field.required and not values.get(field.name)]


def refuse_missing(cls: type[Record], values: Mapping[str, Any]) -> None:
    """Say which fields are missing, where nobody can be asked.

    Raises
    ------
    BadInput
        If any is.
    """
    if missing := find_missing(cls, values):
        named = join_names([name_option(name) for name in missing], "and")
        raise BadInput(
            f"The {word_kind(cls.kind)} lacks {named}. Give them as options or in a file; on a terminal they are asked."
        )


def refuse_bad(cls: type[Record], values: Mapping[str, Any]) -> None:
    """Say which of the given fields may not stand, before the others are asked.

    Raises
    ------
    InvalidRecord
        If any may not.
    """
    problems = [
        Problem(field.name, values[field.name], why)
        for field in list_fields(cls)
        if field.name in values
        and field.name != "coefficients"
        and (why := complain(field.cell, values[field.name], field.required))
    ]
    if "coefficients" in values and (form := FORMS.get(values.get("form", ""))):
        given = values["coefficients"]
        if why := form.coefficients.complaint(given):
            problems.append(Problem("coefficients", join_coefficients(given.items()), why))
    if problems:
        raise InvalidRecord(cls.kind, str(values.get("key", "")), problems)
