"""Paints a geometry as standalone SVG text: no scripts, no ids, no markers, the same bytes every time."""

from __future__ import annotations

from routeheat.draw.arrange import Drawing, arrange
from routeheat.draw.chart import Chart
from routeheat.draw.decks import Stack
from routeheat.draw.geometry import ArrowMark, Geometry, Line, TextBox
from routeheat.draw.looks import (
    DASHES,
    DOUBLE,
    HEAD_HALF,
    HEAD_LENGTH,
    HEADS,
    INLINE,
    SERIES,
    STATIC,
    WIDTHS,
    Palette,
    cycle,
)
from routeheat.draw.svg_chart import chart_parts
from routeheat.draw.svg_parts import lines, opening, polygon, px, stroke, text_element
from routeheat.present.html import escape


def paint(geometry: Geometry | Chart, palette: Palette = INLINE) -> str:
    """The diagram as one ``<svg>`` element with explicit size, title, description and a focusable group per arrow."""
    first = opening(geometry.width, geometry.height, geometry.title, geometry.alt, palette)
    return "\n".join([*first, *_plot(geometry, palette), "</svg>"])


def paint_stack(figure: Stack, palette: Palette = STATIC) -> str:
    """A figure of fixed width, whose plots stand above each other, as one ``<svg>`` element."""
    parts = opening(figure.width, figure.height, figure.title, figure.alt, palette)
    for panel in figure.panels:
        parts += [f'<g transform="translate(0 {px(panel.y)})">', *_plot(panel.geometry, palette), "</g>"]
    return "\n".join([*parts, *(text_element(box, palette) for box in figure.texts), "</svg>"])


def _plot(geometry: Geometry | Chart, palette: Palette) -> list[str]:
    if isinstance(geometry, Chart):
        return chart_parts(geometry, palette)
    parts = _axis(geometry, palette)
    parts += [_carrier(line) for line in geometry.carriers]
    parts += [_leader(line, palette) for line in geometry.leaders]
    owned: dict[int, list[TextBox]] = {}
    for box in geometry.texts:
        if box.arrow is not None:
            owned.setdefault(box.arrow, []).append(box)
    for index, arrow in enumerate(geometry.arrows):
        parts.append(_arrow(arrow, owned.get(index, []), geometry.overlay, palette))
    for key in geometry.keys:
        parts += _key(key)
    parts += [text_element(box, palette) for box in geometry.texts if box.arrow is None]
    return parts


def static_svg(drawing: Drawing, *, width: float | None = None, height: float | None = None) -> str:
    """The diagram with fixed colours on white, for files and ``<img>``."""
    return paint(arrange(drawing, width=width, height=height), STATIC)


def _axis(geometry: Geometry, palette: Palette) -> list[str]:
    axis, zero = geometry.axis, geometry.scale.y_zero
    marks = "".join(f"M{px(axis.x - 5)} {px(tick.y)}h5" for tick in axis.ticks)
    return [
        f'<path class="rh-muted rh-zero" stroke="{palette.muted}" stroke-width="0.7" stroke-dasharray="1 3" '
        f'd="M{px(axis.x)} {px(zero)}H{px(axis.x_right)}"/>',
        f'<path class="rh-axis" stroke="currentColor" stroke-width="1" '
        f'd="M{px(axis.x)} {px(axis.y_bottom)}V{px(axis.y_top)}{marks}"/>',
    ]


def _carrier(line: Line) -> str:
    colour, kind = ("currentColor", "rh-carrier") if line.series is None else stroke(line.series, "rh-carrier")
    return (
        f'<path class="{kind}" stroke="{colour}" stroke-width="0.9" '
        f'd="M{px(line.x0)} {px(line.y0)}L{px(line.x1)} {px(line.y1)}"/>'
    )


def _leader(line: Line, palette: Palette) -> str:
    return (
        f'<path class="rh-muted rh-leader" stroke="{palette.muted}" stroke-width="0.8" '
        f'stroke-dasharray="1.5 1.5" d="M{px(line.x0)} {px(line.y0)}L{px(line.x1)} {px(line.y1)}"/>'
    )


def _key(key: Line) -> list[str]:
    series = key.series or 0
    colour, kind = stroke(series, "rh-key")
    dash = f' stroke-dasharray="{DASHES[cycle(series)]}"' if DASHES[cycle(series)] else ""
    tip = key.x1
    outline = [(tip - back * HEAD_LENGTH, key.y0 + across * HEAD_HALF) for across, back in HEADS[cycle(series)]]
    return [
        f'<path class="{kind}" stroke="{colour}" stroke-width="1.9"{dash} '
        f'd="M{px(key.x0)} {px(key.y0)}H{px(tip - HEAD_LENGTH)}"/>',
        f'<path class="{kind} rh-f{cycle(series)}" stroke="{colour}" fill="{colour}" stroke-width="0.8" '
        f'd="{polygon(outline)}"/>',
    ]


def _arrow(arrow: ArrowMark, texts: list[TextBox], overlay: bool, palette: Palette) -> str:
    line = "" if arrow.line is None else f' data-line="{arrow.line}"'
    parts = [
        f'<g class="rh-arrow" tabindex="0" data-label="{escape(arrow.label)}"{line} '
        f'data-column="{escape(arrow.column)}"><title>{lines(arrow.hover)}</title>'
    ]
    low, high = min(arrow.y0, arrow.y1), max(arrow.y0, arrow.y1)
    if palette.themed:
        parts.append(
            f'<path class="rh-hit rh-s{cycle(arrow.series)}" stroke="{SERIES[cycle(arrow.series)]}" '
            f'stroke-opacity="0" stroke-width="16" d="M{px(arrow.x)} {px(low - 3)}V{px(high + 3)}" '
            'pointer-events="stroke"/>'
        )
    parts += _shaft(arrow, overlay) if arrow.entered else [_gap(arrow)]
    if arrow.whisker:
        parts.append(_whisker(arrow, arrow.whisker))
    parts += [text_element(box, palette) for box in texts]
    return "".join([*parts, "</g>"])


def _shaft(arrow: ArrowMark, overlay: bool) -> list[str]:
    colour, kind = stroke(arrow.series, "rh-shaft")
    fill = colour if arrow.whisker else "none"
    filled = f" rh-f{cycle(arrow.series)}" if arrow.whisker else ""
    width = WIDTHS[arrow.role]
    length = abs(arrow.y1 - arrow.y0)
    if arrow.y0 == arrow.y1:
        return [
            f'<circle class="{kind}{filled}" cx="{px(arrow.x)}" cy="{px(arrow.y1)}" r="3" stroke="{colour}" '
            f'fill="{fill}" stroke-width="1.2"/>'
        ]
    thin = 0.78 if arrow.role == "side" else 1.25 if arrow.role == "direct" else 1.0
    # the head of a short arrow is flat and stays as wide, so that its direction can be seen
    head = min(HEAD_LENGTH * thin, max(length, 3.0))
    back = 1.0 if arrow.y1 < arrow.y0 else -1.0
    shape = HEADS[cycle(arrow.series) if overlay else 0]
    outline = [(arrow.x + across * HEAD_HALF * thin, arrow.y1 + back * part * head) for across, part in shape]
    base = arrow.y1 + back * head
    dash = DASHES[cycle(arrow.series)] if overlay else ""
    dashed = f' stroke-dasharray="{dash}"' if dash else ""
    parts = []
    if length > head:
        offsets = (-DOUBLE, DOUBLE) if arrow.role == "direct" else (0.0,)
        d = "".join(f"M{px(arrow.x + dx)} {px(arrow.y0)}V{px(base)}" for dx in offsets)
        parts.append(f'<path class="{kind}" stroke="{colour}" stroke-width="{width}"{dashed} d="{d}"/>')
    parts.append(
        f'<path class="{kind}{filled}" stroke="{colour}" fill="{fill}" stroke-width="1.1" stroke-linejoin="miter" '
        f'd="{polygon(outline)}"/>'
    )
    return parts


def _gap(arrow: ArrowMark) -> str:
    colour, kind = stroke(arrow.series, "rh-gap")
    return (
        f'<path class="{kind}" stroke="{colour}" stroke-width="2.2" stroke-linecap="round" stroke-dasharray="0 4.35" '
        f'd="M{px(arrow.x)} {px(arrow.y0)}V{px(arrow.y1)}"/>'
    )


def _whisker(arrow: ArrowMark, ends: tuple[float, float]) -> str:
    colour, kind = stroke(arrow.series, "rh-whisker")
    x, low, high = arrow.whisker_x, *ends
    caps = f"M{px(x - 3.5)} {px(low)}h7M{px(x - 3.5)} {px(high)}h7" if arrow.complete else ""
    dashed = "" if arrow.complete else ' stroke-dasharray="3 2"'
    return (
        f'<path class="{kind}" stroke="{colour}" stroke-width="1.1"{dashed} d="M{px(x)} {px(low)}V{px(high)}{caps}"/>'
    )
