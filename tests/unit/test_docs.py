"""The documents agree with the code: commands, options, functions, findings, links."""

from __future__ import annotations

import importlib
import importlib.util
import re
from pathlib import Path

import click
import pytest

from lossworth.cli.main import lossworth

CHECKOUT = Path(__file__).resolve().parents[2]
PAGES = sorted([*CHECKOUT.glob("*.md"), *(CHECKOUT / "docs").glob("*.md"), *(CHECKOUT / "sample_bids").glob("*.md")])


def text_of(name: str) -> str:
    """A page of the repository."""
    return (CHECKOUT / name).read_text(encoding="utf-8")


def section(page: str, heading: str) -> str:
    """What stands under a heading, up to the next of its level."""
    level = heading.partition(" ")[0]
    match = re.search(rf"^{re.escape(heading)}.*?(?=^{level} |\Z)", page, re.MULTILINE | re.DOTALL)
    assert match is not None, f"no section {heading}"
    return match.group()


def test_command_line__every_command_has_a_section() -> None:
    """Every command is documented, and no other."""
    headings = re.findall(r"^## `lossworth (\w+)", text_of("docs/command_line.md"), re.MULTILINE)
    assert sorted(lossworth.commands) == sorted(headings)


@pytest.mark.parametrize("name", sorted(lossworth.commands))
def test_command_line__every_option_stands_under_its_command(name: str) -> None:
    """The options of a command are documented under it, and no other."""
    options = {
        text
        for parameter in lossworth.commands[name].params
        if isinstance(parameter, click.Option)
        for text in parameter.opts
    }
    page = section(text_of("docs/command_line.md"), f"## `lossworth {name}")
    assert options == set(re.findall(r"^\| `(--[\w-]+)`", page, re.MULTILINE))


@pytest.mark.parametrize("name", sorted(lossworth.commands))
def test_help__names_every_argument(name: str) -> None:
    """The help of a command says what its arguments are."""
    command = lossworth.commands[name]
    assert command.help is not None
    for parameter in command.params:
        if isinstance(parameter, click.Argument):
            assert re.search(rf"\b{(parameter.name or '').upper()}\b", command.help), parameter.name


def test_readme__commands_exist() -> None:
    """Every command that the README types exists, with its options."""
    for name, rest in re.findall(r"^(?:\S*[/\\])?lossworth (\w+)(.*)$", text_of("README.md"), re.MULTILINE):
        known = {text for parameter in lossworth.commands[name].params for text in parameter.opts}
        assert set(re.findall(r"--[\w-]+", rest)) <= known


def test_readme__links_every_page() -> None:
    """Whoever begins at the README finds every page, one step away."""
    page = text_of("README.md")
    pages = [path.relative_to(CHECKOUT).as_posix() for path in PAGES if path.name != "README.md"]
    assert [path for path in pages if f"]({path})" not in page] == []


def test_method__functions_exist() -> None:
    """Every function of the engine that the method names can be imported."""
    rows = re.findall(r"^\| `.*", section(text_of("docs/method.md"), "## 8. "), re.MULTILINE)
    names = [name for row in rows for name in re.findall(r"`(\w+)\.(\w+)`", row)]
    assert len(names) >= 15
    missing = [
        f"{module}.{function}"
        for module, function in names
        if not hasattr(importlib.import_module(f"lossworth.capitalization.{module}"), function)
    ]
    assert missing == []


def test_findings_page__is_what_its_script_writes() -> None:
    """The page of findings is written from the table of kinds."""
    spec = importlib.util.spec_from_file_location("make_findings", CHECKOUT / "docs" / "make_findings.py")
    assert spec is not None
    assert spec.loader is not None
    script = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(script)
    assert script.page() == text_of("docs/findings.md")


@pytest.mark.parametrize("page", PAGES, ids=lambda path: path.relative_to(CHECKOUT).as_posix())
def test_pages__links_lead_somewhere(page: Path) -> None:
    """Every relative link and picture exists."""
    links = re.findall(r"\]\(([^)#\s]+)[^)]*\)", page.read_text(encoding="utf-8"))
    assert [link for link in links if "://" not in link and not (page.parent / link).exists()] == []


def test_changelog__has_the_heading_for_results() -> None:
    """Whatever can move a cost or a rank has its place in every release."""
    releases = re.split(r"^## ", text_of("CHANGELOG.md"), flags=re.MULTILINE)[1:]
    assert [release.splitlines()[0] for release in releases if "### Changed results" not in release] == []
