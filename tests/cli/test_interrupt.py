"""Ctrl-C at any moment ends the real command with one line, whether it reaches the workers or not."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
RECORD = 'structure: {smiles: "CCOC(C)=O"}\nspectra:\n- {nucleus: 1H, report: "4.12 (q, J = 7.1 Hz, 2H)"}\n'


@pytest.fixture(scope="module")
def large_registry(tmp_path_factory: pytest.TempPathFactory) -> Path:
    root = tmp_path_factory.mktemp("large")
    (root / "registry.yaml").write_text("name: large\n", encoding="utf-8")
    for number in range(3000):
        folder = root / "compounds" / f"C-{number}"
        folder.mkdir(parents=True)
        (folder / "record.yaml").write_text(RECORD, encoding="utf-8")
    return root


@pytest.mark.skipif(not hasattr(os, "killpg"), reason="needs process groups of a POSIX system")
@pytest.mark.parametrize("reaches_workers", [True, False])
@pytest.mark.parametrize("wait", [2.0, 4.0])
def test_ctrl_c_ends_with_one_line(large_registry: Path, tmp_path: Path, wait: float, reaches_workers: bool) -> None:
    report = tmp_path / "report.json"
    command = [sys.executable, "-m", "verify", "gate", str(large_registry), "--workers", "2", "--json", str(report)]
    process = subprocess.Popen(
        command, cwd=ROOT, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, start_new_session=True
    )
    time.sleep(wait)
    if reaches_workers:
        os.killpg(process.pid, signal.SIGINT)
    else:
        process.send_signal(signal.SIGINT)
    out, error = process.communicate(timeout=120)
    assert (process.returncode, out) == (130, "")
    assert error == "peakwitness: stopped; no report was written\n"
    assert list(tmp_path.iterdir()) == []
