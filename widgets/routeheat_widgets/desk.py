"""The route desk: one typed sheet, and views that answer questions about it while it is typed.

The page sends messages (an edit, a choice); the kernel answers with one synced dictionary, :attr:`RouteDesk.payload`.
Nothing else is shared with the page, so what the page shows is always one whole state of one text.
"""

from __future__ import annotations

import os
import threading
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from functools import cache
from importlib.resources import files
from typing import TYPE_CHECKING, Any

import anywidget
import traitlets

from routeheat import Comparison, Fault, RouteheatError, SheetFaults, UnknownName, compare_routes, draw
from routeheat.chem.route import Sheet
from routeheat.notation.faults import render
from routeheat.present.html import stylesheet
from routeheat_widgets import _twin
from routeheat_widgets._figure import DeskFigure
from routeheat_widgets._file import FileState, SheetFile
from routeheat_widgets._model import DeskModel, clean_text, read_model
from routeheat_widgets._payload import VIEWS, Shown, sheet_content, view_content, view_named
from routeheat_widgets._subshell import release
from routeheat_widgets.routes import per_of

if TYPE_CHECKING:
    from plotly.graph_objects import Figure

_SCRIPTS = ("editor.js", "page.js", "desk.js")
_OPTIONS = ("view", "route", "target", "show", "per", "batch", "product")
_KEYWORDS = ("text", "path", "view", "per", "height")
_FIRST_WIDTH = 640.0
_NARROWEST, _WIDEST = 280.0, 2000.0
"""Widths in px between which the page may ask for a diagram."""
_MOST_CLIENTS = 16
_NO_FILE = {"kind": "none", "message": "text of this notebook session, not in a file"}
_VIEW_MIME = "application/vnd.jupyter.widget-view+json"


@cache
def _script() -> str:
    """The parts of the page's script, in a fixed order, as one module without imports."""
    folder = files("routeheat_widgets")
    return "\n".join(folder.joinpath(name).read_text(encoding="utf-8") for name in _SCRIPTS)


@cache
def _style() -> str:
    own = files("routeheat_widgets").joinpath("desk.css").read_text(encoding="utf-8")
    return f"{stylesheet()}\n{own}"


@dataclass(frozen=True, slots=True)
class _Wanted:
    """What the desk is asked to show; every change makes the next one."""

    turn: int
    text: str
    revision: int
    view: str
    options: Mapping[str, str] = field(default_factory=dict)
    width: float = _FIRST_WIDTH


class RouteDesk(anywidget.AnyWidget):
    """A route sheet with its views, side by side, alive while it is typed.

    ``RouteDesk(text="…")`` holds a text; ``RouteDesk(path="routes.txt")`` a UTF-8 file, saved on every edit. Safe to
    use from several threads. Observers of :attr:`payload` run while the desk is locked: they may use the desk, but
    must not wait for another thread that does.
    """

    _esm = _script()
    _css = _style()
    _closed = True  # until it is made: a desk that was refused is collected like a closed one
    payload = traitlets.Dict(help="What the page shows: one whole state, JSON-safe.").tag(sync=True)

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
        """``view`` is ``routes``, ``steps``, ``heat`` or ``typed``; ``per`` the basis of the routes (``mol``, ``kg``,
        ``12 kg``); ``height`` the height of the desk in px.

        Raises :class:`~routeheat.errors.UnknownName` for any other keyword, ``OSError`` when the file cannot be read,
        :class:`~routeheat.errors.RouteheatError` when it is no UTF-8 text. Faults in the text are shown, not raised.
        """
        for name in unknown:
            raise UnknownName("keyword of RouteDesk", name, _KEYWORDS)
        if text is not None and path is not None:
            raise TypeError("a desk holds a text or a file: give text=… or path=…, not both")
        view_named(view)
        self._lock = threading.RLock()
        """Guards the fields below; never held while something is computed."""
        self._work = threading.RLock()
        """One piece of work at a time: computing, saving, redrawing the figure. Taken before the lock."""
        self._file = None if path is None else SheetFile(path)
        typed = self._file.read() if self._file is not None else text or ""
        self._wanted = _Wanted(0, clean_text(typed), 1, view, _basis(per))
        self._height = height
        self._acks: dict[str, int] = {}
        self._stamp = 0
        self._error = ""
        self._last_error: Exception | None = None
        self._saved = self._wanted.text
        self._file_state = None if self._file is None else self._file.state()
        self._figure = DeskFigure()
        self._model, self._shown = self._compute(self._wanted, None, None)
        self._good = self._shown.content
        self._closed = False
        super().__init__(payload=self._compose())
        release(self.comm)
        self.on_msg(self._receive)

    # what the desk holds --------------------------------------------------------------------------------------------

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
        """Key of the shown view: ``routes``, ``steps``, ``heat`` or ``typed``."""
        return self._wanted.view

    @view.setter
    def view(self, key: str) -> None:
        self._change(view=view_named(key).key)

    def show(self, view: str, **options: str) -> None:
        """Show a view with its choices, as a reader would choose them: ``desk.show("routes", per="kg")``.

        Raises :class:`~routeheat.errors.UnknownName` for an unknown view or choice.
        """
        for name in options:
            if name not in _OPTIONS[1:]:
                raise UnknownName("choice", name, _OPTIONS[1:])
        if "per" in options:
            options |= _basis(options["per"])
        with self._lock:
            merged = {**self._wanted.options, **options}
        self._change(view=view_named(view).key, options=merged)

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

    # the file -------------------------------------------------------------------------------------------------------

    def look_at_file(self) -> FileState | None:
        """Notice whether someone else changed the file."""
        if self._file is None:
            return None
        with self._work:
            self._set_file_state(self._file.state())
        return self._file_state

    def take_file_text(self) -> None:
        """Show the file's text; the desk's own stays in a file beside it. Raises ``OSError``."""
        file = self._bound()
        with self._work:
            text = file.take_file(self.text)
            self._saved = clean_text(text)
            self._set_text(text)
            self._set_file_state(file.state())

    def keep_desk_text(self) -> None:
        """Save the desk's text to the file; the file's own stays in a file beside it. Raises ``OSError``."""
        file = self._bound()
        with self._work:
            self._set_file_state(file.keep_desk(self.text))
            self._saved = self.text

    def _bound(self) -> SheetFile:
        if self._file is None:
            raise RouteheatError("this desk holds a text, not a file: make it with path=…")
        return self._file

    def _save(self) -> None:
        """Save the newest text, once; called with the work lock held."""
        text = self.text
        if self._file is None or text == self._saved:
            return
        state = self._file.save(text)
        if state.problem is None:
            self._saved = text
        self._set_file_state(state)

    def _set_file_state(self, state: FileState) -> None:
        with self._lock:
            if state.problem is not None:
                self._last_error = state.problem
            if state != self._file_state:
                self._file_state = state
                self._publish()

    # changes --------------------------------------------------------------------------------------------------------

    def _set_text(self, text: str) -> None:
        cleaned = clean_text(text)
        with self._lock:
            same = cleaned == self._wanted.text
            revision = self._wanted.revision + 1
        if same:
            with self._work, self._lock:
                self._publish()
        else:
            self._change(text=cleaned, revision=revision)

    def _change(self, **fields: Any) -> None:
        """Ask for something else, compute it, and show it unless something newer was asked for meanwhile."""
        with self._lock:
            if self._closed:
                raise RouteheatError("the desk is closed")
            if "text" in fields:
                fields["revision"] = self._wanted.revision + 1
            wanted = self._wanted = replace(self._wanted, turn=self._wanted.turn + 1, **fields)
        with self._work:
            if wanted is not self._wanted:
                return
            try:
                model, shown = self._compute(wanted, self._model, self._good)
            except Exception as problem:
                self._fail(problem)
                raise
            with self._lock:
                if wanted is not self._wanted or self._closed:
                    return
                self._model, self._shown, self._error = model, shown, ""
                if shown.picture is not None:
                    self._good = shown.content
                self._publish()
            self._figure.update(shown.picture)
            self._save()

    def _compute(self, wanted: _Wanted, before: DeskModel | None, good: Mapping[str, Any] | None
                 ) -> tuple[DeskModel, Shown]:
        if before is not None and before.revision == wanted.revision:
            model = before
        else:
            model = read_model(wanted.text, wanted.revision, before)
        last = good if good is not None and good["view"] == wanted.view else None
        path = None if self._file is None else self._file.path
        return model, view_content(model, view_named(wanted.view), wanted.options, wanted.width, path, last)

    def _current(self) -> DeskModel:
        """The model of the newest text, whether or not it is shown yet."""
        with self._lock:
            model, wanted = self._model, self._wanted
        return model if model.text == wanted.text else read_model(wanted.text, wanted.revision, model)

    def _publish(self) -> None:
        if not self._closed:
            try:
                self.payload = self._compose()
            finally:
                release(self.comm)

    def _compose(self) -> dict[str, Any]:
        self._stamp += 1
        state = self._file_state
        return {
            **sheet_content(self._model),
            **self._shown.content,
            "stamp": self._stamp,
            "acks": dict(self._acks),
            "tabs": [[view.key, view.tab] for view in VIEWS.values()],
            "file": _NO_FILE if state is None else {"kind": state.kind, "message": state.message},
            "error": self._error,
            "figure": self._figure.model_id,
            "height": self._height,
            "caution": _twin.CAUTION,
        }

    def _fail(self, problem: Exception) -> None:
        with self._lock:
            self._last_error = problem
            self._error = f"{type(problem).__name__}: {problem}"
            self._publish()

    # messages from the page -----------------------------------------------------------------------------------------

    def _receive(self, _widget: object, content: Mapping[str, Any], _buffers: object) -> None:
        """Act on one message. Nothing it raises may vanish: a callback's exception reaches nobody, so it is shown."""
        try:
            handler = _HANDLERS.get(str(content.get("kind")))
            if handler is None:
                raise RouteheatError(f"the page sent an unknown message {content.get('kind')!r}")
            handler(self, content)
        except Exception as problem:
            self._fail(problem)

    def _on_edit(self, content: Mapping[str, Any]) -> None:
        with self._lock:
            client = str(content["client"])
            self._acks.pop(client, None)
            self._acks[client] = int(content["serial"])
            while len(self._acks) > _MOST_CLIENTS:
                del self._acks[next(iter(self._acks))]
        self._set_text(str(content["text"]))

    def _on_option(self, content: Mapping[str, Any]) -> None:
        key, value = str(content["key"]), str(content["value"])
        if key not in _OPTIONS:
            raise UnknownName("choice", key, _OPTIONS)
        if key == "view":
            self.view = value
            return
        with self._lock:
            merged = {**self._wanted.options, key: value}
        self._change(options=merged)

    def _on_width(self, content: Mapping[str, Any]) -> None:
        width = min(max(float(content["width"]), _NARROWEST), _WIDEST)
        if width != self._wanted.width:
            self._change(width=width)

    def _on_file(self, content: Mapping[str, Any]) -> None:
        {"look": self.look_at_file, "take": self.take_file_text, "keep": self.keep_desk_text}[str(content["what"])]()

    def _on_figure(self, content: Mapping[str, Any]) -> None:
        with self._work:
            if content["open"]:
                self._figure.open(self._shown.picture)
            else:
                self._figure.hide()
            with self._lock:
                self._publish()

    # how it is shown ------------------------------------------------------------------------------------------------

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


_HANDLERS: dict[str, Callable[[RouteDesk, Mapping[str, Any]], None]] = {
    "edit": RouteDesk._on_edit,
    "option": RouteDesk._on_option,
    "width": RouteDesk._on_width,
    "file": RouteDesk._on_file,
    "figure": RouteDesk._on_figure,
}


def _basis(per: str) -> dict[str, str]:
    """The options that say a basis typed as the library takes it."""
    if not isinstance(per, str):
        raise TypeError(f'per is a text such as "kg" or "12 kg", not {type(per).__name__}')
    return {"per": per} if per in ("mol", "kg", "batch") else {"per": "batch", "batch": per}
