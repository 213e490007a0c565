"""Adiabatic temperature rise, maximum temperature of the synthesis reaction, time to maximum rate: formulas.

Plain floats with units in the names; temperatures in kelvin unless the name says °C; heats exothermic negative, heat
rates (W/kg) positive when heat is released. R is the molar gas constant, 8.31446261815324 J/(mol K).

Sources marked "from memory" have to be checked against the source before they are relied on.
"""

from __future__ import annotations

import math

from routeheat.process.quadrature import bisect, integrate
from routeheat.units import GAS_CONSTANT

R = float(GAS_CONSTANT)
DAY_S = 86400.0
STANDARD_GRAVITY = 9.80665
"""m/s² (3rd CGPM 1901, exact by convention)."""
METHANOL_LATENT_KJ_PER_KG = 1100.0
"""Heat of vaporisation of methanol, rounded, as energy-equivalent tables use it (from memory, check)."""


def adiabatic_rise(heat_kj_per_mol: float, concentration_mol_per_kg: float, cp_kj_per_kg_k: float) -> float:
    """ΔTad in K on the molar basis, (−ΔH) c / cp; c is mol of limiting reactant per kg of mixture at that instant.

    F. Stoessel, Thermal Safety of Chemical Processes, Wiley-VCH 2008, ch. 2 (from memory, check).
    """
    return -heat_kj_per_mol * concentration_mol_per_kg / cp_kj_per_kg_k


def specific_adiabatic_rise(heat_kj_per_kg: float, cp_kj_per_kg_k: float) -> float:
    """ΔTad in K on the specific basis, −Q′ / cp, with Q′ in kJ per kg of mixture, exothermic negative (same source)."""
    return -heat_kj_per_kg / cp_kj_per_kg_k


def evaporated_part(heat_kj_per_kg: float, latent_kj_per_kg: float) -> float:
    """kg of liquid that the heat of 1 kg of mixture evaporates; above 1 more than there is."""
    return -heat_kj_per_kg / latent_kj_per_kg


def height_equivalent_km(heat_kj_per_kg: float) -> float:
    """Height in km to which the heat of a mass could lift that mass, −Q′ / g."""
    return -heat_kj_per_kg / STANDARD_GRAVITY


def speed_equivalent_km_per_s(heat_kj_per_kg: float) -> float:
    """Speed in km/s that the heat of a mass could give to that mass, √(−2 Q′); 0 for an endothermic one."""
    return math.sqrt(max(0.0, -2 * heat_kj_per_kg * 1000)) / 1000


def mtsr(process_c: float, rise_k: float, accumulated: float, mass_ratio: float = 1.0) -> float:
    """Maximum temperature of the synthesis reaction in °C, Tp + Xac ΔTad,rf Mrf/Mr.

    ΔTad,rf refers to the final mass Mrf; ``mass_ratio`` is Mrf/Mr at the worst instant. R. Gygax, Chem. Eng. Sci. 43
    (1988) 1759; Stoessel 2008 (from memory, check).
    """
    return process_c + accumulated * rise_k * mass_ratio


def arrhenius(rate: float, at_k: float, to_k: float, e_j_per_mol: float) -> float:
    """A rate at another temperature, q exp[−E/R (1/T − 1/Tref)]; zero order, so no consumption."""
    return rate * math.exp(-e_j_per_mol / R * (1 / to_k - 1 / at_k))


def activation_energy(rate_1: float, at_1_k: float, rate_2: float, at_2_k: float) -> float:
    """Activation energy in J/mol from two isothermal rates, R ln(q2/q1) / (1/T1 − 1/T2) (S. Arrhenius 1889)."""
    return R * math.log(rate_2 / rate_1) / (1 / at_1_k - 1 / at_2_k)


def tmrad(at_k: float, rate_w_per_kg: float, cp_j_per_kg_k: float, e_j_per_mol: float) -> float:
    """Time to maximum rate under adiabatic conditions in s, zero order: cp R T0² / (q0 E).

    D. I. Townsend, J. C. Tou, Thermochim. Acta 37 (1980) 1; N. N. Semenov (formula text from memory, check).
    """
    return cp_j_per_kg_k * R * at_k**2 / (rate_w_per_kg * e_j_per_mol)


def tmrad_integral(at_k: float, rate_w_per_kg: float, cp_j_per_kg_k: float, e_j_per_mol: float) -> float:
    """The same time in s without the linearised exponent: cp/q0 ∫ exp[E/R (1/T − 1/T0)] dT from T0 to E/2R.

    With u = E/R (1/T0 − 1/T) and ε = R T0/E this is the zero-order formula times ∫ e⁻ᵘ/(1 − εu)² du. Without
    consumption the integral has no natural end; it is cut at E/2R, where the integrand in u is least, and at u = 60,
    behind which nothing is left. Raises ``ValueError`` at or above E/2R.
    """
    epsilon = R * at_k / e_j_per_mol
    end = min(1 / epsilon - 2, 60.0)
    if end <= 0:
        raise ValueError(f"{at_k:g} K is at or above E/2R: the formula does not apply")
    factor = integrate(lambda u: math.exp(-u) / (1 - epsilon * u) ** 2, (0.0, end), 0.5)
    return tmrad(at_k, rate_w_per_kg, cp_j_per_kg_k, e_j_per_mol) * factor


def td24(
    rate_w_per_kg: float, at_k: float, cp_j_per_kg_k: float, e_j_per_mol: float, *, integral: bool = False
) -> float | None:
    """Temperature in K at which the time to maximum rate is 24 h, from one heat rate; zero order.

    ``integral`` uses :func:`tmrad_integral`. ``None`` when no temperature from 100 K up to E/2R gives 24 h. Not for
    autocatalytic decompositions, for which it is not conservative (Bou-Diab and Fierz, J. Hazard. Mater. 93 (2002)
    137; from memory, check).
    """
    time = tmrad_integral if integral else tmrad

    def excess(kelvin: float) -> float:
        # the logarithm keeps very long times finite: log(TMRad/24 h)
        relative = time(kelvin, 1.0, cp_j_per_kg_k, e_j_per_mol)
        rate = math.log(rate_w_per_kg) - e_j_per_mol / R * (1 / kelvin - 1 / at_k)
        return math.log(relative / DAY_S) - rate

    return bisect(excess, 100.0, e_j_per_mol / (2 * R) * (1 - 1e-6)) if e_j_per_mol / (2 * R) > 101 else None


def tmrad_from_td24(at_k: float, td24_k: float, e_j_per_mol: float) -> float:
    """TMRad in s at another temperature from TD24 and E alone; zero order, so TMRad ∝ T² exp(E/RT)."""
    return DAY_S * (at_k / td24_k) ** 2 * math.exp(e_j_per_mol / R * (1 / at_k - 1 / td24_k))


def boiling_point(pressure_pa: float, at_k: float, at_pa: float, latent_j_per_mol: float) -> float:
    """Boiling point in K at a pressure, from one boiling point and the molar heat of vaporisation.

    Clausius-Clapeyron with a constant heat of vaporisation and an ideal vapour (Atkins, Physical Chemistry).
    """
    return 1 / (1 / at_k - R * math.log(pressure_pa / at_pa) / latent_j_per_mol)


def pressure_limit(
    limit_pa: float, at_k: float, at_pa: float, latent_j_per_mol: float, gas_mol: float = 0.0, headspace_m3: float = 0.0
) -> float | None:
    """Temperature in K at which vapour and gas together reach a pressure in a closed vessel.

    Vapour pressure by Clausius-Clapeyron from one boiling point; gas as n R T / V in the headspace (none dissolved).
    ``None`` when the pressure is not reached between 150 K and 1000 K.
    """

    def excess(kelvin: float) -> float:
        vapour = at_pa * math.exp(-latent_j_per_mol / R * (1 / kelvin - 1 / at_k))
        gas = gas_mol * R * kelvin / headspace_m3 if gas_mol else 0.0
        return vapour + gas - limit_pa

    return bisect(excess, 150.0, 1000.0)
