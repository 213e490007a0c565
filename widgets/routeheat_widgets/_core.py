"""How a desk changes: what is asked for, computed, shown and saved, in every thread that asks.

The page sends messages (an edit, a choice); the kernel answers with one synced dictionary, :attr:`DeskCore.payload`.
Nothing else is shared with the page, so what the page shows is always one whole state of one text. Every change makes
the next turn; what was computed for an earlier turn is dropped.
"""

from __future__ import annotations

import threading
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from functools import cache
from importlib.resources import files
from typing import Any

import anywidget
import traitlets

from routeheat import RouteheatError, UnknownName
from routeheat.present.html import stylesheet
from routeheat.process.cautions import SHORT
from routeheat_widgets._export import Taken, take
from routeheat_widgets._figure import DeskFigure
from routeheat_widgets._file import FileState, SheetFile
from routeheat_widgets._model import DeskModel, clean_text, read_model
from routeheat_widgets._moved import MOVABLE
from routeheat_widgets._payload import VIEWS, Shown, sheet_content, view_content, view_named
from routeheat_widgets._subshell import release

_SCRIPTS = ("editor.js", "take.js", "controls.js", "page.js", "desk.js")
CHOICES = ("route", "target", "show", "per", "batch", "product", "known", "of", "attainable", "step", "scale", *MOVABLE)
"""Names of what a reader can choose above the views."""
_FIRST_WIDTH = 640.0
_NARROWEST, _WIDEST = 280.0, 2000.0
"""Widths in px between which the page may ask for a diagram."""
_MOST_CLIENTS = 16
_NO_FILE = {"kind": "none", "message": "text of this notebook session, not in a file"}


@cache
def script() -> str:
    """The parts of the page's script, in a fixed order, as one module without imports."""
    folder = files("routeheat_widgets")
    return "\n".join(folder.joinpath(name).read_text(encoding="utf-8") for name in _SCRIPTS)


@cache
def style() -> str:
    """The rules of the page: those of every table, then the desk's own."""
    own = files("routeheat_widgets").joinpath("desk.css").read_text(encoding="utf-8")
    return f"{stylesheet()}\n{own}"


def _chosen(now: Mapping[str, str], choices: Mapping[str, str]) -> dict[str, str]:
    """The options with ``choices``; values moved in one step are not carried to another."""
    kept = dict(now)
    if choices.get("step", now.get("step")) != now.get("step"):
        kept = {key: value for key, value in kept.items() if key not in MOVABLE}
    return {**kept, **choices}


@dataclass(frozen=True, slots=True)
class Wanted:
    """What the desk is asked to show; every change makes the next one."""

    turn: int
    text: str
    revision: int
    """Number of the text: the first is 1, every accepted edit adds one."""
    view: str
    options: Mapping[str, str] = field(default_factory=dict)
    width: float = _FIRST_WIDTH


class DeskCore(anywidget.AnyWidget):
    """The widget behind :class:`~routeheat_widgets.desk.RouteDesk`."""

    _esm = script()
    _css = style()
    _closed = True  # until it is made: a desk that was refused is collected like a closed one
    payload = traitlets.Dict(help="What the page shows: one whole state, JSON-safe.").tag(sync=True)

    def __init__(
        self, *, text: str, file: SheetFile | None, view: str, options: Mapping[str, str], height: int
    ) -> None:
        self._lock = threading.RLock()
        """Guards the fields below; never held while something is computed."""
        self._work = threading.RLock()
        """One piece of work at a time: computing, saving, redrawing the figure. Taken before the lock."""
        self._file = file
        self._wanted = Wanted(0, clean_text(text), 1, view, options)
        self._height = height
        self._acks: dict[str, int] = {}
        self._stamp = 0
        self._error = ""
        self._last_error: Exception | None = None
        self._saved = self._wanted.text
        self._file_state = None if file is None else file.state()
        self._figure = DeskFigure()
        self._model, self._shown = self._compute(self._wanted, None, None)
        self._good = self._shown.content
        self._closed = False
        super().__init__(payload=self._compose())
        release(self.comm)
        self.on_msg(self._receive)

    # changes --------------------------------------------------------------------------------------------------------

    def _set_text(self, text: str) -> None:
        cleaned = clean_text(text)
        with self._lock:
            same = cleaned == self._wanted.text
        if same:
            with self._work, self._lock:
                self._publish()
        else:
            self._change(text=cleaned)

    def _change(self, *, choices: Mapping[str, str] | None = None, **fields: Any) -> None:
        """Ask for something else, compute it, and show it unless something newer was asked for meanwhile.

        ``fields`` are those of :class:`Wanted`; ``choices`` are added to its options.
        """
        with self._lock:
            if self._closed:
                raise RouteheatError("the desk is closed")
            if "text" in fields:
                fields["revision"] = self._wanted.revision + 1
            if choices is not None:
                fields["options"] = _chosen(self._wanted.options, choices)
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

    def _compute(
        self, wanted: Wanted, before: DeskModel | None, good: Mapping[str, Any] | None
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
            "caution": SHORT,
        }

    def _fail(self, problem: Exception) -> None:
        with self._lock:
            self._last_error = problem
            self._error = f"{type(problem).__name__}: {problem}"
            self._publish()

    # the file ---------------------------------------------------------------------------------------------------------

    def _save(self) -> None:
        """Save the newest text, once; called with the work lock held."""
        text = self._wanted.text
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
            text = file.take_file(self._wanted.text)
            self._saved = clean_text(text)
            self._set_text(text)
            self._set_file_state(file.state())

    def keep_desk_text(self) -> None:
        """Save the desk's text to the file; the file's own stays in a file beside it. Raises ``OSError``."""
        file = self._bound()
        with self._work:
            self._set_file_state(file.keep_desk(self._wanted.text))
            self._saved = self._wanted.text

    def _bound(self) -> SheetFile:
        if self._file is None:
            raise RouteheatError("this desk holds a text, not a file: make it with path=…")
        return self._file

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
        if key == "view":
            self._change(view=view_named(value).key)
        elif key == "moves":
            self._change(choices=dict.fromkeys(MOVABLE, ""))
        elif key in MOVABLE:
            self._change(choices={**self._step_shown(), key: value})
        elif key in CHOICES:
            self._change(choices={key: value})
        else:
            raise UnknownName("choice", key, CHOICES)

    def _step_shown(self) -> dict[str, str]:
        """The step whose values the page moves, so that they stay with it whatever is typed meanwhile."""
        with self._lock:
            controls = self._shown.content["controls"]
        return {item["key"]: item["value"] for item in controls if item["key"] == "step"}

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

    def _on_take(self, content: Mapping[str, Any]) -> None:
        """Answer the asking page with a file, or with the reason why there is none; nothing is saved."""
        answer = {"kind": "taken", "client": str(content["client"]), "serial": int(content["serial"])}
        try:
            found = self._take(content)
        except Exception as problem:
            self._answer({**answer, "error": str(problem).splitlines()[0] if str(problem) else type(problem).__name__})
            if not isinstance(problem, RouteheatError):
                raise
            return
        self._answer({**answer, "name": found.name, "mime": found.mime}, [found.data])

    def _take(self, content: Mapping[str, Any]) -> Taken:
        with self._work:
            model, picture, options = self._model, self._shown.picture, self._wanted.options
        width, index = str(content.get("width", "84 mm")), int(content.get("index", 0))
        return take(model, picture, options, str(content["what"]), str(content["form"]), width=width, index=index)

    def _answer(self, content: Mapping[str, Any], buffers: list[bytes] | None = None) -> None:
        try:
            self.send(content, buffers)
        finally:
            release(self.comm)


_HANDLERS: dict[str, Callable[[DeskCore, Mapping[str, Any]], None]] = {
    "edit": DeskCore._on_edit,
    "option": DeskCore._on_option,
    "width": DeskCore._on_width,
    "file": DeskCore._on_file,
    "figure": DeskCore._on_figure,
    "take": DeskCore._on_take,
}
