"""Data flow one way: what each part may import, walked over the source; and what starts without which library."""

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import meanlab

PACKAGE = Path(meanlab.__file__).parent
TOP = PACKAGE.parent

# from the bottom up; parts in one room may import each other
ROOMS = (
    ("core",),
    ("intake",),
    ("wording",),
    ("procedures",),
    ("checks",),
    ("route",),
    ("planning",),
    ("analysis",),
    ("many", "samples"),
    ("pictures",),
    ("records",),
    ("notebook",),
    ("page", "__main__"),
)
LEVEL = {part: level for level, room in enumerate(ROOMS) for part in room}
ONLY_CORE = ("intake", "wording")

# library → the parts of the package that may import it
HOMES = {
    "streamlit": {"page", "__main__"},
    "openpyxl": {"intake", "records"},
    "python_calamine": {"intake"},
    "sqlalchemy": {"notebook"},
    "platformdirs": {"notebook", "__main__"},
    "plotly": {"pictures/for_page", "page"},
    "matplotlib": {"pictures/for_paper", "records"},
    "docx": {"records"},
    "pandas": {"many", "page"},
}


def sources() -> list[Path]:
    """Return every source file of the package."""
    return sorted(PACKAGE.rglob("*.py"))


def part_of(path: Path) -> str:
    """Return the part of the package that a file belongs to, "" for the package itself."""
    inside = path.relative_to(PACKAGE).parts
    return "" if inside == ("__init__.py",) else inside[0].removesuffix(".py")


def module_of(path: Path) -> str:
    """Return "pictures/for_page" for meanlab/pictures/for_page.py."""
    return path.relative_to(PACKAGE).as_posix().removesuffix(".py").removesuffix("/__init__")


def imported_by(path: Path) -> list[tuple[str, int]]:
    """Return every module a file imports, wherever in the file, with the line; relative ones made absolute."""
    found: list[tuple[str, int]] = []
    package = ["meanlab", *path.relative_to(PACKAGE).parts[:-1]]
    for node in ast.walk(ast.parse(path.read_text("utf-8"))):
        if isinstance(node, ast.Import):
            found += [(name.name, node.lineno) for name in node.names]
        elif isinstance(node, ast.ImportFrom):
            start = ".".join(package[: len(package) + 1 - node.level]) + "." if node.level else ""
            module = (start + (node.module or "")).rstrip(".")
            found.append((module, node.lineno))
            found += [(f"{module}.{name.name}", node.lineno) for name in node.names if module == "meanlab"]
    return found


def test_every_part_has_a_room():
    """A new part of the package needs its place in the layers."""
    assert {part_of(path) for path in sources()} - {""} <= set(LEVEL)


def test_imports_only_go_down():
    """No lower part imports a higher one, and intake and wording import nothing of the package but core."""
    wrong = []
    for path in sources():
        own = part_of(path)
        for module, line in imported_by(path):
            if not module.startswith("meanlab.") or own == "":
                continue
            other = module.split(".")[1]
            if other not in LEVEL:
                continue  # a name of the package itself
            allowed = LEVEL[other] <= LEVEL[own] if own not in ONLY_CORE else other in ("core", own)
            if not allowed:
                wrong.append(f"{path.relative_to(TOP)}:{line} imports {module}")
    assert wrong == []


def test_libraries_stay_in_their_rooms():
    """Streamlit in page/ and __main__ only; spreadsheets, databases and drawing libraries each in their part."""
    wrong = []
    for path in sources():
        for module, line in imported_by(path):
            homes = HOMES.get(module.split(".")[0])
            if homes is not None and not {part_of(path), module_of(path)} & homes:
                wrong.append(f"{path.relative_to(TOP)}:{line} imports {module}")
    assert wrong == []


def run_blocked(blocked: tuple[str, ...], code: str) -> subprocess.CompletedProcess[str]:
    """Run code in a fresh interpreter in which some libraries cannot be imported."""
    guard = (
        "import sys\n"
        "class Blocked:\n"
        "    def find_spec(self, name, path=None, target=None):\n"
        f"        if name.split('.')[0] in {blocked!r}:\n"
        "            raise ModuleNotFoundError(f'{name} is blocked here')\n"
        "sys.meta_path.insert(0, Blocked())\n"
    )
    return subprocess.run(
        [sys.executable, "-c", guard + code], capture_output=True, text=True, cwd=TOP, timeout=120, check=False
    )


def test_readings_are_read_without_the_numerical_libraries():
    """Intake and the facts it returns start without numpy, scipy and pandas: a child process that parses is light."""
    code = (
        "import meanlab\n"
        "found = meanlab.read('5.02\\n5.04\\n<0.1')\n"
        "assert found.to_dict()['values'] == [5.02, 5.04], found\n"
        "assert meanlab.Question('5.00') and meanlab.ReadingSet(('1', '2')) and meanlab.Complaint\n"
    )
    result = run_blocked(("numpy", "scipy", "pandas", "statsmodels", "streamlit", "plotly", "matplotlib"), code)
    assert result.returncode == 0, result.stderr


def test_an_analysis_needs_neither_streamlit_nor_drawing_libraries():
    """From the facts to the analysis everything works where Streamlit, plotly and matplotlib are not installed."""
    code = (
        "from meanlab import Question, analyse, read\n"
        "import meanlab.core, meanlab.intake, meanlab.checks, meanlab.procedures, meanlab.route, meanlab.planning\n"
        "found = analyse(read('5.02\\n5.04\\n4.98\\n5.01'), Question('5.00', equivalence_limit='0.1'))\n"
        "assert found.verdict == 'agrees' and found.conclusion, found\n"
    )
    result = run_blocked(("streamlit", "plotly", "matplotlib", "sqlalchemy"), code)
    assert result.returncode == 0, result.stderr


@pytest.mark.parametrize("name", meanlab.__all__)
def test_public_names_come_when_they_are_asked_for(name):
    """Every public name can be had, and tells where it lives."""
    assert getattr(meanlab, name) is not None
    assert name in dir(meanlab)
