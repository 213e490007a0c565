"""The same geometry as a plotly figure, in units of heat, to explore and zoom in a notebook."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from routeheat.draw.arrange import Drawing, arrange
from routeheat.draw.chart import Chart
from routeheat.draw.geometry import ArrowMark, Geometry, Line, TextBox
from routeheat.draw.looks import PLOTLY_DASHES, SERIES, STATIC, cycle
from routeheat.draw.screen_chart import chart_data
from routeheat.draw.screen_text import FONT, html, plotly_text, px

if TYPE_CHECKING:
    from plotly.graph_objects import Figure

_WIDTHS = {"step": 2.0, "known": 2.0, "side": 1.1, "direct": 4.0}
_SYMBOLS = ("arrow", "arrow-wide")
"""Heads whose tip, not whose middle, stands at the level."""


def figure(drawing: Drawing) -> Figure:
    """The diagram as a :class:`plotly.graph_objects.Figure` with explicit size; equal shapes give equal JSON."""
    import plotly.graph_objects as go

    geometry = arrange(drawing)
    if isinstance(geometry, Chart):
        points, around = chart_data(geometry)
        return go.Figure(data=points, layout=around, skip_invalid=False)
    traces = _levels(geometry)
    traces += [_arrow(arrow, geometry) for arrow in geometry.arrows]
    traces += _whiskers(geometry)
    return go.Figure(data=traces, layout=_layout(geometry), skip_invalid=False)


def _layout(geometry: Geometry) -> dict[str, Any]:
    axis, scale = geometry.axis, geometry.scale
    return {
        # an empty template keeps the figure the same whatever the reader's defaults are
        "template": {},
        "width": round(geometry.width),
        "height": round(geometry.height),
        "margin": {
            "l": axis.x, "r": px(geometry.width - axis.x_right), "t": px(axis.y_top),
            "b": px(geometry.height - axis.y_bottom), "pad": 0,
        },
        "paper_bgcolor": "#ffffff",
        "plot_bgcolor": "#ffffff",
        "font": {"family": FONT, "size": 12.5, "color": STATIC.ink},
        "showlegend": False,
        "hovermode": "closest",
        "hoverlabel": {"align": "left", "bgcolor": "#ffffff", "font": {"color": STATIC.ink}},
        "xaxis": {"visible": False, "range": [axis.x, px(axis.x_right)]},
        "yaxis": {
            "range": [scale.heat(axis.y_bottom), scale.heat(axis.y_top)],
            "tickmode": "array",
            "tickvals": [scale.heat(tick.y) for tick in axis.ticks],
            "ticktext": [plotly_text(tick.text) for tick in axis.ticks],
            "ticks": "outside", "ticklen": 5, "showline": True, "linecolor": STATIC.ink, "tickcolor": STATIC.ink,
            "showgrid": False, "zeroline": True, "zerolinecolor": "#b0b0b0", "zerolinewidth": 1,
            "title": {"text": html(axis.title), "standoff": 8, "font": {"size": 13.5}},
        },
        "annotations": [_annotation(box, geometry) for box in geometry.texts if box.kind not in ("axis", "tick")],
        "shapes": [
            *(_shape(leader, geometry) for leader in geometry.leaders),
            *(_sample(key, geometry) for key in geometry.keys),
        ],
    }  # fmt: skip


def _levels(geometry: Geometry) -> list[dict[str, Any]]:
    """Carriers as one broken line for each colour."""
    groups: dict[int | None, list[Line]] = {}
    for line in geometry.carriers:
        groups.setdefault(line.series, []).append(line)
    return [
        {
            "type": "scatter", "mode": "lines", "hoverinfo": "skip",
            "x": [x for line in lines for x in (px(line.x0), px(line.x1), None)],
            "y": [y for line in lines for y in (geometry.scale.heat(line.y0), geometry.scale.heat(line.y1), None)],
            "line": {"color": STATIC.ink if series is None else SERIES[cycle(series)], "width": 1.0},
        }
        for series, lines in groups.items()
    ]  # fmt: skip


def _arrow(arrow: ArrowMark, geometry: Geometry) -> dict[str, Any]:
    """One arrow: a line hovered anywhere along it, a head whose tip is at the level."""
    scale = geometry.scale
    colour = SERIES[cycle(arrow.series)]
    start, end = scale.heat(arrow.y0), scale.heat(arrow.y1)
    count = 9
    levels = [start + (end - start) * part / (count - 1) for part in range(count)]
    symbol = "circle" if arrow.y0 == arrow.y1 else _SYMBOLS[arrow.series % 2] if geometry.overlay else "arrow"
    head = 12 if arrow.role == "direct" else 8 if arrow.role == "side" else 10
    dash = PLOTLY_DASHES[cycle(arrow.series)] if geometry.overlay else "solid"
    return {
        "type": "scatter",
        "name": plotly_text(arrow.label),
        "mode": "lines+markers" if arrow.entered else "lines",
        "x": [px(arrow.x)] * count,
        "y": levels,
        "line": {
            "color": colour, "width": _WIDTHS[arrow.role] if arrow.entered else 2.2,
            "dash": dash if arrow.entered else "dot",
        },
        "marker": {
            "symbol": symbol if arrow.whisker else f"{symbol}-open",
            "size": [0] * (count - 1) + [head],
            "color": colour,
            "angle": 180 if end < start and symbol != "circle" else 0,
            "line": {"width": 1.2, "color": colour},
            "opacity": 1,
        },
        "hoverinfo": "text",
        "hovertext": "<br>".join(plotly_text(line[:400]) for line in arrow.hover),
    }  # fmt: skip


def _whiskers(geometry: Geometry) -> list[dict[str, Any]]:
    """Error bars beside the heads, one trace per column and kind; a lower bound has no caps."""
    groups: dict[tuple[int, bool], list[tuple[float, float, float]]] = {}
    for arrow in geometry.arrows:
        if arrow.whisker:
            low, high = (geometry.scale.heat(y) for y in arrow.whisker)
            point = (px(arrow.whisker_x), (low + high) / 2, (high - low) / 2)
            groups.setdefault((arrow.series, arrow.complete), []).append(point)
    return [
        {
            "type": "scatter", "mode": "markers", "x": [x for x, _, _ in points], "y": [y for _, y, _ in points],
            "marker": {"size": 0, "color": SERIES[cycle(series)], "opacity": 0}, "hoverinfo": "skip",
            "error_y": {
                "type": "data", "array": [half for _, _, half in points], "color": SERIES[cycle(series)],
                "thickness": 1.1, "width": 4 if complete else 0,
            },
        }
        for (series, complete), points in groups.items()
    ]  # fmt: skip


def _annotation(box: TextBox, geometry: Geometry) -> dict[str, Any]:
    """Texts in the plot stand in units of heat and move with it; those around it stand still."""
    inside = box.kind in ("caption", "label", "level")
    x = {"start": box.x, "middle": box.x + box.w / 2, "end": box.x + box.w}[box.anchor]
    y = box.y + box.h / 2
    text = html(box.rich)
    place: dict[str, Any] = (
        {"xref": "x", "yref": "y", "x": px(x), "y": geometry.scale.heat(y)}
        if inside
        else {"xref": "paper", "yref": "paper", "x": _paper_x(x, geometry), "y": _paper_y(y, geometry)}
    )
    return place | {
        "text": f"<b>{text}</b>" if box.bold else text,
        "xanchor": {"start": "left", "middle": "center", "end": "right"}[box.anchor],
        "yanchor": "middle",
        "showarrow": False,
        "borderpad": 0,
        "font": {"size": box.size, "color": STATIC.muted if box.kind == "note" else STATIC.ink},
    }


def _shape(line: Line, geometry: Geometry) -> dict[str, Any]:
    return {
        "type": "line", "xref": "x", "yref": "y", "x0": px(line.x0), "x1": px(line.x1),
        "y0": geometry.scale.heat(line.y0), "y1": geometry.scale.heat(line.y1),
        "line": {"color": STATIC.muted, "width": 0.7},
    }  # fmt: skip


def _sample(key: Line, geometry: Geometry) -> dict[str, Any]:
    index = cycle(key.series or 0)
    return {
        "type": "line", "xref": "paper", "yref": "paper", "x0": _paper_x(key.x0, geometry),
        "x1": _paper_x(key.x1, geometry), "y0": _paper_y(key.y0, geometry), "y1": _paper_y(key.y1, geometry),
        "line": {"color": SERIES[index], "width": 2, "dash": PLOTLY_DASHES[index]},
    }  # fmt: skip


def _paper_x(x: float, geometry: Geometry) -> float:
    axis = geometry.axis
    return round((x - axis.x) / (axis.x_right - axis.x), 6)


def _paper_y(y: float, geometry: Geometry) -> float:
    axis = geometry.axis
    return round((axis.y_bottom - y) / (axis.y_bottom - axis.y_top), 6)
