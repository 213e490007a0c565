"""Plain shapes that every result renders through.

What lives here: :mod:`table` and :mod:`ladder` (shapes without behaviour of their own), :mod:`markup` (text with
subscripts), :mod:`numbers` (how numbers and uncertainties are written), and the renderers :mod:`text` and :mod:`html`.
May import: :mod:`routeheat.units`, :mod:`routeheat.errors` and the standard library.
"""
