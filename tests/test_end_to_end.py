"""The program as a user runs it: in a process of its own, killed at any moment, in fresh folders."""

from __future__ import annotations

import json
import random
import re
import shlex
import subprocess
import sys
import time
from pathlib import Path

import h5py
import numpy as np
import pytest
from documentation import ROOT
from documents import text

README = (ROOT / "README.md").read_text(encoding="utf-8")
SLOPEWELL = (sys.executable, "-m", "slopewell")
OUTPUTS = "".join(f'[[output]]\nfile = "pair.{ending}"\n' for ending in ("h5", "json", "csv"))


def run(*arguments: str, folder: Path, **options: object) -> subprocess.CompletedProcess[str]:
    return subprocess.run([*SLOPEWELL, *arguments], cwd=folder, capture_output=True, text=True, check=False, **options)


def test_the_command_of_the_readme_writes_every_output(tmp_path: Path) -> None:
    (command,) = re.findall(r"\.venv/bin/slopewell (tabulate samples/.*)\n", README)
    *arguments, into = shlex.split(command)
    assert into == "tables"
    done = run(*arguments, str(tmp_path / into), folder=ROOT)
    assert (done.returncode, done.stderr) == (0, "")
    names = {path.name for path in (tmp_path / into).iterdir()}
    assert len([name for name in names if name.endswith(".dat")]) == 10
    assert {"membrane.h5", "membrane.json", "W-P.csv", "W-P.csv-metadata.json"} <= names
    with h5py.File(tmp_path / into / "membrane.h5") as file:
        numbers = file["interactions/W-P"]
        assert numbers["energy"].attrs["units"] == "eV"
        text_rows = np.loadtxt(tmp_path / into / "W-P.dat")
        assert text_rows[:, 1] == pytest.approx(numbers["energy"][()], rel=1e-15)


def test_the_script_that_is_installed_is_the_same_program(tmp_path: Path) -> None:
    script = Path(sys.executable).with_name("slopewell")
    shown = subprocess.run([str(script), "--version"], cwd=tmp_path, capture_output=True, text=True, check=True)
    assert shown.stdout == run("--version", folder=tmp_path).stdout


def test_a_reader_that_goes_away_is_no_error(tmp_path: Path) -> None:
    (tmp_path / "pair.toml").write_text(text())
    command = f"{shlex.join([*SLOPEWELL, 'forms'])} | head -1"
    done = subprocess.run(["bash", "-o", "pipefail", "-c", command], capture_output=True, text=True, check=False)
    assert (done.returncode, done.stderr) == (0, "")


def test_a_terminal_that_knows_no_unicode_gets_no_traceback(tmp_path: Path) -> None:
    (tmp_path / "pair.toml").write_text(text(cutoff='cutoff = { at = 9, treatment = "truncate" }\n'))
    done = run("check", "pair.toml", folder=tmp_path, env={"PYTHONIOENCODING": "ascii", "PATH": "/usr/bin:/bin"})
    assert done.returncode == 1
    assert "Traceback" not in done.stderr


def test_an_interruption_says_so_and_leaves_nothing(tmp_path: Path) -> None:
    import signal

    (tmp_path / "pair.toml").write_text(text(grid="[grid]\nfrom = 2.5\nto = 9\nrows = 400001\n", outputs=OUTPUTS))
    process = subprocess.Popen(
        [*SLOPEWELL, "tabulate", "pair.toml", "--into", "out"], cwd=tmp_path, stderr=subprocess.PIPE
    )
    time.sleep(1.0)
    process.send_signal(signal.SIGINT)
    _, errors = process.communicate(timeout=60)
    assert b"Traceback" not in errors
    assert process.returncode in (130, -signal.SIGINT, 0)


def whole(path: Path) -> str:
    """The title that a table's file holds; fails where the file is not whole."""
    if path.suffix == ".json":
        return str(json.loads(path.read_text(encoding="utf-8"))["title"])
    if path.suffix == ".h5":
        with h5py.File(path) as file:
            assert file["interactions/A-A/force"].shape == (3001,)
            return str(file.attrs["title"])
    lines = path.read_text(encoding="utf-8").splitlines()
    assert len(lines) == 3002
    return str(json.loads(path.with_name(f"{path.name}-metadata.json").read_text(encoding="utf-8"))["dc:title"])


def test_killing_it_at_any_moment_leaves_the_old_files_or_the_new_ones(tmp_path: Path) -> None:
    document = text(grid="[grid]\nfrom = 2.5\nto = 9\nrows = 3001\n", outputs=OUTPUTS)
    path, out = tmp_path / "pair.toml", tmp_path / "out"
    path.write_text(document)
    command = [*SLOPEWELL, "tabulate", str(path), "--into", str(out)]
    started = time.monotonic()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
    lasts = time.monotonic() - started
    moments = random.Random(11)
    for turn in range(20):
        path.write_text(document.replace("Argon-like", f"Turn {turn}, argon-like"))
        process = subprocess.Popen(command, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        # Most of the time passes before anything is written, so most kills come late.
        time.sleep(lasts * moments.uniform(0.6, 1.1))
        process.kill()
        process.wait()
        names = {file.name for file in out.iterdir() if not file.name.startswith(".")}
        assert names == {"pair.h5", "pair.json", "pair.csv", "pair.csv-metadata.json"}
        assert all("argon-like pair" in whole(out / name).lower() for name in names if "metadata" not in name)
