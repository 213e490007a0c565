"""Elements of SVG text that every painter of it shares: head, theme, lines of text, coordinates."""

from __future__ import annotations

from routeheat.draw.geometry import TextBox
from routeheat.draw.looks import BASELINE, SERIES, SHIFTS, Palette, cycle
from routeheat.draw.metrics import run_size
from routeheat.present.html import escape

FONT = "Arial, Helvetica, 'DejaVu Sans', sans-serif"


def opening(width: float, height: float, title: str, alt: str, palette: Palette) -> list[str]:
    """The opening of an ``<svg>`` element: size, title, description, theme and paper."""
    w, h = px(width), px(height)
    parts = [
        f'<svg xmlns="http://www.w3.org/2000/svg" class="rh-diagram" role="img" viewBox="0 0 {w} {h}" width="{w}" '
        f'height="{h}" font-family="{FONT}" fill="none" color="{palette.ink}">',
        f"<title>{escape(title)}</title><desc>{escape(alt)}</desc>",
    ]
    if palette.themed:
        parts.append(f"<style>{_theme(palette)}</style>")
    if palette.paper:
        parts.append(f'<rect width="{w}" height="{h}" fill="{palette.paper}"/>')
    return parts


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


def text_element(box: TextBox, palette: Palette) -> str:
    """One line of text, anchored in its box."""
    if box.rotated:
        x, y = box.x + box.size * BASELINE, box.y + box.h / 2
        turn = f' transform="rotate(-90 {px(x)} {px(y)})"'
    else:
        x = {"start": box.x, "middle": box.x + box.w / 2, "end": box.x + box.w}[box.anchor]
        y, turn = box.y + box.size * BASELINE, ""
    anchor = "" if box.anchor == "start" else f' text-anchor="{box.anchor}"'
    weight = ' font-weight="600"' if box.bold else ""
    kind, colour = ("rh-note", palette.muted) if box.kind == "note" else (f"rh-{box.kind}", "currentColor")
    full = f"<title>{escape(box.full)}</title>" if box.full else ""
    return (
        f'<text class="{kind}" x="{px(x)}" y="{px(y)}" font-size="{px(box.size)}" fill="{colour}"'
        f'{anchor}{weight}{turn} xml:space="preserve">{full}{_spans(box)}</text>'
    )


def _spans(box: TextBox) -> str:
    """The runs as tspans; each shift undoes the one before, since ``dy`` adds up along a text."""
    shift = 0.0
    parts = []
    for run in box.rich:
        wanted = SHIFTS.get(run.style, 0.0) * box.size
        attributes = "" if wanted == shift else f' dy="{px(wanted - shift)}"'
        if run.style in ("sub", "sup"):
            attributes += f' font-size="{px(run_size(run, box.size))}"'
        elif run.style == "italic":
            attributes += ' font-style="italic"'
        parts.append(f"<tspan{attributes}>{escape(run.text)}</tspan>" if attributes else escape(run.text))
        shift = wanted
    return "".join(parts)


def stroke(series: int, kind: str) -> tuple[str, str]:
    """Colour and classes of what belongs to a series."""
    index = cycle(series)
    return SERIES[index], f"{kind} rh-s{index}"


def polygon(points: list[tuple[float, float]]) -> str:
    """Path data of a closed outline."""
    return "M" + "L".join(f"{px(x)} {px(y)}" for x, y in points) + "Z"


def lines(texts: tuple[str, ...]) -> str:
    """Several lines of text, escaped."""
    return "\n".join(map(escape, texts))


def px(value: float) -> str:
    """A coordinate with at most two decimals and never ``-0``."""
    text = f"{value:.2f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text
