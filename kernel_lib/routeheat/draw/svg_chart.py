"""Paints a chart (rows of dots, a curve) as elements of SVG text."""

from __future__ import annotations

from routeheat.draw.chart import RADIUS, Band, Chart, Point, Rule, pieces, shade
from routeheat.draw.geometry import TextBox
from routeheat.draw.looks import SERIES, Palette
from routeheat.draw.svg_parts import lines, px, text_element
from routeheat.present.html import escape


def chart_parts(chart: Chart, palette: Palette) -> list[str]:
    """Lines first, then a focusable group per band with its dots and texts, then everything else."""
    parts = [_rule(rule, palette) for rule in chart.rules]
    texts: dict[int | None, list[TextBox]] = {}
    points: dict[int | None, list[Point]] = {}
    for box in chart.texts:
        texts.setdefault(box.arrow, []).append(box)
    for point in chart.points:
        points.setdefault(point.band, []).append(point)
    for index, band in enumerate(chart.bands):
        parts.append(_band(band, chart, points.get(index, []), texts.get(index, []), palette))
    parts += [_point(point) for point in points.get(None, [])]
    return [*parts, *(text_element(box, palette) for box in texts.get(None, []))]


def _rule(rule: Rule, palette: Palette) -> str:
    ink = palette.muted if rule.muted else shade(rule.series, "currentColor")
    kind = "rh-muted" if rule.muted else "rh-rule" if rule.series is None else f"rh-rule rh-s{rule.series}"
    dash = f' stroke-dasharray="{" ".join(map(px, rule.dash))}"' if rule.dash else ""
    (x, y), *others = rule.points
    path = f"M{px(x)} {px(y)}" + "".join(f"L{px(x)} {px(y)}" for x, y in others)
    return f'<path class="{kind}" stroke="{ink}" stroke-width="{px(rule.width)}"{dash} d="{path}"/>'


def _band(band: Band, chart: Chart, points: list[Point], texts: list[TextBox], palette: Palette) -> str:
    line = "" if band.line is None else f' data-line="{band.line}"'
    parts = [
        f'<g class="rh-arrow rh-band" tabindex="0" data-label="{escape(band.label)}"{line} '
        f'data-column="{escape(band.group)}"><title>{lines(band.hover)}</title>'
    ]
    if palette.themed:
        left, _, right, _ = chart.plot
        height = band.bottom - band.top
        parts.append(
            f'<path class="rh-hit rh-s0" stroke="{SERIES[0]}" stroke-opacity="0" stroke-width="{px(height)}" '
            f'd="M{px(left)} {px(band.top + height / 2)}H{px(right)}" pointer-events="stroke"/>'
        )
    parts += [_point(point) for point in points]
    parts += [text_element(box, palette) for box in texts]
    return "".join([*parts, "</g>"])


def _point(point: Point) -> str:
    ink = shade(point.series, "currentColor")
    kind = "rh-dot" if point.series is None else f"rh-dot rh-s{point.series}"
    parts = []
    for piece in pieces(point):
        dash = f' stroke-dasharray="{" ".join(map(px, piece.dash))}"' if piece.dash else ""
        path = "M" + "L".join(f"{px(x)} {px(y)}" for x, y in piece.points) + ("Z" if piece.closed else "")
        parts.append(f'<path class="{kind}" stroke="{ink}" stroke-width="{px(piece.width)}"{dash} d="{path}"/>')
    radius = RADIUS.get(point.look)
    if radius:
        disc = point.look == "disc"
        filled = f" rh-f{point.series}" if disc and point.series is not None else ""
        parts.append(
            f'<circle class="{kind}{filled}" cx="{px(point.x)}" cy="{px(point.y)}" r="{px(radius)}" stroke="{ink}" '
            f'fill="{ink if disc else "none"}" stroke-width="{"0.5" if disc else "1.6"}"/>'
        )
    return "".join(parts)
