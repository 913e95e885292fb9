"""What a registry says once for all its records, in a form small enough to hand to every worker."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Defaults:
    """Conditions that hold where neither a record's keys nor the text of its list say otherwise.

    ``fields`` pairs a nucleus with the frequency (MHz) at which it is measured, such as ``("13C", 101.0)``.
    """

    solvent: str | None = None
    temperature_k: float | None = None
    fields: tuple[tuple[str, float], ...] = ()

    def field_mhz(self, nucleus: str) -> float | None:
        """The default frequency in MHz of one nucleus."""
        return dict(self.fields).get(nucleus)


@dataclass(frozen=True, slots=True)
class ReadingSettings:
    """``id_pattern`` must match the whole id of every compound; "" allows any id."""

    id_pattern: str = ""
    defaults: Defaults = Defaults()


NO_SETTINGS = ReadingSettings()
