"""Which library files this user has opened before: an empty file each, in the user's state folder.

The pages of a file never seen are checked before it is used; the mark says
that it was. A folder that cannot be written only means that the check is
done every time.
"""

from __future__ import annotations

import hashlib
import os
import sys
from contextlib import suppress
from pathlib import Path

__all__ = ["find_mark", "find_state_folder", "has_mark", "leave_mark", "mark_file"]


def find_state_folder() -> Path:
    """The folder for what a program keeps between its runs, by the custom of the system."""
    # by hand: a lookup does not import platformdirs
    if sys.platform == "win32":
        folder = os.environ.get("LOCALAPPDATA") or "~/AppData/Local"
    elif sys.platform == "darwin":
        folder = "~/Library/Application Support"
    else:
        folder = os.environ.get("XDG_STATE_HOME", "").strip() or "~/.local/state"
    return Path(os.path.expanduser(folder)) / "rangebook"


def find_mark(path: Path, found: os.stat_result) -> Path:
    """The mark of a file at a place: another file there, or the same elsewhere, has another."""
    named = f"{os.path.realpath(path)}\0{found.st_dev}\0{found.st_ino}"
    name = hashlib.sha256(named.encode("utf-8", "surrogateescape")).hexdigest()[:32]
    return find_state_folder() / "seen" / name


def has_mark(mark: Path) -> bool:
    """True if the file was seen before."""
    return os.path.exists(mark)  # false where the folder cannot be read, too


def leave_mark(mark: Path) -> None:
    """Remember a file as seen, if there is a home and the state folder can be written."""
    if not mark.is_absolute():
        return
    with suppress(OSError):
        mark.parent.mkdir(parents=True, exist_ok=True)
        mark.touch()


def mark_file(path: Path) -> None:
    """Remember a library that the program has just made itself."""
    with suppress(OSError):
        leave_mark(find_mark(path, os.stat(path)))
