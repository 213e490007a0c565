"""The methods a report names, with their sources."""

from __future__ import annotations

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
