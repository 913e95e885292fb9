"""Hydrogens that exchange: what they are called, and C-H and carbons that may not show.

The class decides the shift window and what the solvent does; names are those of ordinary trade use.
"""

from __future__ import annotations

from verify.environments.skeleton import DOUBLE, Skeleton

HALOGENS = frozenset({9, 17, 35, 53})


def exchange_class(s: Skeleton, atom: int) -> str:
    """Class of the hydrogens on ``atom``; "" if they do not exchange (C-H, Si-H, P-H, B-H)."""
    number = s.number[atom]
    if number == 8:
        return _oxygen(s, atom)
    if number == 7:
        return _nitrogen(s, atom)
    if number in (16, 34):
        return _sulfur(s, atom)
    if number in HALOGENS:
        return "acid"
    return ""


def _oxo(s: Skeleton, atom: int, element: int = 8) -> bool:
    """True if ``atom`` has a double bond to the element."""
    return any(code == DOUBLE and s.number[n] == element for n, code in s.order[atom].items())


def _oxygen(s: Skeleton, atom: int) -> str:
    linked = s.neighbours[atom]
    if not linked:
        return "water" if s.charge[atom] >= 0 else "hydroxide"
    if s.charge[atom] > 0:
        return "acid"
    base = linked[0]
    number = s.number[base]
    if number == 6:
        if s.aromatic(base):
            return "phenol"
        if _oxo(s, base):
            return "acid"
        return "enol" if s.unsaturated(base) else "alcohol"
    if number == 7:
        if any(code == DOUBLE and s.number[n] == 6 for n, code in s.order[base].items()):
            return "oxime"
        if any(s.number[n] in (6, 16) and _oxo(s, n) for n in s.neighbours[base] if n != atom):
            return "hydroxamic acid"
        return "hydroxylamine"
    names = {5: "boronic acid", 14: "silanol", 15: "phosphorus acid", 16: "sulfur acid", 8: "hydroperoxide"}
    return names.get(number, "acid")


def _sulfur(s: Skeleton, atom: int) -> str:
    linked = s.neighbours[atom]
    if linked and s.number[linked[0]] == 6:
        if s.aromatic(linked[0]):
            return "thiophenol"
        if _oxo(s, linked[0]):
            return "thioacid"
    return "thiol"


def _nitrogen(s: Skeleton, atom: int) -> str:
    if s.aromatic(atom):
        return "azole"
    if s.charge[atom] > 0:
        return "iminium" if s.unsaturated(atom) else "ammonium"
    if s.charge[atom] < 0:
        return "amide"
    if s.unsaturated(atom):
        return "imine"
    linked = s.neighbours[atom]
    acyl = [n for n in linked if s.number[n] == 6 and _oxo(s, n)]
    others = [n for n in linked if s.number[n] == 7]
    if others:
        if any(s.unsaturated(n) for n in others):
            return "hydrazone"
        deep = acyl or any(s.number[m] == 6 and _oxo(s, m) for n in others for m in s.neighbours[n])
        return "hydrazide" if deep else "hydrazine"
    if any(s.number[n] == 16 and _oxo(s, n) for n in linked):
        return "sulfonamide"
    if acyl:
        return _acylated(s, atom, acyl)
    if any(s.number[n] == 6 and (_oxo(s, n, 16) or _oxo(s, n, 34)) for n in linked):
        return "thioamide"
    if any(s.number[n] == 15 for n in linked):
        return "phosphoramide"
    if any(s.number[n] == 8 for n in linked):
        return "hydroxylamine"
    if any(_oxo(s, n, 7) and not s.aromatic(n) for n in linked):
        return "amidine"
    if any(s.aromatic(n) for n in linked):
        return "aniline"
    return "enamine" if any(s.unsaturated(n) and s.number[n] == 6 for n in linked) else "amine"


def _acylated(s: Skeleton, atom: int, acyl: list[int]) -> str:
    """Amide, imide, carbamate or urea N-H; two acyl groups make an imide."""
    if len(acyl) > 1:
        return "imide"
    rest = [n for n in s.neighbours[acyl[0]] if n != atom and s.order[acyl[0]][n] != DOUBLE]
    if any(s.number[n] == 7 for n in rest):
        return "urea"
    if any(s.number[n] in (8, 16) for n in rest):
        return "carbamate"
    if any(s.number[n] == 8 for n in s.neighbours[atom]):
        return "hydroxamic acid"
    return "amide"


def vanishing_hydrogen(s: Skeleton, atom: int) -> str:
    """Why the C-H hydrogens of ``atom`` may be absent, "" if they may not."""
    if s.number[atom] != 6:
        return "broad on boron" if s.number[atom] == 5 else ""
    if s.unsaturated(atom):
        return ""
    pulling = sum(_withdrawing(s, atom, n) for n in s.neighbours[atom])
    return "acidic C-H between two acceptors" if pulling >= 2 else ""


def _withdrawing(s: Skeleton, atom: int, n: int) -> bool:
    """True if ``n`` is C=O, C=N+, cyano, nitro or sulfonyl seen from ``atom``."""
    if s.number[n] == 6:
        return any(
            m != atom and code in (DOUBLE, 6) and s.number[m] in (7, 8) for m, code in s.order[n].items()
        )
    if s.number[n] == 7:
        return sum(s.number[m] == 8 for m in s.neighbours[n]) == 2
    return s.number[n] == 16 and sum(1 for m, c in s.order[n].items() if c == DOUBLE and s.number[m] == 8) == 2


def vanishing_carbon(s: Skeleton, atom: int) -> str:
    """Why the line of a carbon may be absent, "" if it may not."""
    if any(s.number[n] == 5 for n in s.neighbours[atom]):
        return "carbon on boron (quadrupolar broadening)"
    if any(s.number[n] == 1 and s.isotope[n] == 2 for n in s.neighbours[atom]):
        return "carbon on deuterium (split and weak)"
    return ""
