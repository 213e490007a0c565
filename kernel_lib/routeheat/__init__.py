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

The public names stand in ``__init__.pyi``; each is imported when it is first used (lazy-loader, Scientific Python
SPEC 1). May import: everything below it.
"""

import lazy_loader

from routeheat._version import __version__ as __version__

__getattr__, __dir__, __all__ = lazy_loader.attach_stub(__name__, __file__)
