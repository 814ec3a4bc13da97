"""Slopes that are refused or asked for badly, each with its exact message and exit code.

Every expected text is this program's own wording.
"""

from __future__ import annotations

from facts.bad_requests import ABOVE_ZERO, BARE, ENERGIES, PRESSURES, PROPERTIES, TEMPERATURE

GAUGE = "it is a gauge unit, and a slope stands beside absolute pressures only."
BELONGS = "A slope with its enthalpy belongs to vapor-pressure, sublimation-pressure or melting-pressure;"

# what is asked, of which shelf, exit code, message
REQUESTS = (
    ("an unknown compound", "published", ("slope", "unobtainium", "25C"), 2,
     "There is no compound 'unobtainium'. `rangebook list` shows what there is."),
    ("a formula of two compounds", "published", ("slope", "H2", "20K"), 2,
     "'H2' may mean hydrogen-normal or hydrogen-para. Use one of these keys."),
    ("no unit", "published", ("slope", "water", "298.15"), 2, f"'298.15' cannot be read: {BARE}"),
    ("no temperature", "published", ("slope", "water", "warm"), 2, f"'warm' cannot be read: {TEMPERATURE}"),
    ("below absolute zero, unquoted", "published", ("slope", "methane", "-300C"), 2,
     f"'-300C' cannot be read: {ABOVE_ZERO}"),
    ("an unknown pressure unit", "published", ("slope", "water", "100C", "--unit", "foo"), 2,
     f"'foo' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("a density for a pressure unit", "published", ("slope", "water", "100C", "--unit", "kg/m3"), 2,
     f"'kg/m3' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("a gauge unit", "published", ("slope", "water", "100C", "--unit", "barg"), 2, f"'barg' cannot be read: {GAUGE}"),
    ("a gauge unit in brackets", "published", ("slope", "water", "100C", "-u", "kPa(g)"), 2,
     f"'kPa(g)' cannot be read: {GAUGE}"),
    ("an energy that is none per mole", "published", ("slope", "water", "100C", "--energy-unit", "kJ"), 2,
     f"'kJ' cannot be read: a molar-energy unit is one of {ENERGIES}."),
    ("a pressure for an energy unit", "published", ("slope", "water", "100C", "--energy-unit", "kPa"), 2,
     f"'kPa' cannot be read: a molar-energy unit is one of {ENERGIES}."),
    ("an energy unit in the wrong case", "published", ("slope", "water", "100C", "--energy-unit", "kj/mol"), 2,
     f"'kj/mol' cannot be read: a molar-energy unit is one of {ENERGIES}. Did you mean kJ/mol?"),
    ("no energy unit", "published", ("slope", "water", "100C", "--energy-unit", ""), 2,
     f"'' cannot be read: a molar-energy unit is one of {ENERGIES}."),
    ("an unknown property", "published", ("slope", "water", "25C", "-p", "viscosity"), 2,
     f"There is no property 'viscosity'; {PROPERTIES}"),
    ("the slope of a density", "published", ("slope", "water", "25C", "-p", "saturated-liquid-density"), 2,
     f"{BELONGS} saturated-liquid-density was given."),
    ("the slope of an enthalpy", "published", ("slope", "benzene", "25C", "-p", "enthalpy-of-vaporization"), 2,
     f"{BELONGS} enthalpy-of-vaporization was given."),
    ("a phase that is not there", "published", ("slope", "water", "25C", "--phase", "ice Ih"), 2,
     "water has no vapor-pressure of a phase 'ice Ih'; it has liquid."),
    ("two positions", "published", ("slope", "water", "25C", "--edition", "a", "--as-of", "1"), 2,
     "Both --edition and --as-of were given. Give one of them."),
    ("an edition that is not there", "published", ("slope", "water", "25C", "--edition", "a"), 2,
     "There is no edition 'a'. `rangebook editions` shows what there is."),
    # refused
    ("nothing recorded at all", "published", ("slope", "neon", "25K"), 3,
     "Refused (no-correlation): neon has no correlation for vapor-pressure. It has none at all."),
    ("above the critical point", "published", ("slope", "water", "700K"), 3,
     "Refused (above-critical): 700 K lies above the critical temperature of water, 647.096 K "
     "(iapws-r2-83-sr1-86-r6-95): there is no liquid. Nearest: water-if97 (273.15 to 647.096 K) is 52.904 K away. "
     "`rangebook coverage water --property vapor-pressure` shows the map."),
    ("below the triple point", "published", ("slope", "benzene", "278.67K"), 3,
     "Refused (below-triple): 278.67 K lies below the triple temperature of benzene, 278.68 K (perry-8): the stable "
     "phase is solid. Nearest: benzene-perry-8 (278.68 to 562.05 K) is 0.01 K away. "
     "Ask for --property sublimation-pressure."),
    ("above the triple point", "published", ("slope", "water", "300K", "-p", "sublimation-pressure"), 3,
     "Refused (above-triple): 300 K lies above the triple temperature of water, 273.16 K "
     "(iapws-r2-83-sr1-86-r6-95): the solid has melted. Nearest: water-ice-murphy-koop-2005 (110 to 273.16 K) is "
     "26.84 K away. Ask for the vapour pressure: --property vapor-pressure."),
    ("a gap", "small", ("slope", "brindovane", "330K"), 3,
     "Refused (gap): 330 K falls into a gap between two windows for vapor-pressure of brindovane. "
     "Nearest: brindovane-antoine-low (250 to 310 K) is 20 K away; brindovane-kirchhoff (360 to 420 K) is 30 K away. "
     "`rangebook coverage brindovane --property vapor-pressure` shows the map."),
    ("several phases", "published", ("slope", "water", "260K", "-p", "melting-pressure"), 3,
     "Refused (several-phases): At 260 K several phases of water have a melting-pressure. "
     "Name one with --phase: ice Ih or ice V."),
    ("outside a melting window", "published",
     ("slope", "water", "251K", "-p", "melting-pressure", "--phase", "ice Ih"), 3,
     "Refused (outside-windows): 251 K lies outside every window for melting-pressure of water, ice Ih. "
     "Nearest: water-melting-ice-ih-r14-08 (251.165 to 273.16 K) is 0.165 K away. "
     "`rangebook coverage water --property melting-pressure` shows the map."),
    ("two refusals", "published", ("slope", "neon", "25K", "26K"), 3,
     "Refused (no-correlation): neon has no correlation for vapor-pressure. It has none at all.\n"
     "Refused (no-correlation): neon has no correlation for vapor-pressure. It has none at all."),
)  # fmt: skip

# words, the last line on stderr
USAGE = (
    ("no temperature at all", ("slope", "water"), "Error: Missing argument 'TEMPERATURE...'."),
    ("no compound", ("slope",), "Error: Missing argument 'COMPOUND'."),
    ("an unknown option", ("slope", "water", "100C", "--why"), "Error: No such option: --why"),
    ("a unit without its word", ("slope", "water", "100C", "--unit"), "Error: Option '--unit' requires an argument."),
)
