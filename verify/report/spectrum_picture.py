"""A picture of an expected spectrum: the structure with numbered groups, the curve, and the windows below it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from xml.sax.saxutils import escape

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

WIDTH = 1080
LEFT, RIGHT, BASE, TOP = 40, 24, 430, 250
INK, CURVE, BAND, FAINT = "#222222", "#0072B2", "#E69F00", "#999999"


@dataclass(frozen=True, slots=True)
class Group:
    """One expected group: number in the drawing, name, centre and believed ends in ppm, nuclei."""

    number: int
    words: str
    centre: float
    low: float
    high: float
    nuclei: float


@dataclass(frozen=True, slots=True)
class Picture:
    """``ppm`` and ``height``: the curve, shape (points,); ``drawing``: inner SVG of the structure (480 x 220 px)."""

    title: str
    subtitle: str
    drawing: str
    ppm: Array
    height: Array
    groups: Sequence[Group]
    unit: str


def _ends(picture: Picture) -> tuple[float, float]:
    """Left and right end of the axis in ppm, a little beyond everything."""
    low = min((g.low for g in picture.groups), default=0.0)
    high = max((g.high for g in picture.groups), default=10.0)
    margin = 0.04 * (high - low) + 0.1
    return high + margin, low - margin


def _x(value: float, ends: tuple[float, float]) -> float:
    return LEFT + (ends[0] - value) / (ends[0] - ends[1]) * (WIDTH - LEFT - RIGHT)


def _curve(picture: Picture, ends: tuple[float, float]) -> str:
    inside = (picture.ppm <= ends[0]) & (picture.ppm >= ends[1])
    ppm, height = picture.ppm[inside], picture.height[inside]
    if len(ppm) == 0 or height.max() <= 0:
        return ""
    scaled = height / height.max() * (BASE - TOP)
    points = " ".join(f"{_x(float(p), ends):.1f},{BASE - float(h):.1f}" for p, h in zip(ppm, scaled, strict=True))
    return f'<polyline points="{points}" fill="none" stroke="{CURVE}" stroke-width="1.3"/>'


def _axis(ends: tuple[float, float], unit: str) -> list[str]:
    span = ends[0] - ends[1]
    step = next(s for s in (0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0) if span / s <= 14)
    parts = [f'<line x1="{LEFT}" y1="{BASE}" x2="{WIDTH - RIGHT}" y2="{BASE}" stroke="{INK}"/>']
    tick = np.ceil(ends[1] / step) * step
    while tick <= ends[0]:
        x = _x(float(tick), ends)
        parts.append(f'<line x1="{x:.1f}" y1="{BASE}" x2="{x:.1f}" y2="{BASE + 6}" stroke="{INK}"/>')
        parts.append(f'<text x="{x:.1f}" y="{BASE + 20}" text-anchor="middle">{tick:g}</text>')
        tick = round(float(tick) + step, 6)
    parts.append(f'<text x="{WIDTH - RIGHT}" y="{BASE + 36}" text-anchor="end">{escape(unit)}</text>')
    return parts


def _bands(picture: Picture, ends: tuple[float, float]) -> tuple[list[str], int]:
    """The windows below the axis, in as many rows as keep their names apart, and the number of rows."""
    rows: list[float] = []
    parts = []
    for group in sorted(picture.groups, key=lambda g: -g.centre):
        left, right = _x(group.high, ends), _x(group.low, ends)
        label = f"{group.number}  {group.words} ({group.nuclei:g})"
        begin = min(left, WIDTH - RIGHT - 6.6 * len(label))
        row = next((n for n, taken in enumerate(rows) if taken < begin - 8), len(rows))
        if row == len(rows):
            rows.append(0.0)
        rows[row] = max(right, begin + 6.6 * len(label))
        y = BASE + 52 + 26 * row
        middle, width = _x(group.centre, ends), max(right - left, 2)
        parts.append(f'<rect x="{left:.1f}" y="{y}" width="{width:.1f}" height="7" fill="{BAND}" opacity="0.75"/>')
        mark = f'x1="{middle:.1f}" y1="{y - 2}" x2="{middle:.1f}" y2="{y + 9}"'
        parts.append(f'<line {mark} stroke="{INK}" stroke-width="1.5"/>')
        parts.append(f'<text x="{begin:.1f}" y="{y + 19}" class="small">{escape(label)}</text>')
    return parts, len(rows)


def draw(picture: Picture) -> str:
    """The whole SVG, self-contained."""
    ends = _ends(picture)
    bands, rows = _bands(picture, ends)
    height = BASE + 70 + 26 * max(rows, 1)
    return "\n".join(
        [
            f'<svg xmlns="http://www.w3.org/2000/svg" role="img" width="{WIDTH}" height="{height}" '
            f'viewBox="0 0 {WIDTH} {height}">',
            f"<title>{escape(picture.title)}</title>",
            f"<style>text{{font-family:system-ui,sans-serif;font-size:13px;fill:{INK}}}.small{{font-size:11.5px}}"
            f".head{{font-size:17px}}.faint{{fill:{FAINT}}}</style>",
            f'<rect width="{WIDTH}" height="{height}" fill="#ffffff"/>',
            f'<text x="{LEFT}" y="30" class="head">{escape(picture.title)}</text>',
            f'<text x="{LEFT}" y="50" class="small">{escape(picture.subtitle)}</text>',
            f'<g transform="translate({LEFT},58)">{picture.drawing}</g>',
            *_axis(ends, picture.unit),
            _curve(picture, ends),
            *bands,
            "</svg>",
            "",
        ]
    )
