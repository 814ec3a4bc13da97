"""What cannot be restated: the words of the command, and the one message; the exit code is always 2."""

from __future__ import annotations

PRESSURES = "Pa, hPa, kPa, MPa, GPa, bar, mbar, atm, mmHg, cmHg, Torr, inHg, psi, kgf/cm2"
DENSITIES = "kg/m3, g/cm3, lb/ft3, mol/dm3, mol/m3"

# what it is, words after `restate`, message
RESTATEMENTS = (
    ("a zero that a reduced equation has not", ("water-sr1-86", "--temperature", "degC"),
     "water-sr1-86 cannot be restated in degC: saturation ancillary equation (saturation-ancillary) counts from "
     "absolute zero (ln(p/pc) = (Tc/T) sum n_i (1 - T/Tc)^t_i); K or degR is allowed."),
    ("a zero that ln T has not", ("water-perry-8", "--pressure", "kPa", "--temperature", "degF"),
     "water-perry-8 cannot be restated in degF: Riedel (riedel) counts from absolute zero "
     "(ln p = C1 + C2/T + C3 ln T + C4 T^C5); K or degR is allowed."),
    ("a base without a form", ("water-perry-8", "--log", "log10"),
     "water-perry-8 cannot be restated in log10: Riedel (riedel) is written to base e, and the catalogue has no form "
     "that holds its terms to the other."),
    ("a base without a form, from base 10", ("water-goff-gratch-1946", "--log", "ln"),
     "water-goff-gratch-1946 cannot be restated in ln: Goff-Gratch (goff-gratch) is written to base 10, and the "
     "catalogue has no form that holds its terms to the other."),
    ("a form without a logarithm", ("argon-melting-datchi-2000", "--log", "ln"),
     "argon-melting-datchi-2000 cannot be restated in ln: Simon-Glatzel, power of T (simon-glatzel-power) takes no "
     "logarithm of the value (p = a T^c + b)."),
    ("a unit that the equation fixes", ("water-if97", "--pressure", "kPa"),
     "water-if97 cannot be restated in kPa: IAPWS-IF97 region 4 (iapws-if97-saturation) gives MPa and no other unit."),
    ("a unit that defines a scale", ("helium-3-its-90", "--pressure", "kPa", "--temperature", "degR"),
     "helium-3-its-90 cannot be restated in kPa: ITS-90 helium vapour pressure (helium-its90) gives Pa and no other "
     "unit."),
    ("nothing asked", ("water-if97",),
     "Say what water-if97 is to be restated in: a unit of the value (--pressure, --value), of temperature "
     "(--temperature), or a log base (--log)."),
    ("two units of the value", ("water-sr1-86", "--pressure", "kPa", "--value", "bar"),
     "Both --pressure and --value were given. Give one of them."),
    ("another base", ("water-sr1-86", "--log", "lg"), "log 'lg' given; ln or log10 is allowed."),
    ("an empty base", ("water-sr1-86", "--log", ""), "log '' given; ln or log10 is allowed."),
    ("an unknown unit", ("water-sr1-86", "--pressure", "kpa"),
     f"'kpa' cannot be read: a pressure unit is one of {PRESSURES}. Did you mean kPa?"),
    ("an empty unit", ("water-sr1-86", "--pressure", ""),
     f"'' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("a gauge unit", ("water-sr1-86", "--pressure", "barg"),
     f"'barg' is a gauge unit; a correlation gives absolute pressures. One of {PRESSURES} is allowed."),
    ("a pressure for a density", ("argon-density-tegeler-1999", "--pressure", "kPa"),
     f"'kPa' cannot be read: a density unit is one of {DENSITIES}."),
    ("a temperature for a pressure", ("water-sr1-86", "--pressure", "K"),
     f"'K' cannot be read: a pressure unit is one of {PRESSURES}."),
    ("a pressure for a temperature", ("water-sr1-86", "--temperature", "kPa"),
     "'kPa' cannot be read: a temperature unit is one of K, degC, degF, degR."),
    ("a compound", ("water", "--pressure", "kPa"),
     "'water' is a compound; only a correlation can be restated. `rangebook show water` tells what refers to it."),
    ("a source", ("perry-8", "--pressure", "kPa"),
     "'perry-8' is a source; only a correlation can be restated. `rangebook show perry-8` tells what refers to it."),
    ("a key that nothing has", ("water-sr1-87", "--pressure", "kPa"),
     "There is no record 'water-sr1-87'. Nearest: water-sr1-86, water-perry-8, water-ice-r14-08."),
)  # fmt: skip
