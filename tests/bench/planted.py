"""Plants errors in published lists: the kinds are those of ``peakwitness drill``, the group is the article."""

from __future__ import annotations

from dataclasses import dataclass, replace

from published import Published

from verify.pipeline.planting import KINDS, Specimen
from verify.pipeline.planting import plant as plant_specimen


@dataclass(frozen=True, slots=True)
class Planted:
    """A record with one error of the named kind."""

    kind: str
    record: Published


def _specimen(published: Published) -> Specimen:
    return Specimen(published.id, published.smiles, published.texts, published.id.rsplit("-", 1)[0])


def plant(kind: str, published: Published, rows: list[Published], seed: int) -> Planted | None:
    """The record with one error of this kind, or None where it has no place for one."""
    made = plant_specimen(kind, _specimen(published), [_specimen(row) for row in rows], seed)
    if made is None:
        return None
    return Planted(kind, replace(published, smiles=made.smiles, texts=made.texts))


__all__ = ["KINDS", "Planted", "plant"]
