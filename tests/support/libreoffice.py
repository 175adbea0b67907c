"""Workbooks recalculated by LibreOffice, forced: a cell with a cached value is otherwise left as it is."""

from __future__ import annotations

import atexit
import os
import shutil
import subprocess
import tempfile
from collections.abc import Sequence
from functools import cache
from pathlib import Path

__all__ = ["recalculated"]

#: Mode 0 recalculates every file on loading; without it LibreOffice trusts the cached values.
_SETTINGS = """<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry" xmlns:xs="http://www.w3.org/2001/XMLSchema"
 xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse">
<value>0</value></prop></item>
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="ODFRecalcMode" oor:op="fuse">
<value>0</value></prop></item>
</oor:items>
"""
_SECONDS = 240


@cache
def _profile() -> Path:
    """A profile of this process alone: two running at once on one profile hinder each other."""
    worker = os.environ.get("PYTEST_XDIST_WORKER", "main")
    folder = Path(tempfile.mkdtemp(prefix=f"recalculation-{worker}-"))
    atexit.register(shutil.rmtree, folder, ignore_errors=True)
    (folder / "user").mkdir()
    (folder / "user" / "registrymodifications.xcu").write_text(_SETTINGS, encoding="utf-8")
    return folder


def _program() -> str:
    program = shutil.which("soffice")
    assert program is not None, "soffice is missing; install the package libreoffice-calc-nogui (or libreoffice-calc)"
    return program


def recalculated(files: Sequence[Path], folder: Path) -> tuple[Path, ...]:
    """Workbooks as LibreOffice computes them, under the same names in another folder, by one call of the program.

    A missing program is a failure and never a reason to skip; the program ends with 0 also for files that it cannot
    read, so that the results are looked for.
    """
    folder.mkdir(parents=True, exist_ok=True)
    results = tuple(folder / file.name for file in files)
    assert len(set(results)) == len(files), "two files of the same name"
    assert not any(result.exists() for result in results), "an older result is in the way"
    command = [_program(), f"-env:UserInstallation={_profile().as_uri()}", "--headless", "--norestore"]
    command += ["--convert-to", "xlsx:Calc MS Excel 2007 XML", "--outdir", str(folder), *map(str, files)]
    done = subprocess.run(command, capture_output=True, text=True, timeout=_SECONDS, check=False)
    missing = [result.name for result in results if not result.is_file() or not result.stat().st_size]
    assert missing == [], f"not recalculated: {missing}\n{done.stdout}\n{done.stderr}"
    return results
