"""The cheapest explanation of a reported list, what it costs and what it leaves over.

All costs are negative log likelihoods in nats. Environment numbers index ``EnvironmentSet.all``; signal numbers
index ``PeakList.signals``.
"""

from __future__ import annotations

from dataclasses import dataclass, replace


@dataclass(frozen=True, slots=True)
class Share:
    """``nuclei`` of an environment that a signal is explained by, and what that costs."""

    environment: int
    nuclei: float
    shift_cost: float
    splitting_cost: float


@dataclass(frozen=True, slots=True)
class SignalReading:
    """How one signal is explained.

    ``excess``            reported nuclei that nothing explains
    ``deficit``           nuclei of its environments above the reported number
    ``outside_ppm``       distance to the nearest hard window of what explains it, or of any environment (0 = inside)
    ``shift_gain``        nats won over the whole list if this shift were free
    ``splitting_gain``    nats won over the whole list if these letters and J were free
    ``splitting_cost``    cost of its letters and J in the chosen explanation
    ``splitting_floor``   least cost of its letters and J over every environment it could be
    ``strict``            every environment it could be is open-chain sp3 with simple partners
    ``expected_letters``  what the chosen environments would show, in words ("q or dq"), "" if they fit
    ``letters_declare``   number of J that the letters ask for (-1 = not defined, as for m)
    ``impossible_j``      J values (Hz) larger than any coupling of any environment it could be
    ``j_limit``           the largest J (Hz) believed for it
    ``overlap_reading``   the J pattern looks like overlapped signals picked as one multiplet
    ``unpaired_j``        J values with no partner among the other signals
    ``solvent_line``      residual solvent or water line it coincides with, "" if none
    ``impurity``          known impurity whose lines it belongs to, "" if none
    ``attached_h_wrong``  13C: the text's attached-H letters fit no environment it could be
    """

    signal: int
    shares: tuple[Share, ...]
    excess: float = 0.0
    deficit: float = 0.0
    outside_ppm: float = 0.0
    shift_gain: float = 0.0
    splitting_gain: float = 0.0
    splitting_cost: float = 0.0
    splitting_floor: float = 0.0
    strict: bool = False
    expected_letters: str = ""
    expected_window: str = ""
    letters_declare: int = -1
    impossible_j: tuple[float, ...] = ()
    j_limit: float = 0.0
    overlap_reading: bool = False
    unpaired_j: tuple[float, ...] = ()
    solvent_line: str = ""
    impurity: str = ""
    attached_h_wrong: bool = False

    def with_impurity(self, name: str) -> SignalReading:
        """The same reading, explained as a line of a known impurity."""
        return replace(self, impurity=name)


@dataclass(frozen=True, slots=True)
class Missing:
    """Nuclei of an environment that no signal explains. ``cover`` names what may hide it, "" if nothing."""

    environment: int
    nuclei: float
    window: str
    words: str
    cover: str = ""
    optional: bool = False


@dataclass(frozen=True, slots=True)
class Repair:
    """The smallest change that makes the list fit, in words. ``kind``: "integral", "letters", "coupling", "shift",
    "missing-group", "extra-signal", "solvent-line", "scale", "salt"."""

    kind: str
    words: str
    gain: float
    signal: int = -1
    environment: int = -1


@dataclass(frozen=True, slots=True)
class Totals:
    """Nuclei reported and the bounds the structure allows.

    1H: ``low`` counts C-H hydrogens that must show, ``high`` all hydrogens; ``reported`` sums what was read (after
    ``factor``, the common scale of all integrals: 2.0 when half a molecule was integrated).
    13C: ``reported`` counts lines (not carbons), ``low``/``high`` the number of environments without and with
    permitted doubling. ``complete`` is False when a count could not be read.
    """

    reported: float
    low: float
    high: float
    factor: float = 1.0
    complete: bool = True
    solvent_nuclei: float = 0.0


@dataclass(frozen=True, slots=True)
class SpectrumAssignment:
    """``status``: "explained", "no-list", "not-read", "too-large" or "timeout". ``lenient``: words of the text
    (rotamers, mixture, fractional counts) or flags of the structure that soften every statement, joined by ", ".
    ``group_cut``: an indivisible group had to be cut over two signals. ``offset``: common shift offset in
    ppm found in all signals (0.0 = none).
    ``lines_without_home``: 13C lines that no free environment can take.
    """

    nucleus: str
    spectrum: int
    status: str
    readings: tuple[SignalReading, ...]
    missing: tuple[Missing, ...]
    totals: Totals
    cost: float
    repairs: tuple[Repair, ...] = ()
    lenient: str = ""
    group_cut: tuple[int, ...] = ()
    offset: float = 0.0
    lines_without_home: tuple[int, ...] = ()
    exchangeable_excess: float = 0.0
    signals_low: int = 0
    signals_high: int = 0


@dataclass(frozen=True, slots=True)
class RivalFit:
    """Another structure held against the same lists. ``gain``: nats by which it explains them better than the
    registered one (negative: worse), summed over the spectra that were judged for both."""

    smiles: str
    family: str
    words: str
    gain: float
