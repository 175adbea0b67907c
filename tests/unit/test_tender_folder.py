"""Which files make a tender."""

from __future__ import annotations

from pathlib import Path

from lossworth.intake.tender_folder import find_inputs, find_tender
from support.tender_folders import told, write_folder


def shown(folder: Path, bids: tuple[Path, ...] = ()) -> list[str]:
    """Bid files by the names that findings give them."""
    inputs, _ = find_inputs(folder, bids)
    assert inputs is not None
    return [file.shown_as for file in inputs.bids]


def test_find_inputs__folder(tmp_path: Path) -> None:
    """A folder has its tender file, its bids in the order of their names, and a place for papers."""
    folder = write_folder(tmp_path / "t", bids={"b.csv": "x", "a.xlsx": "x", "c.pdf": "x"})
    inputs, findings = find_inputs(folder)
    assert inputs is not None
    assert (inputs.tender.shown_as, inputs.papers, findings) == ("tender.toml", folder / "papers", ())
    assert shown(folder) == ["bids/a.xlsx", "bids/b.csv", "bids/c.pdf"]


def test_find_inputs__tender_file(tmp_path: Path) -> None:
    """The tender file may be named in place of its folder, under any name."""
    folder = write_folder(tmp_path / "t")
    other = folder / "other.toml"
    other.write_text((folder / "tender.toml").read_text())
    inputs, _ = find_inputs(other)
    assert inputs is not None
    assert (inputs.tender.path, inputs.tender.shown_as) == (other, "other.toml")
    assert shown(other) == ["bids/offers.csv"]


def test_find_inputs__ignored_files(tmp_path: Path) -> None:
    """Lock files and hidden files are no bids."""
    bids = {"~$a.xlsx": "x", ".~lock.a.xlsx#": "x", ".DS_Store": "x", "a.csv": "x"}
    assert shown(write_folder(tmp_path, bids=bids)) == ["bids/a.csv"]


def test_find_inputs__bids_named(tmp_path: Path) -> None:
    """Files and folders named are taken in place of those in the folder; a file named twice is one."""
    folder = write_folder(tmp_path / "t")
    outside = tmp_path / "outside" / "late.csv"
    outside.parent.mkdir()
    outside.write_text("x")
    inside = folder / "bids" / "offers.csv"
    assert shown(folder, (outside, inside, folder / "bids")) == [outside.as_posix(), "bids/offers.csv"]


def test_find_inputs__missing_bid(tmp_path: Path) -> None:
    """A bid file that is named and not there is a finding."""
    folder = write_folder(tmp_path)
    _, findings = find_inputs(folder, (folder / "bids" / "none.csv",))
    assert told(findings) == [("file-missing", "bids/none.csv", None)]


def test_find_inputs__folder_inside(tmp_path: Path) -> None:
    """A folder inside the bids is not entered, and said so."""
    folder = write_folder(tmp_path)
    (folder / "bids" / "old").mkdir()
    _, findings = find_inputs(folder)
    assert told(findings) == [("file-not-read", "bids/old", None)]


def test_find_inputs__no_tender_file(tmp_path: Path) -> None:
    """A folder without a tender file, and a path that is not there, are findings."""
    inputs, findings = find_inputs(write_folder(tmp_path / "t", tender=None))
    assert inputs is None
    assert told(findings) == [("file-missing", "tender.toml", None)]
    inputs, findings = find_inputs(tmp_path / "none")
    assert inputs is None
    assert told(findings) == [("file-missing", str(tmp_path / "none"), None)]


def test_find_tender__strange_paths() -> None:
    """A path that no file can have is a finding."""
    for path in (Path("a\0b"), Path("x" * 5000)):
        file, findings = find_tender(path)
        assert file is None
        assert [finding.kind for finding in findings] == ["file-missing"]


def test_find_tender__file_alone(tmp_path: Path) -> None:
    """The tender file is found without looking at bids."""
    file, findings = find_tender(write_folder(tmp_path))
    assert file is not None
    assert (file.path, findings) == (tmp_path / "tender.toml", ())
