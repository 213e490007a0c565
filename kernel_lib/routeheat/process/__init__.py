"""A route as a process: how often each step runs per mole of product, its heat, and two routes side by side.

What lives here: :mod:`links` (which step feeds which), :mod:`extents` (the exact linear system), :mod:`streams` (what
is bought and what leaves), :mod:`heats` (the heat of a step, typed or derived), :mod:`basis` (per mole, per kilogram,
per batch), :mod:`profile` and :mod:`compare` (the results). Nothing here reads a sheet or draws.
May import: :mod:`routeheat.hess`, :mod:`routeheat.known`, :mod:`routeheat.notation`, :mod:`routeheat.chem`,
:mod:`routeheat.present`, :mod:`routeheat.units`, :mod:`routeheat.errors`.
"""
