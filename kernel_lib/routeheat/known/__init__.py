"""Known heats: the table of species that ships with the package, and how it is searched.

What lives here: the table and its records (:mod:`table`), heat capacities (:mod:`heat_capacity`), the search
(:mod:`lookup`), and the strict adapter to one general reference library behind the extra ``data``
(:mod:`property_data`).
May import: :mod:`routeheat.notation`, :mod:`routeheat.chem`, :mod:`routeheat.present`, :mod:`routeheat.units`,
:mod:`routeheat.errors` and the standard library; the reference library inside the functions that need it.
"""
