"""Results written to files that other programs open.

May import: everything below it, from :mod:`routeheat.draw` down.
"""
