"""Typed atoms of a molecule and the codes of what stands around an atom, the terms of the fitted shift model.

A code is short ASCII text: ``<class><bonds>:<type>`` with the coarse types passed on the way, so that a
table of increments stays readable. ``class`` is the type of the observed atom without its ring, ``bonds``
the distance.
"""

from __future__ import annotations

from dataclasses import dataclass
from zlib import crc32

from rdkit import Chem

from verify.expectations.atom_types import AtomView, coarse_type, fine_type, view_atoms

REACH = 4


@dataclass(frozen=True, slots=True)
class Surroundings:
    """Per heavy atom of one molecule: ``fine`` type ("C4h2r6"), ``coarse`` type (one letter), and the view
    they were read from; ``shells``: circular codes of one, two and three bonds, empty until asked for."""

    view: AtomView
    fine: tuple[str, ...]
    coarse: tuple[str, ...]
    first: tuple[str, ...]
    second: tuple[str, ...]
    third: tuple[str, ...]


def survey(mol: Chem.Mol) -> Surroundings:
    """Type all heavy atoms of a sanitised molecule, with or without explicit H."""
    view = view_atoms(mol)
    atoms = range(view.heavy)
    fine = tuple(fine_type(view, a) for a in atoms)
    coarse = tuple(coarse_type(view, a) for a in atoms)
    around, order = view.around, view.order
    first = tuple(
        fine[a] + "".join(sorted(order[a][k] + fine[b] for k, b in enumerate(around[a]))) for a in atoms
    )
    second = _grown(view, first, _checks(first))
    third = _grown(view, second, _checks(second))
    return Surroundings(view, fine, coarse, first, second, third)


def _checks(codes: tuple[str, ...]) -> list[str]:
    return [f"{crc32(code.encode()):08x}" for code in codes]


def _grown(view: AtomView, codes: tuple[str, ...], marks: list[str]) -> tuple[str, ...]:
    """Codes of one bond more, shortened to a check sum that is the same on every machine."""
    grown = []
    for atom, code in enumerate(codes):
        text = code + "".join(sorted(view.order[atom][k] + marks[b] for k, b in enumerate(view.around[atom])))
        grown.append(f"{crc32(text.encode()):08x}")
    return tuple(grown)


def terms(found: Surroundings, atom: int) -> list[str]:
    """Codes of everything that acts on the shift of a nucleus at or on ``atom``, repeated as often as it occurs."""
    fine, coarse, around = found.fine, found.coarse, found.view.around
    own = fine[atom]
    kind = own.split("r", 1)[0] if own[0] == "C" else own
    broad = found.coarse[atom]
    result = [own, kind, "1" + found.first[atom], "2" + found.second[atom], "3" + found.third[atom]]
    seen = {atom}
    layer = [(atom, "")]
    for distance in range(1, REACH + 1):
        grown: list[tuple[int, str]] = []
        head = f"{kind}{distance}" if distance < 3 else f"{broad}{distance}"
        for here, path in layer:
            for other in around[here]:
                if other in seen:
                    continue
                result.append(f"{head}{path}:{fine[other]}")
                if distance == 2 or distance == 1:
                    result.append(f"{broad}{distance}{path}:{fine[other]}")
                grown.append((other, path + coarse[other]))
        seen.update(a for a, _ in grown)
        layer = grown
    result.extend(_geometry_terms(found, atom, broad))
    return result


def _geometry_terms(found: Surroundings, atom: int, broad: str) -> list[str]:
    """Terms of substituents held cis or trans across a double bond of the atom or of its neighbour."""
    view = found.view
    result = []
    for (one, other), (near, far, cis) in view.stereo.items():
        for start, end, ref, target in ((one, other, near, far), (other, one, far, near)):
            if atom == start:
                own = [b for b in view.around[atom] if b != end]
                if len(own) != 1:
                    continue
                for substituent in view.around[end]:
                    if substituent != start:
                        same = cis ^ (own[0] != ref) ^ (substituent != target)
                        result.append(f"{broad}z{'c' if same else 't'}:{found.fine[substituent]}")
            elif atom in view.around[start] and atom != end:
                for substituent in view.around[end]:
                    if substituent != start:
                        same = cis ^ (atom != ref) ^ (substituent != target)
                        result.append(f"{broad}y{'c' if same else 't'}:{found.fine[substituent]}")
    return result
