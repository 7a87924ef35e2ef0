"""The order of the house: who may import whom, what stays lazy, which names are public, how long a module may be."""

import ast
import importlib
import pkgutil
import subprocess
import sys
from pathlib import Path

import pytest

import massdash

PACKAGE = Path(massdash.__file__).parent
LONGEST_MODULE = 400  # lines

# A scenario enters at one door and walks one way: each room imports from itself and from the rooms above it.
ROOMS = (
    ("errors", "constants", "version", "whole"),
    ("data",),
    ("physics",),
    ("numerals", "scenario"),
    ("quantities", "outcome", "model", "provenance", "report", "latex"),
    ("surveys", "profiles"),
    ("charts",),
    ("render",),
    ("panels",),
    ("app", "door", "serve", "cli", "__main__"),
)
RANK = {name: rank for rank, names in enumerate(ROOMS) for name in names}

# Libraries that are met in some rooms only.
CONFINED = {
    "matplotlib": ("render",),
    "anywidget": ("render", "panels", "door"),
    "ipywidgets": ("panels", "door"),
    "voila": ("app", "door"),
    "yaml": ("scenario",),
    "h5py": ("profiles",),
}
# A script that rebuilds tables from the physics stands below data/ and is imported by nobody.
BUILDERS = PACKAGE / "data" / "builders"


def modules():
    return sorted(path for path in PACKAGE.rglob("*.py") if BUILDERS not in path.parents)


def inside(path):
    """The module's address below the package: ("physics", "eos")."""
    parts = path.relative_to(PACKAGE).with_suffix("").parts
    return parts[:-1] if parts[-1] == "__init__" else parts


def imports(path):
    """Dotted names a module imports, relative ones resolved; ``from a import b`` counts as a.b."""
    package = ("massdash", *inside(path)) if path.name == "__init__.py" else ("massdash", *inside(path)[:-1])
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            above = package[: len(package) - node.level + 1] if node.level else ()
            origin = ".".join([*above, *filter(None, [node.module])])
            yield from (f"{origin}.{alias.name}" for alias in node.names)


def room(path):
    return inside(path)[0] if inside(path) else None


def breaches(path):
    """The imports of a module that reach into a room below its own."""
    for name in imports(path):
        top, _, rest = name.partition(".")
        if top == "massdash" and not RANK.get(rest.partition(".")[0], len(ROOMS)) <= RANK[room(path)]:
            yield name


def name_of(path):
    return str(path.relative_to(PACKAGE))


@pytest.mark.parametrize("path", [path for path in modules() if room(path)], ids=name_of)
def test_rooms_import_only_from_above(path):
    assert list(breaches(path)) == []


def test_every_module_has_a_room():
    assert {room(path) for path in modules()} - {None} <= set(RANK)


@pytest.mark.parametrize(
    ("where", "line", "found"),
    [
        ("physics/new.py", "from massdash.scenario import Scenario", ["massdash.scenario.Scenario"]),
        ("physics/new.py", "from ..model import evaluate", ["massdash.model.evaluate"]),
        ("physics/new.py", "def late():\n    import massdash.render.paper", ["massdash.render.paper"]),
        ("physics/new.py", "from massdash import Scenario", ["massdash.Scenario"]),
        ("charts/__init__.py", "from .. import panels", ["massdash.panels"]),
        ("charts/__init__.py", "from . import chart", []),
        ("panels/new.py", "from massdash.model import evaluate\nimport numpy", []),
    ],
)
def test_the_walk_finds_a_breach(tmp_path, monkeypatch, where, line, found):
    monkeypatch.setitem(globals(), "PACKAGE", tmp_path)
    path = tmp_path / where
    path.parent.mkdir()
    path.write_text(line)
    assert list(breaches(path)) == found


@pytest.mark.parametrize("path", [path for path in modules() if room(path)], ids=name_of)
def test_libraries_stay_in_their_rooms(path):
    used = {name.partition(".")[0] for name in imports(path)}
    assert [library for library in sorted(used & set(CONFINED)) if room(path) not in CONFINED[library]] == []
    if room(path) == "physics":
        assert not [name for name in imports(path) if name.startswith("astropy.units") or name == "astropy.units"]


def test_nobody_imports_the_builders():
    users = [name_of(path) for path in modules() for name in imports(path) if name.startswith("massdash.data.builders")]
    assert users == []


def test_initial_value_solvers_are_called_in_one_place():
    users = {name_of(path) for path in modules() for name in imports(path) if name.startswith("scipy.integrate")}
    assert users <= {"physics/integrate.py"}


@pytest.mark.parametrize("path", sorted(PACKAGE.rglob("*.py")), ids=name_of)
def test_modules_are_short(path):
    assert len(path.read_text(encoding="utf-8").splitlines()) <= LONGEST_MODULE


def loaded_after(code):
    """Top-level and second-level names of the modules that a fresh interpreter has loaded after running the code."""
    report = f"{code}\nimport sys\nprint(*{{'.'.join(name.split('.')[:2]) for name in sys.modules}}, file=sys.stderr)"
    ended = subprocess.run(
        [sys.executable, "-c", report], capture_output=True, text=True, cwd=PACKAGE.parent, check=True
    )
    return set(ended.stderr.split())


@pytest.mark.parametrize(
    "code",
    [
        "import massdash",
        "import massdash\nfor name in massdash.__all__: getattr(massdash, name)",
        "import massdash\nmassdash.load, massdash.Scenario()",
    ],
)
def test_the_library_loads_no_drawing_and_no_widgets(code):
    loaded = loaded_after(code)
    assert "massdash" in loaded
    heavy = {
        "matplotlib",
        "ipywidgets",
        "anywidget",
        "IPython",
        "traitlets",
        "scipy.integrate",
        "astropy.cosmology",
        "h5py",
    }
    assert loaded & heavy == set()


@pytest.mark.parametrize("word", ["--help", "--version"])
def test_the_help_loads_no_numbers(word):
    loaded = loaded_after(f"from massdash.cli import main\ntry: main([{word!r}])\nexcept SystemExit: pass")
    assert "massdash.cli" in loaded
    assert loaded & {"numpy", "scipy", "astropy", "yaml", "matplotlib"} == set()


def test_public_names():
    assert massdash.__all__ == sorted(massdash.__all__)
    assert set(massdash.__all__) == set(massdash._HOMES)
    contract = {"Scenario", "evaluate", "Outcome", "load", "save", "__version__"}
    assert contract | {"MassdashError", "InputError", "ComputationError", "NotAvailable"} <= set(massdash.__all__)
    assert set(massdash.__all__) <= set(dir(massdash))
    with pytest.raises(AttributeError, match="module 'massdash' has no attribute 'Scenaro'"):
        _ = massdash.Scenaro


def packages():
    return [found.name for found in pkgutil.walk_packages([str(PACKAGE)], "massdash.") if found.ispkg]


@pytest.mark.parametrize("name", ["massdash", *packages()])
def test_what_a_package_promises_is_there(name):
    package = importlib.import_module(name)
    assert [public for public in getattr(package, "__all__", ()) if not hasattr(package, public)] == []


def test_the_version_is_that_of_the_project():
    import tomllib

    from massdash.version import find_version

    project = tomllib.loads((PACKAGE.parent / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    assert massdash.__version__ == project["version"]
    assert find_version("no-such-distribution") == project["version"]
