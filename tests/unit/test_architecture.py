"""Imports point one way: read from the source, not by importing it."""

import ast
import graphlib
from collections.abc import Iterator
from pathlib import Path

import pytest

BUILDER = Path(__file__).parents[2] / "builder"

# What each module or package directly below builder/ may import of the others.
_ON_CURVES = {"units", "curves"}
_ON_PARTS = _ON_CURVES | {"problems", "records", "part_curve"}
_ON_CHECKS = _ON_PARTS | {"fits", "misprints", "crosschecks", "comparisons", "circuit", "part_fit"}
_ON_RECORD_KEEPING = _ON_CHECKS | {"decisions", "ledger", "history", "bills", "questions"}
MAY_IMPORT: dict[str, set[str]] = {
    "": _ON_RECORD_KEEPING | {"intake"},
    "units": set(),
    "problems": set(),
    "progress": set(),
    "processes": {"progress"},
    "kept": set(),
    "records": {"units", "problems", "processes", "kept"},
    "curves": {"units"},
    "fits": _ON_CURVES,
    "misprints": _ON_CURVES,
    "intake": {"units", "problems"},
    "part_curve": {"units", "records", "curves"},
    "part_fit": _ON_CURVES | {"records", "part_curve", "fits"},
    "comparisons": _ON_CURVES | {"part_curve"},
    "circuit": _ON_CURVES | {"records", "part_curve"},
    "crosschecks": _ON_PARTS | {"fits", "misprints", "ledger", "processes", "kept"},
    "ledger": {"units", "problems", "records"},
    "decisions": _ON_CHECKS | {"ledger", "processes"},
    "bills": {"units", "problems", "records", "ledger", "decisions"},
    "questions": _ON_CHECKS | {"intake"},
    "history": _ON_CHECKS | {"ledger", "decisions", "processes"},
    "exports": _ON_RECORD_KEEPING,
    "pages": _ON_RECORD_KEEPING | {"exports", "processes", "kept"},
    "commands": _ON_RECORD_KEEPING | {"exports", "intake", "kept"},
    "cli": {"commands"},
    "plugin": _ON_RECORD_KEEPING | {"exports", "pages", "processes", "kept"},
}


def module_name(path: Path, root: Path) -> str:
    parts = path.relative_to(root.parent).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


def imported(root: Path) -> dict[str, set[str]]:
    """Every module below a package with the modules that it imports anywhere, also inside its functions."""
    paths = {module_name(path, root): path for path in root.rglob("*.py")}
    return {name: set(_imports(path, set(paths))) for name, path in paths.items()}


def _imports(path: Path, modules: set[str]) -> Iterator[str]:
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}:{node.lineno}: relative import"
            names = [f"{node.module}.{alias.name}" for alias in node.names]
            yield from (name if name in modules else str(node.module) for name in names)


def layer(module: str) -> str:
    """The name directly below builder/ that a module belongs to; empty for builder itself."""
    return module.partition(".")[2].partition(".")[0]


def within(module: str, package: str) -> bool:
    return f"{module}.".startswith(f"{package}.")


def wrong_directions(root: Path) -> list[str]:
    return sorted(
        f"{module} imports {target}"
        for module, targets in imported(root).items()
        for target in targets
        if within(target, "builder") and layer(target) not in {layer(module)} | MAY_IMPORT.get(layer(module), set())
    )


def cycle(root: Path) -> list[str]:
    graph = {m: {t for t in targets if within(t, "builder")} for m, targets in imported(root).items()}
    try:
        graphlib.TopologicalSorter(graph).prepare()
    except graphlib.CycleError as found:
        return list(found.args[1])
    return []


def importers_of(package: str, root: Path) -> list[str]:
    return sorted(m for m, targets in imported(root).items() if any(within(t, package) for t in targets))


def test_every_package_has_its_place():
    assert {layer(module) for module in imported(BUILDER)} - {""} <= set(MAY_IMPORT)


def test_imports_point_one_way():
    assert wrong_directions(BUILDER) == []


def test_no_module_imports_itself_round_a_corner():
    assert cycle(BUILDER) == []


@pytest.mark.parametrize("package", ["mkdocs", "material"])
def test_only_the_plugin_knows_mkdocs(package):
    assert set(importers_of(package, BUILDER)) <= {"builder.plugin"}


@pytest.mark.parametrize("module", ["builder.cli", "builder.plugin"])
def test_nothing_imports_the_command_line_or_the_plugin(module):
    assert importers_of(module, BUILDER) == []


@pytest.mark.parametrize(
    ("package", "layers"),
    [("click", {"cli", "commands"}), ("pydantic", {"records"}), ("yaml", {"records"}), ("matplotlib", {"pages"})],
)
def test_a_library_is_known_where_it_is_needed_only(package, layers):
    assert {layer(module) for module in importers_of(package, BUILDER)} <= layers


@pytest.fixture
def faulty(tmp_path):
    """A package with every fault that the tests above look for."""
    root = tmp_path / "builder"
    files = {
        "__init__.py": "",
        "units.py": "from builder.problems import nearest",
        "problems.py": "def f():\n    from builder import cli\n",
        "cli.py": "from builder.commands import checking",
        "commands/__init__.py": "",
        "commands/checking.py": "import builder.units",
        "curves/__init__.py": "from builder.records.part import Part\nimport mkdocs.utils",
        "records/__init__.py": "",
        "records/part.py": "",
    }
    for name, text in files.items():
        (root / name).parent.mkdir(parents=True, exist_ok=True)
        (root / name).write_text(text)
    return root


def test_the_checks_themselves_find_these_faults(faulty):
    assert wrong_directions(faulty) == [
        "builder.curves imports builder.records.part",
        "builder.problems imports builder.cli",
        "builder.units imports builder.problems",
    ]
    assert set(cycle(faulty)) == {"builder.units", "builder.problems", "builder.cli", "builder.commands.checking"}
    assert importers_of("mkdocs", faulty) == ["builder.curves"]
    assert importers_of("builder.cli", faulty) == ["builder.problems"]
