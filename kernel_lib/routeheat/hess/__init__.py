"""Hess's law: exact combinations of known rows, why there is none, and what would have to be known.

Exact elimination, the search for the shortest combination, its ledger, and the explanation of a target out of reach.
Nothing here reads text, draws, or runs a route.
May import: :mod:`routeheat.known`, :mod:`routeheat.notation`, :mod:`routeheat.chem`, :mod:`routeheat.present`,
:mod:`routeheat.units`, :mod:`routeheat.errors`.
"""
