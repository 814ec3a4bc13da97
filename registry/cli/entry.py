"""Where the command `rangebook` begins."""

from __future__ import annotations

import gc

__all__ = ["main"]


def main() -> None:
    """Run the command line."""
    # importing makes many objects that live on: collecting among them costs a tenth of a lookup and frees nothing
    gc.set_threshold(200_000, 20, 100)
    from registry.cli.app import main as run

    try:
        run()
    finally:
        # what lives now dies with the process: searching it for cycles at exit costs a tenth of a lookup, too
        gc.freeze()


if __name__ == "__main__":
    main()
