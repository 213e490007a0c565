"""What a chemist types, as exact records: formulas, species, reactions, rows with heats, steps, routes, a sheet.

Exact things (stoichiometry, coefficients) are fractions; measured things (heats) are data with an uncertainty, and a
sum of heats remembers which data it is made of. Nothing here reads text, searches combinations or runs a route.
May import: :mod:`routeheat.present`, :mod:`routeheat.units`, :mod:`routeheat.errors`.
"""
