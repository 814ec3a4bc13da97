"""The docstrings of the public surface are specifications in numpydoc form."""

from __future__ import annotations

import importlib
import inspect

import numpydoc.validate
import pytest
from test_shape import MODULES

import registry

# parameters documented, none unknown, in order; sections known and in order; returns described; summary present
WANTED = {"GL06", "GL07", "GL08", "PR01", "PR02", "PR03", "PR07", "RT01", "RT03", "SS01", "SS03", "YD01", "ES00"}


def _methods(cls: type) -> list[str]:
    return [f"{cls.__module__}.{cls.__qualname__}.{n}" for n, m in inspect.getmembers(cls) if not n.startswith("_")
            and (inspect.isfunction(m) or isinstance(m, property)) and m.__doc__ is not None]  # fmt: skip


PUBLIC = [getattr(registry, name) for name in registry.__all__]
NAMES = sorted(
    {f"{item.__module__}.{item.__qualname__}" for item in PUBLIC}
    | {name for item in PUBLIC if inspect.isclass(item) and "errors" not in item.__module__ for name in _methods(item)}
)


@pytest.mark.parametrize("name", NAMES)
def test_public_docstrings_follow_numpydoc(name):
    """Every public name has a summary, its parameters and what it returns."""
    found = numpydoc.validate.validate(name)
    simple = len(found["docstring"].strip().splitlines()) == 1
    wrong = [(code, text) for code, text in found["errors"] if code in WANTED - {"ES00"}]
    if name.rsplit(".", 1)[-1][0].isupper():  # a result is described by its attributes, not by how it is made
        wrong = [pair for pair in wrong if pair[0] != "PR01"]
    if simple:  # one line says it all for a property, or a method without parameters
        wrong = [pair for pair in wrong if pair[0] not in ("RT01", "RT03")]
    assert wrong == []


@pytest.mark.parametrize("module", MODULES)
def test_every_module_and_public_name_says_what_it_is(module):
    """Modules, classes and functions without a leading underscore have a docstring that starts with a sentence."""
    loaded = importlib.import_module(f"registry.{module}" if module != "__init__" else "registry")
    assert loaded.__doc__
    for name, item in vars(loaded).items():
        mine = getattr(item, "__module__", "") == loaded.__name__
        if mine and not name.startswith("_") and (inspect.isclass(item) or inspect.isfunction(item)):
            assert item.__doc__, f"{module}.{name}"
            assert item.__doc__.strip().splitlines()[0].endswith((".", ":", "::")), f"{module}.{name}"


@pytest.mark.parametrize("name", ["lookup", "coverage", "find_compound"])
def test_the_main_verbs_show_a_worked_value(name):
    """The main verbs have examples, which run as doctests."""
    assert ">>>" in getattr(registry.Library, name).__doc__
