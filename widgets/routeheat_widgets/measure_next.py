"""What to measure next, without the measurements that change nothing: a result that a cell can make too."""

from __future__ import annotations

from dataclasses import replace

import routeheat as rh
from routeheat.chem.route import Sheet
from routeheat_widgets._quantities import Matter

MOST = 12
"""Measurements that are listed."""
_SAME = 1e-9
"""Part of an uncertainty that counts as no change."""


def measure_next(sheet: Sheet, of: Matter, *, attainable: float) -> rh.NextMeasurement:
    """The single measurements that would shrink the uncertainty of ``of`` most, the most helpful first.

    ``attainable`` as for :func:`~routeheat.process.next_measurement.next_measurement`, over the known rows and routes
    of ``sheet``; raises what that raises. A measurement that changes nothing is left out.
    """
    found = rh.next_measurement(of, attainable=attainable, known=sheet.known, routes=sheet.routes)
    now, open_now = found.heat.u, len(found.heat.not_stated)
    telling = [
        effect for effect in found.effects if effect.u_least < now * (1 - _SAME) or len(effect.unstated) < open_now
    ]
    return replace(found, effects=tuple(telling[:MOST]))
