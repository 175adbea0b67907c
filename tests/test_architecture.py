"""The table of allowed imports in docs/architecture.md, compared with the imports in the code."""

from __future__ import annotations

import ast
import re
import subprocess
import sys
from collections.abc import Iterator
from dataclasses import dataclass
from fnmatch import fnmatchcase
from functools import cache
from graphlib import CycleError, TopologicalSorter
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[1]
SOURCE = CHECKOUT / "src" / "lossworth"
ROOT = "lossworth"
HEAVY = (
    "defusedxml",
    "jinja2",
    "numpy",
    "openpyxl",
    "pandas",
    "pydantic",
    "rich",
    "tree_sitter",
    "tree_sitter_toml",
    "xlsxwriter",
)


@dataclass(frozen=True)
class Row:
    """One row of the table: a part, and what it may import; None for everything."""

    part: str
    ours: frozenset[str] | None
    others: frozenset[str]


@dataclass(frozen=True)
class Import:
    """One import found in the code: by which module, of which module of ours or package of others, on which line."""

    module: str
    target: str
    is_ours: bool
    line: int
    only_when_called: bool

    def __str__(self) -> str:
        return f"{self.module}:{self.line} imports {self.target}"


@cache
def table() -> dict[str, Row]:
    """Rows of docs/architecture.md by part."""
    text = (CHECKOUT / "docs" / "architecture.md").read_text(encoding="utf-8")
    rows = {}
    for line in text.splitlines():
        if line.startswith("| `"):
            part, ours, others = (cell.strip() for cell in line.strip("|").split("|"))
            (name,) = named(part)
            rows[name] = Row(name, None if ours == "everything" else named(ours), named(others))
    return rows


def named(cell: str) -> frozenset[str]:
    """Names between backticks; none only where the cell says so."""
    names = re.findall(r"`([^`]+)`", cell)
    assert names or cell == "nothing", f"cell {cell!r} names nothing and does not say so"
    return frozenset(names)


@cache
def modules() -> dict[str, Path]:
    """Every module of ours by its name below the package, the root and the templates included."""
    found = {}
    for path in sorted(SOURCE.rglob("*.py")):
        parts = path.relative_to(SOURCE).with_suffix("").parts
        name = ".".join(parts[:-1] if parts[-1] == "__init__" else parts)
        found[name or ROOT] = path
    found["templates"] = CHECKOUT / "templates" / "__init__.py"
    return found


def belongs(module: str, part: str) -> bool:
    """Whether a module is a part, lies inside it, or matches its pattern."""
    return module == part or fnmatchcase(module, part) or module.startswith(part + ".")


def row_of(module: str) -> Row | None:
    """The row that names a module most closely."""
    fitting = [row for row in table().values() if belongs(module, row.part)]
    return max(fitting, key=lambda row: len(row.part), default=None)


def imports_of(module: str, tree: ast.Module) -> Iterator[Import]:
    """Every import of a module, also inside functions and under TYPE_CHECKING."""
    package = module if modules()[module].name == "__init__.py" else module.rpartition(".")[0]
    for node, late in statements(tree):
        if isinstance(node, ast.Import):
            names = [alias.name for alias in node.names]
        elif node.level:
            base = "" if package == ROOT else package
            for _ in range(node.level - 1):
                assert base, f"{module}:{node.lineno} leaves the package"
                base = base.rpartition(".")[0]
            origin = ".".join(part for part in (ROOT, base, node.module) if part)
            names = [f"{origin}.{alias.name}" for alias in node.names]
        else:
            names = [f"{node.module}.{alias.name}" for alias in node.names]
        for name in names:
            yield resolved(module, name, node.lineno, late)


def statements(tree: ast.Module) -> Iterator[tuple[ast.Import | ast.ImportFrom, bool]]:
    """Import statements, each with whether it runs only when a function is called, or never."""

    def descend(node: ast.AST, late: bool) -> Iterator[tuple[ast.Import | ast.ImportFrom, bool]]:
        for child in ast.iter_child_nodes(node):
            if isinstance(child, ast.Import | ast.ImportFrom):
                yield child, late
            delayed = isinstance(child, ast.FunctionDef | ast.AsyncFunctionDef | ast.Lambda) or (
                isinstance(child, ast.If) and ast.unparse(child.test).endswith("TYPE_CHECKING")
            )
            yield from descend(child, late or delayed)

    yield from descend(tree, False)


def resolved(module: str, name: str, line: int, late: bool) -> Import:
    """The module of ours, or the package of others, that a dotted name means."""
    top, _, rest = name.partition(".")
    if top != ROOT:
        return Import(module, top, False, line, late)
    while rest and rest not in modules():
        rest = rest.rpartition(".")[0]
    return Import(module, rest or ROOT, True, line, late)


@cache
def all_imports() -> tuple[Import, ...]:
    """Every import in the code, those of the standard library left out."""
    found = []
    for module, path in modules().items():
        tree = ast.parse(path.read_text(encoding="utf-8"), filename=str(path))
        found += [i for i in imports_of(module, tree) if i.is_ours or i.target not in sys.stdlib_module_names]
    return tuple(found)


def is_allowed(found: Import) -> bool:
    """Whether the table allows an import."""
    row = row_of(found.module)
    if row is None:
        return False
    if not found.is_ours:
        return found.target in row.others
    target = row_of(found.target)
    if target is None or target == row:
        return target == row
    return target.part in row.ours if row.ours is not None else target.part != ROOT


def test_table__every_part_exists() -> None:
    """A part of the table stands in the code, and a part that may be imported has a row of its own."""
    assert [part for part in table() if not any(belongs(module, part) for module in modules())] == []
    assert {part for row in table().values() for part in row.ours or ()} - set(table()) == set()


def test_table__every_module_has_a_row() -> None:
    """No module escapes the table."""
    assert [module for module in modules() if row_of(module) is None] == []


def test_table__others_are_declared_dependencies() -> None:
    """What may be imported from others is installed with the package: a dependency, or a part of one."""
    import tomllib

    declared = tomllib.loads((CHECKOUT / "pyproject.toml").read_text(encoding="utf-8"))["project"]["dependencies"]
    names = {re.split(r"[<>=~! \[]", text)[0].lower().replace("-", "_") for text in declared}
    parts_of_one = {"pydantic_core", "markupsafe"}
    assert {name for row in table().values() for name in row.others} - names - parts_of_one == set()


def test_imports__only_what_the_table_allows() -> None:
    """A file imports only from floors below its own."""
    assert "\n".join(str(found) for found in all_imports() if not is_allowed(found)) == ""


def test_imports__nobody_imports_the_root_or_the_command_line() -> None:
    """The root is for users of the package; the command line is the last floor."""
    targets = [i for i in all_imports() if i.is_ours and i.module != ROOT and row_of(i.module) != row_of(i.target)]
    assert [str(i) for i in targets if i.target == ROOT or belongs(i.target, "cli")] == []


def test_imports__no_circles() -> None:
    """Modules can be put into an order in which each imports only earlier ones."""
    graph: dict[str, set[str]] = {module: set() for module in modules()}
    for found in all_imports():
        if found.is_ours and not found.only_when_called and found.target != found.module:
            graph[found.module].add(found.target)
    try:
        TopologicalSorter(graph).prepare()
    except CycleError as circle:
        pytest.fail(f"modules import each other in a circle: {circle.args[1]}")


@pytest.mark.parametrize(
    ("module", "code", "allowed"),
    [
        ("evaluation.ranking", "from ..trail import Figure", True),
        ("evaluation.ranking", "from . import pricing", True),
        ("evaluation.ranking", "from ..intake import tender_file", False),
        ("evaluation.ranking", "from .. import trail", True),
        ("evaluation.ranking", "from .. import Tender", False),
        ("evaluation.ranking", "import lossworth.cli", False),
        ("evaluation.ranking", "def late():\n    import openpyxl", False),
        ("capitalization.load", "from ..records.tender import Tender", False),
        ("capitalization.load", "import pandas", False),
        ("report.page", "from ..evaluation.result import Evaluation", False),
        ("report.page", "from .build_view import build_view", False),
        ("report.page", "from .view import LotView", True),
        ("records.bid", "if TYPE_CHECKING:\n    from ..intake import tender_file", False),
    ],
)
def test_is_allowed__finds_what_it_should(module: str, code: str, allowed: bool) -> None:
    """The check itself can fail: known good and known bad imports."""
    (found,) = imports_of(module, ast.parse(code))
    assert allowed is is_allowed(found)


def loaded_by(code: str) -> set[str]:
    """Heavy packages that are loaded after a program has run."""
    program = f"import sys\n{code}\nprint('loaded:', *sorted(set({HEAVY!r}) & sys.modules.keys()))"
    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    return set(done.stdout.splitlines()[-1].removeprefix("loaded:").split())


def test_help__loads_nothing_heavy() -> None:
    """`lossworth --help` answers without loading a package that only the commands need."""
    run = """
sys.argv = ["lossworth", "--help"]
from lossworth.cli.main import main
try:
    main()
except SystemExit as end:
    assert not end.code
"""
    assert loaded_by(run) == set()


def test_loaded_by__finds_what_it_should() -> None:
    """The check itself can fail: the records load pydantic."""
    assert "pydantic" in loaded_by("import lossworth.records.tender")


def test_root__names_are_sorted_and_can_be_fetched() -> None:
    """Every public name of the façade exists, and asking for another says so."""
    import lossworth

    assert sorted(lossworth.__all__) == list(lossworth.__all__)
    assert [name for name in lossworth.__all__ if getattr(lossworth, name).__name__ != name] == []
    with pytest.raises(AttributeError, match="no_such_name"):
        lossworth.no_such_name  # noqa: B018
