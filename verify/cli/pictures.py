"""Joins foresight, simulation and drawing into the picture of an expected spectrum."""

from __future__ import annotations

from verify.api import structure_text
from verify.errors import UsageError
from verify.pipeline.foresight import Foresight, foresee_structure
from verify.pipeline.predicted import predicted_curve
from verify.report.drawing import structure_svg
from verify.report.spectrum_picture import Group, Picture, draw

DRAWING_WIDTH, DRAWING_HEIGHT = 480, 190
BELIEVED = 2.0  # scales shown to each side of a centre


def foreseen_svg(structure: str, nucleus: str, solvent: str | None, field_mhz: float) -> str:
    """The picture as SVG; raises UsageError for a structure that cannot be read."""
    foresight = foresee_structure(structure_text(structure), nucleus, solvent, field_mhz)
    if foresight.structure is None:
        raise UsageError(f"the structure cannot be read: {foresight.problems[0].message}")
    ppm, height, how = predicted_curve(foresight, nucleus)
    condition = f"{nucleus} in {foresight.solvent or solvent or 'an unknown solvent'}, 1H at {field_mhz:g} MHz"
    return draw(
        Picture(
            title=foresight.structure.smiles,
            subtitle=f"{condition}; {', '.join(how) or 'nothing to show'}. Expected, not measured.",
            drawing=structure_svg(foresight.structure.mol, DRAWING_WIDTH, DRAWING_HEIGHT, _labels(foresight)),
            ppm=ppm,
            height=height,
            groups=_groups(foresight),
            unit="ppm",
        )
    )


def _labels(foresight: Foresight) -> dict[int, str]:
    """Heavy atom to the numbers of the groups on it, in the order of the table."""
    found: dict[int, list[str]] = {}
    for number, expectation in enumerate(foresight.expectations, start=1):
        for carrier in expectation.environment.carriers:
            found.setdefault(carrier, []).append(str(number))
    return {atom: ",".join(numbers) for atom, numbers in found.items()}


def _groups(foresight: Foresight) -> list[Group]:
    groups = []
    for number, expectation in enumerate(foresight.expectations, start=1):
        window = expectation.window
        if not window.judged:
            continue
        low = max(window.low, window.centre - BELIEVED * window.scale)
        high = min(window.high, window.centre + BELIEVED * window.scale)
        groups.append(Group(number, expectation.words, window.centre, low, high, expectation.environment.count))
    return groups
