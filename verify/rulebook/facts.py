"""Every fact a rule may use: group, name, type, unit, neutral value and meaning. ``rules/FACTS.md`` comes from it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

VERSION = 1


@dataclass(frozen=True, slots=True)
class Fact:
    """``neutral`` is the value in a record without fault, and gives the type."""

    neutral: bool | float | str
    meaning: str
    unit: str = ""

    @property
    def type(self) -> str:
        """Type in CEL."""
        if isinstance(self.neutral, bool):
            return "bool"
        return "double" if isinstance(self.neutral, float) else "string"


FACTS: Mapping[str, Mapping[str, Fact]] = {
    "record": {
        "has_structure": Fact(True, "the structure could be read"),
        "has_1h": Fact(True, "a 1H spectrum is given"),
        "has_13c": Fact(True, "a 13C spectrum is given"),
        "lacking": Fact("", "nuclei the policy requires that are not given, joined by commas"),
        "basic_nitrogen": Fact(False, "the structure holds an amine or azine nitrogen that acids protonate"),
        "is_salt": Fact(False, "a counter-ion is drawn or declared"),
        "stereo": Fact("complete", "stereo elements: complete, one-undefined, several-undefined, none"),
        "rival_gain": Fact(0.0, "how much better the best isomer explains the lists than the structure", "nats"),
        "rival_words": Fact("", "what that isomer is"),
        "rival_smiles": Fact("", "SMILES of that isomer"),
        "carbonyl_without_line": Fact(False, "a C=O is drawn, and the 13C list, though complete, has no line for it"),
    },
    "mass": {
        "ion": Fact("", "the ion as typed"),
        "understood": Fact(True, "the ion could be read"),
        "stated": Fact(0.0, "calculated m/z as typed (0: not typed)", "u"),
        "expected": Fact(0.0, "m/z of that ion of this structure (0: unknown)", "u"),
        "found": Fact(0.0, "m/z found (0: not typed)", "u"),
        "stated_off": Fact(0.0, "typed calculated value less that of this structure, absolute", "u"),
        "found_off": Fact(0.0, "found value less that of this structure, absolute", "u"),
        "found_off_ppm": Fact(0.0, "the same relative to the value of this structure", "ppm"),
        "electron_missing": Fact(False, "the typed value lacks the mass of the electron"),
        "ion_words": Fact("", "formula of the ion of this structure"),
        "formula_differs": Fact(False, "a formula is typed that is not that of the ion or the molecule"),
        "formula": Fact("", "the formula as typed"),
    },
    "elemental": {
        "element": Fact("", "element symbol"),
        "stated": Fact(0.0, "calculated percentage as typed", "%"),
        "expected": Fact(0.0, "percentage of this structure with its declared components", "%"),
        "found": Fact(0.0, "percentage found (0: not typed)", "%"),
        "stated_off": Fact(0.0, "typed calculated value less expected, absolute", "%"),
        "found_off": Fact(0.0, "found value less expected, absolute", "%"),
        "solvate": Fact("", "a water or solvent fraction with which the typed value fits, empty if none"),
    },
    "spectrum": {
        "nucleus": Fact("1H", "1H, 13C, 19F or 31P"),
        "explained": Fact(True, "the list was read and explained as far as possible"),
        "status": Fact("explained", "explained, no-list, not-read, too-large or timeout"),
        "soft": Fact(False, "words of the text or flags of the structure soften every statement"),
        "soft_words": Fact("", "those words"),
        "solvent": Fact("CDCl3", "usual formula of the solvent, empty if unknown"),
        "solvent_known": Fact(True, "the solvent is stated and known"),
        "solvent_typed": Fact("CDCl3", "the solvent as typed"),
        "field_stated": Fact(True, "the frequency is stated"),
        "field_odd": Fact(False, "the frequency does not belong to this nucleus"),
        "field_mhz": Fact(400.0, "the frequency as typed", "MHz"),
        "signals": Fact(5.0, "signals read"),
        "signals_low": Fact(1.0, "fewest signals any reading of the structure allows"),
        "signals_high": Fact(9.0, "most signals any reading of the structure allows"),
        "reported": Fact(10.0, "1H: hydrogens reported, after the common factor"),
        "low": Fact(10.0, "1H: least hydrogens the list may show"),
        "high": Fact(10.0, "1H: most hydrogens the list may show"),
        "factor": Fact(1.0, "common factor of all integrals (2: half a molecule integrated)"),
        "complete": Fact(True, "1H: every signal states its number of hydrogens"),
        "over": Fact(0.0, "1H: hydrogens above the most, beyond rounding"),
        "under": Fact(0.0, "1H: hydrogens below the least, beyond rounding"),
        "envelope": Fact(False, "1H: the deviation is at most 2 H and one multiplet of 10 H or more may hold it"),
        "over_in_solvent": Fact(False, "1H: one or two hydrogens too many, in a range over the residual solvent line"),
        "solvent_hydrogens": Fact(0.0, "1H: hydrogens of signals that are residual solvent or water lines"),
        "acid_excess": Fact(0.0, "1H: unexplained hydrogens in broad signals where NH+ and OH lie"),
        "salt_fits": Fact(False, "1H: a basic nitrogen is there; one or two acidic hydrogens more make the sum fit"),
        "excess": Fact(0.0, "1H: reported hydrogens nothing explains"),
        "missing": Fact(0.0, "1H: C-H hydrogens no signal explains"),
        "missing_words": Fact("", "1H: the groups no signal explains, with their windows"),
        "missing_cover": Fact("", "what may hide the missing groups: a solvent line or words of the text"),
        "cover_words": Fact("by another signal", "the same in words, by another signal if nothing is known"),
        "selected": Fact(False, "the text says that only some signals are listed"),
        "hides": Fact(False, "the text says that signals are overlapped, hidden or not observed"),
        "unread": Fact(0.0, "numbers like shifts without details that could be read"),
        "group_cut": Fact(False, "1H: an indivisible group had to be cut over two signals"),
        "cut_words": Fact("", "that group"),
        "offset": Fact(0.0, "common offset of all shifts, absolute", "ppm"),
        "offset_words": Fact("", "the same with its sign"),
        "lines": Fact(8.0, "13C: lines read"),
        "environments": Fact(8.0, "environments of this nucleus"),
        "lines_over": Fact(0.0, "13C: lines above the number of environments with permitted doubling"),
        "lines_short": Fact(0.0, "13C: environments less lines"),
        "short_share": Fact(0.0, "13C: the same as a share of the environments"),
        "homeless": Fact(0.0, "13C: lines that no free environment can hold"),
        "homeless_words": Fact("", "those lines"),
        "repairs": Fact("", "the smallest changes that make the list fit, in words"),
        "impurities": Fact("", "known impurities found among leftovers"),
        "unit_hint": Fact("", "what the text itself says against the record's keys"),
    },
    "signal": {
        "words": Fact("2.31 (s, 3H)", "the signal as typed"),
        "shift": Fact(2.31, "middle of the shift", "ppm"),
        "low": Fact(2.31, "lower end of the shift", "ppm"),
        "high": Fact(2.31, "upper end of the shift", "ppm"),
        "is_range": Fact(False, "a range was typed"),
        "width": Fact(0.0, "width of the range", "ppm"),
        "letters": Fact("s", "canonical multiplicity, empty if none"),
        "first_order": Fact(True, "the multiplicity is built of s, d, t, q ..."),
        "broad": Fact(False, "br is typed"),
        "apparent": Fact(False, "app is typed"),
        "nuclei": Fact(3.0, "number of nuclei (0: not stated)"),
        "counted": Fact(True, "the number of nuclei is stated"),
        "excess": Fact(0.0, "nuclei of it nothing explains"),
        "deficit": Fact(0.0, "nuclei of its environments above the number stated"),
        "explained": Fact(True, "some environment explains it"),
        "explained_by": Fact("CH3", "the environments that explain it, in words"),
        "exchangeable": Fact(False, "only exchangeable hydrogen explains it"),
        "outside_ppm": Fact(0.0, "distance to the windows of what explains it, or of any environment", "ppm"),
        "shift_gain": Fact(0.0, "what freeing its shift wins over the whole list", "nats"),
        "shift_cost": Fact(0.0, "what its shift costs in the explanation", "nats"),
        "letters_gain": Fact(0.0, "what freeing its letters and J wins over the whole list", "nats"),
        "letters_cost": Fact(0.0, "what its letters and J cost in the explanation", "nats"),
        "letters_floor": Fact(0.0, "least cost of its letters and J over every environment it could be", "nats"),
        "strict": Fact(False, "every environment it could be is open-chain sp3 with simple partners"),
        "expected_letters": Fact("s", "likely letters of the environments that explain it"),
        "expected_window": Fact("CH3 2.0 to 2.6 ppm", "windows of the environments that explain it"),
        "j_declared": Fact(0.0, "couplings its letters ask for (-1: not defined)"),
        "j_given": Fact(0.0, "couplings typed"),
        "j_distinct": Fact(0.0, "couplings typed that differ from each other"),
        "j_largest": Fact(0.0, "largest coupling typed, absolute", "Hz"),
        "j_impossible": Fact(0.0, "largest coupling beyond every coupling it could show (0: none)", "Hz"),
        "j_limit": Fact(0.0, "largest coupling believed for it", "Hz"),
        "j_overlap": Fact(False, "overlapped signals picked as one multiplet would explain its J"),
        "j_rounded": Fact(False, "its J are multiples of the shift rounding"),
        "j_unpaired": Fact(0.0, "a coupling with no partner among the other signals (0: none)", "Hz"),
        "j_near": Fact(0.0, "the coupling of a partner that lies nearest to it (0: none)", "Hz"),
        "solvent_line": Fact("", "residual solvent line it coincides with, empty if none"),
        "water_line": Fact("", "water line it coincides with, empty if none"),
        "impurity": Fact("", "known impurity whose lines it belongs to"),
        "attached_wrong": Fact(False, "13C: its attached-hydrogen letters fit no environment it could be"),
        "attached": Fact(-1.0, "13C: attached hydrogens by its letters (-1: not stated)"),
        "hidden": Fact(False, "its words say that it lies under something else"),
        "decimals": Fact(2.0, "decimals of the shift"),
        "j_decimals": Fact(1.0, "most decimals of its couplings"),
        "repair": Fact("", "smallest change that makes it fit, in words"),
    },
    "missing": {
        "words": Fact("CH3", "the group"),
        "nuclei": Fact(3.0, "nuclei of it no signal explains"),
        "window": Fact("CH3 2.0 to 2.6 ppm", "its window"),
        "cover": Fact("", "what may hide it"),
        "optional": Fact(False, "a reader would not miss it"),
        "listed_in_13c": Fact(False, "the 13C list holds a line for its carbon"),
    },
    "problem": {
        "code": Fact("", "code of the problem"),
        "says": Fact("", "what was found"),
        "expected": Fact("", "what was expected"),
        "blocks": Fact("", "what cannot be judged because of it: record, spectrum, signal or nothing"),
    },
    "registry": {
        "same_id": Fact("", "file of another record with the same compound id"),
        "same_structure": Fact("", "compound with the same structure"),
        "same_list": Fact("", "compound with the same list under another structure"),
        "nucleus": Fact("", "nucleus of that list"),
    },
}
GROUPS_OF_SCOPE: Mapping[str, tuple[str, ...]] = {
    "record": ("record", "limits"),
    "mass": ("record", "mass", "limits"),
    "elemental": ("record", "elemental", "limits"),
    "spectrum": ("record", "spectrum", "limits"),
    "signal": ("record", "spectrum", "signal", "limits"),
    "missing": ("record", "spectrum", "missing", "limits"),
    "problem": ("problem", "limits"),
    "registry": ("registry", "limits"),
}


def neutral(scope: str) -> dict[str, dict[str, Any]]:
    """Facts of a record without fault, for the groups a scope may use (limits excepted)."""
    groups = [group for group in GROUPS_OF_SCOPE[scope] if group != "limits"]
    return {group: {name: fact.neutral for name, fact in FACTS[group].items()} for group in groups}
