"""Results kept as readable JSON and checked when they are calculated again.

In code and in notebooks: ``rh.reference("routes", comparison, store="references")`` keeps the result the first time
and checks it afterwards; what moved beyond the tolerance raises :class:`~routeheat.errors.ReferenceMoved`, with the
rows of the sheet whose edit explains it. Commit the folder.

In tests: the pytest plugin (:mod:`routeheat.rerun.plugin`, loaded by pytest where routeheat is installed) has the
fixture ``heat_reference``, which keeps references beside the test, and the option ``--routeheat-refresh``, which keeps
the present results instead of checking them::

    def test_routes(heat_reference):
        heat_reference("routes", rh.compare_routes(rh.read_sheet(SHEET).routes))

In notebooks under nbval: put ``rh.reference(…)`` in a cell, run the notebook twice (the first run keeps, the second
says that the result agrees) and save it. Then ``pytest --nbval --nbval-current-env -p no:cacheprovider notebooks``
fails when a result moves, also where the printed digits do not change; with ``--routeheat-refresh`` the kernel keeps
the present results. Widgets and pictures need no reference: a reference holds the numbers behind them.

Two environment variables do the same without pytest: ``ROUTEHEAT_REFRESH=1`` refreshes; where ``CI`` is set, a
reference that is missing is an error, so that a check that never ran cannot pass.

May import: everything below it, from :mod:`routeheat.report` down; pytest in :mod:`routeheat.rerun.plugin` alone.
"""
