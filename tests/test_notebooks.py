"""The notebooks: short cells without functions, outputs or places on somebody's disk, and each of them runs."""

import ast
import os
import re
from pathlib import Path

import nbformat
import pytest
from nbclient import NotebookClient

ROOT = Path(__file__).resolve().parents[1]
NOTEBOOKS = sorted((ROOT / "notebooks").glob("*.ipynb"))
LONGEST_CELL = 10  # lines
PATIENCE = 120  # seconds a cell; only ever waited for when something is broken
FOLDER = re.compile(r"""(?<![\w.:/])(~|/(home|root|tmp|work|usr|opt|mnt|Users|private))/|\b[A-Za-z]:[\\/](?!/)""")

DEFINITIONS = (ast.FunctionDef, ast.AsyncFunctionDef, ast.ClassDef)

each = pytest.mark.parametrize("path", NOTEBOOKS, ids=lambda path: path.stem)


def read(path):
    return nbformat.read(path, as_version=4)


def wrongs(notebook):
    """What a notebook must not have, as sentences."""
    nbformat.validate(notebook)
    found = [f"{cell.id}: names a place on a disk" for cell in notebook.cells if FOLDER.search(cell.source)]
    return found + [wrong for cell in notebook.cells if cell.cell_type == "code" for wrong in wrongs_of_code(cell)]


def wrongs_of_code(cell):
    if len(cell.source.splitlines()) > LONGEST_CELL:
        yield f"{cell.id}: more than {LONGEST_CELL} lines"
    if any(isinstance(node, DEFINITIONS) for node in ast.walk(ast.parse(cell.source))):
        yield f"{cell.id}: defines a function or class"
    if cell.outputs or cell.execution_count is not None:
        yield f"{cell.id}: has stored outputs"


def cell(source="1 + 1", **changes):
    return nbformat.v4.new_notebook(cells=[nbformat.v4.new_code_cell(source, id="cell", **changes)])


def execute(notebook, folder):
    """Run in a fresh kernel in ``folder``, which finds this checkout and no settings of the user."""
    own = dict.fromkeys(("HOME", "JUPYTER_CONFIG_DIR", "IPYTHONDIR", "JUPYTER_RUNTIME_DIR"), str(folder))
    client = NotebookClient(notebook, timeout=PATIENCE, resources={"metadata": {"path": str(folder)}})
    return client.execute(env={**os.environ, **own, "PYTHONPATH": str(ROOT)})


def test_there_are_notebooks():
    assert {"dashboard", "three_roads"} <= {path.stem for path in NOTEBOOKS}


@each
def test_a_notebook_is_kept_in_order(path):
    assert wrongs(read(path)) == []


@each
def test_a_notebook_says_what_it_is_and_runs_anywhere(path):
    metadata = read(path).metadata
    assert metadata.title
    assert metadata.kernelspec.name == "python3"


@pytest.mark.parametrize(
    ("notebook", "said"),
    [
        (cell(), []),
        (cell("\n".join(["1"] * 10)), []),
        (cell("link = 'https://example.org/home/page'; share = 1 /2/3; part = 'data/tmp/a'"), []),
        (cell("\n".join(["1"] * 11)), ["cell: more than 10 lines"]),
        (cell("if True:\n    def double(x): return 2 * x"), ["cell: defines a function or class"]),
        (cell("class Star: pass"), ["cell: defines a function or class"]),
        (cell(outputs=[nbformat.v4.new_output("stream", text="2")]), ["cell: has stored outputs"]),
        (cell(execution_count=1), ["cell: has stored outputs"]),
        (cell("open('/home/me/star.yaml')"), ["cell: names a place on a disk"]),
        (cell("open('~/star.yaml')"), ["cell: names a place on a disk"]),
        (cell("open('C:/stars/star.yaml')"), ["cell: names a place on a disk"]),
    ],
)
def test_disorder_is_found(notebook, said):
    assert wrongs(notebook) == said


@pytest.mark.slow
@each
def test_a_notebook_runs(path, tmp_path):
    done = execute(read(path), tmp_path)
    code = [cell for cell in done.cells if cell.cell_type == "code"]
    assert [cell.execution_count for cell in code] == list(range(1, len(code) + 1))
    said = [output.text for cell in code for output in cell.outputs if output.get("name") == "stderr"]
    assert said == []
    assert code[-1].outputs
