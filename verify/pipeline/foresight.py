"""What a structure should show, without any list: environments with windows and the patterns to be accepted."""

from __future__ import annotations

from dataclasses import dataclass, replace

from verify.environments.model import EnvironmentSet
from verify.environments.stage import find_environments
from verify.expectations.model import Expectation, Splitting
from verify.expectations.solvent import solvent_name
from verify.expectations.splitting import accepted_splittings
from verify.expectations.stage import expect
from verify.findings.problem import Problem
from verify.record.model import ComponentText, StructureText
from verify.structure.model import Structure
from verify.structure.stage import read_structure


@dataclass(frozen=True, slots=True)
class Foresight:
    """``expectations`` of one nucleus, highest shift first, splittings filled in; ``all`` those of every nucleus,
    aligned with ``environments.all``. ``structure`` is None only if a problem says why."""

    structure: Structure | None
    environments: EnvironmentSet
    expectations: tuple[Expectation, ...]
    all: tuple[Expectation, ...]
    problems: tuple[Problem, ...]
    solvent: str | None
    field_mhz: float


def foresee_structure(
    text: StructureText, nucleus: str, solvent: str | None, field_mhz: float,
    components: tuple[ComponentText, ...] = (),
) -> Foresight:
    """Expectations of a structure for "1H", "13C", "19F" or "31P" at a 1H frequency in MHz."""
    read = read_structure(text, components)
    if read.structure is None:
        return Foresight(None, EnvironmentSet(()), (), (), read.problems, solvent, field_mhz)
    environments = find_environments(read.structure)
    known = solvent_name(solvent) or None
    everything = expect(read.structure, environments, known, field_mhz)
    mine = [e for e in everything if e.environment.nucleus == nucleus]
    mine.sort(key=lambda e: (-e.window.centre, e.environment.index))
    full = tuple(replace(e, splittings=_splittings(e, nucleus)) for e in mine)
    return Foresight(read.structure, environments, full, everything, read.problems, known, field_mhz)


def _splittings(expectation: Expectation, nucleus: str) -> tuple[Splitting, ...]:
    """Patterns of hydrogen; lines of other nuclei are reported decoupled from it, split by F or P at most."""
    return accepted_splittings(expectation.couplings) if nucleus == "1H" or expectation.couplings else ()
