"""The packages that come with the program."""

from __future__ import annotations

from pathlib import Path

__all__ = ["find_shelf"]


def find_shelf(name: str) -> Path:
    """The folder of a shelf: in an installed package, else beside it."""
    package = Path(__file__).resolve().parent
    shipped = package / "_shipped" / "seed_demo"
    return (shipped if shipped.is_dir() else package.parent / "seed_demo") / name
