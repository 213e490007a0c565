"""routeheat: heats of alternative synthesis routes, with exact combinations and honest uncertainty.

Every known heat is a row: a reaction, exact, with an enthalpy. A route is rows run so many times each.

>>> import routeheat as rh
>>> sheet = rh.read_sheet('''
... uncertainty k = 2
...
... known
...   [K1] formation of CO2(g)  | dH -393.51 ± 0.13 kJ/mol
...   [K2] formation of H2O(l)  | dH -285.830 ± 0.040 kJ/mol
...   [K3] combustion of C2H2(g) to CO2(g), H2O(l) | dH -1299.4 ± 0.8 kJ/mol
...
... target [T] 2 C(s, graphite) + H2(g) -> C2H2(g)
... ''')

Hess's law with exact coefficients; the heat remembers its rows:

>>> found = rh.combine(sheet.targets["T"], sheet.known)
>>> found.coefficients
{'K1': Fraction(2, 1), 'K2': Fraction(1, 1), 'K3': Fraction(-1, 1)}
>>> print(found.heat)
226.55 ± 0.84 (k = 2) kJ/mol

Exothermic is negative. Results have ``.text``, ``.table()``, ``.to_dict()`` and show themselves in a notebook;
``rh.svg(result)`` and ``rh.draw(result)`` are their diagrams. What cannot be known is refused, never guessed:

>>> rh.combine(rh.read_reaction("H2O(l) -> H2O(g)"), sheet.known)  # doctest: +ELLIPSIS
Traceback (most recent call last):
    ...
routeheat.errors.OutOfReach: ...

May import: everything below it; heavy libraries are imported where they are used.
"""

from routeheat.chem.route import Route, Sheet
from routeheat.draw import draw, svg
from routeheat.errors import (
    Fault,
    FormulaError,
    OutOfReach,
    RouteError,
    RouteheatError,
    SheetFaults,
    UnitError,
    UnknownName,
)
from routeheat.hess.combination import Combination, alternatives, combine
from routeheat.hess.reach import Refusal
from routeheat.notation.code import read_reaction, row
from routeheat.notation.write import write as write_sheet
from routeheat.process.compare import Comparison, compare_routes
from routeheat.process.profile import Profile, profile
from routeheat.process.profile_views import step_ladder
from routeheat.process.sheet import check_sheet, read_sheet

__all__ = [
    "Combination",
    "Comparison",
    "Fault",
    "FormulaError",
    "OutOfReach",
    "Profile",
    "Refusal",
    "Route",
    "RouteError",
    "RouteheatError",
    "Sheet",
    "SheetFaults",
    "UnitError",
    "UnknownName",
    "alternatives",
    "check_sheet",
    "combine",
    "compare_routes",
    "draw",
    "profile",
    "read_reaction",
    "read_sheet",
    "row",
    "step_ladder",
    "svg",
    "write_sheet",
]
__version__ = "0.1.0"
