"""The upper tail of the chi-square distribution, from closed forms for whole degrees of freedom.

May import: nothing of routeheat.
"""

from __future__ import annotations

import math


def upper_tail(chi2: float, dof: int) -> float:
    """Probability that a chi-square variable with ``dof`` degrees of freedom is at least ``chi2``.

    With a = dof/2 and x = chi2/2 this is Q(a, x), built up by Q(a + 1, x) = Q(a, x) + xᵃ e⁻ˣ / Γ(a + 1) from
    Q(0, x) = 0 or Q(1/2, x) = erfc(√x) (NIST Digital Library of Mathematical Functions, 8.8.6 and 8.4.6; M. Abramowitz,
    I. A. Stegun, Handbook of Mathematical Functions, 26.4.4 and 26.4.5). All terms are positive, so a small probability
    keeps its relative accuracy. Raises ``ValueError`` for fewer than one degree of freedom or a negative ``chi2``.
    """
    if dof < 1 or not chi2 >= 0:
        raise ValueError(f"no probability of chi-square {chi2} on {dof} degrees of freedom")
    if chi2 == 0:
        return 1.0
    if math.isinf(chi2):
        return 0.0
    x = chi2 / 2
    odd = dof % 2
    terms = [math.erfc(math.sqrt(x))] if odd else []
    exponents = (index + 0.5 * odd for index in range(dof // 2))
    terms += [math.exp(a * math.log(x) - x - math.lgamma(a + 1)) for a in exponents]
    return min(math.fsum(terms), 1.0)
