"""What `make test` does where programs are missing: install as root, otherwise name them and fail."""

from __future__ import annotations

import shutil
import subprocess
from pathlib import Path

SCRIPT = Path(__file__).resolve().parents[2] / ".ci" / "system_packages"
PROGRAMS = ("chromium", "soffice", "pdftoppm")
NEEDED = "chromium libreoffice-calc-nogui poppler-utils libatomic1 fonts-liberation"


def machine(folder: Path, *, user: int, apt_get: str = "exit 0", furnished: bool = False) -> Path:
    """A folder of programs that stands for a machine, bare or furnished with all that tests need except Calc."""
    for name in ("bash", "dirname", "readlink", "mktemp", "rm", "tail"):
        found = shutil.which(name)
        assert found is not None
        (folder / name).symlink_to(found)
    fakes = {
        "id": f"echo {user}",
        "apt-get": f'echo "$@" >> {folder}/asked\n{apt_get}',
        "ldconfig": "echo libatomic.so.1" if furnished else "exit 0",
        "fc-match": "echo LiberationSans-Regular.ttf" if furnished else "echo DejaVuSans.ttf",
        **(dict.fromkeys(PROGRAMS, "exit 0") if furnished else {}),
    }
    for name, body in fakes.items():
        (folder / name).write_text(f"#!{folder}/bash\n{body}\n", encoding="utf-8")
        (folder / name).chmod(0o755)
    return folder


def run(programs: Path) -> subprocess.CompletedProcess[str]:
    """Run the script on a machine."""
    command = [str(programs / "bash"), str(SCRIPT)]
    return subprocess.run(command, env={"PATH": str(programs)}, capture_output=True, text=True, check=False)


def test_system_packages__named_where_apt_may_not_be_used(tmp_path: Path) -> None:
    """A user who is not root is told what to install, and the run fails."""
    done = run(machine(tmp_path, user=1000))
    assert done.returncode == 1
    assert f"apt-get install --no-install-recommends {NEEDED}" in done.stderr
    assert not (tmp_path / "asked").exists()


def test_system_packages__installed_by_root(tmp_path: Path) -> None:
    """Root gets the missing packages through apt."""
    done = run(machine(tmp_path, user=0))
    assert done.returncode == 0
    asked = (tmp_path / "asked").read_text(encoding="utf-8").splitlines()
    assert asked == ["update", f"install --yes --no-install-recommends {NEEDED}"]


def test_system_packages__only_what_is_missing(tmp_path: Path) -> None:
    """A spreadsheet without Calc counts as missing; a browser that is there is left alone."""
    run(machine(tmp_path, user=0, furnished=True))
    assert (tmp_path / "asked").read_text(encoding="utf-8").splitlines()[-1].endswith(" libreoffice-calc-nogui")


def test_system_packages__nothing_to_do(tmp_path: Path) -> None:
    """Where everything is there, apt is not asked."""
    (tmp_path / "libsclo.so").touch()
    done = run(machine(tmp_path, user=0, furnished=True))
    assert done.returncode == 0
    assert not (tmp_path / "asked").exists()


def test_system_packages__a_failure_of_apt_is_shown(tmp_path: Path) -> None:
    """What apt said is printed, and the run fails."""
    done = run(machine(tmp_path, user=0, apt_get="echo no such mirror; exit 100"))
    assert done.returncode == 1
    assert "no such mirror" in done.stderr
