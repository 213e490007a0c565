"""The methods a report names, with their sources; what was not read in its source says so."""

from __future__ import annotations

from routeheat.chem.route import Sheet
from routeheat.process.cautions import FROM_MEMORY, THRESHOLDS
from routeheat.report.agreement import has_cycle
from routeheat.report.scale import concerns_vessel
from routeheat.report.screening import declares

METHODS: tuple[str, ...] = (
    "Combinations: Hess's law, with exact rational coefficients over species; a species is a substance in a phase and "
    "a form (G. H. Hess, Pogg. Ann. Phys. 50 (1840) 385).",
    "Uncertainty: u² = Σ (cᵢ uᵢ)² over independent data; data that two results share cancel in their difference "
    "(JCGM 100:2008, eq. 10 and F.1.2.3). A printed ± is k·u; numbers are rounded after JCGM 100:2008, 7.2.6.",
    "Uncertainty as typed: digits in brackets are a standard uncertainty of the last digits (JCGM 100:2008, 7.2.2); "
    "± takes the coverage factor typed beside it, else that of the sheet, else k = 2.",
    "Profiles: the heat of each step times its runs per mole of product after all yields, excesses and recycles, from "
    "one exact linear system; added up in working order. Such sums are not state functions.",
    "Closure between routes: net equations with theoretical extents (yields of 1, no excess), whose difference is "
    "taken from the known rows where they give it.",
    "Difference of routes: counts as different when it is at least twice the standard uncertainty of the difference.",
    "Adiabatic temperature rise: ΔTad = −ΔrH · c / cp per mole of limiting reactant charged (F. Stoessel, Thermal "
    "Safety of Chemical Processes, Wiley-VCH 2008, ch. 2; from memory, check against the source).",
)
"""Of every report."""
RECONCILED: tuple[str, ...] = (
    "Reconciliation: generalised least squares on the cycles of the known rows, whose normalised residuals, χ² and p "
    "say whether they agree; below p = 0.01 there is no adjusted value without a decision of the user (B. Ruscic et "
    f"al., J. Phys. Chem. A 108 (2004) 9979; {FROM_MEMORY}). Birge ratio √(χ²/dof): R. T. Birge, Phys. Rev. 40 (1932) "
    "207. Rows are never dropped or averaged silently.",
)
NEXT: tuple[str, ...] = (
    "What to measure next: knowing a heat better changes the variance of the heat that matters by rank one (J. "
    "Sherman, W. J. Morrison, Ann. Math. Stat. 21 (1950) 124). The chance of a clear difference is a preposterior "
    f"probability (H. Raiffa, R. Schlaifer, Applied Statistical Decision Theory, 1961; {FROM_MEMORY}).",
)
SCALE: tuple[str, ...] = (
    "MTSR: Tp + Xac·ΔTad at the worst instant; at stoichiometric feed that is the equivalence point (R. Gygax, Chem. "
    f"Eng. Sci. 43 (1988) 1759; F. Stoessel, Thermal Safety of Chemical Processes, Wiley-VCH 2008; {FROM_MEMORY}).",
    "TMRad: cp·R·T²/(q·E) of a zero-order decomposition (N. N. Semenov; D. I. Townsend, J. C. Tou, Thermochim. Acta "
    f"37 (1980) 1; formula {FROM_MEMORY}); TD24 is the temperature at which it is 24 h. Refused for autocatalytic "
    "decompositions, for which it is not conservative (L. Bou-Diab, H. Fierz, J. Hazard. Mater. 93 "
    f"(2002) 137; {FROM_MEMORY}).",
    "Criticality class: by the ordering of MTSR, MTT and TD24, ties to the worse class (F. Stoessel, Chem. Eng. Prog. "
    f"89(10) (1993) 68, and Process Saf. Environ. Prot. 87 (2009) 105; orderings {FROM_MEMORY}). Probabilities of "
    "classes: independent normal distributions of MTSR, MTT and TD24.",
    f"Severity and probability levels: F. Stoessel 2008, ch. 3, and GB/T 42300-2022; {THRESHOLDS}.",
    "Load of a jacket: heat rate of an evenly fed reaction without accumulation over U·A·ΔT; the margin is a choice, "
    "not a source. Gas is ideal, n·R·T/p.",
)
SCREENING: tuple[str, ...] = (
    "Oxygen balance: −1600/M (2 C + (H − X)/2 + 2 S + metal oxide O − O) with the products stated; halogen term and "
    "bands (W. C. Lothrop, G. R. Handrick, Chem. Rev. 44 (1949) 419; CCPS, Guidelines for Chemical Reactivity "
    f"Evaluation, 1995) {FROM_MEMORY}; criticised by R. E. Shanley, G. A. Melhem, Process Saf. Prog. 14 (1995) 29.",
    "Waivers of the explosives, self-reactive and organic peroxide classes: UN Manual of Tests and Criteria, appendix "
    "6; GHS, chapters 2.1, 2.8 and 2.15.",
    f"EP and SS: T. Yoshida et al., Kogyo Kayaku 48 (1987) 311; coefficients of both variants {FROM_MEMORY}.",
    "Azides: (C + O)/N and C/N (S. Bräse, C. Gil, K. Knepper, V. Zimmermann, Angew. Chem. Int. Ed. 44 (2005) 5188; "
    f"{FROM_MEMORY}); tiers of one university fact sheet. Energies of groups: sources stand with each table.",
)
WASTE: tuple[str, ...] = (
    "Waste: atom economy (B. M. Trost, Science 254 (1991) 1471), E factor (R. A. Sheldon, Green Chem. 9 (2007) 1273; "
    f"{FROM_MEMORY}), PMI = E + 1 with the same boundary, reaction mass efficiency (D. J. C. Constable, A. D. Curzons, "
    "V. L. Cunningham, Green Chem. 4 (2002) 521).",
)


def methods_of(sheet: Sheet) -> tuple[str, ...]:
    """The methods that a report of ``sheet`` uses."""
    return (
        *METHODS,
        *(RECONCILED if has_cycle(sheet) else ()),
        *(NEXT if sheet.routes or sheet.targets else ()),
        *(SCALE if concerns_vessel(sheet) else ()),
        *(SCREENING if declares(sheet) else ()),
        *(WASTE if sheet.routes else ()),
    )
