"""The route desk: one typed sheet, and views that answer questions about it while it is typed."""

from __future__ import annotations

import os
from typing import TYPE_CHECKING, Any

from routeheat import Comparison, Fault, RouteheatError, SheetFaults, UnknownName, compare_routes, draw
from routeheat.chem.route import Sheet
from routeheat.notation.faults import render
from routeheat_widgets import _twin
from routeheat_widgets._core import CHOICES, DeskCore
from routeheat_widgets._file import FileState, SheetFile
from routeheat_widgets._payload import view_named
from routeheat_widgets.routes import per_of

if TYPE_CHECKING:
    from plotly.graph_objects import Figure

_KEYWORDS = ("text", "path", "view", "per", "height")
_VIEW_MIME = "application/vnd.jupyter.widget-view+json"


class RouteDesk(DeskCore):
    """A route sheet with its views, side by side, alive while it is typed.

    ``RouteDesk(text="…")`` holds a text; ``RouteDesk(path="routes.txt")`` a UTF-8 file, saved on every edit. Safe to
    use from several threads. Observers of :attr:`payload` run while the desk is locked: they may use the desk, but
    must not wait for another thread that does.
    """

    def __init__(
        self,
        *,
        text: str | None = None,
        path: str | os.PathLike[str] | None = None,
        view: str = "routes",
        per: str = "mol",
        height: int = 600,
        **unknown: object,
    ) -> None:
        """``view`` is ``routes``, ``steps``, ``heat``, ``known``, ``measure``, ``scale`` or ``typed``; ``per`` the
        basis of the routes (``mol``, ``kg``, ``12 kg``); ``height`` the height of the desk in px.

        Raises :class:`~routeheat.errors.UnknownName` for any other keyword, ``OSError`` when the file cannot be read,
        :class:`~routeheat.errors.RouteheatError` when it is no UTF-8 text. Faults in the text are shown, not raised.
        """
        for name in unknown:
            raise UnknownName("keyword of RouteDesk", name, _KEYWORDS)
        if text is not None and path is not None:
            raise TypeError("a desk holds a text or a file: give text=… or path=…, not both")
        view_named(view)
        file = None if path is None else SheetFile(path)
        typed = file.read() if file is not None else text or ""
        super().__init__(text=typed, file=file, view=view, options=_basis(per), height=height)

    @property
    def text(self) -> str:
        """The typed text. Setting it redraws the desk and saves the file; faults are shown, never raised."""
        return self._wanted.text

    @text.setter
    def text(self, text: str) -> None:
        if not isinstance(text, str):
            raise TypeError(f"the text of a desk is a str, not {type(text).__name__}")
        self._set_text(text)
        state = self._file_state
        if state is not None and state.problem is not None:
            raise state.problem

    @property
    def sheet(self) -> Sheet:
        """The sheet that the text says; raises :class:`~routeheat.errors.SheetFaults` when it has faults."""
        model = self._current()
        if model.faults:
            raise SheetFaults(model.faults, render(model.text, model.faults))
        return model.sheet

    @property
    def faults(self) -> tuple[Fault, ...]:
        """Everything wrong with the text, in its order; empty when it is healthy."""
        return self._current().faults

    @property
    def comparison(self) -> Comparison:
        """All routes of the sheet side by side, on the basis chosen on the desk.

        Raises :class:`~routeheat.errors.SheetFaults` when the text has faults, and what
        :func:`~routeheat.process.compare.compare_routes` raises.
        """
        return compare_routes(self.sheet.routes, per=per_of(self._wanted.options))

    @property
    def view(self) -> str:
        """Key of the shown view, as in :meth:`__init__`."""
        return self._wanted.view

    @view.setter
    def view(self, key: str) -> None:
        self._change(view=view_named(key).key)

    def show(self, view: str, **options: str) -> None:
        """Show a view with its choices, as a reader would choose them: ``desk.show("routes", per="kg")``.

        Raises :class:`~routeheat.errors.UnknownName` for an unknown view or choice.
        """
        for name in options:
            if name not in CHOICES:
                raise UnknownName("choice", name, CHOICES)
        if "per" in options:
            options |= _basis(options["per"])
        self._change(view=view_named(view).key, choices=options)

    @property
    def code(self) -> str:
        """Code that makes the shown view again in a cell; empty while a broken line is stood in for."""
        with self._work:
            return str(self._shown.content["code"])

    @property
    def last_error(self) -> Exception | None:
        """The last thing that went wrong on the desk itself; faults of the text are in :attr:`faults`."""
        return self._last_error

    @property
    def file_state(self) -> FileState | None:
        """Where the text stands with respect to its file; ``None`` without a file."""
        return self._file_state

    def figure(self) -> Figure:
        """The shown diagram as a plotly figure; raises :class:`~routeheat.errors.RouteheatError` without a diagram."""
        picture = self._shown.picture
        if picture is None or picture.drawn is None:
            raise RouteheatError(f"the view {self.view!r} shows no diagram now")
        return draw(picture.drawn)

    def __repr__(self) -> str:
        return _twin.summary(self._current())

    def _page(self) -> str:
        with self._work:
            return _twin.static_page(self._model, self._shown.picture, view_named(self.view).question)

    def _live(self) -> dict[str, Any]:
        """What a page with a kernel shows; nothing once the desk is closed."""
        if self._closed:
            return {}
        return {_VIEW_MIME: {"version_major": 2, "version_minor": 0, "model_id": self.model_id}}

    def _repr_mimebundle_(self, **_kwargs: object) -> tuple[dict[str, Any], dict[str, Any]]:
        """The live desk for a notebook with a kernel, the shown view as a page for one without."""
        return {"text/plain": repr(self), "text/html": self._page(), **self._live()}, {}

    def _ipython_display_(self, **_kwargs: object) -> None:
        """The live desk, and the page as an output of its own.

        A viewer that knows widgets never looks at the other forms in the same output, even when it has no kernel and
        shows an error; the page's style hides the second output while the first is alive.
        """
        import IPython.display

        publish: Any = IPython.display.publish_display_data
        if not self._closed:
            publish({"text/plain": repr(self), **self._live()})
        publish({"text/plain": repr(self), "text/html": self._page()})

    def close(self) -> None:
        """Take the desk off every page and let go of everything; text, sheet and comparison stay readable."""
        if self._closed:
            return
        with self._work, self._lock:
            self._closed = True
            layout = self.layout
            self._figure.close()
            self.on_msg(self._receive, remove=True)
            self.unobserve_all()
            super().close()
            layout.close()


def _basis(per: str) -> dict[str, str]:
    """The options that say a basis typed as the library takes it."""
    if not isinstance(per, str):
        raise TypeError(f'per is a text such as "kg" or "12 kg", not {type(per).__name__}')
    return {"per": per} if per in ("mol", "kg", "batch") else {"per": "batch", "batch": per}
