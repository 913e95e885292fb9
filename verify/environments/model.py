"""Environments: sets of nuclei that give one signal, and how they couple."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Neighbour:
    """Coupling of one nucleus of an environment to a set of equivalent nuclei.

    ``environment`` indexes ``EnvironmentSet.all`` (H, F and P alike). ``count`` nuclei of it, seen from ONE nucleus of
    the owning environment along paths of ``bonds`` bonds. ``path`` is one representative chain of atom
    indices from the owning nucleus to the partner nucleus, both included.
    ``same`` is True for couplings inside one environment (magnetically inequivalent, AA'XX').
    """

    environment: int
    nucleus: str
    count: int
    bonds: int
    path: tuple[int, ...]
    same: bool = False


@dataclass(frozen=True, slots=True)
class Environment:
    """One expected signal.

    index        position in ``EnvironmentSet.all``
    nucleus      "1H", "13C", "19F", "31P"
    atoms        indices of the nuclei in ``Structure.mol`` (explicit H), sorted
    carriers     heavy atoms that bear them (for 13C, 19F, 31P: the atoms themselves), input order
    count        number of nuclei (times the component's stoichiometry)
    kind         "single", "homotopic", "enantiotopic", "diastereotopic"
    constitution class number without stereo: equal number = same constitution (may coincide, may be drawn apart)
    partners     indices of environments it may coincide with
    exchangeable "" or the class: "alcohol", "phenol", "acid", "amine", "amide", "ammonium", "thiol", "enol", ...
    may_double   "" or why two sets may be seen ("amide rotamer", "undefined stereo", "tautomer", ...)
    may_vanish   "" or why it may be absent
    attached_h   13C only: number of H on the carbon; else -1
    component    index into ``Structure.components``
    magnetically_equivalent   all nuclei have equal couplings to every nucleus outside
    neighbours   couplings, see ``Neighbour``
    reason       one line in words for reports
    """

    index: int
    nucleus: str
    atoms: tuple[int, ...]
    carriers: tuple[int, ...]
    count: float
    kind: str
    constitution: int
    partners: tuple[int, ...]
    exchangeable: str
    may_double: str
    may_vanish: str
    attached_h: int
    component: int
    magnetically_equivalent: bool
    neighbours: tuple[Neighbour, ...]
    reason: str


@dataclass(frozen=True, slots=True)
class EnvironmentSet:
    """All environments of a structure; ``all[i].index == i``."""

    all: tuple[Environment, ...]

    def of(self, nucleus: str) -> tuple[Environment, ...]:
        """Environments of one nucleus, in index order."""
        return tuple(e for e in self.all if e.nucleus == nucleus)
