"""Docstrings: everything public has one, and where physics is documented every parameter has its unit."""

import ast
import re
from collections.abc import Iterable, Iterator
from pathlib import Path

from mkdocs.plugins import EVENTS
from mkdocs.structure.files import File

BUILDER = Path(__file__).parents[2] / "builder"
# Written in numpydoc style throughout; a function that raises says so in a section of its own.
NUMPYDOC = ("units.py", "curves", "fits", "misprints", "circuit")

Function = ast.FunctionDef | ast.AsyncFunctionDef
Documented = Function | ast.ClassDef | ast.Module
UNIT = re.compile(r"\[[^\[\]\s][^\[\]]*\]|\bno unit\b", re.IGNORECASE)


def public_definitions(tree: ast.Module) -> Iterator[tuple[str, Function | ast.ClassDef]]:
    """Public classes, functions and methods with their dotted names; stubs of overloads have no docstring."""
    for node in _definitions(tree.body):
        yield node.name, node
        if isinstance(node, ast.ClassDef):
            yield from ((f"{node.name}.{inner.name}", inner) for inner in _definitions(node.body))


def _definitions(body: list[ast.stmt]) -> Iterator[Function | ast.ClassDef]:
    for node in body:
        if isinstance(node, Function | ast.ClassDef) and not node.name.startswith("_") and not _is_overload(node):
            yield node


def _is_overload(node: Function | ast.ClassDef) -> bool:
    return any(ast.unparse(decorator).endswith("overload") for decorator in node.decorator_list)


def public_functions(tree: ast.Module) -> Iterator[tuple[str, Function]]:
    return ((name, node) for name, node in public_definitions(tree) if isinstance(node, Function))


def section(docstring: str, title: str) -> str:
    """The text below a numpydoc heading, up to the next one; empty where there is none."""
    found = re.search(rf"^{title}\n-+\n(.*?)(?=^\S[^\n]*\n-+$|\Z)", docstring, re.MULTILINE | re.DOTALL)
    return found[1] if found else ""


def described(parameters: str) -> dict[str, str]:
    """Each parameter of a section with its description; `a, b : float` describes two."""
    entries = re.findall(r"^(\S[^\n]*?) ?:[^\n]*\n((?:[ \t]+[^\n]*\n?|\n)*)", parameters, re.MULTILINE)
    return {name.strip("* `"): text for names, text in entries for name in names.split(",")}


def documented_methods(trees: Iterable[ast.Module]) -> set[str]:
    every = (item for tree in trees for item in public_definitions(tree))
    return {node.name for name, node in every if "." in name and ast.get_docstring(node)}


def mkdocs_methods() -> set[str]:
    """What MkDocs calls on its plugins and files, documented by MkDocs."""
    return {f"on_{event}" for event in EVENTS} | set(dir(File))


DOCUMENTED_METHODS = mkdocs_methods() | documented_methods(
    ast.parse(path.read_text(encoding="utf-8")) for path in BUILDER.rglob("*.py")
)


def undocumented(tree: ast.Module) -> Iterator[tuple[int, str]]:
    if tree.body and not ast.get_docstring(tree):
        yield 1, "(module)"
    derived = {node.name for node in tree.body if isinstance(node, ast.ClassDef) and node.bases}
    for name, node in public_definitions(tree):
        # A method of a derived class may be the base's, documented there.
        inherits = "." in name and name.partition(".")[0] in derived
        if not ast.get_docstring(node) and not (inherits and node.name in DOCUMENTED_METHODS):
            yield node.lineno, name


def without_unit(tree: ast.Module) -> Iterator[tuple[int, str]]:
    for name, node in public_functions(tree):
        parameters = described(section(ast.get_docstring(node) or "", "Parameters"))
        if parameters:
            missing = (p for p in _public_parameters(node) if not UNIT.search(parameters.get(p, "")))
            yield from ((node.lineno, f"{name}({parameter})") for parameter in missing)


def _public_parameters(node: Function) -> list[str]:
    a = node.args
    every = [*a.posonlyargs, *a.args, *([a.vararg] if a.vararg else []), *a.kwonlyargs, *([a.kwarg] if a.kwarg else [])]
    return [arg.arg for arg in every if arg.arg not in ("self", "cls") and not arg.arg.startswith("_")]


def silent_about_raising(tree: ast.Module) -> Iterator[tuple[int, str]]:
    for name, node in public_functions(tree):
        raises = any(isinstance(inner, ast.Raise) for inner in ast.walk(node))
        if raises and not section(ast.get_docstring(node) or "", "Raises"):
            yield node.lineno, name


def listed(check, paths: list[Path]) -> list[str]:
    """Findings of a check as file:line: name."""
    return [
        f"{path.relative_to(BUILDER.parent)}:{line}: {name}"
        for path in sorted(paths)
        for line, name in check(ast.parse(path.read_text(encoding="utf-8")))
    ]


def test_everything_public_has_a_docstring():
    assert listed(undocumented, list(BUILDER.rglob("*.py"))) == []


def test_every_documented_parameter_has_its_unit_or_says_that_it_has_none():
    assert listed(without_unit, list(BUILDER.rglob("*.py"))) == []


def test_every_function_of_the_physics_that_raises_says_what():
    paths = [path for path in BUILDER.rglob("*.py") if path.relative_to(BUILDER).parts[0] in NUMPYDOC]
    assert listed(silent_about_raising, paths) == []


FAULTY = ast.parse('''
class Named:
    def method(self):
        pass

    def _own(self):
        pass

def heated(t_c, power_mw, *, t_k, count, _hidden=0):
    """Temperature.

    Parameters
    ----------
    t_c, t_k : float
        Body temperature. [°C]
    power_mw : float
        Power, as a number such as [] or [ ].
    count : int
        How often; no unit.

    Returns
    -------
    float
        Temperature. [K]
    """
    raise ValueError

def cooled(t_c, other_c):
    """Temperature.

    Parameters
    ----------
    t_c : float
        Temperature. [°C]

    Raises
    ------
    ValueError
        Never. [K]
    """
    raise ValueError
''')


def test_the_checks_themselves_find_these_faults():
    assert [name for _, name in undocumented(FAULTY)] == ["(module)", "Named", "Named.method"]
    assert [name for _, name in without_unit(FAULTY)] == ["heated(power_mw)", "cooled(other_c)"]
    assert [name for _, name in silent_about_raising(FAULTY)] == ["heated"]
    assert next(silent_about_raising(FAULTY))[0] == 9
