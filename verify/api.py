"""The Python interface: examine a record or a table, ask what a structure shows, gate a registry."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING, Any

from verify.engine.run import gate_folder
from verify.engine.settings import DEFAULT_POLICY, Overrides, RunSettings, whole_paths, whole_policy
from verify.engine.work import Bench, judge_reading, make_bench
from verify.environments.model import Environment
from verify.environments.stage import find_environments
from verify.errors import UsageError
from verify.expectations.model import Expectation
from verify.expectations.solvent import solvent_name
from verify.findings.finding import Deviation, Level
from verify.findings.result import RecordResult
from verify.findings.run import RunResult
from verify.pipeline.foresight import foresee_structure
from verify.record.model import Record, RecordReading, StructureText
from verify.record.stage import reading_of, record_from_mapping
from verify.sources.rows import record_of_row
from verify.structure.stage import read_structure

if TYPE_CHECKING:
    import pandas as pd

NUCLEI = ("1H", "13C", "19F", "31P")
EXCHANGING = ("D2O", "CD3OD")  # solvents in which O-H, N-H and S-H become O-D, N-D and S-D. common practice
FRAME_COLUMNS = (
    "compound",
    "verdict",
    "errors",
    "warnings",
    "notes",
    "first_rule",
    "first_message",
    "unassessed_because",
)


def examine(
    record: Mapping[str, Any] | Record | RecordReading,
    policy: str = DEFAULT_POLICY,
    packs: Sequence[str] = (),
    today: str | None = None,
    deviations: Iterable[Deviation] = (),
) -> RecordResult:
    """Judge one record; a record that cannot be judged comes back "unassessed" with the reason, never raised.

    ``packs`` are folders of further rules; ``today`` (ISO date, else the calendar's) decides expiry of deviations.
    Raises ConfigurationError for a policy or pack that cannot be used.
    """
    return judge_reading(_reading(record), _bench(policy, packs, today, tuple(deviations)))


def gate(
    path: str,
    policy: str = "",
    packs: Sequence[str] = (),
    deviations: str = "",
    workers: int = 1,
    today: str | None = None,
) -> RunResult:
    """Judge every record of a registry folder; what is given here overrides its ``registry.yaml``.

    ``workers`` 0 chooses by the number of records and processors. Raises UsageError where ``path`` is no
    registry, ConfigurationError where its settings cannot be used.
    """
    overrides = Overrides(policy, tuple(packs), deviations)
    return gate_folder(path, overrides, workers=workers, today=_today(today))


def environments(structure: str, nucleus: str = "1H", solvent: str | None = None) -> tuple[Environment, ...]:
    """What gives one signal each, for a SMILES, InChI or MOL text.

    In a solvent that exchanges O-H, N-H and S-H (D2O, CD3OD) those are left out. Raises UsageError for a
    structure that cannot be read or a nucleus that is not known.
    """
    _require_nucleus(nucleus)
    read = read_structure(structure_text(structure))
    if read.structure is None:
        raise UsageError(f"the structure cannot be read: {read.problems[0].message}")
    found = find_environments(read.structure).of(nucleus)
    if solvent_name(solvent) in EXCHANGING:
        return tuple(environment for environment in found if not environment.exchangeable)
    return found


def foresee(
    structure: str, nucleus: str = "1H", solvent: str | None = "CDCl3", field_mhz: float = 400.0
) -> tuple[Expectation, ...]:
    """What the spectrum should show, highest shift first; ``field_mhz`` is the 1H frequency of the magnet.

    Raises UsageError for a structure that cannot be read or a nucleus that is not known.
    """
    _require_nucleus(nucleus)
    found = foresee_structure(structure_text(structure), nucleus, solvent, field_mhz)
    if found.structure is None:
        raise UsageError(f"the structure cannot be read: {found.problems[0].message}")
    return found.expectations


def examine_frame(
    frame: pd.DataFrame, policy: str = DEFAULT_POLICY, packs: Sequence[str] = (), today: str | None = None
) -> pd.DataFrame:
    """Judge every row of a pandas frame; the result has the same index and the columns FRAME_COLUMNS.

    Columns read: compound, smiles | molblock | inchi, h1, h1_mhz, h1_solvent, the same for c13, f19 and p31,
    hrms_ion, hrms_calculated, hrms_found. Raises ConfigurationError for a policy or pack that cannot be used.
    """
    import pandas as pd  # loaded here because it would double the start-up time of everything else

    bench = _bench(policy, packs, today, ())
    rows = [
        _frame_row(judge_reading(record_from_mapping(record_of_row(row, f"row {number}")), bench))
        for number, row in enumerate(frame.to_dict(orient="records"), 1)
    ]
    return pd.DataFrame(rows, index=frame.index, columns=list(FRAME_COLUMNS))


def structure_text(structure: str) -> StructureText:
    """A structure typed as SMILES, InChI or MOL block; the text itself tells which."""
    if structure.lstrip().startswith("InChI="):
        return StructureText("inchi", structure.strip(), "/structure/inchi")
    if "\n" in structure and "M  END" in structure:
        return StructureText("molblock", structure, "/structure/molblock")
    return StructureText("smiles", structure.strip(), "/structure/smiles")


def _reading(record: Mapping[str, Any] | Record | RecordReading) -> RecordReading:
    if isinstance(record, RecordReading):
        return record
    return reading_of(record) if isinstance(record, Record) else record_from_mapping(record)


def _bench(policy: str, packs: Sequence[str], today: str | None, deviations: tuple[Deviation, ...]) -> Bench:
    whole = whole_paths(tuple(packs))
    return make_bench(RunSettings(_today(today), whole_policy(policy), whole, deviations=deviations))


def _today(today: str | None) -> str:
    return today or date.today().isoformat()


def _require_nucleus(nucleus: str) -> None:
    if nucleus not in NUCLEI:
        raise UsageError(f'"{nucleus}" is no nucleus that is looked at; expected one of {", ".join(NUCLEI)}')


def _frame_row(result: RecordResult) -> tuple[object, ...]:
    levels = [result.standing(level) for level in Level]
    gravest = next((found[0] for found in levels if found), None)
    return (
        result.compound,
        str(result.verdict),
        *(len(found) for found in levels),
        gravest.rule if gravest else "",
        gravest.message if gravest else "",
        result.unassessed_because,
    )
