"""A record by questions and answers: one field at a time, a bad answer is asked again."""

from __future__ import annotations

import sys
from collections.abc import Callable, Mapping
from typing import Any

from registry.cells import complain
from registry.cli.fields import Field, list_fields, refuse_bad
from registry.errors import BadInput, InvalidRecord, quote
from registry.exchange.coefficients import join_coefficients, parse_coefficients
from registry.forms.catalogue import FORMS
from registry.records import Record

__all__ = ["ask_on_terminal", "ask_record", "can_ask"]

Ask = Callable[[str], str]
Tell = Callable[[str], None]

EMPTY = "-"
"""Empties a field that an answer before has filled; no text may start with it."""


def can_ask() -> bool:
    """True if somebody sits at a terminal who can read a question and answer it."""
    return all(stream is not None and stream.isatty() for stream in (sys.stdin, sys.stderr))


def ask_on_terminal(prompt: str) -> str:
    """An answer from the terminal; the question goes to stderr, for stdout holds results.

    Raises
    ------
    EOFError
        If there is no more input.
    """
    print(prompt, end="", file=sys.stderr, flush=True)
    answer = sys.stdin.readline()
    if not answer:
        print(file=sys.stderr)
        raise EOFError
    return answer


def ask_record(cls: type[Record], values: Mapping[str, Any], ask: Ask, tell: Tell) -> Record:
    """A record from what is given and from answers to questions.

    Parameters
    ----------
    cls : type
        The record; not a dataset, whose points no question asks for.
    values : mapping of str to str
        Fields that are given already, which are not asked; coefficients as a
        dict of texts.
    ask : callable
        ``ask(prompt)`` gives an answer, and raises EOFError when there are no
        more.
    tell : callable
        ``tell(text)`` shows a line.

    Returns
    -------
    Record
        Complete; nothing is recorded by it.

    Raises
    ------
    InvalidRecord
        If what was given may not stand, so that no answer can mend it.
    BadInput
        If the answers end.

    Examples
    --------
    >>> from registry.records import CompoundName
    >>> answers = iter(["", "oxidane"])
    >>> ask_record(CompoundName, {"compound": "water"}, lambda prompt: next(answers), print).key
      it is empty; text is allowed.
    'water:oxidane'
    """
    refuse_bad(cls, values)
    asked = [field for field in list_fields(cls) if field.name not in values]
    answers: dict[str, Any] = {}
    while True:
        for field in asked:
            answers[field.name] = _ask_field(field, {**values, **answers}, ask, tell)
        try:
            return cls(**values, **answers)
        except InvalidRecord as error:
            if not any(_can_mend(problem.field, answers) for problem in error.problems):
                raise
            for problem in error.problems:
                tell(f"  {problem}")
            tell(f"Once more: an empty answer keeps what stands in brackets, {EMPTY} empties it.")


def _can_mend(field: str, answers: Mapping[str, Any]) -> bool:
    """True if another answer helps: a bound, say, is judged with the other bound and the unit."""
    return field.split("_")[0] in {name.split("_")[0] for name in answers}


def _ask_field(field: Field, known: Mapping[str, Any], ask: Ask, tell: Tell) -> Any:
    """A good answer to one question; `known` has what is given and answered, this field too from the second round."""
    kept = known.get(field.name, "")
    while True:
        try:
            answer = ask(_word_prompt(field, known)).strip()
        except EOFError:
            raise BadInput(f"The answers ended at {field.name}. Nothing was recorded.") from None
        if not answer and kept:
            return kept
        text = "" if kept and answer == EMPTY else answer
        value, why = _read_coefficients(text, known) if field.name == "coefficients" else (text, _judge(field, text))
        if not why:
            return value
        tell(f"  {quote(text)} given; {why}" if text else f"  {why}")


def _judge(field: Field, text: str) -> str:
    return complain(field.cell, text, field.required)


def _word_prompt(field: Field, known: Mapping[str, Any]) -> str:
    told = field.told
    if field.name == "coefficients" and known.get("form") in FORMS:
        form = FORMS[known["form"]]
        told = f"{form.coefficients} of {form.equation}; {told}"
    kept = known.get(field.name, "")
    shown = join_coefficients(kept.items()) if isinstance(kept, dict) else kept
    return f"{field.name} ({told.removesuffix('.')}){f' [{shown}]' if shown else ''}: "


def _read_coefficients(text: str, known: Mapping[str, Any]) -> tuple[dict[str, str], str]:
    try:
        found = parse_coefficients(text)
    except ValueError as error:
        return {}, str(error)
    return found, FORMS[known["form"]].coefficients.complaint(found)
