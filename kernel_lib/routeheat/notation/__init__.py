"""Typed text to chemistry and back: tokens with spans, a recursive-descent grammar, faults with a caret.

Nothing typed is ever evaluated. Every fault of a text is collected with its line, column, reason and repair, and what
can be read is still built. May import: :mod:`routeheat.chem`, :mod:`routeheat.present`, :mod:`routeheat.units`,
:mod:`routeheat.errors`.
"""
