"""Bars beside numbers: small SVG elements made of numbers alone, so that there is nothing in them to escape."""

from __future__ import annotations

WIDTH = 84
HEIGHT = 14
_MIDDLE = WIDTH / 2
_REACH = 4.0
"""Normalised residual at the ends of its bar; what lies beyond ends in an arrow."""


def _svg(inner: str) -> str:
    return (
        f'<svg class="rhd-mark" width="{WIDTH}" height="{HEIGHT}" viewBox="0 0 {WIDTH} {HEIGHT}" aria-hidden="true">'
        f"{inner}</svg>"
    )


def _upright(x: float, kind: str, top: float = 1.0) -> str:
    return f'<path class="{kind}" d="M{x:.1f} {top:.1f}V{HEIGHT - top:.1f}"/>'


def residual_bar(value: float | None, limits: tuple[float, ...] = (2.0, 3.0)) -> str:
    """A deviation in units of its standard uncertainty, from zero in the middle; ``limits`` are drawn on both sides.

    The last limit is a full line, the others are dashed; beyond the last the bar is striking. Empty for ``None``.
    """
    if value is None:
        return ""
    scale = _MIDDLE / (_REACH + 0.3)
    end = _MIDDLE + scale * max(-_REACH, min(_REACH, value))
    left, right = sorted((_MIDDLE, end))
    kind = "rhd-beyond" if abs(value) > limits[-1] else "rhd-within"
    parts = [f'<rect class="{kind}" x="{left:.1f}" y="4" width="{max(right - left, 0.8):.1f}" height="6"/>']
    if abs(value) > _REACH:
        tip = 1.0 if value > 0 else -1.0
        parts.append(f'<path class="{kind}" d="M{end:.1f} 2l{3 * tip:.0f} 5l{-3 * tip:.0f} 5z"/>')
    parts.append(_upright(_MIDDLE, "rhd-zero", 0.0))
    for limit in limits:
        line = "rhd-limit" if limit == limits[-1] else "rhd-limit rhd-dashed"
        parts += [_upright(_MIDDLE + side * scale * limit, line) for side in (-1, 1)]
    return _svg("".join(parts))


def share_bar(share: float | None) -> str:
    """A part of a whole, 0 to 1, in a frame that is the whole; empty for ``None``."""
    if share is None:
        return ""
    full = WIDTH - 2
    return _svg(
        f'<rect class="rhd-frame" x="1" y="4" width="{full}" height="6"/>'
        f'<rect class="rhd-within" x="1" y="4" width="{full * max(0.0, min(1.0, share)):.1f}" height="6"/>'
    )


def remaining_bar(after: float, least: float, now: float) -> str:
    """What a measurement leaves of an uncertainty: the frame is ``now``, the bar ``after``, the line ``least``.

    Empty when there is no uncertainty now that it could be compared with.
    """
    if not now > 0:
        return ""
    full = WIDTH - 2
    at = [1 + full * max(0.0, min(1.0, part / now)) for part in (after, least)]
    return _svg(
        f'<rect class="rhd-frame" x="1" y="4" width="{full}" height="6"/>'
        f'<rect class="rhd-within" x="1" y="4" width="{at[0] - 1:.1f}" height="6"/>{_upright(at[1], "rhd-limit")}'
    )
