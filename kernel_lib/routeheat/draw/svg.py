"""Paints a geometry as standalone SVG text: no scripts, no ids, no markers, the same bytes every time."""

from __future__ import annotations

from routeheat.draw.geometry import ArrowMark, Geometry, Line, TextBox
from routeheat.draw.layout import lay_out
from routeheat.draw.looks import DASHES, HEADS, INLINE, SERIES, STATIC, Palette, cycle
from routeheat.draw.metrics import run_size
from routeheat.present.html import escape
from routeheat.present.ladder import Ladder

FONT = "Arial, Helvetica, 'DejaVu Sans', sans-serif"
HEAD_LENGTH = 9.0
HEAD_HALF = 4.6
_WIDTHS = {"step": 1.9, "known": 1.9, "side": 1.0, "direct": 1.5}
_DOUBLE = 2.6
"""Half the distance in px between the two lines of a direct arrow."""
_BASELINE = 1.0
"""Distance in font sizes from the top of a line to its baseline."""
_DROP = 0.22
_RAISE = 0.36
"""Shifts of sub- and superscripts in font sizes."""


def paint(geometry: Geometry, palette: Palette = INLINE) -> str:
    """The diagram as one ``<svg>`` element with explicit size, title, description and a focusable group per arrow."""
    w, h = _n(geometry.width), _n(geometry.height)
    parts = [
        f'<svg xmlns="http://www.w3.org/2000/svg" class="rh-diagram" role="img" viewBox="0 0 {w} {h}" width="{w}" '
        f'height="{h}" font-family="{FONT}" fill="none" color="{palette.ink}">',
        f"<title>{escape(geometry.title)}</title><desc>{escape(geometry.alt)}</desc>",
    ]
    if palette.themed:
        parts.append(f"<style>{_theme(palette)}</style>")
    if palette.paper:
        parts.append(f'<rect width="{w}" height="{h}" fill="{palette.paper}"/>')
    parts += _axis(geometry, palette)
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
    parts += [_text(box, palette) for box in geometry.texts if box.arrow is None]
    parts.append("</svg>")
    return "\n".join(parts)


def static_svg(ladder: Ladder, *, width: float | None = None, height: float | None = None) -> str:
    """The diagram with fixed colours on white, for files and ``<img>``."""
    return paint(lay_out(ladder, width=width, height=height), STATIC)


def _theme(palette: Palette) -> str:
    rules = [
        f".rh-diagram{{color:var(--jp-ui-font-color1,{palette.ink})}}",
        f".rh-diagram .rh-muted{{stroke:var(--jp-ui-font-color2,{palette.muted})}}",
        f".rh-diagram .rh-note{{fill:var(--jp-ui-font-color2,{palette.muted})}}",
        ".rh-diagram .rh-arrow{cursor:pointer}",
        ".rh-diagram .rh-arrow:hover .rh-hit,.rh-diagram .rh-arrow:focus .rh-hit{stroke-opacity:0.18}",
        ".rh-diagram .rh-arrow:focus{outline:none}",
        ".rh-diagram .rh-arrow:focus-visible{outline:1.5px solid currentColor;outline-offset:2px}",
    ]
    for index, colour in enumerate(SERIES):
        name = f"var(--rh-series-{index},{colour})"
        rules.append(f".rh-diagram .rh-s{index}{{stroke:{name}}}.rh-diagram .rh-f{index}{{fill:{name}}}")
    return "".join(rules)


def _axis(geometry: Geometry, palette: Palette) -> list[str]:
    axis, zero = geometry.axis, geometry.scale.y_zero
    marks = "".join(f"M{_n(axis.x - 5)} {_n(tick.y)}h5" for tick in axis.ticks)
    return [
        f'<path class="rh-muted rh-zero" stroke="{palette.muted}" stroke-width="0.7" stroke-dasharray="1 3" '
        f'd="M{_n(axis.x)} {_n(zero)}H{_n(axis.x_right)}"/>',
        f'<path class="rh-axis" stroke="currentColor" stroke-width="1" '
        f'd="M{_n(axis.x)} {_n(axis.y_bottom)}V{_n(axis.y_top)}{marks}"/>',
    ]


def _carrier(line: Line) -> str:
    colour, kind = ("currentColor", "rh-carrier") if line.series is None else _stroke(line.series, "rh-carrier")
    return (
        f'<path class="{kind}" stroke="{colour}" stroke-width="0.9" '
        f'd="M{_n(line.x0)} {_n(line.y0)}L{_n(line.x1)} {_n(line.y1)}"/>'
    )


def _leader(line: Line, palette: Palette) -> str:
    return (
        f'<path class="rh-muted rh-leader" stroke="{palette.muted}" stroke-width="0.8" '
        f'stroke-dasharray="1.5 1.5" d="M{_n(line.x0)} {_n(line.y0)}L{_n(line.x1)} {_n(line.y1)}"/>'
    )


def _key(key: Line) -> list[str]:
    series = key.series or 0
    colour, kind = _stroke(series, "rh-key")
    dash = f' stroke-dasharray="{DASHES[cycle(series)]}"' if DASHES[cycle(series)] else ""
    tip = key.x1
    outline = [(tip - back * HEAD_LENGTH, key.y0 + across * HEAD_HALF) for across, back in HEADS[cycle(series)]]
    return [
        f'<path class="{kind}" stroke="{colour}" stroke-width="1.9"{dash} '
        f'd="M{_n(key.x0)} {_n(key.y0)}H{_n(tip - HEAD_LENGTH)}"/>',
        f'<path class="{kind} rh-f{cycle(series)}" stroke="{colour}" fill="{colour}" stroke-width="0.8" '
        f'd="{_polygon(outline)}"/>',
    ]


def _arrow(arrow: ArrowMark, texts: list[TextBox], overlay: bool, palette: Palette) -> str:
    line = "" if arrow.line is None else f' data-line="{arrow.line}"'
    parts = [
        f'<g class="rh-arrow" tabindex="0" data-label="{escape(arrow.label)}"{line} '
        f'data-column="{escape(arrow.column)}"><title>{_lines(arrow.hover)}</title>'
    ]
    low, high = min(arrow.y0, arrow.y1), max(arrow.y0, arrow.y1)
    if palette.themed:
        parts.append(
            f'<path class="rh-hit rh-s{cycle(arrow.series)}" stroke="{SERIES[cycle(arrow.series)]}" '
            f'stroke-opacity="0" stroke-width="16" d="M{_n(arrow.x)} {_n(low - 3)}V{_n(high + 3)}" '
            'pointer-events="stroke"/>'
        )
    parts += _shaft(arrow, overlay) if arrow.entered else [_gap(arrow)]
    if arrow.whisker:
        parts.append(_whisker(arrow, arrow.whisker))
    parts += [_text(box, palette) for box in texts]
    return "".join([*parts, "</g>"])


def _shaft(arrow: ArrowMark, overlay: bool) -> list[str]:
    colour, kind = _stroke(arrow.series, "rh-shaft")
    fill = colour if arrow.whisker else "none"
    filled = f" rh-f{cycle(arrow.series)}" if arrow.whisker else ""
    width = _WIDTHS[arrow.role]
    length = abs(arrow.y1 - arrow.y0)
    if arrow.y0 == arrow.y1:
        return [
            f'<circle class="{kind}{filled}" cx="{_n(arrow.x)}" cy="{_n(arrow.y1)}" r="3" stroke="{colour}" '
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
        offsets = (-_DOUBLE, _DOUBLE) if arrow.role == "direct" else (0.0,)
        d = "".join(f"M{_n(arrow.x + dx)} {_n(arrow.y0)}V{_n(base)}" for dx in offsets)
        parts.append(f'<path class="{kind}" stroke="{colour}" stroke-width="{width}"{dashed} d="{d}"/>')
    parts.append(
        f'<path class="{kind}{filled}" stroke="{colour}" fill="{fill}" stroke-width="1.1" stroke-linejoin="miter" '
        f'd="{_polygon(outline)}"/>'
    )
    return parts


def _gap(arrow: ArrowMark) -> str:
    colour, kind = _stroke(arrow.series, "rh-gap")
    return (
        f'<path class="{kind}" stroke="{colour}" stroke-width="2.2" stroke-linecap="round" stroke-dasharray="0 4.35" '
        f'd="M{_n(arrow.x)} {_n(arrow.y0)}V{_n(arrow.y1)}"/>'
    )


def _whisker(arrow: ArrowMark, ends: tuple[float, float]) -> str:
    colour, kind = _stroke(arrow.series, "rh-whisker")
    x, low, high = arrow.whisker_x, *ends
    caps = f"M{_n(x - 3.5)} {_n(low)}h7M{_n(x - 3.5)} {_n(high)}h7" if arrow.complete else ""
    dashed = "" if arrow.complete else ' stroke-dasharray="3 2"'
    return (
        f'<path class="{kind}" stroke="{colour}" stroke-width="1.1"{dashed} '
        f'd="M{_n(x)} {_n(low)}V{_n(high)}{caps}"/>'
    )


def _text(box: TextBox, palette: Palette) -> str:
    if box.rotated:
        x, y = box.x + box.size * _BASELINE, box.y + box.h / 2
        turn = f' transform="rotate(-90 {_n(x)} {_n(y)})"'
    else:
        x = {"start": box.x, "middle": box.x + box.w / 2, "end": box.x + box.w}[box.anchor]
        y, turn = box.y + box.size * _BASELINE, ""
    anchor = "" if box.anchor == "start" else f' text-anchor="{box.anchor}"'
    weight = ' font-weight="600"' if box.bold else ""
    kind, colour = ("rh-note", palette.muted) if box.kind == "note" else (f"rh-{box.kind}", "currentColor")
    full = f"<title>{escape(box.full)}</title>" if box.full else ""
    return (
        f'<text class="{kind}" x="{_n(x)}" y="{_n(y)}" font-size="{_n(box.size)}" fill="{colour}"'
        f'{anchor}{weight}{turn} xml:space="preserve">{full}{_spans(box)}</text>'
    )


def _spans(box: TextBox) -> str:
    """The runs as tspans; each shift undoes the one before, since ``dy`` adds up along a text."""
    shift = 0.0
    parts = []
    for run in box.rich:
        wanted = {"sub": _DROP, "sup": -_RAISE}.get(run.style, 0.0) * box.size
        attributes = "" if wanted == shift else f' dy="{_n(wanted - shift)}"'
        if run.style in ("sub", "sup"):
            attributes += f' font-size="{_n(run_size(run, box.size))}"'
        elif run.style == "italic":
            attributes += ' font-style="italic"'
        parts.append(f"<tspan{attributes}>{escape(run.text)}</tspan>" if attributes else escape(run.text))
        shift = wanted
    return "".join(parts)


def _stroke(series: int, kind: str) -> tuple[str, str]:
    index = cycle(series)
    return SERIES[index], f"{kind} rh-s{index}"


def _polygon(points: list[tuple[float, float]]) -> str:
    return "M" + "L".join(f"{_n(x)} {_n(y)}" for x, y in points) + "Z"


def _lines(lines: tuple[str, ...]) -> str:
    return "\n".join(map(escape, lines))


def _n(value: float) -> str:
    """A coordinate with at most two decimals and never ``-0``."""
    text = f"{value:.2f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text
