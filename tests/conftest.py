"""What many tests share: libraries made once, copied where a test writes."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
from hypothesis import settings

from registry.opening import open_library, start_library

settings.register_profile("suite", derandomize=True, deadline=None, print_blob=True)
settings.load_profile("suite")


@pytest.fixture(scope="session", autouse=True)
def own_home(tmp_path_factory):
    """No test, nor a process it starts, reads or writes in the home of whoever runs it."""
    home = tmp_path_factory.mktemp("home")
    with pytest.MonkeyPatch.context() as patch:
        patch.setenv("HOME", str(home))
        for name in ("XDG_STATE_HOME", "XDG_DATA_HOME", "XDG_CONFIG_HOME", "XDG_CACHE_HOME"):
            patch.delenv(name, raising=False)
        yield home


def _make(factory, shelf: str) -> Path:
    path = factory.mktemp("shelf") / f"{shelf}.db"
    start_library(path, shelf).close()
    return path


@pytest.fixture(scope="session")
def published_path(tmp_path_factory) -> Path:
    """A library file with the published shelf; not to be written to."""
    return _make(tmp_path_factory, "published")


@pytest.fixture(scope="session")
def scenario_path(tmp_path_factory) -> Path:
    """A library file with the invented scenario; not to be written to."""
    return _make(tmp_path_factory, "scenario")


@pytest.fixture(scope="session")
def published(published_path):
    """The published shelf, open."""
    with open_library(published_path) as library:
        yield library


@pytest.fixture(scope="session")
def scenario(scenario_path):
    """The invented scenario, open."""
    with open_library(scenario_path) as library:
        yield library


@pytest.fixture
def own_path(published_path, tmp_path) -> Path:
    """A copy of the published shelf that a test may write to."""
    return Path(shutil.copy(published_path, tmp_path / "own.db"))
