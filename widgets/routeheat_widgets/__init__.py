"""routeheat_widgets: the route desk, a notebook widget around one typed route sheet.

>>> import routeheat_widgets as rw
>>> desk = rw.RouteDesk(text="known\\n  [K1] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol (k = 2)")
>>> desk
RouteDesk: 1 known row, 2 lines, no faults
>>> desk.close()

The typed text is the truth; everything on the desk is computed from it and can be made again in a cell with the code
that each view shows.
May import: routeheat, ipywidgets, anywidget, traitlets, IPython; plotly inside the function that needs it.
"""

from routeheat_widgets._moved import moved
from routeheat_widgets.desk import RouteDesk
from routeheat_widgets.known_heats import KnownHeats, OpenCycles, known_heats, open_cycles
from routeheat_widgets.measure_next import measure_next
from routeheat_widgets.typed import Typed
from routeheat_widgets.what_if import WhatIf, what_if

__all__ = [
    "KnownHeats",
    "OpenCycles",
    "RouteDesk",
    "Typed",
    "WhatIf",
    "known_heats",
    "measure_next",
    "moved",
    "open_cycles",
    "what_if",
]
