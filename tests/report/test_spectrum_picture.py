"""The picture of an expected spectrum: well-formed, self-contained, every group drawn where it is expected."""

from __future__ import annotations

import re
from xml.etree import ElementTree

import numpy as np
import pytest

from verify.cli.pictures import foreseen_svg
from verify.errors import UsageError
from verify.report.spectrum_picture import BASE, Group, Picture, draw


@pytest.mark.parametrize("nucleus", ["1H", "13C", "19F", "31P"])
def test_every_nucleus_gives_a_picture_without_references_to_the_outside(nucleus: str) -> None:
    svg = foreseen_svg("FC(F)(F)c1ccc(P(=O)(OCC)OCC)cc1", nucleus, "CDCl3", 400.0)
    root = ElementTree.fromstring(svg)
    assert root.tag.endswith("svg")
    assert "<polyline" in svg
    assert re.findall(r"(?:href|src)=", svg) == []
    assert re.findall(r"https?://(?!www\.w3\.org/)", svg) == []


def test_a_structure_without_the_nucleus_has_an_empty_picture() -> None:
    assert "nothing to show" in foreseen_svg("CCO", "19F", "CDCl3", 400.0)


def test_a_structure_that_cannot_be_read_is_told() -> None:
    with pytest.raises(UsageError, match="cannot be read"):
        foreseen_svg("c1ccccc", "1H", "CDCl3", 400.0)


def test_high_shifts_stand_left_and_the_highest_point_reaches_the_top() -> None:
    ppm = np.linspace(8.0, 0.0, 801)
    height = np.exp(-((ppm - 7.0) ** 2) / 0.001) + 0.5 * np.exp(-((ppm - 2.0) ** 2) / 0.001)
    groups = [Group(1, "aryl CH", 7.0, 6.5, 7.5, 1.0), Group(2, "CH3 <b>", 2.0, 1.5, 2.5, 3.0)]
    svg = draw(Picture("a & b", "c", "", ppm, height, groups, "ppm"))
    assert "CH3 &lt;b&gt;" in svg
    points = re.search(r'points="([^"]+)"', svg)
    assert points is not None
    pairs = [tuple(map(float, pair.split(","))) for pair in points.group(1).split()]
    highest = min(pairs, key=lambda pair: pair[1])
    second = min((p for p in pairs if p[0] > highest[0] + 200), key=lambda pair: pair[1])
    assert highest[0] < second[0]
    assert BASE - highest[1] == pytest.approx(2 * (BASE - second[1]), rel=0.02)
