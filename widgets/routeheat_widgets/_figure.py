"""The desk's one plotly figure: made when it is first asked for, then changed in place, never made again."""

from __future__ import annotations

from typing import Any

from routeheat.draw import draw
from routeheat_widgets._view import Picture


class DeskFigure:
    """A figure widget that follows the shown diagram while it is open. The desk calls it under its work lock."""

    def __init__(self) -> None:
        self._widget: Any = None
        self._open = False

    @property
    def model_id(self) -> str:
        """Id of the widget to show; empty when none is open."""
        return str(self._widget.model_id) if self._open and self._widget is not None else ""

    def open(self, picture: Picture | None) -> None:
        """Show the diagram of ``picture``, if it has one."""
        if picture is None or picture.drawn is None:
            return
        self._open = True
        if self._widget is None:
            import plotly.graph_objects as go

            self._widget = go.FigureWidget(draw(picture.drawn))
        else:
            self.update(picture)

    def hide(self) -> None:
        """Stop following; the widget is kept for the next time."""
        self._open = False

    def update(self, picture: Picture | None) -> None:
        """Change the open figure to the diagram of ``picture``; it stays as it is when there is none."""
        if not self._open or self._widget is None or picture is None or picture.drawn is None:
            return
        new = draw(picture.drawn)
        with self._widget.batch_update():
            if len(new.data) != len(self._widget.data):
                self._widget.data = ()
                self._widget.add_traces(new.data)
            else:
                for old, fresh in zip(self._widget.data, new.data, strict=True):
                    old.update(fresh.to_plotly_json(), overwrite=True)
            self._widget.layout = new.layout

    def close(self) -> None:
        """Let the widget go."""
        if self._widget is not None:
            self._widget.close()
            self._widget = None
        self._open = False
