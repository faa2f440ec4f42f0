"""Ids that are paths, and runs in a hostile environment (records H112-H135).

H123-H128 and H134 are in `test_files` and `test_batch`, H129 and H131 in
`test_checker_kernel`, H133 in `test_cli` and `test_batch`.
"""

from __future__ import annotations

import ast
import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

import certgen
from certgen.cli import main
from tests.handmade import NAMES, handmade, stored

ROOT = Path(__file__).parent.parent
RECORDS = json.loads((ROOT / "tests/truths/hostile_inputs.json").read_text())["records"]
IDS = [r for r in RECORDS if "H112" <= r["id"] <= "H121"]


@pytest.mark.parametrize("record", IDS, ids=lambda r: str(r["id"]))
def test_an_id_is_never_a_path(
    record: dict[str, str], tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Status 2, one message, nothing written."""
    status = main(["certify", "--equation", "y' = y", f"--id={record['payload']}",
                   "--out", str(tmp_path / "out")])
    assert status == 2 and not (tmp_path / "out").exists()
    assert "id" in capsys.readouterr().err


@pytest.mark.parametrize("name", ["con", "aux", "nul", "com1", "lpt9"])
def test_an_id_is_no_reserved_file_name(name: str, tmp_path: Path) -> None:
    """Such a file cannot be copied to every machine: status 2 (H121)."""
    assert main(["certify", "--equation", "y' = y", "--id", name,
                 "--out", str(tmp_path)]) == 2


def certify(folder: Path, **environment: str) -> dict[str, bytes]:
    """The files that a fresh process makes of two claims."""
    out = folder / "out"
    equations = {"lamp": "y' = (x+1)/(x^2-2) y", "tide": r"\frac{u'}{u}=\frac{1}{3t}"}
    for name, equation in equations.items():
        done = subprocess.run(
            [sys.executable, "-m", "certgen", "certify", "--equation", equation,
             "--id", name, "--out", str(out)],
            cwd=folder, env=os.environ | {"PYTHONPATH": str(ROOT)} | environment,
            capture_output=True, text=True, check=False,
        )  # fmt: skip
        assert done.returncode in (0, 1), done.stderr
    return {path.name: path.read_bytes() for path in sorted(out.iterdir())}


def test_the_environment_changes_no_byte(tmp_path: Path) -> None:
    """Hash seeds, locales and time zones: the same JSON and TeX (H130, H135)."""
    environments = [
        {"PYTHONHASHSEED": "0", "LC_ALL": "C", "TZ": "UTC"},
        {"PYTHONHASHSEED": "17", "LC_ALL": "tr_TR.UTF-8", "TZ": "Asia/Kathmandu"},
        {"PYTHONHASHSEED": "4242", "LC_ALL": "de_DE.UTF-8", "PYTHONUTF8": "0"},
    ]
    made = []
    for i, environment in enumerate(environments):
        folder = tmp_path / str(i)
        folder.mkdir()
        made.append(certify(folder, **environment))
    assert sorted(made[0]) == ["lamp.json", "lamp.tex", "tide.json", "tide.tex"]
    assert made[0] == made[1] == made[2]


def test_nothing_here_reads_a_clock() -> None:
    """No module of the package imports a clock (H135)."""
    users = set()
    for path in Path(certgen.__file__).parent.rglob("*.py"):
        for node in ast.walk(ast.parse(path.read_text())):
            names = [a.name for a in node.names] if isinstance(node, ast.Import) else []
            if isinstance(node, ast.ImportFrom):
                names = [str(node.module)]
            if {"time", "datetime"} & set(names):
                users.add(path.name)
    assert users == set()


LITTLE_MEMORY = """
import resource, sys
resource.setrlimit(resource.RLIMIT_AS, ({mib} << 20, {mib} << 20))
from certgen.cli import main
sys.exit(main(["check", sys.argv[1], "--arithmetic", "plain"]))
"""


@pytest.mark.parametrize("mib", [512, 96])
def test_little_memory_gives_no_wrong_answer(mib: int, tmp_path: Path) -> None:
    """A right answer or status 3, never a traceback (H132)."""
    path = tmp_path / "lamp.json"
    path.write_text(stored(handmade(NAMES[0])))
    done = subprocess.run(
        [sys.executable, "-c", LITTLE_MEMORY.format(mib=mib), str(path)],
        capture_output=True, text=True, check=False,
    )  # fmt: skip
    assert done.returncode in (0, 3)
    assert done.returncode == 3 or "accepted" in done.stdout
    assert "Traceback" not in done.stderr
