"""The catalogue of equation forms: one table, nothing discovered.

To add a form: write it in the file of its family (or a new one) and see that
the family's `FORMS` is listed here. The tests enumerate this table.
"""

from __future__ import annotations

from registry.forms import (
    corresponding,
    implicit,
    melting,
    reciprocal,
    reduced,
    reference_point,
    temperature_powers,
    water,
)
from registry.forms.form import Form

__all__ = ["FORMS"]

_FAMILIES = (
    reciprocal.FORMS,
    temperature_powers.FORMS,
    reduced.FORMS,
    reference_point.FORMS,
    implicit.FORMS,
    water.FORMS,
    melting.FORMS,
    corresponding.FORMS,
)

FORMS: dict[str, Form] = {form.name: form for family in _FAMILIES for form in family}
