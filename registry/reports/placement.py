"""Files that appear whole or not at all."""

from __future__ import annotations

import os
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from registry.errors import BadInput

__all__ = ["check_place", "place_whole"]


def check_place(path: Path, replace: bool) -> None:
    """Say no where a file may not be written, before anything is made."""
    if path.is_dir() or (path.exists() and not path.is_file()):
        raise BadInput(f"{path} is no plain file. Give the name of a file.")
    if os.path.lexists(path) and not replace:
        raise BadInput(f"{path} is there already. Give another name, or --force to replace it.")
    if not path.parent.is_dir():
        raise BadInput(f"There is no folder {path.parent}. Make it first, or give another place.")


@contextmanager
def place_whole(path: Path, *, replace: bool = False) -> Iterator[Path]:
    """A name beside a place to write to; what was written is moved there once it is whole.

    Parameters
    ----------
    path : Path
        Where the file is wanted.
    replace : bool
        Put it in the place of a file that is there.

    Yields
    ------
    Path
        A name in the same folder.

    Raises
    ------
    BadInput
        If something is there and may not be replaced, or it is no file.
    """
    path = Path(os.path.realpath(path)) if path.exists() else path
    check_place(path, replace)
    fresh = path.with_name(f".{os.urandom(8).hex()}.part")
    try:
        yield fresh
        with fresh.open("rb+") as file:
            os.fsync(file.fileno())
        if replace:
            fresh.replace(path)
        else:
            _put(fresh, path)
    finally:
        fresh.unlink(missing_ok=True)


def _put(fresh: Path, path: Path) -> None:
    """Give a file its name, unless somebody else took it meanwhile."""
    try:
        os.link(fresh, path)
    except FileExistsError:
        raise BadInput(f"{path} is there already. Give another name, or --force to replace it.") from None
    except OSError:  # a file system without links
        check_place(path, replace=False)
        fresh.rename(path)
