"""Where the command `rangebook` begins."""

from __future__ import annotations

import gc

__all__ = ["main"]


def main() -> None:
    """Run the command line."""
    # importing makes many objects that live on: collecting among them costs a tenth of a lookup and frees nothing
    gc.set_threshold(200_000, 20, 100)
    from registry.cli.app import main as run

    run()


if __name__ == "__main__":
    main()
