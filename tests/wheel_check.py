"""Build the wheel, install it in a clean environment away from the checkout, and run the main job from there.

`make test` calls it; run it alone with ``python tests/wheel_check.py``. It ends with exit code 1 and a sentence for
each thing that is not as it should be.
"""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

from support.demo_figures import differences

CHECKOUT = Path(__file__).resolve().parents[1]
PAPERS = ("evaluation.json", "evaluation.xlsx", "evaluation.html")
#: Nothing of the checkout may reach the installed package through these.
DROPPED = ("PYTHONPATH", "PYTHONHOME", "VIRTUAL_ENV")


def run(*command: str | Path, folder: Path) -> str:
    """Run a command and return what it printed; end the check with its messages if it fails."""
    environment = {name: value for name, value in os.environ.items() if name not in DROPPED}
    done = subprocess.run(command, cwd=folder, env=environment, capture_output=True, text=True, check=False)
    if done.returncode:
        shown = " ".join(str(part) for part in command)
        sys.exit(f"wheel check: exit code {done.returncode} from: {shown}\n{done.stdout}{done.stderr}")
    return done.stdout


def installed(work: Path) -> Path:
    """Build source distribution and wheel, install the wheel in a new environment, return its folder of programs."""
    # The wheel is built from the source distribution, so that nothing left in the checkout can slip into it.
    run(sys.executable, "-m", "build", "--outdir", work / "dist", CHECKOUT, folder=work)
    (wheel,) = (work / "dist").glob("*.whl")
    environment = work / ".wheel-venv"
    run(sys.executable, "-m", "venv", environment, folder=work)
    programs = environment / ("Scripts" if os.name == "nt" else "bin")
    run(programs / "python", "-m", "pip", "install", "--quiet", wheel, folder=work)
    return programs


def main() -> None:
    """Check the wheel."""
    with tempfile.TemporaryDirectory(prefix="lossworth-wheel-") as place:
        work = Path(place).resolve()
        programs = installed(work)
        home = run(programs / "python", "-c", "import lossworth; print(lossworth.__file__)", folder=work).strip()
        if work not in Path(home).parents:
            sys.exit(f"wheel check: the package comes from {home} and not from the wheel")
        tender = work / "demo tender"
        shutil.copytree(
            CHECKOUT / "sample_bids", tender, ignore=shutil.ignore_patterns("papers", "*.py", "__pycache__")
        )
        run(programs / "lossworth", "evaluate", tender, folder=work)
        missing = [name for name in PAPERS if not (tender / "papers" / name).stat().st_size]
        found = differences(json.loads((tender / "papers" / "evaluation.json").read_text(encoding="utf-8")))
        run(programs / "lossworth", "start", work / "own tender", folder=work)
        run(programs / "lossworth", "rates", work / "own tender", folder=work)
    if missing or found:
        sys.exit("wheel check:\n" + "\n".join([*(f"{name} is empty" for name in missing), *found]))
    sys.stdout.write("wheel check: the installed wheel evaluates the demo to the cent, away from the checkout\n")


if __name__ == "__main__":
    main()
