"""Pressures at which no temperature is found, each with its exact message and exit code.

Every expected text is this program's own wording. The shelf `planted` is
invented (tests/test_boil.py); its numbers are no data.
"""

from __future__ import annotations

# what is asked, of which shelf, exit code, reason, message
REFUSED = (
    ("above the critical point", "published", ("water", "400bar"), "above-all",
     "40 MPa lies above every vapor-pressure of water: the highest is 22.064 MPa at 647.096 K, the critical "
     "temperature. Nearest: water-if97, 0.611212677 kPa to 22.064 MPa over 273.15 to 647.096 K. `rangebook "
     "coverage water --property vapor-pressure` shows the map."),
    ("below the triple point", "published", ("water", "10Pa"), "below-all",
     "10 Pa lies below every vapor-pressure of water: the lowest is 0.609438794 kPa at 273.11 K. Nearest: "
     "water-hardy-1998, 0.609438794 kPa to 0.611212911 kPa over 273.11 to 273.15 K. Ask for --property "
     "sublimation-pressure. The metastable liquid is covered by water-hardy-1998 or water-murphy-koop-2005: ask "
     "with --metastable."),
    ("below everything that is held", "published", ("mercury", "1e-12Pa"), "below-all",
     "1e-12 Pa lies below every vapor-pressure of mercury: the lowest is 0.000298278122 Pa at 234.3156 K. Nearest: "
     "mercury-huber-2006, 0.000298278122 Pa to 167 MPa over 234.3156 to 1764 K. `rangebook coverage mercury "
     "--property vapor-pressure` shows the map."),
    ("above the triple point of a solid", "published", ("water", "1kPa", "-p", "sublimation-pressure"), "above-all",
     "1 kPa lies above every sublimation-pressure of water: the highest is 0.611657069 kPa at 273.16 K, the triple "
     "point temperature. Nearest: water-ice-murphy-koop-2005, 2.57665518e-12 Pa to 0.611657069 kPa over 110 to "
     "273.16 K. Ask for the vapour pressure: --property vapor-pressure."),
    ("above a melting curve", "published", ("water", "20GPa", "-p", "melting-pressure"), "above-all",
     "20000 MPa lies above every melting-pressure of water: the highest is 12752.4296 MPa at 750 K. Nearest: "
     "water-melting-ice-vii-datchi-2000, 2172.12013 MPa to 12752.4296 MPa over 355 to 750 K. `rangebook coverage "
     "water --property melting-pressure` shows the map."),
    ("above a melting curve that falls", "published",
     ("water", "300MPa", "-p", "melting-pressure", "--phase", "ice Ih"), "above-all",
     "300 MPa lies above every melting-pressure of water: the highest is 208.566566 MPa at 251.165 K. Nearest: "
     "water-melting-ice-ih-r14-08, 208.566566 MPa to 0.611657 kPa over 251.165 to 273.16 K. `rangebook coverage "
     "water --property melting-pressure` shows the map."),
    ("several phases, one of which has it", "published", ("water", "400MPa", "-p", "melting-pressure"),
     "several-phases",
     "No phase of water was named, and 400 MPa is its melting-pressure for ice V at 259.820266 K "
     "(water-melting-ice-v-r14-08). Name one with --phase: ice V."),
    ("several phases that have it", "published", ("water", "2.2GPa", "-p", "melting-pressure"), "several-phases",
     "No phase of water was named, and 2200 MPa is its melting-pressure for ice VI at 354.452835 K "
     "(water-melting-ice-vi-r14-08) and ice VII at 357.609301 K (water-melting-ice-vii-datchi-2000). Name one with "
     "--phase: ice VI or ice VII."),
    ("a seam that jumps up", "published", ("ethanol", "5.79kPa"), "seam",
     "5.79 kPa falls into the jump of the seam at 293 K, between ethanol-antoine-low (5.77369255 kPa at 293 K) and "
     "ethanol-poling-5 (5.80861348 kPa at 293 K): no temperature has it. `rangebook coverage ethanol --property "
     "vapor-pressure` shows the map."),
    ("a seam that jumps down", "scenario", ("tallowane", "160.5Pa"), "seam",
     "0.1605 kPa falls into the jump of the seam at 233.15 K: tallowane-riedel has it below, at 233.118023 K, and "
     "tallowane-antoine-low above, at 233.196056 K. Choose by the side you are on."),
    ("two seams that jump down", "published", ("ammonia", "6.16kPa"), "several-temperatures",
     "ammonia has 6.16 kPa at several temperatures: 195.455157 K (ammonia-antoine-lange) and 195.706054 K "
     "(ammonia-gao-2023). `rangebook coverage ammonia --property vapor-pressure` shows the map."),
    ("only what is not accepted", "scenario", ("brindovane", "2kPa"), "not-accepted",
     "Only correlations that are not accepted have 2 kPa for brindovane: brindovane-antoine-mid is withdrawn (The "
     "invented erratum to handbook B withdraws this line: its first constant is misprinted and every pressure is "
     "14 % high); brindovane-cox-draft is a draft. It answers again once a reviewed record covers it."),
    ("no correlation", "published", ("naphthalene", "1atm"), "no-correlation",
     "naphthalene has no correlation for vapor-pressure. It has sublimation-pressure. `rangebook show naphthalene` "
     "lists them."),
    ("a gap", "planted", ("gapane", "500kPa"), "gap",
     "500 kPa falls into a gap for vapor-pressure of gapane, between gapane-1 (268.337287 kPa at 350 K) and "
     "gapane-2 (1202.60428 kPa at 400 K). `rangebook coverage gapane --property vapor-pressure` shows the map."),
    ("a curve that turns", "planted", ("turnane", "20kPa"), "several-temperatures",
     "turnane has 20 kPa at several temperatures: 384.466774 K (turnane-1) and 415.533226 K (turnane-1). Its curve "
     "turns: `rangebook show turnane-1` tells its coefficients and its window."),
    ("a jump of the temperature scale", "planted", ("scalane", "44.1kPa"), "seam",
     "44.1 kPa falls into the jump of its temperature scale (IPTS-48) at 523.15 K, between scalane-1 (44.0852083 "
     "kPa at 523.15 K) and scalane-1 (44.1125676 kPa at 523.15 K): no temperature has it. `rangebook coverage "
     "scalane --property vapor-pressure` shows the map."),
)  # fmt: skip

PRESSURES = "Pa, hPa, kPa, MPa, GPa, bar, mbar, atm, mmHg, cmHg, Torr, inHg, psi, kgf/cm2"
ABOVE_ZERO = "an absolute pressure is greater than zero."

# what is asked, of the published shelf, message; exit code 2
BAD = (
    ("no unit", ("water", "101325"),
     f"'101325' cannot be read: a pressure needs its unit ({PRESSURES}), such as 101.325kPa."),
    ("a temperature", ("water", "25C"), f"'25C' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("no number", ("water", "kPa"),
     "'kPa' cannot be read: a pressure is a number with a unit, such as 101.325kPa."),
    ("a decimal comma", ("water", "1,5bar"),
     "'1,5bar' cannot be read: '1,5' is not a printed number; a pressure looks like 101.325kPa."),
    ("zero", ("water", "0kPa"), f"'0kPa' cannot be read: {ABOVE_ZERO}"),
    ("below zero", ("water", "-5kPa"), f"'-5kPa' cannot be read: {ABOVE_ZERO}"),
    ("a vacuum deeper than the atmosphere", ("water", "-2barg", "--atmosphere", "1bar"),
     f"'-2barg' cannot be read: {ABOVE_ZERO}"),
    ("a gauge pressure", ("water", "2", "barg"),
     "'barg' cannot be read: it is a gauge unit, and only absolute pressures are kept here. "
     "Use the absolute unit, or state the local atmosphere (--atmosphere 101.325kPa)."),
    ("a gauge atmosphere", ("water", "2barg", "--atmosphere", "1barg"),
     "'1barg' cannot be read: the local atmosphere is an absolute pressure, such as 101.325kPa."),
    ("a pressure unit for the temperature", ("water", "1atm", "-u", "kPa"),
     "'kPa' cannot be read: a temperature unit is one of K, degC, degF, degR."),
    ("a property that is no pressure", ("water", "1atm", "-p", "enthalpy-of-vaporization"),
     "A temperature is found at a pressure: enthalpy-of-vaporization is none. "
     "Ask for vapor-pressure, sublimation-pressure or melting-pressure."),
    ("an unknown property", ("water", "1atm", "-p", "viscosity"),
     "There is no property 'viscosity'; the properties are vapor-pressure, sublimation-pressure, melting-pressure, "
     "enthalpy-of-vaporization and saturated-liquid-density."),
    ("an unknown phase", ("water", "1atm", "--phase", "gas"),
     "water has no vapor-pressure of a phase 'gas'; it has liquid."),
    ("an unknown compound", ("unobtainium", "1atm"),
     "There is no compound 'unobtainium'. `rangebook list` shows what there is."),
    ("an edition and a date", ("water", "1atm", "--edition", "a", "--as-of", "1"),
     "Both --edition and --as-of were given. Give one of them."),
)  # fmt: skip
