"""Marks: what is asked, of which shelf, exit code, the line of the value, and a sentence that must stand beneath.

Every expected text is this program's own wording; blanks are counted as one.
"""

from __future__ import annotations

MARKS = (
    ("beyond a window", "published", ("lookup", "ethanol", "210K", "--beyond", "10K"), 0, "beyond",
     "210K 210 K 3.16400 Pa (BEYOND) none +13.5 % x 3.873 memory",
     "It is extrapolated 6.15 K beyond the window. caution No other accepted correlation ends within 10 K to compare "
     "it with."),
    ("in a gap, with a neighbour", "scenario", ("lookup", "brindovane", "320K", "--beyond", "60K"), 0, "beyond",
     "320K 320 K 2.69282 kPa (BEYOND) none +5.19 % x 1.681 seen brindovane-antoine-low",
     "Beside it brindovane-kirchhoff, 40 K beyond its window, gives +0.864 %."),
    ("an estimate", "published", ("lookup", "acetylene", "250K", "--estimate", "ambrose-walton"), 0, "estimate",
     "250K 250 K 1367.59 kPa (ESTIMATE) none +3.12 % x 1.366 none ambrose-walton",
     "It is an estimate, not a measured or evaluated value. Typical error:"),
    ("a draft", "scenario", ("lookup", "brindovane", "330K", "--drafts"), 0, "draft",
     "(DRAFT) 0.5 %",
     "The correlation is draft, not accepted."),
    ("a seam", "published", ("lookup", "ethanol", "293K"), 0, None,
     "293K 293 K 5.80861 kPa none +6.03 % x 1.827 memory ethanol-poling-5",
     "A seam: ethanol-antoine-low answers below it, ethanol-poling-5 above; the value changes by +0.605 %."),
    ("an answer and a refusal", "published", ("lookup", "ethanol", "210K", "200K", "--beyond", "10K"), 3, "beyond",
     "210K 210 K 3.16400 Pa (BEYOND) none +13.5 % x 3.873 memory",
     "It is extrapolated 6.15 K beyond the window."),
    ("a temperature on another scale", "published", ("lookup", "water", "100 degC (IPTS-68)"), 0, None,
     "100 degC (IPTS-68) 373.124359 K 101.325 kPa 0.025 %",
     "water-if97, revision 1, accepted"),
    ("a temperature with its uncertainty", "published",
     ("lookup", "water", "25", "+/-", "0.1", "degC", "(k=2)"), 0, None,
     "25 +/- 0.1 degC (k=2) 298.15 K 3.16975 kPa 0.025 % 0.596 % 0.597 %",
     "water-if97, revision 1, accepted"),
    ("why, on an older scale", "published",
     ("lookup", "naphthalene", "260K", "-p", "sublimation-pressure", "--why"), 0, None, "260K 260 K",
     "IPTS-68, whose number there is"),
    ("why, with digits and no stated scale", "published", ("lookup", "ethanol", "250K", "--why"), 0, None, "250K 250 K",
     "digits The rounding of the printed coefficients leaves open"),
)  # fmt: skip
