"""The house keeps its plan: imports point one way, one folder opens files, one knows pydantic, names do not clash."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).resolve().parent.parent / "movload"
# A folder (or module) may import from itself and from what stands above it.
FLOORS = (
    ("errors", "arrays"), ("units",), ("bridge",), ("traffic",), ("statics",), ("peaks",), ("strength",), ("rating",),
    ("review",), ("files",), ("report",), ("stock",), ("cli",),
)  # fmt: skip
LEVEL = {name: level for level, names in enumerate(FLOORS) for name in names}
MODULES = sorted(path for path in PACKAGE.rglob("*.py") if path.parent != PACKAGE or path.stem in LEVEL)
OPENERS = {"open", "read_text", "read_bytes", "write_text", "write_bytes", "mkstemp", "fdopen", "unlink"}


def folder_of(path: Path) -> str:
    """Return the folder, or the top module, that a file belongs to."""
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imported(path: Path) -> list[tuple[str, int]]:
    """Return every module that a file imports, deferred ones too, with the line."""
    found = []
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found += [(alias.name, node.lineno) for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}:{node.lineno}: relative import"
            found.append((node.module or "", node.lineno))
    return found


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_imports_point_upward_in_the_plan(path: Path) -> None:
    mine = LEVEL[folder_of(path)]
    for module, line in imported(path):
        if module.startswith("movload."):
            theirs = LEVEL[module.split(".")[1]]
            same = module.split(".")[1] == folder_of(path)
            assert theirs < mine or same, f"{path.name}:{line} imports {module}, which stands below"


def test_every_module_stands_somewhere_in_the_plan() -> None:
    folders = {folder_of(path) for path in PACKAGE.rglob("*.py") if path.name not in {"__init__.py", "__main__.py"}}
    assert folders <= set(LEVEL)


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_only_files_opens_files(path: Path) -> None:
    if folder_of(path) in {"files", "stock"}:
        return
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Call):
            name = getattr(node.func, "attr", getattr(node.func, "id", ""))
            assert name not in OPENERS, f"{path.name}:{node.lineno} calls {name}"


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_only_the_schema_knows_pydantic(path: Path) -> None:
    if path.parent == PACKAGE / "files" / "schema":
        return
    assert not [module for module, _ in imported(path) if module.split(".")[0].startswith("pydantic")]


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_only_the_command_line_prints(path: Path) -> None:
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Call) and getattr(node.func, "id", "") == "print":
            pytest.fail(f"{path.name}:{node.lineno} prints")


def test_packages_hold_only_their_docstring() -> None:
    for init in PACKAGE.rglob("*/__init__.py"):
        body = ast.parse(init.read_text(encoding="utf-8")).body
        assert len(body) == 1, init
        assert isinstance(body[0], ast.Expr), init


def test_no_public_name_equals_a_folders_name() -> None:
    import movload

    assert not set(movload.__all__) & set(LEVEL)


def test_nothing_imports_the_folders_it_must_not_need() -> None:
    """Statics takes load columns, never vehicles; drawings never read files."""
    for path in MODULES:
        names = {module for module, _ in imported(path)}
        if folder_of(path) == "statics":
            assert not {name for name in names if name.startswith("movload.traffic")}, path
        if folder_of(path) == "report":
            assert not {name for name in names if name.startswith("movload.files")}, path


def test_no_file_is_long() -> None:
    """400 lines is a smell to act on (the habit is 250)."""
    assert not [path for path in MODULES if path.read_text(encoding="utf-8").count("\n") > 400]
