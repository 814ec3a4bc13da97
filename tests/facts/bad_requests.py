"""Bad requests, each with its exact message and exit code.

Every expected text is this program's own wording.
"""

from __future__ import annotations

TEMPERATURES = "K, degC, degF, degR"
PRESSURES = "Pa, hPa, kPa, MPa, GPa, bar, mbar, atm, mmHg, cmHg, Torr, inHg, psi, kgf/cm2"
ENERGIES = "J/mol, kJ/mol, cal/mol, kcal/mol, J/g"
DENSITIES = "kg/m3, g/cm3, lb/ft3, mol/dm3, mol/m3"
GAUGE = (
    "it is a gauge unit, and only absolute pressures are kept here. "
    "Use the absolute unit, or state the local atmosphere (--atmosphere 101.325kPa)."
)
TEMPERATURE = "a temperature is a number with a unit, such as 298.15K or 25C."
BARE = f"a temperature needs its unit ({TEMPERATURES}), such as 298.15K or 25C."
ABOVE_ZERO = "a temperature lies above absolute zero, 0 K."
PROPERTIES = (
    "the properties are vapor-pressure, sublimation-pressure, melting-pressure, enthalpy-of-vaporization and "
    "saturated-liquid-density."
)
LONG = "x" * 10**6
SHORTENED = f"'{'x' * 59}... (1000000 characters)"

# what is asked, of which shelf, exit code, message
REQUESTS = (
    ("an unknown compound", "published", ("lookup", "unobtainium", "25C"), 2,
     "There is no compound 'unobtainium'. `rangebook list` shows what there is."),
    ("a misspelt compound", "published", ("lookup", "amonia", "25C"), 2,
     "There is no compound 'amonia'. Nearest: ammonia."),
    ("a CAS number one digit off", "published", ("lookup", "7732-18-4", "25C"), 2,
     "There is no compound '7732-18-4'. Nearest: 7732-18-5."),
    ("a formula of two compounds", "published", ("lookup", "H2", "25C"), 2,
     "'H2' may mean hydrogen-normal or hydrogen-para. Use one of these keys."),
    ("a name of two compounds", "scenario", ("lookup", "demonstration solvent", "25C"), 2,
     "'demonstration solvent' may mean dunmarane or tallowane. Use one of these keys."),
    ("an empty compound", "published", ("lookup", "", "25C"), 2,
     "There is no compound ''. `rangebook list` shows what there is."),
    ("a compound of a million letters", "published", ("lookup", LONG, "25C"), 2,
     f"There is no compound {SHORTENED}. `rangebook list` shows what there is."),
    ("a compound with a NUL", "published", ("lookup", "water\0", "25C"), 2,
     "There is no compound 'water\\x00'. Nearest: water."),
    ("a compound that looks like SQL", "published", ("lookup", "' OR 1=1 --", "25C"), 2,
     'There is no compound "\' OR 1=1 --". `rangebook list` shows what there is.'),
    ("a wildcard", "published", ("lookup", "%", "25C"), 2,
     "There is no compound '%'. `rangebook list` shows what there is."),
    ("a compound that starts with =", "published", ("lookup", "=1+1", "25C"), 2,
     "There is no compound '=1+1'. `rangebook list` shows what there is."),
    ("no unit", "published", ("lookup", "water", "298.15"), 2, f"'298.15' cannot be read: {BARE}"),
    ("no unit at the second temperature", "published", ("lookup", "water", "25C", "26"), 2,
     f"'26' cannot be read: {BARE}"),
    ("an unknown temperature unit", "published", ("lookup", "water", "25X"), 2,
     f"'25X' cannot be read: a temperature unit is one of {TEMPERATURES}."),
    ("a temperature unit in the wrong case", "published", ("lookup", "water", "25degc"), 2,
     f"'25degc' cannot be read: a temperature unit is one of {TEMPERATURES}. Did you mean degC?"),
    ("a pressure for a temperature", "published", ("lookup", "water", "25bar"), 2,
     f"'25bar' cannot be read: a temperature unit is one of {TEMPERATURES}."),
    ("absolute zero", "published", ("lookup", "water", "0K"), 2, f"'0K' cannot be read: {ABOVE_ZERO}"),
    ("absolute zero in Rankine", "published", ("lookup", "water", "0R"), 2, f"'0R' cannot be read: {ABOVE_ZERO}"),
    ("below absolute zero, with a minus sign", "published", ("lookup", "water", "\u22125 K"), 2,
     f"'-5 K' cannot be read: {ABOVE_ZERO}"),
    ("below absolute zero", "published", ("lookup", "water", "-300C"), 2, f"'-300C' cannot be read: {ABOVE_ZERO}"),
    ("below absolute zero, in two words", "published", ("lookup", "water", "-300", "C"), 2,
     f"'-300 C' cannot be read: {ABOVE_ZERO}"),
    ("not a number", "published", ("lookup", "water", "nan K"), 2, f"'nan K' cannot be read: {TEMPERATURE}"),
    ("an infinite temperature", "published", ("lookup", "water", "inf K"), 2, f"'inf K' cannot be read: {TEMPERATURE}"),
    ("a unit and no number", "published", ("lookup", "water", "K"), 2, f"'K' cannot be read: {TEMPERATURE}"),
    ("two points in a number", "published", ("lookup", "water", "1.2.3K"), 2,
     "'1.2.3K' cannot be read: '1.2.3' is not a printed number; a temperature looks like 298.15K or 25C."),
    ("a decimal comma", "published", ("lookup", "water", "25,5C"), 2,
     "'25,5C' cannot be read: '25,5' is not a printed number; a temperature looks like 298.15K or 25C."),
    ("an underscore in a number", "published", ("lookup", "water", "1_0C"), 2,
     "'1_0C' cannot be read: '1_0' is not a printed number; a temperature looks like 298.15K or 25C."),
    ("a temperature beyond a double", "published", ("lookup", "water", "1e999K"), 2,
     "'1e999K' cannot be read: '1e999' is beyond what a double can hold; a temperature looks like 298.15K or 25C."),
    ("an exponent without unit", "published", ("lookup", "water", "1e5"), 2, f"'1e5' cannot be read: {BARE}"),
    ("Arabic digits", "published", ("lookup", "water", "٢٥ C"), 2, f"'٢٥ C' cannot be read: {TEMPERATURE}"),
    ("full-width digits", "published", ("lookup", "water", "\uff12\uff15C"), 2,
     f"'\uff12\uff15C' cannot be read: {TEMPERATURE}"),
    ("an empty temperature", "published", ("lookup", "water", ""), 2, f"'' cannot be read: {TEMPERATURE}"),
    ("a blank temperature", "published", ("lookup", "water", " "), 2, f"' ' cannot be read: {TEMPERATURE}"),
    ("a temperature of a million letters", "published", ("lookup", "water", LONG), 2,
     f"{SHORTENED} cannot be read: {TEMPERATURE}"),
    ("a gauge unit", "published", ("lookup", "water", "25C", "-u", "barg"), 2, f"'barg' cannot be read: {GAUGE}"),
    ("a gauge unit in parentheses", "published", ("lookup", "water", "25C", "-u", "kPa(g)"), 2,
     f"'kPa(g)' cannot be read: {GAUGE}"),
    ("psig", "published", ("lookup", "water", "25C", "-u", "psig"), 2, f"'psig' cannot be read: {GAUGE}"),
    ("an atmosphere without unit", "published", ("lookup", "water", "25C", "-u", "barg", "--atmosphere", "1"), 2,
     f"'1' cannot be read: a pressure needs its unit ({PRESSURES}), such as 101.325kPa."),
    ("an atmosphere in degrees", "published", ("lookup", "water", "25C", "-u", "barg", "--atmosphere", "1C"), 2,
     f"'1C' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("an atmosphere of zero", "published", ("lookup", "water", "25C", "-u", "barg", "--atmosphere", "0kPa"), 2,
     "'0kPa' cannot be read: an absolute pressure is greater than zero."),
    ("an atmosphere below zero", "published", ("lookup", "water", "25C", "-u", "barg", "--atmosphere=-1bar"), 2,
     "'-1bar' cannot be read: an absolute pressure is greater than zero."),
    ("an atmosphere that nothing asks for", "published", ("lookup", "water", "25C", "--atmosphere", "0kPa"), 2,
     "'0kPa' cannot be read: an absolute pressure is greater than zero."),
    ("a gauge atmosphere", "published", ("lookup", "water", "25C", "-u", "barg", "--atmosphere", "1barg"), 2,
     "'1barg' cannot be read: the local atmosphere is an absolute pressure, such as 101.325kPa."),
    ("an atmosphere with a decimal comma", "published",
     ("lookup", "water", "25C", "-u", "barg", "--atmosphere", "1,01bar"), 2,
     "'1,01bar' cannot be read: '1,01' is not a printed number; a pressure looks like 101.325kPa."),
    ("an atmosphere of a million letters", "published", ("lookup", "water", "25C", "--atmosphere", LONG), 2,
     f"{SHORTENED} cannot be read: a pressure is a number with a unit, such as 101.325kPa."),
    ("a temperature unit for the value", "published", ("lookup", "water", "25C", "-u", "K"), 2,
     f"'K' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("an energy unit for a pressure", "published", ("lookup", "water", "25C", "-u", "J/g"), 2,
     f"'J/g' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("a pressure unit for an enthalpy", "scenario",
     ("lookup", "tallowane", "300K", "-p", "enthalpy-of-vaporization", "-u", "kPa"), 2,
     f"'kPa' cannot be read: a molar-energy unit is one of {ENERGIES}."),
    ("an energy unit for a density", "scenario",
     ("lookup", "tallowane", "300K", "-p", "saturated-liquid-density", "-u", "J/g"), 2,
     f"'J/g' cannot be read: a density unit is one of {DENSITIES}."),
    ("an unknown unit", "published", ("lookup", "water", "25C", "-u", "foo"), 2,
     f"'foo' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("a unit in the wrong case", "published", ("lookup", "water", "25C", "-u", "pa"), 2,
     f"'pa' cannot be read: a pressure unit is one of {PRESSURES}. Did you mean Pa?"),
    ("a unit of a million letters", "published", ("lookup", "water", "25C", "-u", LONG), 2,
     f"{SHORTENED} cannot be read: a pressure unit is one of {PRESSURES}."),
    ("an unknown property", "published", ("lookup", "water", "25C", "-p", "foo"), 2,
     f"There is no property 'foo'; {PROPERTIES}"),
    ("an empty property", "published", ("lookup", "water", "25C", "-p", ""), 2,
     f"There is no property ''; {PROPERTIES}"),
    ("a coverage of an unknown property", "published", ("coverage", "water", "-p", "vapour"), 2,
     f"There is no property 'vapour'; {PROPERTIES}"),
    ("an unknown phase", "published", ("lookup", "water", "25C", "--phase", "gas"), 2,
     "water has no vapor-pressure of a phase 'gas'; it has liquid."),
    ("an unknown phase, where there are several", "published",
     ("lookup", "water", "255K", "-p", "melting-pressure", "--phase", "ice IX"), 2,
     "water has no melting-pressure of a phase 'ice IX'; it has ice III, ice Ih, ice V, ice VI and ice VII."),
    ("a coverage of an unknown phase", "published", ("coverage", "water", "--phase", "gas"), 2,
     "water has no vapor-pressure of a phase 'gas'; it has liquid."),
    ("a coverage of an unknown compound", "published", ("coverage", "foo"), 2,
     "There is no compound 'foo'. `rangebook list` shows what there is."),
    ("a key that is nowhere", "published", ("show", "nothing"), 2,
     "There is no record 'nothing'. `rangebook list` shows what there is."),
    ("a misspelt key", "scenario", ("show", "brindovane-antoine-lo"), 2,
     "There is no record 'brindovane-antoine-lo'. Nearest: brindovane-antoine-low, brindovane-antoine-mid, "
     "brindovane-antoine-high."),
    ("an ambiguous key", "published", ("show", "H2"), 2,
     "'H2' may mean hydrogen-normal or hydrogen-para. Use one of these keys."),
    # refused
    ("several phases", "scenario", ("lookup", "corvexane", "155K", "-p", "melting-pressure"), 3,
     "Refused (several-phases): At 155 K several phases of corvexane have a melting-pressure. "
     "Name one with --phase: solid I or solid II."),
    ("several phases, with a third one's window between", "published",
     ("lookup", "water", "255K", "-p", "melting-pressure"), 3,
     "Refused (several-phases): At 255 K several phases of water have a melting-pressure. "
     "Name one with --phase: ice III or ice Ih."),
    ("outside every window of a named phase", "published",
     ("lookup", "water", "25C", "-p", "melting-pressure", "--phase", "ice Ih"), 3,
     "Refused (outside-windows): 298.15 K lies outside every window for melting-pressure of water, ice Ih. "
     "Nearest: water-melting-ice-ih-r14-08 (251.165 to 273.16 K) is 24.99 K away. "
     "`rangebook coverage water --property melting-pressure` shows the map."),
    ("outside every window", "published", ("lookup", "ethanol", "200K"), 3,
     "Refused (outside-windows): 200 K lies outside every window for vapor-pressure of ethanol. "
     "Nearest: ethanol-antoine-low (216.15 to 353.15 K) is 16.15 K away. "
     "`rangebook coverage ethanol --property vapor-pressure` shows the map."),
    ("above every window", "scenario", ("lookup", "brindovane", "600K"), 3,
     "Refused (outside-windows): 600 K lies outside every window for vapor-pressure of brindovane. "
     "Nearest: brindovane-antoine-high (410.927778 to 555.372222 K) is 44.6278 K away. "
     "`rangebook coverage brindovane --property vapor-pressure` shows the map."),
    ("a gap", "small", ("lookup", "brindovane", "330K"), 3,
     "Refused (gap): 330 K falls into a gap between two windows for vapor-pressure of brindovane. "
     "Nearest: brindovane-antoine-low (250 to 310 K) is 20 K away; brindovane-kirchhoff (360 to 420 K) is 30 K away. "
     "`rangebook coverage brindovane --property vapor-pressure` shows the map."),
    ("above the critical temperature", "published", ("lookup", "water", "700K"), 3,
     "Refused (above-critical): 700 K lies above the critical temperature of water, 647.096 K "
     "(iapws-r2-83-sr1-86-r6-95): there is no liquid. "
     "Nearest: water-if97 (273.15 to 647.096 K) is 52.904 K away. "
     "`rangebook coverage water --property vapor-pressure` shows the map."),
    ("above the critical temperature, inside a window", "scenario", ("lookup", "dunmarane", "555K"), 3,
     "Refused (above-critical): 555 K lies above the critical temperature of dunmarane, 552.6 K "
     "(invented-handbook-d): there is no liquid. "
     "Nearest: dunmarane-antoine-past-critical (480 to 552.6 K) is 2.4 K away. "
     "`rangebook coverage dunmarane --property vapor-pressure` shows the map."),
    ("above the critical temperature, for a density", "published",
     ("lookup", "water", "700K", "-p", "saturated-liquid-density"), 3,
     "Refused (above-critical): 700 K lies above the critical temperature of water, 647.096 K "
     "(iapws-r2-83-sr1-86-r6-95): there is no liquid. "
     "Nearest: water-density-sr1-86 (273.16 to 647.096 K) is 52.904 K away. "
     "`rangebook coverage water --property saturated-liquid-density` shows the map."),
    ("below the triple temperature", "published", ("lookup", "ethanol", "100K"), 3,
     "Refused (below-triple): 100 K lies below the triple temperature of ethanol, 159 K "
     "(poling-prausnitz-oconnell-5): the stable phase is solid. "
     "Nearest: ethanol-antoine-low (216.15 to 353.15 K) is 116.15 K away. "
     "`rangebook coverage ethanol --property vapor-pressure` shows the map."),
    ("below the triple temperature, with ways out", "scenario", ("lookup", "corvexane", "155K"), 3,
     "Refused (below-triple): 155 K lies below the triple temperature of corvexane, 158.42 K "
     "(invented-evaluation-f): the stable phase is solid. "
     "Nearest: corvexane-supercooled (158.37 to 183.15 K) is 3.37 K away. Ask for --property sublimation-pressure. "
     "The metastable liquid is covered by corvexane-supercooled: ask with --metastable."),
    ("a solid above its triple temperature", "published", ("lookup", "water", "300K", "-p", "sublimation-pressure"), 3,
     "Refused (above-triple): 300 K lies above the triple temperature of water, 273.16 K "
     "(iapws-r2-83-sr1-86-r6-95): the solid has melted. "
     "Nearest: water-ice-murphy-koop-2005 (110 to 273.16 K) is 26.84 K away. "
     "Ask for the vapour pressure: --property vapor-pressure."),
    ("only a withdrawn record and a draft", "scenario", ("lookup", "brindovane", "330K"), 3,
     "Refused (not-accepted): At 330 K only correlations that are not accepted cover brindovane: "
     "brindovane-antoine-mid is withdrawn (The invented erratum to handbook B withdraws this line: its first constant "
     "is misprinted and every pressure is 14 % high); brindovane-cox-draft is a draft. "
     "Nearest: brindovane-antoine-low (250 to 310 K) is 20 K away; brindovane-kirchhoff (360 to 420 K) is 30 K away. "
     "It answers again once a reviewed record covers it."),
    # asked for by name
    ("a larger uncertainty than asked for", "published", ("lookup", "water", "25C", "--within", "0.02%"), 3,
     "Refused (too-uncertain): water-if97 answers at 298.15 K with a stated uncertainty of 0.025 % (k=2), and "
     "--within 0.02% was asked for. No other correlation that covers it states one small enough."),
    ("a larger uncertainty than asked for, by the temperature", "published",
     ("lookup", "water", "25+/-0.05C", "--within", "0.2 %"), 3,
     "Refused (too-uncertain): water-if97 answers at 298.15 K with an uncertainty of 0.299 % (k=2), 0.298 % of it from "
     "the temperature, and --within 0.2% was asked for. The temperature alone makes more: state it more closely."),
    ("a larger uncertainty than one ranked behind", "scenario",
     ("lookup", "brindovane", "400K", "--within", "0.1%"), 3,
     "Refused (too-uncertain): brindovane-kirchhoff answers at 400 K with a stated uncertainty of 0.8 % (k=2), and "
     "--within 0.1% was asked for. No other correlation that covers it states one small enough."),
    ("no stated uncertainty", "published", ("lookup", "ethanol", "25C", "--within", "1%"), 3,
     "Refused (uncertainty-not-stated): ethanol-poling-5 answers at 298.15 K, but states no uncertainty there, and "
     "--within 1% was asked for. No other correlation that covers it states one small enough."),
    ("no stated uncertainty beyond a window", "published",
     ("lookup", "ethanol", "210K", "--beyond", "10K", "--within", "1%"), 3,
     "Refused (uncertainty-not-stated): The value at 210 K is extrapolated: no source states its uncertainty, and "
     "--within 1% was asked for."),
    ("no stated uncertainty of an estimate", "published",
     ("lookup", "acetylene", "250K", "--estimate", "lee-kesler", "--within", "5%"), 3,
     "Refused (uncertainty-not-stated): The value at 250 K is an estimate: no source states its uncertainty, and "
     "--within 5% was asked for."),
    ("further beyond than asked for", "published", ("lookup", "ethanol", "200K", "--beyond", "9F"), 3,
     "Refused (outside-windows): 200 K lies outside every window for vapor-pressure of ethanol. "
     "Nearest: ethanol-antoine-low (216.15 to 353.15 K) is 16.15 K away. "
     "`rangebook coverage ethanol --property vapor-pressure` shows the map. --beyond 5K does not reach it."),
    ("beyond the critical temperature", "published", ("lookup", "water", "700K", "--beyond", "100K"), 3,
     "Refused (above-critical): 700 K lies above the critical temperature of water, 647.096 K "
     "(iapws-r2-83-sr1-86-r6-95): there is no liquid. "
     "Nearest: water-if97 (273.15 to 647.096 K) is 52.904 K away. "
     "`rangebook coverage water --property vapor-pressure` shows the map. --beyond does not cross a phase limit."),
    ("beyond windows of several phases", "published",
     ("lookup", "water", "250K", "-p", "melting-pressure", "--beyond", "5K"), 3,
     "Refused (outside-windows): 250 K lies outside every window for melting-pressure of water. "
     "Nearest: water-melting-ice-ih-r14-08 (251.165 to 273.16 K) is 1.165 K away. "
     "`rangebook coverage water --property melting-pressure` shows the map. "
     "--beyond needs the phase: name it with --phase."),
    ("an estimate above the critical temperature", "published",
     ("lookup", "acetylene", "310K", "--estimate", "lee-kesler"), 3,
     "Refused (above-critical): 310 K lies above the critical temperature of acetylene, 308.3 K (perry-8): there is no "
     "liquid. Nearest: acetylene-antoine-appendix-e (192.35 to 201.15 K) is 108.85 K away. "
     "`rangebook coverage acetylene --property vapor-pressure` shows the map."),
    ("an estimate without constants", "published", ("lookup", "neon", "30K", "--estimate", "lee-kesler"), 3,
     "Refused (no-correlation): neon has no correlation for vapor-pressure. It has none at all. --estimate lee-kesler "
     "needs the critical temperature, critical pressure and acentric factor of neon, which no accepted fixed point "
     "says."),
    ("an estimate of another property", "published",
     ("lookup", "r-134a", "160K", "-p", "saturated-liquid-density", "--estimate", "lee-kesler"), 2,
     "Lee-Kesler estimates vapour pressures, not saturated-liquid-density. Leave --estimate out."),
    ("an estimate of another property, where one answers", "published",
     ("lookup", "water", "25C", "-p", "saturated-liquid-density", "--estimate", "lee-kesler"), 2,
     "Lee-Kesler estimates vapour pressures, not saturated-liquid-density. Leave --estimate out."),
    ("an unknown method", "published", ("lookup", "water", "25C", "--estimate", "riedel"), 2,
     "There is no estimation method 'riedel'; the methods are lee-kesler and ambrose-walton."),
    ("a tolerance without %", "published", ("lookup", "water", "25C", "--within", "2"), 2,
     "'2' cannot be read: --within takes a percentage above zero, such as 2%."),
    ("a tolerance below zero, in two words", "published", ("lookup", "water", "25C", "--within", "-1%"), 2,
     "'-1%' cannot be read: --within takes a percentage above zero, such as 2%."),
    ("a distance below zero, in two words", "published", ("lookup", "water", "25C", "--beyond", "-5K"), 2,
     "'-5K' cannot be read: --beyond takes a difference of temperature above zero, such as 5K; its units are "
     f"{TEMPERATURES}."),
    ("a tolerance of nothing", "published", ("lookup", "water", "25C", "--within", "0%"), 2,
     "'0%' cannot be read: --within takes a percentage above zero, such as 2%."),
    ("an empty tolerance", "published", ("lookup", "water", "25C", "--within", ""), 2,
     "'' cannot be read: --within takes a percentage above zero, such as 2%."),
    ("a distance without unit", "published", ("lookup", "water", "25C", "--beyond", "5"), 2,
     f"'5' cannot be read: --beyond takes a difference of temperature above zero, such as 5K; its units are "
     f"{TEMPERATURES}."),
    ("a distance below zero", "published", ("lookup", "water", "25C", "--beyond=-5K"), 2,
     f"'-5K' cannot be read: --beyond takes a difference of temperature above zero, such as 5K; its units are "
     f"{TEMPERATURES}."),
    ("an uncertainty without unit", "published", ("lookup", "water", "25+/-0.1"), 2,
     "'25+/-0.1' cannot be read: the unit stands behind the uncertainty, such as 298.15+/-0.05K."),
    ("two scales", "published", ("lookup", "water", "25C (IPTS-68) (IPTS-48)"), 2,
     "'25C (IPTS-68) (IPTS-48)' cannot be read: a temperature is read on one scale, such as 100 degC (IPTS-68)."),
    ("an unknown scale", "published", ("lookup", "water", "25C (ITS-27)"), 2,
     "'25C (ITS-27)' cannot be read: what stands in brackets is a temperature scale (ITS-90, IPTS-68, IPTS-48 or "
     "ice-point-273.16) or a coverage factor (k=2)."),
    ("a scale that is not converted there", "published", ("lookup", "mercury", "500C (IPTS-48)"), 2,
     "'500C (IPTS-48)' cannot be read: no published conversion from IPTS-48 to ITS-90 reaches this temperature."),
    ("nothing recorded for the property", "published", ("lookup", "mercury", "300K", "-p", "melting-pressure"), 3,
     "Refused (no-correlation): mercury has no correlation for melting-pressure. It has vapor-pressure. "
     "`rangebook show mercury` lists them."),
    ("nothing recorded for the property, two for others", "published",
     ("lookup", "ethanol", "25C", "-p", "melting-pressure"), 3,
     "Refused (no-correlation): ethanol has no correlation for melting-pressure. It has enthalpy-of-vaporization and "
     "vapor-pressure. `rangebook show ethanol` lists them."),
)  # fmt: skip

# lines on stdin, message
STDIN = (
    ("a bare number on line 3", b"25C\n\n30\n", f"stdin, line 3: '30' cannot be read: {BARE}"),
    ("a word on line 2", b"25C\nfoo\n", f"stdin, line 2: 'foo' cannot be read: {TEMPERATURE}"),
    ("absolute zero on line 1", b"0K\n25C\n", f"stdin, line 1: '0K' cannot be read: {ABOVE_ZERO}"),
    ("two temperatures on a line", b"25C 26C\n",
     f"stdin, line 1: '25C 26C' cannot be read: a temperature unit is one of {TEMPERATURES}."),
    ("a decimal comma on line 1", b"25,5C\n",
     "stdin, line 1: '25,5C' cannot be read: '25,5' is not a printed number; "
     "a temperature looks like 298.15K or 25C."),
    ("a minus sign as typed", "25C\n\u2212300C\n".encode(),
     f"stdin, line 2: '\u2212300C' cannot be read: {ABOVE_ZERO}"),
    ("UTF-16", "25C\n".encode("utf-16"), "stdin is no UTF-8 text (invalid start byte)."),
    ("nothing", b"", "No temperature was given. Give one or more, such as 298.15K, 25C or 77F, or - for stdin."),
    ("Latin-1", b"25C\n25 \xb0C\n", "stdin is no UTF-8 text (invalid start byte)."),
)  # fmt: skip

# what the option parser says: its last line, for the lines above it belong to the parser
USAGE = (
    ("no temperature", ("lookup", "water"), "Error: Missing argument 'TEMPERATURE...'."),
    ("no compound", ("lookup",), "Error: Missing argument 'COMPOUND'."),
    ("an unknown option", ("lookup", "water", "25C", "--nonsense"), "Error: No such option: --nonsense"),
    ("an unknown command", ("nonsense",), "Error: No such command 'nonsense'."),
    ("an option without its value", ("lookup", "water", "25C", "--unit"),
     "Error: Option '--unit' requires an argument."),
)  # fmt: skip

# arguments that look bad and are not, kelvin
READ = (
    ("an exponent", ("2.9815e2K",), [298.15]),
    ("an exponent with its sign and a blank", ("2.9815E+2 K",), [298.15]),
    ("an exponent before another unit", ("2.5e1C",), [298.15]),
    ("an exponent below zero", ("298150e-3K",), [298.15]),
)
