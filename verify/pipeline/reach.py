"""How far a record could be judged: the proton frequency of a spectrum, and why a record is unassessed."""

from __future__ import annotations

from verify.expectations.solvent import solvent_name
from verify.peaklist.model import PeakList
from verify.record.model import SpectrumText
from verify.rulebook.model import RecordCase

# Ratios of resonance frequencies to that of 1H. source: IUPAC recommendations 2001/2008 (Xi scale, rounded)
TO_PROTON = {"1H": 1.0, "13C": 0.25145, "19F": 0.94094, "31P": 0.40481}
RAREST_MAGNET_MHZ = 970.0
BLIND_FLAGS = {
    "paramagnetic-metal": "the structure holds a metal that may be paramagnetic; its shifts are not predicted",
    "radical": "the structure is a radical; its spectrum is not predicted",
}
STATUS_WORDS = {
    "too-large": "the structure has more nuclei than are assigned",
    "timeout": "no explanation of the list was proved best in the time allowed",
}


def proton_field(field_mhz: float | None, nucleus: str) -> float | None:
    """1H frequency in MHz of the magnet, rounded to ten, so that spectra of one magnet agree.

    Common slip: "13C NMR (400 MHz)". A frequency that would need a magnet rarer than the slip is taken as that of 1H.
    """
    if field_mhz is None or field_mhz <= 0:
        return None
    proton = field_mhz / TO_PROTON.get(nucleus, 1.0)
    if nucleus in ("13C", "31P") and proton > RAREST_MAGNET_MHZ:
        proton = field_mhz
    return round(proton, -1) if proton > 95.0 else proton


def solvent_and_field(spectrum: SpectrumText, peaks: PeakList) -> tuple[str | None, float | None]:
    """Canonical solvent and proton frequency (MHz): the record's own keys, else what the text says, else the
    defaults of the registry."""
    solvent = solvent_name(spectrum.solvent or peaks.solvent or spectrum.default_solvent) or None
    field = spectrum.field_mhz or peaks.field_mhz or spectrum.default_field_mhz
    return solvent, proton_field(field, spectrum.nucleus)


def unassessed_because(case: RecordCase) -> str:
    """A sentence where the record could not be judged, else ""."""
    for problem in case.problems:
        if problem.blocks == "record":
            return problem.message
    if case.structure is None:
        return "there is no structure to judge by"
    for flag, words in BLIND_FLAGS.items():
        if flag in case.structure.flags:
            return words
    if not case.spectra:
        return "the record holds no spectrum"
    return "" if any(_judged(case, n) for n in range(len(case.spectra))) else _why_none(case)


def _judged(case: RecordCase, number: int) -> bool:
    assignment = case.spectra[number].assignment
    return assignment is not None and assignment.status == "explained"


def _why_none(case: RecordCase) -> str:
    for spectrum in case.spectra:
        for problem in spectrum.peaks.problems:
            if problem.blocks in ("spectrum", "record"):
                return f"{spectrum.spectrum.nucleus}: {problem.message}"
        status = spectrum.assignment.status if spectrum.assignment else ""
        if status in STATUS_WORDS:
            return f"{spectrum.spectrum.nucleus}: {STATUS_WORDS[status]}"
    return "no signal could be read in any list"
