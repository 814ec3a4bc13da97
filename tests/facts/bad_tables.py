"""Bad requests for tables, each with its exact message and exit code.

Every expected text is this program's own wording. {folder} stands for a
temporary folder that holds taken.csv and library.db.
"""

from __future__ import annotations

from facts.bad_requests import ABOVE_ZERO, BARE, DENSITIES, GAUGE, LONG, PRESSURES, SHORTENED, TEMPERATURE, TEMPERATURES

WATER = ("water", "--from", "0C", "--to", "100C")
STEPS = (*WATER, "--step", "5K")
ENDS = ".txt, .csv, .md, .markdown, .json, .xlsx"
KINDS = "Give both as one or the other."
ORDER = "Give two ends, the lower one first."

# what is asked, of which shelf, exit code, message
REQUESTS = (
    ("an unknown compound", "published", ("amonia", "--from", "0C", "--to", "9C", "--step", "1C"), 2,
     "There is no compound 'amonia'. Nearest: ammonia."),
    ("an unknown property", "published", (*STEPS, "-p", "colour"), 2,
     "There is no property 'colour'; the properties are vapor-pressure, sublimation-pressure, melting-pressure, "
     "enthalpy-of-vaporization and saturated-liquid-density."),
    ("an unknown phase", "published", (*STEPS, "--phase", "foam"), 2,
     "water has no vapor-pressure of a phase 'foam'; it has liquid."),
    ("no unit", "published", ("water", "--from", "0", "--to", "100C", "--step", "5K"), 2,
     f"'0' cannot be read: {BARE}"),
    ("no unit at the end", "published", ("water", "--from", "0C", "--to", "100", "--step", "5K"), 2,
     f"'100' cannot be read: {BARE}"),
    ("no number", "published", ("water", "--from", "K", "--to", "100C", "--step", "5K"), 2,
     f"'K' cannot be read: {TEMPERATURE}"),
    ("an end of a million letters", "published", ("water", "--from", LONG, "--to", "100C", "--step", "5K"), 2,
     f"{SHORTENED} cannot be read: {TEMPERATURE}"),
    ("an end with an uncertainty", "published", ("water", "--from", "25+/-1C", "--to", "100C", "--step", "5K"), 2,
     f"'25+/-1C' cannot be read: {TEMPERATURE}"),
    ("absolute zero", "published", ("water", "--from", "0K", "--to", "100C", "--step", "5K"), 2,
     f"'0K' cannot be read: {ABOVE_ZERO}"),
    ("below absolute zero", "published", ("water", "--from", "-300C", "--to", "100C", "--step", "5K"), 2,
     f"'-300C' cannot be read: {ABOVE_ZERO}"),
    ("the higher end first", "published", ("water", "--from", "100C", "--to", "0C", "--step", "5K"), 2,
     f"The table starts at 373.15 K and ends at 273.15 K. {ORDER}"),
    ("equal ends", "published", ("water", "--from", "0C", "--to", "273.15K", "--step", "5K"), 2,
     f"The table starts at 273.15 K and ends at 273.15 K. {ORDER}"),
    ("a temperature and a pressure", "published", ("water", "--from", "0C", "--to", "1bar", "--step", "5K"), 2,
     f"--to '1bar' is a pressure, and --from a temperature. {KINDS}"),
    ("a temperature and a gauge pressure", "published", ("water", "--from", "0C", "--to", "1barg", "--step", "5K"), 2,
     f"--to '1barg' is a pressure, and --from a temperature. {KINDS}"),
    ("a pressure and a temperature", "published", ("water", "--from", "1bar", "--to", "100C", "--step", "5K"), 2,
     f"--to '100C' is a temperature, and --from a pressure. {KINDS}"),
    ("neither step nor points", "published", WATER, 2,
     "A table needs a step or a number of points. Give one of them."),
    ("step and points", "published", (*STEPS, "--points", "5"), 2,
     "Both a step and a number of points were given. Give one of them."),
    ("a step without unit", "published", (*WATER, "--step", "5"), 2,
     f"'5' cannot be read: a temperature needs its unit ({TEMPERATURES}), such as 5K or 9F."),
    ("a step of zero", "published", (*WATER, "--step", "0K"), 2, "'0K' cannot be read: a step is greater than zero."),
    ("a step downwards", "published", (*WATER, "--step", "-5C"), 2,
     "'-5C' cannot be read: a step is greater than zero."),
    ("a step of pressure for temperatures", "published", (*WATER, "--step", "1bar"), 2,
     f"--step '1bar' is a pressure, and --from a temperature. {KINDS}"),
    ("a pressure beyond every number", "published", ("water", "--from", "1e-400Pa", "--to", "1bar"), 2,
     "'1e-400Pa' cannot be read: '1e-400' is beyond what a double can hold; a pressure looks like 101.325kPa."),
    ("a step of temperature for pressures", "published", ("water", "--from", "1bar", "--to", "9bar", "--step", "5K"), 2,
     f"--step '5K' is a temperature, and --from a pressure. {KINDS}"),
    ("a gauge step", "published", ("water", "--from", "1bar", "--to", "2bar", "--step", "1barg"), 2,
     "'1barg' cannot be read: a step is a difference, in a unit such as kPa."),
    ("too many steps", "published", (*WATER, "--step", "0.000001K"), 2,
     "That makes 100,000,001 rows; at most 10,000,000 are allowed. Take a larger step."),
    ("too many points", "published", (*WATER, "--points", "10000001"), 2,
     "That makes 10,000,001 rows; at most 10,000,000 are allowed. Ask for fewer."),
    ("one point", "published", (*WATER, "--points", "1"), 2,
     "A table of 1 points was asked for; at least 2 are needed, one at each end."),
    ("points below zero", "published", (*WATER, "--points", "-3"), 2,
     "A table of -3 points was asked for; at least 2 are needed, one at each end."),
    ("an unknown unit of temperature", "published", (*STEPS, "-t", "Celsius degrees"), 2,
     f"'Celsius degrees' cannot be read: a temperature unit is one of {TEMPERATURES}. Did you mean degC?"),
    ("a temperature unit for the value", "published", (*STEPS, "-u", "K"), 2,
     f"'K' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("an energy unit for a density", "scenario",
     ("tallowane", "--from", "300K", "--to", "310K", "--step", "5K", "-p", "saturated-liquid-density", "-u", "J/g"), 2,
     f"'J/g' cannot be read: a density unit is one of {DENSITIES}."),
    ("a gauge unit", "published", (*STEPS, "-u", "barg"), 2, f"'barg' cannot be read: {GAUGE}"),
    ("gauge ends", "published", ("water", "--from", "1barg", "--to", "3barg"), 2, f"'barg' cannot be read: {GAUGE}"),
    ("a gauge pressure below a vacuum", "published",
     ("water", "--from", "-2barg", "--to", "3barg", "--atmosphere", "1bar"), 2,
     "'-2barg' cannot be read: an absolute pressure is greater than zero."),
    ("a gauge atmosphere", "published", (*STEPS, "--atmosphere", "1barg"), 2,
     "'1barg' cannot be read: the local atmosphere is an absolute pressure, such as 101.325kPa."),
    ("pressures for a density", "scenario", ("tallowane", "--from", "1bar", "--to", "2bar", "-p",
     "saturated-liquid-density"), 2,
     "saturated-liquid-density is no pressure, so --from '1bar' does not fit. Give two temperatures."),
    ("no round number between", "published", ("water", "--from", "1.1bar", "--to", "1.9bar"), 2,
     "No round number (1, 2 or 5 times a power of ten) lies from 1.1 to 1.9 bar. Give a step or a number of points."),
    ("a higher pressure first", "published", ("water", "--from", "2bar", "--to", "1bar"), 2,
     f"The table starts at 200000 Pa and ends at 100000 Pa. {ORDER}"),
    ("an unknown format", "published", (*STEPS, "--format", "pdf"), 2,
     "--format 'pdf' given; text, csv, markdown, json, xlsx are allowed."),
    ("a workbook on the screen", "published", (*STEPS, "--format", "xlsx"), 2,
     "A workbook is not for the screen. Say where to write it: --output table.xlsx."),
    ("a suffix that names no format", "published", (*STEPS, "--output", "{folder}/table.dat"), 2,
     f"{{folder}}/table.dat ends in none of {ENDS}. Name the format with --format."),
    ("a file that is there", "published", (*STEPS, "--output", "{folder}/taken.csv"), 2,
     "{folder}/taken.csv is there already. Give another name, or --force to replace it."),
    ("a dash for a file", "published", (*STEPS, "--output", "-", "--format", "csv"), 2,
     "--output - names no file. Leave --output out: the table goes to the screen or into a pipe."),
    ("a folder for a file", "published", (*STEPS, "--output", "{folder}", "--format", "csv", "--force"), 2,
     "{folder} is no plain file. Give the name of a file."),
    ("a folder that is missing", "published", (*STEPS, "--output", "{folder}/none/table.csv"), 2,
     "There is no folder {folder}/none. Make it first, or give another place."),
    ("a device for a file", "published", (*STEPS, "--output", "/dev/null", "--format", "csv", "--force"), 2,
     "/dev/null is no plain file. Give the name of a file."),
    ("edition and date", "published", (*STEPS, "--edition", "a", "--as-of", "1"), 2,
     "Both --edition and --as-of were given. Give one of them."),
    ("no correlation for the property", "published",
     ("ethanol", "--from", "200K", "--to", "300K", "--step", "5K", "-p", "sublimation-pressure"), 3,
     "Refused (no-correlation), 21 of 21 rows; the first: ethanol has no correlation for sublimation-pressure. "
     "It has enthalpy-of-vaporization and vapor-pressure. `rangebook show ethanol` lists them."),
    ("above every window", "published", ("water", "--from", "700K", "--to", "710K", "--step", "5K"), 3,
     "Refused (above-critical), 3 of 3 rows; the first: 700 K lies above the critical temperature of water, 647.096 K "
     "(iapws-r2-83-sr1-86-r6-95): there is no liquid. Nearest: water-if97 (273.15 to 647.096 K) is 52.904 K away. "
     "`rangebook coverage water --property vapor-pressure` shows the map."),
    ("no single correlation", "published",
     ("ethanol", "--from", "250K", "--to", "500K", "--step", "5K", "--one"), 3,
     "Refused (no-single-correlation): No accepted correlation answers for vapor-pressure of ethanol over all of 250 "
     "to 500 K. Closest: ethanol-poling-5 answers over 82.8 % of it (293 to 513.92 K); "
     "ethanol-antoine-high answers over 59.9 % of it (350.15 to 513.92 K); "
     "ethanol-antoine-low answers over 41.3 % of it (216.15 to 353.15 K). "
     "Ask for a span inside one of these, or for a table with seams."),
)  # fmt: skip

# words that are off, the last line on stderr
USAGE = (
    ("no ends", ("table", "water"), "Error: Missing option '--from'."),
    ("one end", ("table", "water", "--from", "0C"), "Error: Missing option '--to'."),
    ("points that are no number", ("table", *WATER, "--points", "many"),
     "Error: Invalid value for '--points': 'many' is not a valid int."),
)  # fmt: skip
