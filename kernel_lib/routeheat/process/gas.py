"""Gas evolved per mole of product by a whole route, side rows included."""

from __future__ import annotations

from routeheat.process.profile import Profile
from routeheat.process.vessel_parts import gas_per_mol


def gas_per_product(profile: Profile) -> float:
    """mol of gas evolved per mole of product: typed per step, else the gaseous products of each equation."""
    return sum(float(item.charged) * gas_per_mol(item.step, item.limiting)[0] for item in profile.steps)
