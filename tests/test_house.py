"""The rules of the house: imports go down, each module stands alone, everything has its place and size, public names are what is said."""

from __future__ import annotations

import ast
import re
import subprocess
import sys
from functools import cache
from pathlib import Path

import pytest

import guys

REPOSITORY = Path(__file__).parent.parent
PACKAGE = REPOSITORY / "guys"
TOP_LEVEL = {"README.md", "DEVELOPERS.md", "pyproject.toml", "guys", "tests", "scenarios", "docs"}
LONGEST_MODULE = 500

FLOORS: dict[str, int] = {
    **dict.fromkeys(("errors", "constants", "units", "version"), 0),
    **dict.fromkeys(("tables", "catalogue", "lattice", "scenario", "site"), 1),
    **dict.fromkeys(("rotation", "columns", "beam", "cable", "joint", "tilting", "band", "sounding"), 2),
    **dict.fromkeys(("icing", "mesh", "sections", "structure"), 3),
    **dict.fromkeys(("loads",), 4),
    **dict.fromkeys(("results", "solver", "equilibrium", "recovery", "lengths", "setting", "stability", "path", "limits", "reserves"), 5),
    **dict.fromkeys(("holdfasts", "checks"), 6),
    **dict.fromkeys(("studies",), 7),
    **dict.fromkeys(("drawing", "record", "exchange"), 8),
    **dict.fromkeys(("terminal", "doors", "cli", "page", "__main__", ""), 9),
}
"""Floor of each module or subpackage; a module imports from its own floor or from below.  "" is the package itself.

Element mechanics and banded algebra (2) know arrays alone; the structure (3) is laid out in their terms.
"""

MODULES = sorted(PACKAGE.rglob("*.py"))


def dotted(path: Path) -> str:
    parts = path.relative_to(REPOSITORY).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


NAMES = {dotted(path): path for path in MODULES}


def room(name: str) -> str:
    """The module or subpackage of a dotted name: guys.scenario.reader → scenario."""
    return [*name.split("."), ""][1]


@cache
def imports(name: str) -> frozenset[str]:
    """Modules of the package that a module imports, anywhere in its text; those for type checking alone are left out."""
    found: set[str] = set()

    def visit(node: ast.AST) -> None:
        if isinstance(node, ast.If) and ast.unparse(node.test) in ("TYPE_CHECKING", "typing.TYPE_CHECKING"):
            return
        if isinstance(node, ast.Import):
            found.update(each.name for each in node.names if each.name.split(".")[0] == "guys")
        if isinstance(node, ast.ImportFrom) and (node.module or "").split(".")[0] == "guys":
            assert node.module is not None
            found.update(f"{node.module}.{each.name}" if f"{node.module}.{each.name}" in NAMES else node.module for each in node.names)
        assert not (isinstance(node, ast.ImportFrom) and node.level), f"{name}: relative import"
        for child in ast.iter_child_nodes(node):
            visit(child)

    visit(ast.parse(NAMES[name].read_text(encoding="utf-8")))
    return frozenset(found & set(NAMES))


def test_every_module_has_its_floor() -> None:
    assert {room(name) for name in NAMES} <= set(FLOORS)


@pytest.mark.parametrize("name", sorted(NAMES))
def test_imports_go_down(name: str) -> None:
    upward = [each for each in imports(name) if each != "guys" and FLOORS[room(each)] > FLOORS[room(name)]]
    assert not upward, f"{name}, floor {FLOORS[room(name)]}, imports {upward}"
    assert "guys" not in imports(name) or FLOORS[room(name)] == FLOORS[""]


def test_no_import_ring() -> None:
    """Between modules, a package's `__init__` counting as a module that its own parts do not import."""
    done: set[str] = set()

    def walk(name: str, trail: tuple[str, ...]) -> None:
        assert name not in trail, " → ".join((*trail[trail.index(name) :], name))
        if name not in done:
            for each in sorted(imports(name)):
                walk(each, (*trail, name))
            done.add(name)

    for name in sorted(NAMES):
        walk(name, ())


def test_each_module_imports_alone() -> None:
    """Each in an interpreter state without any other module of its floor or above; those below cannot need it, since imports go down."""
    floors = {name: FLOORS[room(name)] for name in NAMES if not name.endswith("__main__")}
    program = f"""
import importlib, sys
floors = {floors!r}
done = set()
for name in sorted(floors, key=floors.get):
    if name in done:
        continue
    for loaded in [each for each in sys.modules if floors.get(each, -1) >= floors[name] or each == "guys"]:
        del sys.modules[loaded]
    try:
        importlib.import_module(name)
    except Exception as error:
        print(name, repr(error))
    done |= {{each for each in sys.modules if each.startswith(name + ".")}}  # loaded by their package, which always comes first
"""
    done = subprocess.run([sys.executable, "-W", "error", "-c", program], capture_output=True, text=True, check=True)
    assert done.stdout == ""


@pytest.mark.parametrize("path", MODULES, ids=dotted)
def test_modules_are_short_and_say_what_they_are(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    assert text.count("\n") <= LONGEST_MODULE
    assert ast.get_docstring(ast.parse(text)), "no docstring"


def calls(path: Path) -> set[str]:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    return {ast.unparse(node.func) for node in ast.walk(tree) if isinstance(node, ast.Call)}


@pytest.mark.parametrize("path", MODULES, ids=dotted)
def test_only_the_doors_print_and_only_the_reader_opens(path: Path) -> None:
    floor, used = FLOORS[room(dotted(path))], calls(path)
    assert floor == 9 or not used & {"print", "click.echo", "sys.stdout.write", "sys.stderr.write"}
    assert floor in (1, 8) or "open" not in used
    assert floor in (8, 9) or not [call for call in used if re.search(r"\.(write_text|write_bytes|savefig|mkdir)$", call)]


def test_top_level() -> None:
    listed = subprocess.run(["git", "ls-files"], cwd=REPOSITORY, capture_output=True, text=True, check=False)
    if listed.returncode == 0 and listed.stdout:
        tops = {line.split("/")[0] for line in listed.stdout.splitlines()}
        assert {top for top in tops if not top.startswith(".")} <= TOP_LEVEL


def test_public_names() -> None:
    assert guys.__all__ == ["Solution", "__version__", "parse_scenario", "read_scenario", "solve"]
    assert dir(guys) == sorted(guys.__all__)
    assert all(getattr(guys, name) is not None for name in guys.__all__)
    with pytest.raises(AttributeError, match="no attribute 'nothing'"):
        guys.nothing  # noqa: B018


def test_version_and_changes_agree() -> None:
    headings = re.findall(r"^## (\S+)", (REPOSITORY / "docs/changes.md").read_text(encoding="utf-8"), re.MULTILINE)
    assert headings[0] == guys.__version__
