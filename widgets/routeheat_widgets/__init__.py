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

from routeheat_widgets.desk import RouteDesk
from routeheat_widgets.typed import Typed

__all__ = ["RouteDesk", "Typed"]
