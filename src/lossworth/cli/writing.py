"""Papers reach the disk whole or not at all, and never over existing ones unasked."""

from __future__ import annotations

import shutil
import tempfile
from collections.abc import Iterable, Mapping
from pathlib import Path

from ..errors import OutputExists

__all__ = ["copy_tree", "refuse_existing", "write_all"]


def refuse_existing(folder: Path, names: Iterable[str]) -> None:
    """Stop if a paper would replace an existing file.

    Parameters
    ----------
    folder : Path
        Folder of the papers.
    names : iterable of str
        File names.

    Raises
    ------
    OutputExists
        Naming every file that stands in the way.
    """
    existing = [str(folder / name) for name in names if (folder / name).exists()]
    if existing:
        raise OutputExists(existing)


def write_all(folder: Path, contents: Mapping[str, bytes], *, whole_folders: Iterable[str] = ()) -> None:
    """Write several files: first all beside their places, then all moved there.

    Parameters
    ----------
    folder : Path
        Made where it is missing.
    contents : mapping of str to bytes
        By file name, with forward slashes where it lies in a folder below.
    whole_folders : iterable of str
        Folders below that hold nothing but these contents: what an earlier run left in them is removed.

    Raises
    ------
    OSError
        If the disk refuses; no file is then left half-written.
    """
    folder.mkdir(parents=True, exist_ok=True)
    with tempfile.TemporaryDirectory(dir=folder, prefix=".writing-") as draft:
        for name, content in contents.items():
            (Path(draft) / name).parent.mkdir(parents=True, exist_ok=True)
            (Path(draft) / name).write_bytes(content)
        for below in whole_folders:
            shutil.rmtree(folder / below, ignore_errors=True)
        for name in contents:
            (folder / name).parent.mkdir(parents=True, exist_ok=True)
            (Path(draft) / name).replace(folder / name)


def copy_tree(source: Path, target: Path) -> tuple[str, ...]:
    """Copy a folder of starter files.

    Parameters
    ----------
    source : Path
        Folder inside the package.
    target : Path
        Made where it is missing.

    Returns
    -------
    tuple of str
        Paths of the copied files, relative to the target.
    """
    copied = []
    for file in sorted(path for path in source.rglob("*") if path.is_file()):
        name = file.relative_to(source)
        (target / name).parent.mkdir(parents=True, exist_ok=True)
        shutil.copyfile(file, target / name)
        copied.append(name.as_posix())
    return tuple(copied)
