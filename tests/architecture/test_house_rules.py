"""The habits of the house: what stands at the top, public names, docstrings, lengths, pinned requirements."""

import ast
import re
import subprocess
import sys
from pathlib import Path

import pytest

import meanlab

PACKAGE = Path(meanlab.__file__).parent
TOP = PACKAGE.parent
MOST_LINES, MOST_IN_A_FUNCTION = 350, 40
VISIBLE = ["DEVELOPERS.md", "README.md", "app.py", "meanlab", "requirements.txt", "sample_sets", "tests"]
PUBLIC = [
    *("Analysis", "Complaint", "Intake", "Plan", "Question", "ReadingSet", "__version__", "analyse", "analyse_many"),
    *("columns", "plan_agreement", "plan_detection", "plan_interval", "power", "power_agreement", "read"),
]


def sources() -> list[Path]:
    """Return every source file of the package, and the start file."""
    return [*sorted(PACKAGE.rglob("*.py")), TOP / "app.py"]


def name_of(path: Path) -> str:
    """Return the path of a file under the top, as the identifier of a test."""
    return path.relative_to(TOP).as_posix()


def test_the_visible_top_level_is_exact():
    """What a newcomer sees first: seven names, no more; hidden settings do not count."""
    ignored = {"sample_sets"} if not (TOP / "sample_sets").exists() else set()
    seen = sorted(path.name for path in TOP.iterdir() if not path.name.startswith("."))
    caches = {"__pycache__"}
    assert [name for name in seen if name not in caches] == [name for name in VISIBLE if name not in ignored]


def test_the_public_names_are_guarded():
    """A name is added to or taken from the public face on purpose only."""
    assert sorted(meanlab.__all__) == sorted(PUBLIC)
    with pytest.raises(AttributeError, match="no attribute 'analyze'"):
        _ = meanlab.analyze


@pytest.mark.parametrize("path", sources(), ids=name_of)
def test_every_file_says_what_it_holds(path):
    """Each module and package starts with a docstring."""
    assert ast.get_docstring(ast.parse(path.read_text("utf-8")))


@pytest.mark.parametrize("path", sources(), ids=name_of)
def test_no_file_is_too_long(path):
    """A file of more than 350 lines is two nouns, not one."""
    assert len(path.read_text("utf-8").splitlines()) <= MOST_LINES


def public_functions(path: Path):
    """Yield every function, and every method of a public class that can inherit no docstring."""
    tree = ast.parse(path.read_text("utf-8"))
    classes = [node for node in tree.body if isinstance(node, ast.ClassDef) and not node.name.startswith("_")]
    own = [
        node for node in classes if {ast.unparse(base) for base in node.bases} <= {"Facts", "Protocol", "ValueError"}
    ]
    for holder in [tree, *own]:
        for node in holder.body:
            if isinstance(node, (ast.FunctionDef, ast.AsyncFunctionDef)) and not node.name.startswith("_"):
                yield node


@pytest.mark.parametrize("path", sources(), ids=name_of)
def test_every_public_function_says_what_it_returns(path):
    """Functions, methods and properties without a leading underscore have a docstring."""
    assert [node.name for node in public_functions(path) if not ast.get_docstring(node)] == []


@pytest.mark.parametrize("path", sources(), ids=name_of)
def test_functions_stay_short(path):
    """A function has at most 40 lines beside its docstring; a single expression or table may be longer."""
    long = []
    for node in ast.walk(ast.parse(path.read_text("utf-8"))):
        if isinstance(node, ast.FunctionDef):
            body = node.body[1:] if ast.get_docstring(node) else node.body
            lines = (node.end_lineno or 0) - body[0].lineno + 1 if body else 0
            simple = bool(body) and (body[-1].end_lineno or 0) - body[-1].lineno + 1 > lines // 2
            if lines > MOST_IN_A_FUNCTION and not simple:
                long.append((node.name, lines))
    assert long == []


@pytest.mark.parametrize("path", sources(), ids=name_of)
def test_modules_keep_no_changing_state(path):
    """No ``global`` statement, and no list, dict or set literal under a lower-case name of a module."""
    tree = ast.parse(path.read_text("utf-8"))
    assert not [node for node in ast.walk(tree) if isinstance(node, ast.Global)]
    loose = [
        target.id
        for node in tree.body
        if isinstance(node, ast.Assign) and isinstance(node.value, (ast.List, ast.Dict, ast.Set, ast.ListComp))
        for target in node.targets
        if isinstance(target, ast.Name) and not re.fullmatch(r"_*[A-Z][A-Z0-9_]*|__all__", target.id)
    ]
    assert loose == []


def test_requirements_are_pinned():
    """Every requirement names one version, for running and for testing."""
    for path in (TOP / "requirements.txt", TOP / "tests" / "requirements.txt"):
        lines = [line.split("#")[0].strip() for line in path.read_text("utf-8").splitlines()]
        wanted = [line for line in lines if line and not line.startswith("-r ")]
        assert wanted
        assert [
            line for line in wanted if not re.fullmatch(r"[A-Za-z0-9_.\-]+(\[[a-z,]+\])?==[0-9][0-9a-z.]*", line)
        ] == []


def test_what_is_imported_is_required():
    """Every library that the package imports stands in requirements.txt."""
    lines = (TOP / "requirements.txt").read_text("utf-8").splitlines()
    required = {line.split("==")[0].lower().replace("-", "_") for line in lines if "==" in line}
    names = {"docx": "python_docx", "PIL": "pillow"}
    found = set()
    for path in sources():
        for node in ast.walk(ast.parse(path.read_text("utf-8"))):
            modules = [name.name for name in node.names] if isinstance(node, ast.Import) else []
            if isinstance(node, ast.ImportFrom) and not node.level:
                modules = [node.module or ""]
            found |= {module.split(".")[0] for module in modules}
    outside = {names.get(name, name).lower() for name in found - set(sys.stdlib_module_names) - {"meanlab"}}
    assert outside - required == set()


def test_nothing_that_is_built_is_kept():
    """The tree under version control holds no caches and no compiled files."""
    try:
        tracked = subprocess.run(
            ["git", "ls-files"], cwd=TOP, capture_output=True, text=True, check=True
        ).stdout.split()
    except (OSError, subprocess.CalledProcessError):
        pytest.skip("not a checkout")
    assert [name for name in tracked if "__pycache__" in name or name.endswith((".pyc", ".db"))] == []


def test_no_two_test_files_bear_one_name():
    """pytest imports test files and their helpers by their bare names, so each name stands once."""
    names = [path.name for path in (TOP / "tests").rglob("*.py") if path.name != "conftest.py"]
    assert sorted(names) == sorted(set(names))
