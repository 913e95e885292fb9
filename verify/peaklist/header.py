"""Reads what stands before the first signal: nucleus, frequency, solvent, temperature, and where the list begins."""

from __future__ import annotations

import re
from dataclasses import dataclass

_NUCLEUS = re.compile(
    r"\b(?:(1|l|I)\s*-?\s*(?:\{[^}]*\}\s*)?H|(13)\s*-?\s*C|(19)\s*-?\s*F|(31)\s*-?\s*P)(?:\s*\(\s*1\s*H\s*\))?[\s_-]*N\s?M\s?R\b"
    r"|\b(?:(H)|(C)|(F)|(P))[\s_-]*NMR\b|\b(proton)\s*NMR\b|\b(carbon)(?:-13)?\s*NMR\b|\bNMR\s*\(?\s*(?:(1)\s*H|(13)\s*C|(19)\s*F|(31)\s*P)\b",
    re.IGNORECASE,
)
_NAMES = ("1H", "13C", "19F", "31P", "1H", "13C", "19F", "31P", "1H", "13C", "1H", "13C", "19F", "31P")
_FIELD = re.compile(r"(?<![\d.])(\d{2,4}(?:\.\d{1,3})?)\s*[- ]?\s*M\s?H\s?z", re.IGNORECASE)
_TEMPERATURE = re.compile(r"(?<![\d.])(-?\d{1,3}(?:\.\d+)?)\s*(°\s*C|º\s*C|K\b|℃)")
# Usual names of deuterated solvents, as typed in reports (common practice).
_SOLVENTS = (
    (r"CDCl\s?3|CDC[l1I]3|chloroform-?\s*d1?|d1?-?chloroform|deuterochloroform", "CDCl3"),
    (r"DMSO-?\s*d?\s*-?\s*6|\(CD3\)2\s?SO|d\s?6?-?\s*DMSO|DMSO", "DMSO-d6"),
    (r"CD3\s?OD|MeOD(?:-?d[34])?|MeOH-?d4|methanol-?\s*d\s*4|d4-?(?:methanol|MeOH)|CD3OH", "CD3OD"),
    (r"D2\s?O|deuterium oxide", "D2O"),
    (r"acetone-?\s*d\s*6|\(CD3\)2\s?CO|d6-?acetone|acetone", "acetone-d6"),
    (r"CD3\s?CN|MeCN-?d3|acetonitrile-?\s*d\s*3|d3-?(?:MeCN|acetonitrile)", "CD3CN"),
    (r"C6\s?D6|benzene-?\s*d\s*6|d6-?benzene", "C6D6"),
    (r"CD2\s?Cl2|dichloromethane-?\s*d\s*2|DCM-?d2|methylene chloride-?d2", "CD2Cl2"),
    (r"toluene-?\s*d\s*8|C7D8|d8-?toluene", "toluene-d8"),
    (r"THF-?\s*d\s*8|d8-?THF|tetrahydrofuran-?d8", "THF-d8"),
    (r"pyridine-?\s*d\s*5|C5D5N|py-?d5|d5-?pyridine", "pyridine-d5"),
    (r"DMF-?\s*d\s*7|d7-?DMF", "DMF-d7"),
    (r"TFA-?\s*d1?|CF3CO(?:2|O)D|d-?TFA", "TFA-d"),
    (r"dioxane-?\s*d\s*8", "dioxane-d8"),
)
_SOLVENT = re.compile("|".join(f"(?P<s{n}>(?<![A-Za-z]){pattern}(?![A-Za-z]))" for n, (pattern, _) in enumerate(_SOLVENTS)), re.IGNORECASE)
# Pieces that may stand between "NMR" and the first shift.
_LEAD = re.compile(
    r"(?:\s+|[,;:=.]|\((?=[^()]{0,120}(?:MHz|M Hz|mhz|ppm|δ|J\s?(?:in|/)\s?Hz|DMSO|CD|D2O|MeO|acetone|TMS|-d\d|K\)|298|room|rt))[^()]{0,160}(?:\([^()]{0,40}\)[^()]{0,80}){0,4}\)"
    r"|δ\s*(?:_?\s*\(?\s*[HCFP]\b\s*\)?)?|delta\b|(?:chemical )?shifts?\b|(?:in\s+)?ppm\b|\(\s*(?:δ|ppm|in ppm|δ,? ?(?:in )?ppm|d|δ/ppm|J in Hz)\s*\)|/|\bin\b"
    r"|\d{2,4}(?:\.\d{1,3})?\s*M\s?Hz|[-+]?\d{1,3}\s*(?:°\s*C|K\b)|\bTMS\b|NMR\b|\bdata\b|\bspectrum\b|\bat\b|\bsolvent\b|\bd\b(?=\s*[=:]?\s*\d{1,3}\.)"
    r"|\{[^}]*\}|-)+",
    re.IGNORECASE,
)


@dataclass(frozen=True, slots=True)
class Header:
    """``end``: offset at which the list begins. Field in MHz, temperature in K; "" or None where not stated."""

    nucleus: str
    field_mhz: float | None
    solvent: str | None
    temperature_k: float | None
    end: int


def read_header(text: str) -> Header:
    """Read the head of plain text; everything is optional."""
    nucleus, end = "", 0
    found = _NUCLEUS.search(text[:200])
    if found is not None and not re.search(r"\d\.\d+\s*\(", text[: found.start()]):
        nucleus = _NAMES[next(n for n, group in enumerate(found.groups()) if group)]
        end = found.end()
    end = _lead(text, end)
    head = text[: min(end, 400)]
    field = _FIELD.search(head)
    return Header(nucleus, float(field.group(1)) if field else None, _solvent(head), _temperature(head), end)


def only_section(text: str, nucleus: str | None) -> str:
    """The text with everything blanked but one spectrum of a paragraph that tells of several, each under its own head.

    The section of ``nucleus``, else the first; a text without a second head stays as it is. The length is kept.
    """
    heads = [m for m in _NUCLEUS.finditer(text) if not _inside_bracket(text, m.start())]
    if len(heads) < 2:
        return text
    names = [_NAMES[next(n for n, group in enumerate(head.groups()) if group)] for head in heads]
    chosen = names.index(nucleus) if nucleus in names else 0
    start = heads[chosen].start() if chosen else 0
    end = heads[chosen + 1].start() if chosen + 1 < len(heads) else len(text)
    return " " * start + text[start:end] + " " * (len(text) - end)


def _inside_bracket(text: str, position: int) -> bool:
    """True where a bracket opened shortly before is still open: "(see 13C NMR)" is no head."""
    before = text[max(0, position - 60) : position]
    return before.count("(") > before.count(")")


def _lead(text: str, start: int) -> int:
    """Offset behind everything that belongs to the head."""
    position = start
    while True:
        solvent = _SOLVENT.match(text, position)
        lead = solvent or _LEAD.match(text, position)
        if lead is None or lead.end() == position:
            break
        position = lead.end()
    signed = text[position - 1 : position] == "-" and text[position : position + 1].isdigit()
    return position - 1 if signed and position > start else position


def _solvent(head: str) -> str | None:
    names = [_SOLVENTS[int(m.lastgroup[1:])][1] for m in _SOLVENT.finditer(head) if m.lastgroup]
    distinct = list(dict.fromkeys(names))
    return "/".join(distinct[:2]) if distinct else None


def _temperature(head: str) -> float | None:
    found = _TEMPERATURE.search(head)
    if found is None:
        return None
    value = float(found.group(1))
    kelvin = value if found.group(2).startswith("K") else value + 273.15
    return kelvin if 100.0 <= kelvin <= 500.0 else None
