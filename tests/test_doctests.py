"""Every example in a docstring runs, and gives what it says."""

from __future__ import annotations

import doctest
import importlib
import pkgutil
from pathlib import Path

import pytest

import registry
from registry.opening import start_library

MODULES = sorted(
    module.name for module in pkgutil.walk_packages(registry.__path__, "registry.") if "._shipped" not in module.name
)


@pytest.mark.parametrize("name", MODULES)
def test_docstring_examples_hold(name, tmp_path, monkeypatch):
    """The examples of a module run in a folder with the published shelf as shelf.db."""
    monkeypatch.chdir(tmp_path)
    module = importlib.import_module(name)
    if "shelf.db" in Path(module.__file__).read_text(encoding="utf-8"):
        start_library("shelf.db").close()
    flags = doctest.NORMALIZE_WHITESPACE | doctest.ELLIPSIS
    result = doctest.testmod(module, optionflags=flags)
    assert result.failed == 0
