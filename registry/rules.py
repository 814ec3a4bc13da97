"""Rules version 1: everything a lookup applies besides the records.

An edition and a receipt carry the version; the same records, request and
version give the same value. Nothing here changes under a version: a change
makes a new one. Besides these numbers the version covers the ranking
(`registry.ranking`), the confirmation of records from memory
(`registry.confirmation`), the phase limits (`registry.limits`), the
temperature scales (`registry.scales`), the atomic weights
(`registry.atomic_weights`) and what makes an enthalpy of a slope: the methods
and constants of `registry.equilibrium.virial`, `registry.equilibrium.volumes` and
`registry.equilibrium.clapeyron`.
"""

from __future__ import annotations

VERSION = 1

BOUND_TOLERANCE = 1e-9
"""Kelvin by which a temperature may pass a bound through float rounding and still count as at it.

Windows are compared with the number asked for; the shift between temperature
scales (at most 0.3 K, below 0.05 K under 600 K) is not applied to bounds,
which are printed far more coarsely.
"""

TRIPLE_MARGIN = 0.05
"""Kelvin below the triple temperature within which a liquid curve still answers, marked."""

CONFIRMING_VALUES = 2
"""Independent values that must agree before a record from memory counts by its own evidence."""

CONFIRMING_PERCENT = 1.0
"""Percent within which an independent value agrees, besides the digits it is printed with."""

FIXED_POINT_PERCENT = 0.1
"""Percent within which an independent fixed point agrees."""

STANDARD_ATMOSPHERE = 101325.0
"""Pa, at which a normal boiling or sublimation temperature is defined."""
