"""How each form is restated: one table, a row for every form of the catalogue of forms."""

from __future__ import annotations

from registry.restating import reciprocal, scaling, temperature_powers
from registry.restating.change import Rule

__all__ = ["RULES"]

RULES: dict[str, Rule] = {**reciprocal.RULES, **temperature_powers.RULES, **scaling.RULES}
