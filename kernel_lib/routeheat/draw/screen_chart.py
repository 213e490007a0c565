"""A chart as a plotly figure in its own units, to explore and zoom in a notebook."""

from __future__ import annotations

from typing import Any

from routeheat.draw.chart import PLOTLY_SYMBOLS, Chart, Point, Rule, Ruler, shade
from routeheat.draw.geometry import TextBox
from routeheat.draw.looks import STATIC
from routeheat.draw.screen_text import FONT, html, plotly_text, px

_SIZES = {"ring": 9, "disc": 10, "diamond": 13, "square": 11, "triangle": 13, "post": 14}


def chart_data(chart: Chart) -> tuple[list[dict[str, Any]], dict[str, Any]]:
    """Traces and layout; horizontal places are values, upright ones too where the chart has an upright axis."""
    upright = chart.upright or Ruler(0.0, 1.0)
    traces = [_rule(rule, chart.across, upright) for rule in chart.rules]
    traces += [_point(point, chart, upright) for point in chart.points]
    return traces, _layout(chart, upright)


def _layout(chart: Chart, upright: Ruler) -> dict[str, Any]:
    hidden = {"visible": False}
    return {
        "template": {},
        "width": round(chart.width),
        "height": round(chart.height),
        "margin": {"l": 0, "r": 0, "t": 0, "b": 0, "pad": 0},
        "paper_bgcolor": "#ffffff",
        "plot_bgcolor": "#ffffff",
        "font": {"family": FONT, "size": 12.5, "color": STATIC.ink},
        "showlegend": False,
        "hovermode": "closest",
        "hoverlabel": {"align": "left", "bgcolor": "#ffffff", "font": {"color": STATIC.ink}},
        "xaxis": {**hidden, "range": [chart.across.value(0.0), chart.across.value(chart.width)]},
        "yaxis": {**hidden, "range": [upright.value(chart.height), upright.value(0.0)]},
        "annotations": [_annotation(box, chart, upright) for box in chart.texts],
    }


def _rule(rule: Rule, across: Ruler, upright: Ruler) -> dict[str, Any]:
    dash = ",".join(f"{px(part)}px" for part in rule.dash) or "solid"
    return {
        "type": "scatter", "mode": "lines", "hoverinfo": "skip",
        "x": [across.value(x) for x, _ in rule.points],
        "y": [upright.value(y) for _, y in rule.points],
        "line": {
            "color": STATIC.muted if rule.muted else shade(rule.series, STATIC.ink), "width": rule.width, "dash": dash,
        },
    }  # fmt: skip


def _point(point: Point, chart: Chart, upright: Ruler) -> dict[str, Any]:
    ink = shade(point.series, STATIC.ink)
    value = chart.across.value(point.x)
    trace: dict[str, Any] = {
        "type": "scatter", "mode": "markers", "x": [value], "y": [upright.value(point.y)],
        "marker": {"symbol": PLOTLY_SYMBOLS[point.look], "size": _SIZES[point.look], "color": ink,
                   "line": {"width": 1.6, "color": ink}},
    }  # fmt: skip
    if point.whisker:
        half = chart.across.value(point.whisker[1]) - value
        trace["error_x"] = {
            "type": "data", "array": [half], "color": ink, "thickness": 1.2, "width": 6 if point.complete else 0,
        }  # fmt: skip
    if point.band is None:
        return trace | {"hoverinfo": "skip"}
    hover = chart.bands[point.band].hover
    first = (point.hover,) if point.hover else ()
    return trace | {"hoverinfo": "text", "hovertext": "<br>".join(plotly_text(line[:400]) for line in (*first, *hover))}


def _annotation(box: TextBox, chart: Chart, upright: Ruler) -> dict[str, Any]:
    x = {"start": box.x, "middle": box.x + box.w / 2, "end": box.x + box.w}[box.anchor]
    text = html(box.rich)
    return {
        "xref": "x", "yref": "y", "x": chart.across.value(x), "y": upright.value(box.y + box.h / 2),
        "text": f"<b>{text}</b>" if box.bold else text,
        "xanchor": {"start": "left", "middle": "center", "end": "right"}[box.anchor],
        "yanchor": "middle", "showarrow": False, "borderpad": 0, "textangle": -90 if box.rotated else 0,
        "font": {"size": box.size, "color": STATIC.muted if box.kind == "note" else STATIC.ink},
    }  # fmt: skip
