"""rangebook: a versioned registry of pure-compound temperature correlations.

Public names are resolved on first use, so that importing one numeric module
loads no database code.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from registry.answers import Answer
    from registry.batches import Batch
    from registry.equilibrium.boundary import SaturationBatch
    from registry.equilibrium.saturation import Saturation
    from registry.errors import RangebookError, Refused
    from registry.inverse.refusals import InverseRefusal
    from registry.inverse.temperatures import Temperatures
    from registry.library import Library
    from registry.opening import open_library, start_library
    from registry.readings import Reading, parse_reading
    from registry.refusals import Refusal
    from registry.tables.tabulation import Table

__version__ = "0.1.0"

__all__ = [
    "Answer", "Batch", "InverseRefusal", "Library", "RangebookError", "Reading", "Refusal", "Refused", "Saturation",
    "SaturationBatch", "Table", "Temperatures",
    "open_library", "parse_reading", "start_library",
]  # fmt: skip

_HOMES = {
    "Answer": "answers", "Batch": "batches", "Refusal": "refusals", "InverseRefusal": "inverse.refusals",
    "Table": "tables.tabulation", "Temperatures": "inverse.temperatures",
    "Reading": "readings", "parse_reading": "readings",
    "Saturation": "equilibrium.saturation", "SaturationBatch": "equilibrium.boundary",
    "RangebookError": "errors", "Refused": "errors",
    "Library": "library", "open_library": "opening", "start_library": "opening",
}  # fmt: skip


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'registry' has no attribute {name!r}")
    from importlib import import_module

    return getattr(import_module(f"registry.{_HOMES[name]}"), name)
